import { Column, CreateDateColumn, Entity, PrimaryGeneratedColumn } from "typeorm";

/** What the demonstration's own mail server caught. */
@Entity("caught_mail")
export class CaughtMailRow {
  @PrimaryGeneratedColumn({ type: "bigint", unsigned: true })
  id!: string;

  @Column({ type: "varchar", length: 254 })
  to!: string;

  @Column({ type: "varchar", length: 255 })
  subject!: string;

  @Column({ type: "mediumtext" })
  text!: string;

  @CreateDateColumn({ type: "datetime", precision: 6 })
  at!: Date;
}
