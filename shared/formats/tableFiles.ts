/** A fitting table as files: rows in and out with the reason, what each row hands to a likelihood, and the choices. */
import type { ConstraintFilter } from "~shared/filter/filter";
import { asUsed } from "~shared/statement/asUsed";
import { WEIGHTINGS, type Weighting } from "~shared/statement/fields";
import { WEIGHTING_WORDS } from "~shared/statement/words";

import {
  cellText,
  CONSTRAINT_COLUMNS,
  constraintCells,
  csvFile,
  READING_NOTE,
} from "./constraintCsv";
import { demonstrationWords, lastEventWords, TABLE_CAUTIONS } from "./exportRow";
import type { ExportHeader, ExportRow } from "./exportRow";

export interface TableFileRow extends ExportRow {
  included: boolean;
  /** Whether the registry proposed it so; false when a person chose otherwise. */
  proposed: boolean;
  /** Why it is in or out, in words; null for a row in without a word. */
  reason: string | null;
  /** Name of the likelihood form, or null when no form takes the row. */
  likelihoodForm: string | null;
  /** Its formula with the row's numbers, or why the row is left out. */
  likelihoodFormula: string | null;
}

/** A paper of the table, as it is cited. */
export interface TablePaper {
  key: string;
  /** The BibTeX entry under that key. */
  bibtex: string;
  /** CSL-JSON, as text. */
  csl: string;
}

export interface TableFile extends ExportHeader {
  name: string;
  /** Address of the table's page. */
  address: string;
  /** The filter itself; header.filter holds its words. */
  filterRecipe: ConstraintFilter;
  rows: readonly TableFileRow[];
  /** Papers of all rows, each once, in the order of their keys. */
  papers: readonly TablePaper[];
}

/** A choice the table records: a row taken out, or in against the proposal, with its reason. */
export interface TableChoice {
  record: string;
  included: boolean;
  by: "default" | "person";
  reason: string | null;
}

function choicesOf(table: TableFile): TableChoice[] {
  return table.rows
    .filter((row) => !row.included || !row.proposed || row.reason !== null)
    .map((row) => ({
      record: row.quotable,
      included: row.included,
      by: row.proposed ? "default" : "person",
      reason: row.reason,
    }));
}

function included(table: TableFile): TableFileRow[] {
  return table.rows.filter((row) => row.included);
}

/** How the neutral fractions among the rows in are weighted, and how many of each there are. */
function weightingsOf(table: TableFile): { weighting: Weighting; rows: number }[] {
  const fractions = included(table).filter((row) => row.fields.quantity === "neutralFraction");
  return WEIGHTINGS.map((weighting) => ({
    weighting,
    rows: fractions.filter((row) => (row.fields.weighting ?? "unknown") === weighting).length,
  })).filter(({ rows }) => rows > 0);
}

/** "Volume-weighted 5, mass-weighted 1 (mixed)", or null without a neutral fraction. */
function weightingWords(table: TableFile): string | null {
  const weightings = weightingsOf(table);
  if (weightings.length === 0) return null;
  const words = weightings
    .map(({ weighting, rows }) => `${WEIGHTING_WORDS[weighting].toLowerCase()} ${rows}`)
    .join(", ");
  return `${words.charAt(0).toUpperCase()}${words.slice(1)}${weightings.length > 1 ? " (mixed)" : ""}`;
}

/** What a reader of this table must know, beside what holds for every export. */
function cautionsOf(table: TableFile): string[] {
  const opticalDepth = included(table).some(
    ({ fields }) => fields.quantity === "opticalDepth" || fields.quantity === "opticalDepthRange",
  );
  return [
    ...TABLE_CAUTIONS,
    ...(weightingsOf(table).length > 1
      ? ["Neutral fractions of different weightings stand side by side; none is converted."]
      : []),
    ...(opticalDepth
      ? [
          "An optical depth came from a history family, with helium and weighting assumed by its authors.",
        ]
      : []),
  ];
}

