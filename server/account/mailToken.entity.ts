import {
  Column,
  CreateDateColumn,
  Entity,
  Index,
  JoinColumn,
  ManyToOne,
  PrimaryColumn,
  type Relation,
} from "typeorm";

import { User } from "./user.entity";

export type MailTokenPurpose = "confirm" | "reset" | "address" | "objection";

/** A link sent by mail. Only the hash is kept: reading this table opens no account. */
@Entity("mail_token")
export class MailToken {
  /** SHA-256 of the token, hexadecimal. */
  @PrimaryColumn({ type: "char", length: 64 })
  hash!: string;

  @Column({ type: "varchar", length: 16 })
  purpose!: MailTokenPurpose;

  @Index("mail_token_user")
  @Column({ type: "uuid" })
  userId!: string;

  @ManyToOne(() => User, { onDelete: "CASCADE" })
  @JoinColumn({ name: "userId" })
  user!: Relation<User>;

  /** The mail address that the link is about: the new one to confirm, or the old one to return to. */
  @Column({ type: "varchar", length: 254, nullable: true })
  address!: string | null;

  @Column({ type: "datetime", precision: 6 })
  expiresAt!: Date;

  @CreateDateColumn({ type: "datetime", precision: 6 })
  createdAt!: Date;
}
