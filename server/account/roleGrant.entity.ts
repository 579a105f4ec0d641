import {
  Column,
  CreateDateColumn,
  Entity,
  JoinColumn,
  ManyToOne,
  PrimaryColumn,
  type Relation,
} from "typeorm";

import type { Role } from "~shared/review/states";

import { User } from "./user.entity";

/** One role of one person. */
@Entity("role_grant")
export class RoleGrant {
  @PrimaryColumn({ type: "uuid" })
  userId!: string;

  @PrimaryColumn({ type: "varchar", length: 16 })
  role!: Role;

  @ManyToOne(() => User, (user) => user.roles, { onDelete: "CASCADE" })
  @JoinColumn({ name: "userId" })
  user!: Relation<User>;

  /** Who granted it; null for the command line and the seed. */
  @Column({ type: "uuid", nullable: true })
  grantedById!: string | null;

  @CreateDateColumn({ type: "datetime", precision: 6 })
  grantedAt!: Date;
}
