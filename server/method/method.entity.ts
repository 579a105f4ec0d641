import { Column, Entity, PrimaryColumn } from "typeorm";

import type { MethodFamily } from "~shared/methods/vocabulary";

/** One method of the vocabulary. Never removed: a retired one stays as a word for what took it over. */
@Entity("method_tag")
export class MethodRow {
  @PrimaryColumn({ type: "varchar", length: 40, charset: "ascii", collation: "ascii_bin" })
  tag!: string;

  @Column({ type: "varchar", length: 24 })
  family!: MethodFamily;

  @Column({ type: "varchar", length: 60 })
  name!: string;

  @Column({ type: "varchar", length: 200 })
  definition!: string;

  @Column({ type: "varchar", length: 200 })
  caution!: string;

  @Column({ type: "json" })
  aliases!: string[];

  @Column({ type: "boolean", default: false })
  neverIndependent!: boolean;

  /** Place in the family's list, lower first. */
  @Column({ type: "int", unsigned: true })
  position!: number;

  /** The tag that took it over; null while it is in use. */
  @Column({ type: "varchar", length: 40, charset: "ascii", collation: "ascii_bin", nullable: true })
  retiredInto!: string | null;

  /** Raised by every change; one that names an older one is refused. */
  @Column({ type: "int", unsigned: true, default: 1 })
  version!: number;
}
