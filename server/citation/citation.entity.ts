import { Column, CreateDateColumn, Entity, Index, PrimaryGeneratedColumn } from "typeorm";

import type { CslName } from "./citationJs";

/** Compared byte by byte: a bibcode's case matters, and no collation may take é for e. */
const EXACT = { charset: "ascii", collation: "ascii_bin" } as const;

/** One paper, as it came and as it is cited. It never changes once it is kept. */
@Entity("citation")
export class Citation {
  @PrimaryGeneratedColumn("uuid")
  id!: string;

  /** The registry's key: first author and year in ASCII. */
  @Index("citation_key", { unique: true })
  @Column({ type: "varchar", length: 80, charset: "ascii", collation: "ascii_general_ci" })
  key!: string;

  @Column({ type: "varchar", length: 40 })
  entryType!: string;

  /** The entry exactly as it came, under the key it came with. */
  @Column({ type: "mediumtext" })
  sourceBibtex!: string;

  /** The same text under the registry's key, with the words of the file's own @string written out. */
  @Column({ type: "mediumtext" })
  entryBibtex!: string;

  /** CSL-JSON; text, so that it is handed out as it was made. */
  @Column({ type: "mediumtext" })
  csl!: string;

  @Index("citation_doi", { unique: true })
  @Column({
    type: "varchar",
    length: 255,
    nullable: true,
    charset: "utf8mb4",
    collation: "utf8mb4_bin",
  })
  doi!: string | null;

  @Index("citation_arxiv", { unique: true })
  @Column({ type: "varchar", length: 40, nullable: true, ...EXACT })
  arxiv!: string | null;

  @Column({ type: "int", nullable: true })
  arxivVersion!: number | null;

  @Index("citation_bibcode", { unique: true })
  @Column({ type: "varchar", length: 19, nullable: true, ...EXACT })
  bibcode!: string | null;

  @Column({ type: "text" })
  title!: string;

  /** Title in the form in which titles are compared (titles.ts). */
  @Index("citation_title")
  @Column({ type: "varchar", length: 500, charset: "utf8mb4", collation: "utf8mb4_bin" })
  titleMatch!: string;

  @Index("citation_year")
  @Column({ type: "int", nullable: true })
  year!: number | null;

  /** As a reference list has them: "van der Zee, M."; "and others" last when the entry says so. */
  @Column({ type: "json" })
  authors!: string[];

  @Column({ type: "json" })
  authorNames!: CslName[];

  @Column({ type: "text", nullable: true })
  container!: string | null;

  @Column({ type: "varchar", length: 100, nullable: true })
  volume!: string | null;

  @Column({ type: "varchar", length: 100, nullable: true })
  pages!: string | null;

  @Column({ type: "varchar", length: 255 })
  shortName!: string;

  /** Who brought it. */
  @Column({ type: "uuid", nullable: true })
  createdById!: string | null;

  @CreateDateColumn({ type: "datetime", precision: 6 })
  createdAt!: Date;
}

/** A single row whose lock lets one transaction at a time look for a paper and keep it. */
@Entity("citation_gate")
export class CitationGate {
  @Column({ type: "int", primary: true })
  id!: number;

  @Column({ type: "bigint", unsigned: true })
  passes!: string;
}
