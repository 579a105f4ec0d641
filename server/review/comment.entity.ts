import {
  Column,
  Entity,
  Index,
  JoinColumn,
  ManyToOne,
  PrimaryGeneratedColumn,
  type Relation,
} from "typeorm";

import { Revision } from "~server/constraint/revision.entity";

/** An editor's comment at a field of a returned revision, with the contributor's answer. */
@Entity("field_comment")
export class FieldCommentRecord {
  @PrimaryGeneratedColumn("uuid")
  id!: string;

  /** The revision that was returned. */
  @Index()
  @Column({ type: "uuid" })
  revisionId!: string;

  @ManyToOne(() => Revision, { onDelete: "CASCADE" })
  @JoinColumn({ name: "revisionId" })
  revision!: Relation<Revision>;

  @Column({ type: "int" })
  position!: number;

  @Column({ type: "varchar", length: 60 })
  field!: string;

  @Column({ type: "text" })
  text!: string;

  @Column({ type: "uuid" })
  byId!: string;

  @Column({ type: "datetime", precision: 6 })
  at!: Date;

  @Column({ type: "text", nullable: true })
  answer!: string | null;
}
