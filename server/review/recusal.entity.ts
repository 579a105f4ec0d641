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

/** An editor's own word that they can't read a paper impartially; taking it back removes the row. */
@Entity("recusal")
@Unique("one_recusal", ["citationId", "editorId"])
export class Recusal {
  @PrimaryGeneratedColumn("uuid")
  id!: string;

  @Column({ type: "uuid" })
  citationId!: string;

  @ManyToOne(() => Citation, { onDelete: "CASCADE" })
  @JoinColumn({ name: "citationId" })
  citation!: Relation<Citation>;

  @Index("recusals_of_editor")
  @Column({ type: "uuid" })
  editorId!: string;

  /** Read by the editor alone. */
  @Column({ type: "varchar", length: 500, nullable: true })
  reason!: string | null;

  @Column({ type: "datetime", precision: 6 })
  at!: Date;
}
