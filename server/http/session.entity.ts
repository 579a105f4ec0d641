import { Column, Entity, Index, PrimaryColumn } from "typeorm";

/** Table of express-mysql-session, listed here so that migrations and backups know it. */
@Entity("session")
export class SessionRow {
  @PrimaryColumn({
    name: "session_id",
    type: "varchar",
    length: 128,
    charset: "utf8mb4",
    collation: "utf8mb4_bin",
  })
  sessionId!: string;

  @Index("session_expires")
  @Column({ type: "int", unsigned: true })
  expires!: number;

  @Column({ type: "mediumtext", nullable: true })
  data!: string | null;
}
