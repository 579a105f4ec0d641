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

/** private: its owner; link: who has the address; public: everybody, and it is listed. */
export const VISIBILITIES = ["private", "link", "public"] as const;
export type Visibility = (typeof VISIBILITIES)[number];

/** A saved fitting table. What its versions hand out was copied when they were saved, so it never changes. */
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

  @Column({ type: "varchar", length: 10, default: "public" })
  visibility!: Visibility;

  /** The newest version. */
  @Column({ type: "int", unsigned: true, default: 0 })
  version!: number;

  /** The table that this one began as a copy of. */
  @Column({ type: "varchar", length: 24, nullable: true })
  adaptedFrom!: string | null;

  /** Whether its owner is told by mail when a release would change it. */
  @Column({ type: "boolean", default: false })
  notify!: boolean;

  /** The newest release that its owner was told about; 0 before the first. */
  @Column({ type: "int", unsigned: true, default: 0 })
  toldOfRelease!: number;

  @Column({ type: "int", unsigned: true, default: 0 })
  rowsIn!: number;

  @Column({ type: "int", unsigned: true, default: 0 })
  rowsOut!: number;

  @Column({ type: "varchar", length: 2000, default: "" })
  filterWords!: string;

  @Column({ type: "int", unsigned: true, nullable: true })
  releaseNumber!: number | null;
}
