import {
  Column,
  Entity,
  Index,
  JoinColumn,
  ManyToOne,
  PrimaryColumn,
  PrimaryGeneratedColumn,
  type Relation,
} from "typeorm";

import type { LinkRelation } from "~shared/dependence/relation";
import type { ConditionKind } from "~shared/statement/fields";

import { Revision } from "./revision.entity";

/** One record, or kind of data, that a revision names; computed from its content like its other index columns. */
@Entity("revision_link")
@Index("links_to", ["targetId", "relation"])
export class RevisionLink {
  @PrimaryGeneratedColumn({ type: "int", unsigned: true })
  id!: number;

  @Index("links_of_revision")
  @Column({ type: "uuid" })
  revisionId!: string;

  @ManyToOne(() => Revision, { onDelete: "CASCADE" })
  @JoinColumn({ name: "revisionId" })
  revision!: Relation<Revision>;

  @Column({ type: "varchar", length: 16 })
  relation!: LinkRelation;

  /** The record named; null where a kind of data is. */
  @Column({ type: "int", unsigned: true, nullable: true })
  targetId!: number | null;

  /** The kind of data named; null where a record is. */
  @Column({ type: "varchar", length: 24, nullable: true })
  kind!: ConditionKind | null;
}

/** A single row whose lock lets one transaction at a time look for circles and add a link. */
@Entity("relation_gate")
export class RelationGate {
  @PrimaryColumn({ type: "int" })
  id!: number;

  @Column({ type: "bigint", unsigned: true })
  passes!: string;
}
