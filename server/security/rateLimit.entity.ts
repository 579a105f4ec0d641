import { Column, Entity, PrimaryColumn } from "typeorm";

/** Table of rate-limiter-flexible, whose column order this must keep. */
@Entity("rate_limit")
export class RateLimitRow {
  @PrimaryColumn({ type: "varchar", length: 255, charset: "utf8mb4", collation: "utf8mb4_bin" })
  key!: string;

  @Column({ type: "int", default: 0 })
  points!: number;

  @Column({ type: "bigint", unsigned: true, nullable: true })
  expire!: string | null;
}
