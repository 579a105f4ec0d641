/** A fitting table as files: rows in and out with the reason, what each row hands to a likelihood, and the choices. */
import type { ConstraintFilter } from "~shared/filter/filter";
import { asUsed } from "~shared/statement/asUsed";

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

export interface TableFile extends ExportHeader {
  name: string;
  slug: string;
  /** Address the table is fetched from. */
  address: string;
  /** The filter itself; header.filter holds its words. */
  filterRecipe: ConstraintFilter;
  rows: readonly TableFileRow[];
}

/** A choice the table records: a row taken out or in against the proposal, or with a reason. */
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

/** Everything a table's file holds, except its digest and where it is fetched from. */
export function tableContent(table: TableFile) {
  return {
    format: "fogline-fitting-table/1",
    name: table.name,
    registry: table.registry,
    demonstration: table.demonstration,
    lastEvent: table.lastEvent,
    filter: { words: table.filter, recipe: table.filterRecipe },
    licence: table.licence,
    cautions: [...TABLE_CAUTIONS],
    choices: choicesOf(table),
    rows: table.rows.map((row) => ({
      record: row.number,
      revision: row.quotable,
      state: row.state,
      included: row.included,
      proposed: row.proposed,
      reason: row.reason,
      likelihood: { form: row.likelihoodForm, formula: row.likelihoodFormula },
      citation: row.citation,
      printed: row.fields,
      used: asUsed(row.fields),
    })),
  };
}

/** The table as JSON, ended by a line feed. */
export function tableJson(table: TableFile, digest: string): string {
  const { format, ...content } = tableContent(table);
  const file = { format, digest: `sha256:${digest}`, address: table.address, ...content };
  return `${JSON.stringify(file, null, 2)}\n`;
}

const TABLE_COLUMNS = ["included", "by", "reason", "likelihood_form", "likelihood_formula"];

/** The table as CSV: rows in first, then rows out, each with its reason. */
export function tableCsv(table: TableFile, digest: string): string {
  const ordered = [
    ...table.rows.filter((row) => row.included),
    ...table.rows.filter((row) => !row.included),
  ];
  const rowsIn = table.rows.filter((row) => row.included).length;
  return csvFile(
    [
      `${table.registry}: fitting table "${table.name}"`,
      demonstrationWords(table.demonstration),
      `Address: ${table.address}`,
      `Filter: ${table.filter}`,
      `Rows in: ${rowsIn}; rows out: ${table.rows.length - rowsIn}`,
      `Last event: ${lastEventWords(table)}`,
      `Digest: sha256:${digest} (over the filter, rows, revisions and citations; no clock, name or owner)`,
      `Licence: ${table.licence}`,
      ...choiceLines(table),
      ...TABLE_CAUTIONS,
      READING_NOTE,
    ],
    [...TABLE_COLUMNS, ...CONSTRAINT_COLUMNS.map((column) => column.name)],
    ordered.map((row) => [
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
