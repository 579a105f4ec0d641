import {
  Column,
  CreateDateColumn,
  Entity,
  Index,
  OneToMany,
  PrimaryGeneratedColumn,
  type Relation,
} from "typeorm";

import { RoleGrant } from "./roleGrant.entity";

/** A person's account. */
@Entity("user")
export class User {
  @PrimaryGeneratedColumn("uuid")
  id!: string;

  /** Lower case; compared byte by byte, so that é is not e. */
  @Index("user_email", { unique: true })
  @Column({ type: "varchar", length: 254, charset: "utf8mb4", collation: "utf8mb4_bin" })
  email!: string;

  @Column({ type: "varchar", length: 120 })
  nameOnPapers!: string;

  /** Other names under which this person has published; they keep an editor off such papers too. */
  @Column({ type: "json" })
  furtherNames!: string[];

  @Column({ type: "varchar", length: 19, nullable: true })
  orcid!: string | null;

  @Column({ type: "varchar", length: 255 })
  passwordHash!: string;

  /** Raised when sessions must end; a session that carries an older number is nobody's. */
  @Column({ type: "int", default: 0 })
  sessionEpoch!: number;

  @Column({ type: "datetime", precision: 6, nullable: true })
  confirmedAt!: Date | null;

  @CreateDateColumn({ type: "datetime", precision: 6 })
  createdAt!: Date;

  /** When the account was deleted. The row stays, for the records and the log name its id. */
  @Column({ type: "datetime", precision: 6, nullable: true })
  formerAt!: Date | null;

  @OneToMany(() => RoleGrant, (grant) => grant.user)
  roles!: Relation<RoleGrant>[];
}
