import {
  Column,
  CreateDateColumn,
  Entity,
  Index,
  JoinColumn,
  ManyToOne,
  PrimaryGeneratedColumn,
  Unique,
  type Relation,
} from "typeorm";

import type { DataKind, DataRelation } from "~shared/dependence/namedData";

/** A named sightline, field or sample: a thing of its own, whatever a paper calls it. */
@Entity("named_data")
export class NamedData {
  @PrimaryGeneratedColumn({ type: "int", unsigned: true })
  id!: number;

  /** Its part of the address; stays when the name changes. */
  @Index("data_slug", { unique: true })
  @Column({ type: "varchar", length: 90, charset: "ascii", collation: "ascii_bin" })
  slug!: string;

  @Column({ type: "varchar", length: 300 })
  name!: string;

  @Column({ type: "varchar", length: 12, default: "unknown" })
  kind!: DataKind;

  /** Right ascension, degrees, J2000, as typed. */
  @Column({ type: "varchar", length: 24, nullable: true })
  ra!: string | null;

  /** Declination, degrees, J2000, as typed. */
  @Column({ type: "varchar", length: 24, nullable: true })
  dec!: string | null;

  /** Area or extent in words. */
  @Column({ type: "varchar", length: 300, nullable: true })
  extent!: string | null;

  @Column({ type: "text", nullable: true })
  note!: string | null;

  /** The thing of which this name is an alias since they were merged. */
  @Column({ type: "int", unsigned: true, nullable: true })
  mergedIntoId!: number | null;

  /** Raised by every change; one that names an older one is refused. */
  @Column({ type: "int", unsigned: true, default: 1 })
  version!: number;

  @CreateDateColumn({ type: "datetime", precision: 6 })
  createdAt!: Date;
}

/** A spelling that a thing goes by, its name among them. */
@Entity("named_data_alias")
export class NamedDataAlias {
  @PrimaryGeneratedColumn({ type: "int", unsigned: true })
  id!: number;

  @Index("aliases_of_data")
  @Column({ type: "int", unsigned: true })
  dataId!: number;

  @ManyToOne(() => NamedData, { onDelete: "CASCADE" })
  @JoinColumn({ name: "dataId" })
  data!: Relation<NamedData>;

  @Column({ type: "varchar", length: 300 })
  name!: string;

  /** The form in which names are compared: a spelling stands for one thing. `revision_data` has the same. */
  @Index("one_spelling", { unique: true })
  @Column({ type: "varchar", length: 200 })
  comparable!: string;
}

/** "from is a subset of to", or "from overlaps with to". */
@Entity("named_data_relation")
@Unique("one_data_relation", ["fromId", "toId"])
export class NamedDataRelation {
  @PrimaryGeneratedColumn({ type: "int", unsigned: true })
  id!: number;

  @Column({ type: "int", unsigned: true })
  fromId!: number;

  @ManyToOne(() => NamedData, { onDelete: "CASCADE" })
  @JoinColumn({ name: "fromId" })
  from!: Relation<NamedData>;

  @Column({ type: "varchar", length: 12 })
  relation!: DataRelation;

  @Index("data_related_to")
  @Column({ type: "int", unsigned: true })
  toId!: number;

  @ManyToOne(() => NamedData, { onDelete: "CASCADE" })
  @JoinColumn({ name: "toId" })
  to!: Relation<NamedData>;
}
