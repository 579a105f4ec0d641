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
import type { NoticeKind } from "~shared/review/notice";

/** What was recorded about a record after its approval. Never removed: it may end, with a reason. */
@Entity("record_notice")
@Index("notices_of_record", ["constraintId", "endedAt"])
@Index("replaced_by", ["replacedById"])
export class RecordNotice {
  @PrimaryGeneratedColumn({ type: "int", unsigned: true })
  id!: number;

  @Column({ type: "int", unsigned: true })
  constraintId!: number;

  @ManyToOne(() => Constraint, { onDelete: "CASCADE" })
  @JoinColumn({ name: "constraintId" })
  constraint!: Relation<Constraint>;

  @Column({ type: "varchar", length: 12 })
  kind!: NoticeKind;

  @Column({ type: "text" })
  reason!: string;

  /** The record in its place; only of a superseded one. */
  @Column({ type: "int", unsigned: true, nullable: true })
  replacedById!: number | null;

  /** The revision whose approval said so; null where a maintainer did. */
  @Column({ type: "uuid", nullable: true })
  revisionId!: string | null;

  @Column({ type: "uuid" })
  byId!: string;

  @Column({ type: "datetime", precision: 6 })
  at!: Date;

  @Column({ type: "datetime", precision: 6, nullable: true })
  endedAt!: Date | null;

  @Column({ type: "uuid", nullable: true })
  endedById!: string | null;

  /** Why it holds no more. */
  @Column({ type: "text", nullable: true })
  endedReason!: string | null;
}
