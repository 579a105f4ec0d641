import {
  Column,
  CreateDateColumn,
  Entity,
  Index,
  JoinColumn,
  ManyToOne,
  PrimaryGeneratedColumn,
  type Relation,
} from "typeorm";

import { User } from "~server/account/user.entity";
import type { RecordState } from "~shared/review/states";

/** A record. Its id is the number people quote; what it says stands in its revisions. */
@Entity("constraint_record") // CONSTRAINT is a reserved word
export class Constraint {
  @PrimaryGeneratedColumn({ type: "int", unsigned: true })
  id!: number;

  @Column({ type: "varchar", length: 20, default: "current" })
  state!: RecordState;

  @Index()
  @Column({ type: "uuid" })
  ownerId!: string;

  @ManyToOne(() => User, { onDelete: "RESTRICT" })
  @JoinColumn({ name: "ownerId" })
  owner!: Relation<User>;

  /** The revision in use; null until the first approval. */
  @Index()
  @Column({ type: "uuid", nullable: true })
  approvedRevisionId!: string | null;

  /** One imported row of one person, so that importing a file twice makes no second copy. */
  @Index("one_import", { unique: true })
  @Column({ type: "char", length: 64, nullable: true })
  importIdentity!: string | null;

  @CreateDateColumn({ type: "datetime", precision: 6 })
  createdAt!: Date;
}
