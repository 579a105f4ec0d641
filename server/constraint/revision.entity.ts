import {
  Column,
  Entity,
  Index,
  JoinColumn,
  ManyToOne,
  PrimaryGeneratedColumn,
  Unique,
  type Relation,
} from "typeorm";

import { Citation } from "~server/citation/citation.entity";
import type { RevisionState } from "~shared/review/states";
import type {
  ConstraintFields,
  Quantity,
  StatementKind,
  VersionRead,
  Weighting,
} from "~shared/statement/fields";
import type { Finding } from "~shared/statement/rules";

import { Constraint } from "./constraint.entity";

/** A contributor's answer to a finding, and whether the editor accepts it. */
export interface StoredAnswer {
  code: string;
  answer: string;
  accepted: boolean;
}

/** What a record says, in one version of it. Unchanged once submitted, except for its way through review. */
@Entity("revision")
@Unique("one_ordinal", ["constraintId", "ordinal"])
@Index("by_state", ["state", "submittedAt"])
@Index("by_statement", ["quantity", "kind"])
export class Revision {
  @PrimaryGeneratedColumn("uuid")
  id!: string;

  @Column({ type: "int", unsigned: true })
  constraintId!: number;

  @ManyToOne(() => Constraint, { onDelete: "CASCADE" })
  @JoinColumn({ name: "constraintId" })
  constraint!: Relation<Constraint>;

  @Column({ type: "int", unsigned: true })
  ordinal!: number;

  @Column({ type: "varchar", length: 20 })
  state!: RevisionState;

  /** Raised by every write; a write that names an older one is refused (see STALE in draft.service). */
  @Column({ type: "int", unsigned: true, default: 1 })
  version!: number;

  @Column({ type: "json" })
  fields!: ConstraintFields;

  @Column({ type: "uuid", nullable: true })
  citationId!: string | null;

  @ManyToOne(() => Citation, { nullable: true, onDelete: "RESTRICT" })
  @JoinColumn({ name: "citationId" })
  citation!: Relation<Citation> | null;

  /** The returned or approved revision that this one follows. */
  @Column({ type: "uuid", nullable: true })
  followsId!: string | null;

  @Column({ type: "json" })
  answers!: StoredAnswer[];

  /** Findings as they stood at submission, which the editor sees; empty in a draft. */
  @Column({ type: "json" })
  findings!: Finding[];

  @Column({ type: "datetime", precision: 6 })
  createdAt!: Date;

  @Column({ type: "datetime", precision: 6 })
  updatedAt!: Date;

  @Column({ type: "datetime", precision: 6, nullable: true })
  submittedAt!: Date | null;

  /** Data licence agreed to at submission. */
  @Column({ type: "varchar", length: 120, nullable: true })
  licence!: string | null;

  @Column({ type: "uuid", nullable: true })
  claimedById!: string | null;

  @Column({ type: "datetime", precision: 6, nullable: true })
  claimedUntil!: Date | null;

  /** How often the present holder has lengthened the claim. */
  @Column({ type: "tinyint", unsigned: true, default: 0 })
  claimRenewals!: number;

  @Column({ type: "uuid", nullable: true })
  decidedById!: string | null;

  @Column({ type: "datetime", precision: 6, nullable: true })
  decidedAt!: Date | null;

  @Column({ type: "text", nullable: true })
  decisionNote!: string | null;

  // Index columns: computed from the content whenever it is written (revision.index.ts).

  @Column({ type: "varchar", length: 30, nullable: true })
  quantity!: Quantity | null;

  @Column({ type: "varchar", length: 20, nullable: true })
  kind!: StatementKind | null;

  @Column({ type: "varchar", length: 20, nullable: true })
  weighting!: Weighting | null;

  @Column({ type: "varchar", length: 20, nullable: true })
  versionRead!: VersionRead | null;

  /** Representative redshift as used; null for quantities that have none. */
  @Index()
  @Column({ type: "double", nullable: true })
  zUsed!: number | null;

  @Column({ type: "int", nullable: true })
  year!: number | null;

  /** ",dampingWing,other,": commas on both ends, so that a whole word can be looked for. */
  @Column({ type: "varchar", length: 250, default: "," })
  families!: string;

  @Column({ type: "varchar", length: 1000, default: "," })
  tags!: string;

  @Column({ type: "varchar", length: 120, nullable: true })
  alternativesKey!: string | null;

  /** A collaboration's author list alone can be longer than a plain text column. */
  @Column({ type: "mediumtext" })
  searchText!: string;
}

/** One named sightline, field or sample that a revision uses, in the form in which names are compared. */
@Entity("revision_data")
export class RevisionData {
  @PrimaryGeneratedColumn({ type: "int", unsigned: true })
  id!: number;

  @Index()
  @Column({ type: "uuid" })
  revisionId!: string;

  @ManyToOne(() => Revision, { onDelete: "CASCADE" })
  @JoinColumn({ name: "revisionId" })
  revision!: Relation<Revision>;

  @Index()
  @Column({ type: "varchar", length: 200 })
  comparable!: string;

  @Column({ type: "varchar", length: 300 })
  name!: string;
}
