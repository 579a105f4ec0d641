import {
  Column,
  Entity,
  Index,
  JoinColumn,
  ManyToOne,
  PrimaryColumn,
  type Relation,
} from "typeorm";

import type { FileColumn, FileRow } from "~shared/formats/columnFile/columnFile";
import type { Decision } from "~shared/table/decision";
import type { SettledMixture, SettledSet } from "~shared/table/settleTable";

import type { TableRecipe } from "./recipe";
import { SavedTable } from "./table.entity";

/**
 * One version of a fitting table, with all it hands out: what its files say was settled and written when it
 * was saved. Neither it nor its rows are ever written again.
 */
@Entity("fitting_table_version")
export class TableVersion {
  @PrimaryColumn({ type: "varchar", length: 24 })
  slug!: string;

  @PrimaryColumn({ type: "int", unsigned: true })
  version!: number;

  @ManyToOne(() => SavedTable, { onDelete: "RESTRICT" })
  @JoinColumn({ name: "slug" })
  table!: Relation<SavedTable>;

  @Column({ type: "datetime", precision: 6 })
  createdAt!: Date;

  /** The table's name when it was saved: renaming a table changes no byte of its versions. */
  @Column({ type: "varchar", length: 120 })
  name!: string;

  /** Of the table's page, as it was when it was saved. */
  @Column({ type: "varchar", length: 500 })
  address!: string;

  /** Release that its rows come from; null for the latest approved records of that moment. */
  @Column({ type: "int", unsigned: true, nullable: true })
  releaseNumber!: number | null;

  @Column({ type: "json" })
  recipe!: TableRecipe;

  @Column({ type: "varchar", length: 2000 })
  filterWords!: string;

  /** Hexadecimal SHA-256 over the RFC 8785 form of `content` in the JSON file. */
  @Column({ type: "char", length: 64 })
  digest!: string;

  @Column({ type: "int", unsigned: true })
  rowsIn!: number;

  @Column({ type: "int", unsigned: true })
  rowsOut!: number;

  @Column({ type: "int", unsigned: true })
  lastEventSequence!: number;

  @Column({ type: "char", length: 64 })
  lastEventDigest!: string;

  @Column({ type: "datetime", precision: 6 })
  lastEventAt!: Date;

  @Column({ type: "varchar", length: 120 })
  licence!: string;

  @Column({ type: "boolean" })
  demonstration!: boolean;

  @Column({ type: "json" })
  decisions!: Decision[];

  @Column({ type: "json" })
  mixtures!: SettledMixture[];

  @Column({ type: "json" })
  sets!: SettledSet[];

  /** Lines at the head of every file, cautions among them. */
  @Column({ type: "json" })
  lines!: string[];

  @Column({ type: "json" })
  cautions!: string[];

  /** Columns of the tabular files. */
  @Column({ type: "json" })
  columns!: FileColumn[];

  /** The paragraph for a paper's section on methods, in LaTeX. */
  @Column({ type: "mediumtext" })
  methods!: string;

  /** The figure as SVG. */
  @Column({ type: "mediumtext" })
  figure!: string;
}

/** A record of a table's version, in or out. */
@Entity("fitting_table_row")
@Index("rows_by_paper", ["slug", "version", "citationKey"])
export class TableVersionRow {
  @PrimaryColumn({ type: "varchar", length: 24 })
  slug!: string;

  @PrimaryColumn({ type: "int", unsigned: true })
  version!: number;

  /** From 0, in the order of the files. */
  @PrimaryColumn({ type: "int", unsigned: true })
  position!: number;

  /** The record, by its number. */
  @Index()
  @Column({ type: "int", unsigned: true })
  constraintId!: number;

  @Column({ type: "boolean" })
  included!: boolean;

  @Column({ type: "varchar", length: 80, charset: "ascii", collation: "ascii_bin" })
  citationKey!: string;

  /** Its part of `content.rows` in the JSON file, in RFC 8785 form. */
  @Column({ type: "mediumtext" })
  content!: string;

  /** Its cells in the tabular files; null for a row that is out. */
  @Column({ type: "json", nullable: true })
  cells!: FileRow | null;

  /** Its row in the LaTeX table; null for a row that is out. */
  @Column({ type: "text", nullable: true })
  latex!: string | null;

  /** Its part of `content.papers`, in RFC 8785 form. */
  @Column({ type: "mediumtext" })
  paper!: string;

  /** The record as the API shows it, JSON as text. */
  @Column({ type: "mediumtext" })
  record!: string;
}
