import { Column, Entity, PrimaryColumn } from "typeorm";

/** A fact about this registry that all its processes share. */
@Entity("setting")
export class Setting {
  @PrimaryColumn({ type: "varchar", length: 64 })
  name!: string;

  @Column({ type: "text" })
  value!: string;
}
