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
import type { TokenScope } from "~shared/review/tokenScopes";

/** A key by which a program acts for its person. Only the hash is kept: this table opens nothing. */
@Entity("api_token")
export class ApiToken {
  @PrimaryGeneratedColumn("uuid")
  id!: string;

  @Index("api_token_owner")
  @Column({ type: "uuid" })
  ownerId!: string;

  @ManyToOne(() => User, { onDelete: "CASCADE" })
  @JoinColumn({ name: "ownerId" })
  owner!: Relation<User>;

  @Column({ type: "varchar", length: 60 })
  name!: string;

  @Column({ type: "json" })
  scopes!: TokenScope[];

  /** SHA-256 of the token, hexadecimal. */
  @Index("api_token_hash", { unique: true })
  @Column({ type: "char", length: 64, charset: "ascii", collation: "ascii_bin" })
  hash!: string;

  /** Its first characters, by which its person tells it from another. */
  @Column({ type: "varchar", length: 12, charset: "ascii", collation: "ascii_bin" })
  start!: string;

  @CreateDateColumn({ type: "datetime", precision: 6 })
  createdAt!: Date;

  @Column({ type: "datetime", precision: 6 })
  expiresAt!: Date;

  /** Written once a minute at most: a coarse answer, and no write for each read. */
  @Column({ type: "datetime", precision: 6, nullable: true })
  lastUsedAt!: Date | null;

  @Column({ type: "datetime", precision: 6, nullable: true })
  revokedAt!: Date | null;
}
