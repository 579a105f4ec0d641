/** The columns of a record in releases and fitting tables, with their units and descriptors. */
import { currentTags, familiesOf } from "~shared/methods/vocabulary";
import { asUsed, type AsUsed } from "~shared/statement/asUsed";

import type { FileCell, FileColumn, FileRow } from "./columnFile/columnFile";
import type { ExportRow } from "./exportRow";

export interface RecordColumn extends FileColumn {
  cell(record: ExportRow, used: AsUsed | null): FileCell;
}

/** Words of a list in one cell. */
export function listCell(words: readonly string[]): string | null {
  return words.length === 0 ? null : words.join("; ");
}

const text = (
  name: string,
  meaning: string,
  cell: RecordColumn["cell"],
  more: Partial<FileColumn> = {},
): RecordColumn => ({ name, meaning, kind: "text", cell, ...more });

const flag = (name: string, meaning: string, cell: RecordColumn["cell"]): RecordColumn => ({
  name,
  meaning,
  kind: "flag",
  ucd: "meta.code",
  cell,
});

const decimal = (
  name: string,
  meaning: string,
  ucd: string,
  cell: RecordColumn["cell"],
): RecordColumn => ({ name, meaning, kind: "decimal", ucd, cell });

const double = (
  name: string,
  meaning: string,
  ucd: string,
  cell: RecordColumn["cell"],
): RecordColumn => ({ name, meaning, kind: "double", ucd, cell });

/**
 * Columns in their order. A limit is told by its kind and its flags, never by a number; an empty cell means that
 * nothing is stated. A number whose unit depends on the quantity (a fraction, an optical depth, a redshift, or
 * million years where duration_unit says so) carries none.
 */
