import { Column, Entity, Index, PrimaryColumn } from "typeorm";

/** One change of state. Rows are only ever added; see eventLog.ts for the digest chain. */
@Entity("event")
@Index("event_by_kind", ["kind"])
@Index("event_by_actor", ["actorId"])
export class EventRecord {
  /** Counts from 1 without a gap; given by the head row, not by the database. */
  @PrimaryColumn({ type: "int", unsigned: true })
  sequence!: number;

  @Column({ type: "datetime", precision: 6 })
  at!: Date;

  @Column({ type: "varchar", length: 60 })
  kind!: string;

  @Column({ type: "varchar", length: 36, nullable: true })
  actorId!: string | null;

  @Index()
  @Column({ type: "varchar", length: 120 })
  subject!: string;

  @Column({ type: "json" })
  detail!: Record<string, unknown>;

  @Column({ type: "char", length: 64 })
  previousDigest!: string;

  @Column({ type: "char", length: 64 })
  digest!: string;
}

/** A single row: the end of the chain. Its lock puts writers of events in a line. */
@Entity("event_head")
export class EventHead {
  @PrimaryColumn({ type: "int" })
  id!: number;

  @Column({ type: "int", unsigned: true })
  sequence!: number;

  @Column({ type: "char", length: 64 })
  digest!: string;
}
