import {
  Column,
  Entity,
  JoinColumn,
  ManyToOne,
  PrimaryGeneratedColumn,
  Unique,
  type Relation,
} from "typeorm";

import { Revision } from "~server/constraint/revision.entity";
import type { ReadingContent, ReadingField } from "~shared/review/reading";

/** One field read again after the comparison: what stood there before stays on record. */
export interface Correction {
  field: ReadingField;
  /** Content of the field before, as it is stored (text, list or flag). */
  before: unknown;
  why: string;
  at: string;
}

/** An editor's blind reading of what the paper prints, one for each editor and revision. */
@Entity("reading")
@Unique("one_reading", ["revisionId", "editorId"])
export class Reading {
  @PrimaryGeneratedColumn("uuid")
  id!: string;

  @Column({ type: "uuid" })
  revisionId!: string;

  @ManyToOne(() => Revision, { onDelete: "CASCADE" })
  @JoinColumn({ name: "revisionId" })
  revision!: Relation<Revision>;

  @Column({ type: "uuid" })
  editorId!: string;

  @Column({ type: "datetime", precision: 6 })
  storedAt!: Date;

  /** As it was stored first; never written again. */
  @Column({ type: "json" })
  first!: ReadingContent;

  /** With the corrections since. */
  @Column({ type: "json" })
  latest!: ReadingContent;

  /** Fields this editor typed; the others come from the reading of an earlier revision. */
  @Column({ type: "json" })
  typed!: ReadingField[];

  @Column({ type: "json" })
  corrections!: Correction[];

  /** Codes of the checklist (shared/review/checklist.ts) that this editor has ticked. */
  @Column({ type: "json" })
  ticked!: string[];
}
