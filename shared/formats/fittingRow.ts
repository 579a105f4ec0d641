/** A row of a fitting table as every file hands it out, and its columns. */
import type { SettledRow } from "~shared/table/settleTable";

import type { FileCell, FileColumn, FileRow } from "./columnFile/columnFile";
import type { ExportRow } from "./exportRow";
import { listCell, RECORD_COLUMNS, recordCells } from "./recordColumns";

/** A record with what the table decided about it. */
export interface FittingRow {
  readonly record: ExportRow;
  readonly settled: SettledRow;
  /** Label of the correlated set it enters with. */
  readonly setLabel: string | null;
}

interface Column extends FileColumn {
  cell(row: FittingRow): FileCell;
}

const text = (name: string, meaning: string, cell: Column["cell"], ucd?: string): Column => ({
  name,
  meaning,
  kind: "text",
  cell,
  ...(ucd === undefined ? {} : { ucd }),
});

/** What the table adds to a record. */
const DECIDED_COLUMNS: readonly Column[] = [
  text(
    "z_treatment",
    "How a history meets it: point, binMean, averagedLikelihood",
    ({ settled }) => ("leftOut" in settled.likelihood ? null : settled.likelihood.redshift),
  ),
  {
    name: "level",
    meaning: "Level as a probability: as printed, or as decided where none is",
    kind: "double",
    ucd: "stat.confidenceLevel",
    cell: ({ settled }) => settled.used?.level ?? settled.options.level ?? null,
  },
  {
    name: "level_decided",
    meaning: "True where the table decided on the level",
    kind: "flag",
    ucd: "meta.code",
    cell: ({ settled: { used, options } }) =>
      used && used.level === null && options.level !== undefined,
  },
  text("likelihood", "Form of the likelihood", ({ settled }) =>
    "leftOut" in settled.likelihood ? null : settled.likelihood.form,
  ),
  text("likelihood_formula", "Its -2 ln L with the row's numbers", ({ settled }) =>
    "leftOut" in settled.likelihood ? null : settled.likelihood.formula,
  ),
  text(
    "likelihood_reason",
    "Why another form than the default was chosen",
    ({ settled }) => settled.formReason,
  ),
  text("mixture", "Alternatives that enter as one equal mixture", ({ settled }) => settled.mixture),
  {
    name: "weight",
    meaning: "Share in that mixture; 1 for a row by itself",
    kind: "double",
    ucd: "stat.weight",
    cell: ({ settled }) => settled.weight,
  },
  text("correlated_set", "Correlated set it enters with", ({ setLabel }) => setLabel),
  text(
    "cautions",
    "What to know about the row",
    ({ settled }) => listCell(settled.cautions),
    "meta.note",
  ),
];

/** Columns of a fitting table in their order: those of the record, then what the table decided. */
export const FITTING_COLUMNS: readonly FileColumn[] = [...RECORD_COLUMNS, ...DECIDED_COLUMNS];

/** The cells of a row in the order of FITTING_COLUMNS. */
export function fittingCells(row: FittingRow): FileRow {
  return [
    ...recordCells(row.record, row.settled.used),
    ...DECIDED_COLUMNS.map((column) => column.cell(row)),
  ];
}
