import {
  Column,
  Entity,
  Index,
  JoinColumn,
  ManyToOne,
  PrimaryGeneratedColumn,
  type Relation,
} from "typeorm";

import { Constraint } from "~server/constraint/constraint.entity";
import { Revision } from "~server/constraint/revision.entity";
import type { CheckState, CheckVerdict } from "~shared/review/authorCheck";

/** A paper's author asked to look at a revision, and what became of it. */
@Entity("author_check")
@Index("check_by_state", ["state", "sentAt"])
export class AuthorCheck {
  @PrimaryGeneratedColumn("uuid")
  id!: string;

  @Index("checks_of_record")
  @Column({ type: "int", unsigned: true })
  constraintId!: number;

  @ManyToOne(() => Constraint, { onDelete: "CASCADE" })
  @JoinColumn({ name: "constraintId" })
  constraint!: Relation<Constraint>;

  /** The revision that the author is shown; it never changes. */
  @Column({ type: "uuid" })
  revisionId!: string;

  @ManyToOne(() => Revision, { onDelete: "CASCADE" })
  @JoinColumn({ name: "revisionId" })
  revision!: Relation<Revision>;

  /** SHA-256 of the link's token. The token itself is in the mail and nowhere else. */
  @Index("check_token", { unique: true })
  @Column({ type: "char", length: 64, charset: "ascii", collation: "ascii_bin" })
  tokenHash!: string;

  /** As the editor typed it; forgotten with the address. */
  @Column({ type: "varchar", length: 120, nullable: true })
  authorName!: string | null;

  @Column({ type: "varchar", length: 254, nullable: true })
  authorEmail!: string | null;

  @Column({ type: "varchar", length: 12 })
  state!: CheckState;

  /** The last answer; the ones before it stand in the trail. */
  @Column({ type: "varchar", length: 12, nullable: true })
  verdict!: CheckVerdict | null;

  /** Raised by every change; of two who write at once, one is refused. */
  @Column({ type: "int", unsigned: true, default: 1 })
  version!: number;

  @Column({ type: "uuid" })
  sentById!: string;

  @Column({ type: "datetime", precision: 6 })
  sentAt!: Date;

  @Column({ type: "datetime", precision: 6 })
  expiresAt!: Date;

  @Column({ type: "datetime", precision: 6, nullable: true })
  answeredAt!: Date | null;

  /** Who closed or revoked it, and when. */
  @Column({ type: "uuid", nullable: true })
  endedById!: string | null;

  @Column({ type: "datetime", precision: 6, nullable: true })
  endedAt!: Date | null;
}

/** One entry of a check's answer trail. */
@Entity("author_check_entry")
export class AuthorCheckEntry {
  @PrimaryGeneratedColumn({ type: "int", unsigned: true })
  id!: number;

  @Index("entries_of_check")
  @Column({ type: "uuid" })
  checkId!: string;

  @ManyToOne(() => AuthorCheck, { onDelete: "CASCADE" })
  @JoinColumn({ name: "checkId" })
  check!: Relation<AuthorCheck>;

  /** The editor who wrote it; null for the author. */
  @Column({ type: "uuid", nullable: true })
  byId!: string | null;

  /** Only in an answer of the author. */
  @Column({ type: "varchar", length: 12, nullable: true })
  verdict!: CheckVerdict | null;

  @Column({ type: "text", nullable: true })
  text!: string | null;

  @Column({ type: "datetime", precision: 6 })
  at!: Date;
}
