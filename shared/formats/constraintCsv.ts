/** The filtered list as CSV (RFC 4180, UTF-8), as printed and as used side by side. */
import Papa from "papaparse";

import { currentTags, familiesOf } from "~shared/methods/vocabulary";
import { asUsed } from "~shared/statement/asUsed";
import type { AsUsed } from "~shared/statement/asUsed";
import { curveFacts } from "~shared/statement/curve";

import {
  commentLine,
  demonstrationWords,
  EXPORT_CAUTIONS,
  lastEventWords,
  safeCell,
} from "./exportRow";
import type { ExportHeader, ExportRow } from "./exportRow";

type Cell = string | number | boolean | null;

interface Column<Row> {
  name: string;
  /** What the column holds, for the documentation. */
  meaning: string;
  cell(row: Row, used: AsUsed | null): Cell;
}

function list(entries: readonly string[]): string {
  return entries.join("; ");
}

/**
 * Columns in their order. An empty cell means that nothing is stated; a limit is told by its kind and its
 * flag, never by a magic number. "printed" is what the paper says, "used" its neutral-fraction form.
 */
export const CONSTRAINT_COLUMNS: readonly Column<ExportRow>[] = [
  { name: "record", meaning: "Number of the record", cell: (row) => row.number },
  { name: "revision", meaning: "Number with revision, to be quoted", cell: (row) => row.quotable },
  { name: "state", meaning: "State of the record", cell: (row) => row.state },
  { name: "citation_key", meaning: "Key in the .bib file", cell: (row) => row.citation.key },
  { name: "citation", meaning: "Short reference", cell: (row) => row.citation.shortName },
  { name: "year", meaning: "Year of the paper", cell: (row) => row.citation.year },
  { name: "doi", meaning: "DOI", cell: (row) => row.citation.doi },
  { name: "arxiv", meaning: "arXiv number", cell: (row) => row.citation.arxiv },
  { name: "bibcode", meaning: "Bibcode", cell: (row) => row.citation.bibcode },
  { name: "quantity", meaning: "Quantity", cell: (row) => row.fields.quantity },
  {
    name: "method_families",
    meaning: "Families of the methods",
    cell: (row) => list(familiesOf(row.fields.methodTags)),
  },
  {
    name: "methods",
    meaning: "Tags of the methods",
    cell: (row) => list(currentTags(row.fields.methodTags)),
  },
  { name: "z", meaning: "Redshift", cell: (row) => row.fields.z },
  { name: "z_low", meaning: "Low end of the redshift", cell: (row) => row.fields.zLow },
  { name: "z_high", meaning: "High end of the redshift", cell: (row) => row.fields.zHigh },
  { name: "z_role", meaning: "What the redshift stands for", cell: (row) => row.fields.zRole },
  {
    name: "range_low",
    meaning: "Range of an optical depth, from redshift",
    cell: (row) => row.fields.rangeLow,
  },
  {
    name: "range_high",
    meaning: "Range of an optical depth, to redshift",
    cell: (row) => row.fields.rangeHigh,
  },
  { name: "weighting", meaning: "Volume- or mass-weighted", cell: (row) => row.fields.weighting },
  { name: "estimator", meaning: "What the value is", cell: (row) => row.fields.estimator },
  { name: "level", meaning: "Level as a word", cell: (row) => row.fields.level },
  {
    name: "level_probability",
    meaning: "Level as a probability; empty when not stated",
    cell: (_, used) => used?.level ?? null,
  },
  {
    name: "level_not_stated",
    meaning: "True when the paper states no level",
    cell: (row) => row.fields.level === "notStated",
  },
  { name: "printed_species", meaning: "Fraction printed", cell: (row) => row.fields.species },
  {
    name: "printed_helium",
    meaning: "Helium electrons in a printed electron fraction",
    cell: (row) => row.fields.helium,
  },
  { name: "printed_scale", meaning: "Linear or log10", cell: (row) => row.fields.scale },
  { name: "printed_kind", meaning: "Kind of statement as printed", cell: (row) => row.fields.kind },
  { name: "printed_value", meaning: "Value or limit as printed", cell: (row) => row.fields.value },
  { name: "printed_plus", meaning: "Error above as printed", cell: (row) => row.fields.plus },
  { name: "printed_minus", meaning: "Error below as printed", cell: (row) => row.fields.minus },
  {
    name: "printed_limit_base",
    meaning: "Base of a limit with its own sigma",
    cell: (row) => row.fields.limitBase,
  },
  { name: "printed_limit_sigma", meaning: "That sigma", cell: (row) => row.fields.limitSigma },
  { name: "printed_band_low", meaning: "Low end of a band", cell: (row) => row.fields.bandLow },
  { name: "printed_band_high", meaning: "High end of a band", cell: (row) => row.fields.bandHigh },
  {
    name: "printed_curve_rows",
    meaning: "Rows of a tabulated curve; the rows themselves are a file of the record",
    cell: ({ fields }) => {
      const facts = curveFacts(fields.curveTable, fields.curveColumn);
      return facts === null ? null : Number(facts.rows);
    },
  },
  {
    name: "printed_curve_column",
    meaning: "What its second column holds: density or lnLikelihood",
    cell: (row) => row.fields.curveColumn,
  },
  {
    name: "printed_fraction",
    meaning: "Fraction of a redshift at a fraction",
    cell: (row) => row.fields.fraction,
  },
  {
    name: "printed_fraction_from",
    meaning: "Duration from this fraction",
    cell: (row) => row.fields.fractionFrom,
  },
  {
    name: "printed_fraction_to",
    meaning: "Duration to that fraction",
    cell: (row) => row.fields.fractionTo,
  },
  { name: "duration_unit", meaning: "redshift or myr", cell: (row) => row.fields.durationUnit },
  {
    name: "history_assumed",
    meaning: "History family an optical depth or duration was derived with",
    cell: (row) => row.fields.historyAssumed,
  },
  {
    name: "helium_assumed",
    meaning: "How helium was treated in an optical depth",
    cell: (row) => row.fields.heliumAssumed,
  },
  {
    name: "truncation_assumed",
    meaning: "Where the history or the integral was cut off",
    cell: (row) => row.fields.truncationAssumed,
  },
  { name: "printed_text", meaning: "Exact printed text", cell: (row) => row.fields.printedText },
  {
    name: "used_kind",
    meaning: "Kind of statement as used",
    cell: (_, used) => used?.kind ?? null,
  },
  {
    name: "used_in",
    meaning: "linear, or log10 of the neutral fraction",
    cell: (_, used) => used?.evaluatedIn ?? null,
  },
  {
    name: "used_upper_limit",
    meaning: "True for an upper limit as used",
    cell: (_, used) => used && used.kind === "upperLimit",
  },
  {
    name: "used_lower_limit",
    meaning: "True for a lower limit as used",
    cell: (_, used) => used && used.kind === "lowerLimit",
  },
  { name: "used_value", meaning: "Value or limit as used", cell: (_, used) => used?.value ?? null },
  {
    name: "used_plus",
    meaning: "Error above at the printed level",
    cell: (_, used) => used?.plus ?? null,
  },
  {
    name: "used_minus",
    meaning: "Error below at the printed level",
    cell: (_, used) => used?.minus ?? null,
  },
  {
    name: "used_limit_base",
    meaning: "Base of a limit as used",
    cell: (_, used) => used?.limitBase ?? null,
  },
  {
    name: "used_limit_sigma",
    meaning: "Its own sigma at the printed level",
    cell: (_, used) => used?.limitSigma ?? null,
  },
  { name: "used_low", meaning: "Low end of a band as used", cell: (_, used) => used?.low ?? null },
  {
    name: "used_high",
    meaning: "High end of a band as used",
    cell: (_, used) => used?.high ?? null,
  },
  {
    name: "used_k",
    meaning: "Half-width of the level in sigma",
    cell: (_, used) => used?.k ?? null,
  },
  {
    name: "used_sigma_plus",
    meaning: "One-sigma equivalent above, plus / k",
    cell: (_, used) => used?.sigmaPlus ?? null,
  },
  {
    name: "used_sigma_minus",
    meaning: "One-sigma equivalent below, minus / k",
    cell: (_, used) => used?.sigmaMinus ?? null,
  },
  {
    name: "used_fraction",
    meaning: "Neutral fraction of a redshift at a fraction",
    cell: (_, used) => used?.fraction ?? null,
  },
  {
    name: "used_fraction_from",
    meaning: "Duration from this neutral fraction",
    cell: (_, used) => used?.fractionFrom ?? null,
  },
  {
    name: "used_fraction_to",
    meaning: "Duration to that neutral fraction",
    cell: (_, used) => used?.fractionTo ?? null,
  },
  {
    name: "used_derived",
    meaning: "True when a number rests on more than an exact change of convention",
    cell: (_, used) => used?.derived ?? null,
  },
  {
    name: "conversions",
    meaning: "Each conversion in words",
    cell: (_, used) => used?.steps.map((step) => step.text).join(" ") ?? null,
  },
  {
    name: "data_known",
    meaning: "False when the paper does not say which data it used",
    cell: (row) => row.fields.dataKnown,
  },
  {
    name: "data_used",
    meaning: "Sightlines, fields, samples",
    cell: (row) => list(row.fields.dataUsed),
  },
  {
    name: "conditioned_on",
    meaning: "Records or kinds of data inside the result",
    cell: (row) => list(row.fields.conditionedOn),
  },
  {
    name: "cosmic_variance",
    meaning: "Included, excluded or unknown",
    cell: (row) => row.fields.cosmicVariance,
  },
  {
    name: "alternatives_group",
    meaning: "Label shared by the alternatives of one paper",
    cell: (row) => row.fields.alternativesGroup,
  },
  {
    name: "alternatives_preferred",
    meaning: "True for the paper's preferred one",
    cell: (row) => row.fields.alternativesPreferred,
  },
  {
    name: "version_read",
    meaning: "published, preprint or erratum",
    cell: (row) => row.fields.versionRead,
  },
  {
    name: "preprint_version",
    meaning: "Version of the preprint",
    cell: (row) => row.fields.preprintVersion,
  },
  { name: "place", meaning: "Where in the paper", cell: (row) => row.fields.place },
  { name: "page", meaning: "Page", cell: (row) => row.fields.page },
  {
    name: "read_off_figure",
    meaning: "True when read off a figure",
    cell: (row) => row.fields.readOffFigure,
  },
  {
    name: "digitizing_error",
    meaning: "Its digitizing error",
    cell: (row) => row.fields.digitizingError,
  },
  { name: "remark", meaning: "Remark", cell: (row) => row.fields.remark },
];

