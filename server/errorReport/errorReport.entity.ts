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
import type { ReportOutcome, ReportState } from "~shared/review/errorReport";

/** What a reader says is wrong with a record, and what became of it. The words are not public. */
@Entity("error_report")
@Index("report_by_state", ["state", "createdAt"])
export class ErrorReport {
  @PrimaryGeneratedColumn("uuid")
  id!: string;

  @Index("report_of_record")
  @Column({ type: "int", unsigned: true })
  constraintId!: number;

  @ManyToOne(() => Constraint, { onDelete: "CASCADE" })
  @JoinColumn({ name: "constraintId" })
  constraint!: Relation<Constraint>;

  /** The approved revision that the reader saw. */
  @Column({ type: "uuid" })
  revisionId!: string;

  @ManyToOne(() => Revision, { onDelete: "CASCADE" })
  @JoinColumn({ name: "revisionId" })
  revision!: Relation<Revision>;

  @Column({ type: "text" })
  text!: string;

  /** Who reported it, if somebody was signed in. */
  @Column({ type: "uuid", nullable: true })
  reporterId!: string | null;

  /** Where answers are mailed; forgotten some time after the report is closed. */
  @Column({ type: "varchar", length: 254, nullable: true })
  reporterEmail!: string | null;

  @Column({ type: "varchar", length: 12 })
  state!: ReportState;

  @Column({ type: "varchar", length: 24, nullable: true })
  outcome!: ReportOutcome | null;

  /** The revision that corrects it: FL-0042.3; only with that outcome. */
  @Column({ type: "varchar", length: 24, nullable: true })
  correctedBy!: string | null;

  /** Raised by every change; of two editors who answer at once, one is refused. */
  @Column({ type: "int", unsigned: true, default: 1 })
  version!: number;

  @Column({ type: "datetime", precision: 6 })
  createdAt!: Date;

  /** When the reporter used the one reply. */
  @Column({ type: "datetime", precision: 6, nullable: true })
  repliedAt!: Date | null;

  @Column({ type: "datetime", precision: 6, nullable: true })
  closedAt!: Date | null;
}

/** One entry of a report's answer trail. */
@Entity("error_report_message")
export class ErrorReportMessage {
  @PrimaryGeneratedColumn({ type: "int", unsigned: true })
  id!: number;

  @Index("message_of_report")
  @Column({ type: "uuid" })
  reportId!: string;

  @ManyToOne(() => ErrorReport, { onDelete: "CASCADE" })
  @JoinColumn({ name: "reportId" })
  report!: Relation<ErrorReport>;

  /** The editor or maintainer who wrote it; null for the reporter. */
  @Column({ type: "uuid", nullable: true })
  byId!: string | null;

  @Column({ type: "text" })
  text!: string;

  @Column({ type: "datetime", precision: 6 })
  at!: Date;
}
