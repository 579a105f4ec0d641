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

export const UPLOAD_KINDS = ["csv", "bib"] as const;
export type UploadKind = (typeof UPLOAD_KINDS)[number];

/** A file somebody brought, until it is imported or forgotten. Only its owner reads it. */
@Entity("upload")
export class Upload {
  @PrimaryGeneratedColumn("uuid")
  id!: string;

  @Index()
  @Column({ type: "uuid" })
  ownerId!: string;

  @ManyToOne(() => User, { onDelete: "CASCADE" })
  @JoinColumn({ name: "ownerId" })
  owner!: Relation<User>;

  @Column({ type: "varchar", length: 200 })
  name!: string;

  @Column({ type: "varchar", length: 10 })
  kind!: UploadKind;

  @Column({ type: "mediumtext" })
  text!: string;

  @CreateDateColumn({ type: "datetime", precision: 6 })
  createdAt!: Date;

  @Index()
  @Column({ type: "datetime", precision: 6 })
  expiresAt!: Date;
}
