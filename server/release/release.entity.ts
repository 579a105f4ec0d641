import {
  Column,
  Entity,
  Index,
  JoinColumn,
  ManyToOne,
  PrimaryColumn,
  type Relation,
} from "typeorm";

import { User } from "~server/account/user.entity";
import type { KeptSurroundings } from "~server/table/surroundings";
import type { SnapshotConstraint } from "~server/table/snapshot";

/** A numbered snapshot of all approved records. Neither it nor its rows are ever written again. */
@Entity("registry_release") // RELEASE is a reserved word
export class Release {
  /** Counts from 1. */
  @PrimaryColumn({ type: "int", unsigned: true })
  number!: number;

  @Column({ type: "datetime", precision: 6 })
  cutAt!: Date;

  @Column({ type: "uuid" })
  cutById!: string;

  @ManyToOne(() => User, { onDelete: "RESTRICT" })
  @JoinColumn({ name: "cutById" })
  cutBy!: Relation<User>;

  @Column({ type: "text" })
  notes!: string;

  /** SHA-256 over the RFC 8785 form of its content; see releaseContent.ts. */
  @Column({ type: "char", length: 64 })
  digest!: string;

  @Column({ type: "int", unsigned: true })
  records!: number;

  /** Data licence, as it stood. */
  @Column({ type: "varchar", length: 120 })
  licence!: string;

  @Column({ type: "boolean" })
  demonstration!: boolean;

  /** Named data, correlated sets and conditions as they stood, JSON as text in RFC 8785 form. */
  @Column({ type: "mediumtext" })
  surroundings!: string;

  /** The last event before it was cut: what the snapshot holds. */
  @Column({ type: "int", unsigned: true })
  lastEventSequence!: number;

  @Column({ type: "char", length: 64 })
  lastEventDigest!: string;

  @Column({ type: "datetime", precision: 6 })
  lastEventAt!: Date;
}

/** One record of a release. */
@Entity("registry_release_row")
export class ReleaseRow {
  @PrimaryColumn({ type: "int", unsigned: true })
  releaseNumber!: number;

  /** The record, by its number. */
  @PrimaryColumn({ type: "int", unsigned: true })
  @Index()
  constraintId!: number;

  @ManyToOne(() => Release, { onDelete: "RESTRICT" })
  @JoinColumn({ name: "releaseNumber" })
  release!: Relation<Release>;

  @Column({ type: "int", unsigned: true })
  ordinal!: number;

  /** SHA-256 over the RFC 8785 form of the content, so that releases are compared without reading it. */
  @Column({ type: "char", length: 64 })
  digest!: string;

  /** JSON as text: handed out as it was written. */
  @Column({ type: "mediumtext" })
  content!: string;
}

/** What the registry knew beside its records when a release was cut, read back. */
export function releaseSurroundings(release: Pick<Release, "surroundings">): KeptSurroundings {
  return JSON.parse(release.surroundings) as KeptSurroundings;
}

/** A row's content, read back. */
export function rowContent(row: Pick<ReleaseRow, "content">): SnapshotConstraint {
  return JSON.parse(row.content) as SnapshotConstraint;
}
