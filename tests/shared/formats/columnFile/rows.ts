import type { FileColumn, FileHead, FileRow } from "~shared/formats/columnFile/columnFile";

const columns: FileColumn[] = [
  { name: "record", meaning: "Number of the record", kind: "text", ucd: "meta.id;meta.main" },
  { name: "z", meaning: "Redshift", kind: "decimal", ucd: "src.redshift" },
  { name: "age", meaning: "Cosmic age there", kind: "double", unit: "Gyr", ucd: "time.age" },
  { name: "year", meaning: "Year of the paper", kind: "integer", ucd: "time.publiYear" },
  { name: "upper_limit", meaning: "True for an upper limit", kind: "flag", ucd: "meta.code" },
  { name: "printed_text", meaning: "Exact printed text", kind: "text", ucd: "meta.note" },
];

/** A table with every kind of column, invented; nulls, signs, quotes and letters beyond ASCII among its cells. */
export const HEAD: FileHead = {
  title: "Invented rows",
  lines: ["All of it is invented.", "Digest: sha256:00"],
  columns,
};

export const ROWS: FileRow[] = [
  [
    "FL-0001",
    "7.10",
    0.7512345678901234,
    2024,
    false,
    "x = 0.30 +0.10 \u22120.05, \u201ctop\u201d # 1",
  ],
  ["FL-0002", "5.9", null, null, true, null],
  ["FL-0003", null, 1e-7, 1999, null, 'Ly\u03b1 at "z"\nnext line, M\u00fcller'],
  ["FL-10000", "\u22120.5", 12, 2026, true, "="],
];
