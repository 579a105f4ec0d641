import { Column, CreateDateColumn, Entity, Index, PrimaryGeneratedColumn } from "typeorm";

/** A mail to be delivered, stored by the transaction that causes it. */
@Entity("outbox_mail")
@Index("outbox_mail_due", ["deliveredAt", "nextTryAt"])
export class OutboxMail {
  @PrimaryGeneratedColumn({ type: "bigint", unsigned: true })
  id!: string;

  @Column({ type: "varchar", length: 254 })
  to!: string;

  @Column({ type: "varchar", length: 200 })
  subject!: string;

  @Column({ type: "mediumtext" })
  text!: string;

  @CreateDateColumn({ type: "datetime", precision: 6 })
  createdAt!: Date;

  @Column({ type: "int", default: 0 })
  tries!: number;

  @Column({ type: "datetime", precision: 6, default: () => "CURRENT_TIMESTAMP(6)" })
  nextTryAt!: Date;

  @Column({ type: "datetime", precision: 6, nullable: true })
  deliveredAt!: Date | null;

  /** Set when delivery was given up. */
  @Column({ type: "datetime", precision: 6, nullable: true })
  failedAt!: Date | null;
}