export const RECORD_COLUMNS: readonly RecordColumn[] = [
  text("record", "Number of the record", (record) => record.number, {
    ucd: "meta.id;meta.main",
  }),
  text("revision", "Number with revision, to be quoted", (record) => record.quotable, {
    ucd: "meta.id",
  }),
  text("state", "State of the record: current or superseded", (record) => record.state),
  text("citation_key", "Key in the .bib file", (record) => record.citation.key, {
    ucd: "meta.bib",
  }),
  text("citation", "Short reference", (record) => record.citation.shortName, {
    ucd: "meta.bib.author",
  }),
  {
    name: "year",
    meaning: "Year of the paper",
    kind: "integer",
    ucd: "time.publiYear",
    unit: "a",
    cell: (record) => record.citation.year,
  },
  text("doi", "DOI", (record) => record.citation.doi, { ucd: "meta.ref.doi" }),
  text("arxiv", "arXiv number", (record) => record.citation.arxiv, { ucd: "meta.id" }),
  text("bibcode", "Bibcode", (record) => record.citation.bibcode, { ucd: "meta.bib.bibcode" }),
  text("method_families", "Families of the methods", (record) =>
    listCell(familiesOf(record.fields.methodTags)),
  ),
  text("methods", "Tags of the methods", (record) =>
    listCell(currentTags(record.fields.methodTags)),
  ),
  text("quantity", "Quantity", (record) => record.fields.quantity, { ucd: "meta.code.class" }),
  text("duration_unit", "Unit of a duration: redshift or myr", (_, used) =>
    used?.quantity === "duration" ? used.durationUnit : null,
  ),
  text("weighting", "Volume- or mass-weighted, or unknown", (_, used) =>
    used?.quantity === "neutralFraction" ? used.weighting : null,
  ),
  double("z", "Redshift", "src.redshift", (_, used) => used?.z ?? null),
  double(
    "z_low",
    "Low end of the redshift",
    "src.redshift;stat.min",
    (_, used) => used?.zLow ?? null,
  ),
  double(
    "z_high",
    "High end of the redshift",
    "src.redshift;stat.max",
    (_, used) => used?.zHigh ?? null,
  ),
  text("z_role", "What the redshift stands for", (_, used) => used?.zRole ?? null),
  double(
    "range_low",
    "Optical depth from this redshift",
    "src.redshift;stat.min",
    (_, used) => used?.rangeLow ?? null,
  ),
  double(
    "range_high",
    "Optical depth to this redshift",
    "src.redshift;stat.max",
    (_, used) => used?.rangeHigh ?? null,
  ),
  double(
    "fraction",
    "Neutral fraction of a redshift at a fraction",
    "phys.abund",
    (_, used) => used?.fraction ?? null,
  ),
  double(
    "fraction_from",
    "Duration from this neutral fraction",
    "phys.abund",
    (_, used) => used?.fractionFrom ?? null,
  ),
  double(
    "fraction_to",
    "Duration to this neutral fraction",
    "phys.abund",
    (_, used) => used?.fractionTo ?? null,
  ),
  text("used_kind", "Kind of statement as used", (_, used) => used?.kind ?? null),
  flag(
    "upper_limit",
    "True for an upper limit as used",
    (_, used) => used && used.kind === "upperLimit",
  ),
  flag(
    "lower_limit",
    "True for a lower limit as used",
    (_, used) => used && used.kind === "lowerLimit",
  ),
  text(
    "used_in",
    "linear, or log10 of the neutral fraction",
    (_, used) => used?.evaluatedIn ?? null,
  ),
  decimal("used_value", "Value or limit as used", "phys.abund", (_, used) => used?.value ?? null),
  decimal(
    "used_plus",
    "Error above at the printed level",
    "stat.error;stat.max",
    (_, used) => used?.plus ?? null,
  ),
  decimal(
    "used_minus",
    "Error below at the printed level",
    "stat.error;stat.min",
    (_, used) => used?.minus ?? null,
  ),
  decimal(
    "used_limit_base",
    "Base of a limit with its own sigma",
    "phys.abund",
    (_, used) => used?.limitBase ?? null,
  ),
  decimal(
    "used_limit_sigma",
    "That sigma at the printed level",
    "stat.error",
    (_, used) => used?.limitSigma ?? null,
  ),
  decimal("used_low", "Low end of a band", "phys.abund;stat.min", (_, used) => used?.low ?? null),
  decimal(
    "used_high",
    "High end of a band",
    "phys.abund;stat.max",
    (_, used) => used?.high ?? null,
  ),
  double(
    "printed_level_probability",
    "Level as printed, as a probability",
    "stat.confidenceLevel",
    (_, used) => used?.level ?? null,
  ),
  text("estimator", "What the value is", (_, used) => used?.estimator ?? null),
  flag(
    "derived",
    "True when a number rests on more than an exact change of convention",
    (_, used) => used?.derived ?? null,
  ),
  text("printed_text", "Exact printed text", (record) => record.fields.printedText, {
    ucd: "meta.note",
  }),
  text("printed_species", "Fraction printed", (record) => record.fields.species),
  text("printed_kind", "Kind of statement as printed", (record) => record.fields.kind),
  decimal(
    "printed_value",
    "Value or limit as printed",
    "phys.abund",
    (record) => record.fields.value,
  ),
  text("printed_level", "Level as a word", (record) => record.fields.level),
  text("data_used", "Sightlines, fields, samples", (record) => listCell(record.fields.dataUsed)),
  flag(
    "data_known",
    "False when the paper does not say which data it used",
    (record) => record.fields.dataKnown,
  ),
  text("conditioned_on", "Records or kinds of data inside the result", (record) =>
    listCell(record.fields.conditionedOn),
  ),
  text("version_read", "published, preprint or erratum", (record) => record.fields.versionRead),
  text("place", "Where in the paper", (record) => record.fields.place),
];

/** The cells of a record in the order of RECORD_COLUMNS. */
export function recordCells(
  record: ExportRow,
  used: AsUsed | null = asUsed(record.fields),
): FileRow {
  return RECORD_COLUMNS.map((column) => column.cell(record, used));
}
