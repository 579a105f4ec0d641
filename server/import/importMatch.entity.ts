import {
  Column,
  Entity,
  Index,
  JoinColumn,
  ManyToOne,
  PrimaryGeneratedColumn,
  type Relation,
} from "typeorm";

import { User } from "~server/account/user.entity";
import type { ColumnMatch, WordMatch } from "~shared/formats/importMatching";

/** How one person's lists of one header are read: kept, so that the next list needs no matching. */
@Entity("import_match")
@Index("one_match", ["ownerId", "signature"], { unique: true })
export class ImportMatch {
  @PrimaryGeneratedColumn("uuid")
  id!: string;

  @Column({ type: "uuid" })
  ownerId!: string;

  @ManyToOne(() => User, { onDelete: "CASCADE" })
  @JoinColumn({ name: "ownerId" })
  owner!: Relation<User>;

  /** SHA-256 over the column names in their order. */
  @Column({ type: "char", length: 64 })
  signature!: string;

  @Column({ type: "json" })
  columns!: ColumnMatch[];

  @Column({ type: "json" })
  words!: WordMatch[];

  @Column({ type: "datetime", precision: 6 })
  updatedAt!: Date;
}