/** A cell's text: numbers in full precision, flags as true and false, nothing as nothing. */
export function cellText(cell: Cell): string {
  if (cell === null) return "";
  return typeof cell === "string" ? safeCell(cell) : String(cell);
}

/** A whole CSV file: header lines that start with "# ", the column line, the rows; lines end with CR LF. */
export function csvFile(
  comments: readonly (string | null)[],
  columns: readonly string[],
  rows: readonly (readonly string[])[],
): string {
  const head = comments.filter((line) => line !== null).map((line) => `${commentLine(line)}\r\n`);
  // A number sign in a cell would begin a comment in readers that know the header lines.
  const quoted = (value: unknown) => typeof value === "string" && /[#'=]/.test(value);
  const body = Papa.unparse(
    { fields: [...columns], data: rows.map((row) => [...row]) },
    {
      newline: "\r\n",
      quotes: quoted as never,
    },
  );
  return `${head.join("")}${body}\r\n`;
}

/** Cells of one record in the order of CONSTRAINT_COLUMNS. */
export function constraintCells(row: ExportRow): string[] {
  const used = asUsed(row.fields);
  return CONSTRAINT_COLUMNS.map((column) => cellText(column.cell(row, used)));
}

/** How to read the cells, said once in every header. */
export const READING_NOTE =
  "Fractions in used_ columns are neutral, at the printed level; an empty cell means nothing is stated; text that begins like a formula is preceded by an apostrophe.";

/** The list as CSV; the same rows and header give the same bytes, for no clock is read. */
export function constraintsCsv(rows: readonly ExportRow[], header: ExportHeader): string {
  return csvFile(
    [
      `${header.registry}: published constraints on the neutral fraction of the intergalactic medium`,
      demonstrationWords(header.demonstration),
      `Filter: ${header.filter}`,
      `Records: ${rows.length}`,
      `Last event: ${lastEventWords(header)}`,
      `Licence: ${header.licence}`,
      ...EXPORT_CAUTIONS,
      READING_NOTE,
    ],
    CONSTRAINT_COLUMNS.map((column) => column.name),
    rows.map(constraintCells),
  );
}