/**
 * What a table says: the part of its JSON file that its digest is over. It holds no clock, name,
 * owner or address, so that the same choices over the same revisions have the same digest.
 */
export function tableContent(table: TableFile) {
  return {
    registry: table.registry,
    demonstration: table.demonstration,
    licence: table.licence,
    filter: { words: table.filter, recipe: table.filterRecipe },
    cautions: cautionsOf(table),
    weighting: weightingsOf(table),
    choices: choicesOf(table),
    rows: table.rows.map((row) => ({
      record: row.number,
      revision: row.quotable,
      state: row.state,
      included: row.included,
      by: row.proposed ? "default" : "person",
      reason: row.reason,
      likelihood: { form: row.likelihoodForm, formula: row.likelihoodFormula },
      citation: row.citation,
      printed: row.fields,
      used: asUsed(row.fields),
    })),
    papers: table.papers,
  };
}

const DIGEST_NOTE = "SHA-256 over the RFC 8785 form of content";

/**
 * The table as JSON, ended by a line feed.
 *
 * @param digest - Hexadecimal SHA-256 over the RFC 8785 form of `tableContent`.
 */
export function tableJson(table: TableFile, digest: string): string {
  const file = {
    format: "fogline-fitting-table/1",
    digest: `sha256:${digest}`,
    digestOver: DIGEST_NOTE,
    name: table.name,
    address: table.address,
    lastEvent: table.lastEvent,
    content: tableContent(table),
  };
  return `${JSON.stringify(file, null, 2)}\n`;
}

const TABLE_COLUMNS = ["included", "by", "reason", "likelihood_form", "likelihood_formula"];

/** The table as CSV: rows in first, then rows out, each with its reason. */
export function tableCsv(table: TableFile, digest: string): string {
  const rowsIn = included(table);
  const rowsOut = table.rows.filter((row) => !row.included);
  const weighting = weightingWords(table);
  return csvFile(
    [
      `${table.registry}: fitting table "${table.name}"`,
      demonstrationWords(table.demonstration),
      `Address: ${table.address}`,
      `Filter: ${table.filter}`,
      `Rows in: ${rowsIn.length}; rows out: ${rowsOut.length}`,
      weighting && `Weighting of the neutral fractions in: ${weighting}`,
      `Last event: ${lastEventWords(table)}`,
      `Digest: sha256:${digest} (${DIGEST_NOTE} in the JSON file)`,
      `Licence: ${table.licence}`,
      ...choiceLines(table),
      ...cautionsOf(table),
      READING_NOTE,
    ],
    [...TABLE_COLUMNS, ...CONSTRAINT_COLUMNS.map((column) => column.name)],
    [...rowsIn, ...rowsOut].map((row) => [
      cellText(row.included),
      row.proposed ? "default" : "person",
      cellText(row.reason),
      cellText(row.likelihoodForm),
      cellText(row.likelihoodFormula),
      ...constraintCells(row),
    ]),
  );
}

function choiceLines(table: TableFile): string[] {
  const choices = choicesOf(table);
  if (choices.length === 0) return ["Choices: every row as proposed"];
  return choices.map(
    (choice) =>
      `Choice: ${choice.record} ${choice.included ? "in" : "out"} (${choice.by})${choice.reason === null ? "" : `: ${choice.reason}`}`,
  );
}

/** Lines at the head of the table's bibliography: what it belongs to, and every choice. */
export function tableBibliographyLines(table: TableFile, digest: string): string[] {
  const demonstration = demonstrationWords(table.demonstration);
  return [
    `${table.registry}: papers of the rows in fitting table "${table.name}"`,
    ...(demonstration ? [demonstration] : []),
    `Address: ${table.address}`,
    `Digest: sha256:${digest} (${DIGEST_NOTE} in the JSON file)`,
    `Data licence: ${table.licence}. The papers are their authors': cite them.`,
    ...choiceLines(table),
    ...cautionsOf(table),
  ];
}
