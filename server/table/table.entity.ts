import {
  Column,
  Entity,
  Index,
  JoinColumn,
  ManyToOne,
  PrimaryColumn,
  type Relation,
} from "typeorm";

import { User } from "~server/account/user.entity";

import type { TableSnapshot } from "./snapshot";

/** A saved fitting table. What it hands out was copied when it was saved, so it never changes. */
@Entity("fitting_table")
export class SavedTable {
  /** Part of the permanent address; short and not to be guessed. */
  @PrimaryColumn({ type: "varchar", length: 24 })
  slug!: string;

  @Column({ type: "varchar", length: 120 })
  name!: string;

  @Index()
  @Column({ type: "uuid" })
  ownerId!: string;

  @ManyToOne(() => User, { onDelete: "RESTRICT" })
  @JoinColumn({ name: "ownerId" })
  owner!: Relation<User>;

  @Column({ type: "datetime", precision: 6 })
  createdAt!: Date;

  /** Set instead of removing the row: an address, once given, is never given again. */
  @Column({ type: "datetime", precision: 6, nullable: true })
  deletedAt!: Date | null;

  @Column({ type: "char", length: 64 })
  digest!: string;

  @Column({ type: "int", unsigned: true })
  lastEventSequence!: number;

  @Column({ type: "char", length: 64 })
  lastEventDigest!: string;

  @Column({ type: "datetime", precision: 6 })
  lastEventAt!: Date;

  @Column({ type: "json" })
  snapshot!: TableSnapshot;
}
