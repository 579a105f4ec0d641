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

import { User } from "~server/account/user.entity";
import { Citation } from "~server/citation/citation.entity";
import type { StoredAnswer } from "~server/constraint/revision.entity";
import type { SetFinding } from "~shared/correlatedSet/checks";
import type { MatrixKind, SetState } from "~shared/correlatedSet/content";
import type { SetReadingContent } from "~shared/correlatedSet/reading";

/**
 * Records of one paper with the matrix it prints for them. Unchanged once submitted; the answer to
 * a return, and the correction of an approved set, is a new set of the same chain.
 */
@Entity("correlated_set")
export class CorrelatedSet {
  @PrimaryGeneratedColumn({ type: "int", unsigned: true })
  id!: number;

  /** Id of the first set of the chain; all that follow one another share it. */
  @Index("set_of_chain")
  @Column({ type: "int", unsigned: true })
  chainId!: number;

  @Column({ type: "int", unsigned: true, nullable: true })
  followsId!: number | null;

  @Index("set_of_owner")
  @Column({ type: "uuid" })
  ownerId!: string;

  @ManyToOne(() => User, { onDelete: "RESTRICT" })
  @JoinColumn({ name: "ownerId" })
  owner!: Relation<User>;

  @Column({ type: "uuid" })
  citationId!: string;

  @ManyToOne(() => Citation, { onDelete: "RESTRICT" })
  @JoinColumn({ name: "citationId" })
  citation!: Relation<Citation>;

  @Index("set_by_state")
  @Column({ type: "varchar", length: 20 })
  state!: SetState;

  /** Raised by every write; a write that names an older one is refused. */
  @Column({ type: "int", unsigned: true, default: 1 })
  version!: number;

  @Column({ type: "varchar", length: 120, nullable: true })
  label!: string | null;

  /** Record numbers (FL-0042) in the order of the matrix. */
  @Column({ type: "json" })
  members!: string[];

  @Column({ type: "varchar", length: 20, nullable: true })
  matrixKind!: MatrixKind | null;

  /** Lower triangle as printed. */
  @Column({ type: "json" })
  triangle!: string[][];

  @Column({ type: "text", nullable: true })
  place!: string | null;

  @Column({ type: "varchar", length: 120, nullable: true })
  page!: string | null;

  @Column({ type: "text", nullable: true })
  note!: string | null;

  @Column({ type: "json" })
  answers!: StoredAnswer[];

  /** Findings as they stood at submission; empty in a draft. */
  @Column({ type: "json" })
  findings!: SetFinding[];

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

  @Column({ type: "uuid", nullable: true })
  decidedById!: string | null;

  @Column({ type: "datetime", precision: 6, nullable: true })
  decidedAt!: Date | null;

  @Column({ type: "text", nullable: true })
  decisionNote!: string | null;

  /** Revisions of the members in use when the set was approved (FL-0042.3), in its order. */
  @Column({ type: "json" })
  memberRevisions!: string[];

  @Column({ type: "datetime", precision: 6, nullable: true })
  withdrawnAt!: Date | null;

  @Column({ type: "text", nullable: true })
  withdrawnBecause!: string | null;
}

/** One entry read again after the comparison. */
export interface EntryCorrection {
  /** From 0; both null for the kind of matrix. */
  row: number | null;
  column: number | null;
  before: string;
  why: string;
  at: string;
}

/** An editor's blind reading of the matrix, one for each editor and set. */
@Entity("set_reading")
@Unique("one_set_reading", ["setId", "editorId"])
export class SetReading {
  @PrimaryGeneratedColumn("uuid")
  id!: string;

  @Column({ type: "int", unsigned: true })
  setId!: number;

  @ManyToOne(() => CorrelatedSet, { onDelete: "CASCADE" })
  @JoinColumn({ name: "setId" })
  set!: Relation<CorrelatedSet>;

  @Column({ type: "uuid" })
  editorId!: string;

  @Column({ type: "datetime", precision: 6 })
  storedAt!: Date;

  /** As it was stored first; never written again. */
  @Column({ type: "json" })
  first!: SetReadingContent;

  /** With the corrections since. */
  @Column({ type: "json" })
  latest!: SetReadingContent;

  @Column({ type: "json" })
  corrections!: EntryCorrection[];
}
