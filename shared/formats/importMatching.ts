/** A hand-kept CSV list into drafts: pure, so that the preview and the import are one computation. */
import canonicalize from "canonicalize";
import Papa from "papaparse";

import { formatRecordNumber, parseRecordNumber } from "~shared/identifiers/recordNumber";
import type { ConstraintFields, FieldName } from "~shared/statement/fields";
import { emptyFields } from "~shared/statement/fields";
import { openFields } from "~shared/statement/required";
import { fieldFindings } from "~shared/statement/rules";
import type { Finding } from "~shared/statement/rules";

import {
  importFieldName,
  isImportField,
  isWordChoice,
  isWordField,
  proposeWords,
  wordChoices,
} from "./importFields";
import type { ColumnMatch, ImportField, WordField } from "./importFields";

export {
  choiceWords,
  IMPORT_FIELDS,
  importFieldName,
  isImportField,
  isWordField,
  proposeColumns,
  proposeWords,
} from "./importFields";
export type { ColumnMatch, ImportField, WordField } from "./importFields";

export interface CsvRow {
  /** Line of the file on which the row begins, from 1. */
  line: number;
  cells: string[];
  /** What is wrong with the row as CSV, in words; null when nothing is. */
  problem: string | null;
}

export interface CsvList {
  header: string[];
  rows: CsvRow[];
}

/**
 * Reads a list: comma, semicolon or tab between cells, quotes as in RFC 4180, lines that begin with "#"
 * and empty lines passed over. Columns without a name, or with one twice, get a name of their own.
 *
 * @returns Null when there is no header line.
 */
export function parseList(text: string): CsvList | null {
  const source = text.replace(/^\ufeff/, "").replace(/\r\n?/g, "\n");
  const parsed: { line: number; cells: string[]; problem: string | null }[] = [];
  let line = 1;
  let at = 0;
  Papa.parse<string[]>(source, {
    delimiter: delimiterOf(source),
    newline: "\n",
    skipEmptyLines: false,
    step: ({ data, errors, meta }) => {
      const broken = errors.some((error) => error.type === "Quotes");
      parsed.push({
        line,
        cells: data.map((cell) => cell.trim()),
        problem: broken
          ? "A quotation mark is opened and not closed, or stands inside a cell."
          : null,
      });
      line += source.slice(at, meta.cursor).split("\n").length - 1;
      at = meta.cursor;
    },
  });
  const kept = parsed.filter(
    ({ cells }) => cells.some((cell) => cell !== "") && !(cells[0] ?? "").startsWith("#"),
  );
  const [head, ...rows] = kept;
  if (head === undefined) return null;
  const header = columnNames(head.cells);
  return {
    header,
    rows: rows.map((row) => ({
      ...row,
      problem:
        row.problem ??
        (row.cells.length > header.length
          ? `The row has ${row.cells.length} cells, the header ${header.length}. A cell with a comma needs quotation marks.`
          : null),
    })),
  };
}

/** The separator that stands most often in the header line, quoted parts left aside. */
function delimiterOf(source: string): string {
  const header =
    source.split("\n").find((text) => text.trim() !== "" && !text.startsWith("#")) ?? "";
  const plain = header.replace(/"[^"]*"/g, "");
  const counted = [",", ";", "\t"].map((sign) => ({ sign, count: plain.split(sign).length }));
  return counted.sort((a, b) => b.count - a.count)[0]?.sign ?? ",";
}

function columnNames(cells: readonly string[]): string[] {
  const met = new Set<string>();
  return cells.map((cell, index) => {
    const base = cell === "" ? `column ${index + 1}` : cell;
    let name = base;
    for (let n = 2; met.has(name); n++) name = `${base} (${n})`;
    met.add(name);
    return name;
  });
}

export interface WordMatch {
  field: string;
  word: string;
  /** Null: the field stays open where the word stands. */
  value: string | null;
}

export interface ImportWord {
  field: WordField;
  word: string;
  proposed: string | null;
  choices: string[];
}

/** Fields whose cells may hold several entries, divided by semicolons. */
const LIST_FIELDS: readonly ImportField[] = [
  "methodTags",
  "conditionedOn",
  "dataUsed",
  "modelTags",
  "supersedes",
  "erratumOf",
  "reanalysisOf",
  "subsetOf",
];

/** Fields that name other records. */
const RELATIONS = ["supersedes", "erratumOf", "reanalysisOf", "subsetOf"] as const;

function entriesOf(field: ImportField, cell: string): string[] {
  const entries = LIST_FIELDS.includes(field) ? cell.split(";") : [cell];
  return entries.map((entry) => entry.trim()).filter((entry) => entry !== "");
}

function matchedColumns(
  header: readonly string[],
  columns: readonly ColumnMatch[],
): Map<ImportField, number> {
  const fields = new Map<ImportField, number>();
  for (const { column, field } of columns) {
    const index = header.indexOf(column);
    if (index >= 0 && field !== null && isImportField(field) && !fields.has(field)) {
      fields.set(field, index);
    }
  }
  return fields;
}

/** Every different word that stands in a matched column of words, with what it probably means. */
export function listWords(list: CsvList, columns: readonly ColumnMatch[]): ImportWord[] {
  const words: ImportWord[] = [];
  for (const [field, index] of matchedColumns(list.header, columns)) {
    if (!isWordField(field)) continue;
    const met = new Set(list.rows.flatMap((row) => entriesOf(field, row.cells[index] ?? "")));
    for (const word of met) {
      words.push({ field, word, proposed: proposeWords(field, word), choices: wordChoices(field) });
    }
  }
  return words;
}

/** What a key of the list stands for: a paper that can be kept, or why it can't. */
export type KeyedCitation =
  | { identity: string; shortName: string }
  | {
      problem: string;
      /** Line of the .bib file. */
      line: number;
    };

export interface ImportRefusal {
  file: string;
  line: number;
  column: string | null;
  reason: string;
}

export interface ImportedRow {
  line: number;
  key: string;
  /** The paper's identity as the caller gave it; null when the key stands for none. */
  citation: string | null;
  citationShortName: string | null;
  fields: ConstraintFields;
  refusals: ImportRefusal[];
  /** What a submission will still need. */
  openFields: FieldName[];
  /** Worst grade of what the rules say of the draft; "none" when they say nothing. */
  grade: Finding["grade"] | "none";
  /** Line of an equal row further up, or null. */
  sameAsLine: number | null;
  /** Text to digest, so that a second import finds the row again; "" for a refused row. */
  identity: string;
}

export interface BuildRowsInput {
  list: CsvList;
  csvName: string;
  bibName: string;
  columns: readonly ColumnMatch[];
  /** What the person chose; a word left out of it is taken as proposed. */
  words: readonly WordMatch[];
  /** By the keys of the .bib file. */
  citations: ReadonlyMap<string, KeyedCitation>;
}

/**
 * Every row of the list as a draft's fields, with the reasons that refuse it. Only what is wrong refuses a
 * row; what the list doesn't hold stays open, and a word nobody matched is kept in the remark.
 */
export function buildRows(input: BuildRowsInput): ImportedRow[] {
  const columns = matchedColumns(input.list.header, input.columns);
  const lines = new Map<string, number>();
  return input.list.rows.map((row) => {
    const built = buildRow(row, input, columns);
    const earlier = built.identity === "" ? undefined : lines.get(built.identity);
    if (earlier === undefined && built.identity !== "") lines.set(built.identity, built.line);
    return { ...built, sameAsLine: earlier ?? null };
  });
}

function buildRow(
  row: CsvRow,
  input: BuildRowsInput,
  columns: ReadonlyMap<ImportField, number>,
): ImportedRow {
  const cell = (field: ImportField): string => {
    const index = columns.get(field);
    return index === undefined ? "" : (row.cells[index] ?? "");
  };
  const columnOf = (field: ImportField): string | null => {
    const index = columns.get(field);
    return index === undefined ? null : (input.list.header[index] ?? null);
  };
  const refusals: ImportRefusal[] = [];
  const refuse = (column: string | null, reason: string) =>
    refusals.push({ file: input.csvName, line: row.line, column, reason });

  const key = cell("citationKey");
  const citation = findCitation(input.citations, key);
  if (row.problem !== null) refuse(null, row.problem);
  if (!columns.has("citationKey")) {
    refuse(null, "No column is matched to the citation key, so the row names no paper.");
  } else if (key === "") {
    refuse(columnOf("citationKey"), "The cell is empty: the row names no paper.");
  } else if (citation === null) {
    refuse(columnOf("citationKey"), `The key ${key} is not in ${input.bibName}.`);
  } else if ("problem" in citation) {
    refuse(
      columnOf("citationKey"),
      `The paper ${key} can't be read in ${input.bibName}, line ${citation.line}: ${citation.problem}`,
    );
  }

  const fields = fieldsOf(columns, cell, wordReader(input.words));
  const findings = fieldFindings(fields, { citation: true, complete: false });
  if (row.problem === null) {
    for (const finding of findings) {
      if (finding.grade === "error") {
        refuse(columnOfFinding(finding, fields, columnOf), finding.message);
      }
    }
  }
  const known = citation !== null && "identity" in citation ? citation : null;
  return {
    line: row.line,
    key,
    citation: known?.identity ?? null,
    citationShortName: known?.shortName ?? null,
    fields,
    refusals,
    openFields: openFields(fields),
    grade: findings[0]?.grade ?? "none",
    sameAsLine: null,
    identity: known === null || refusals.length > 0 ? "" : rowIdentity(fields, known.identity),
  };
}

/** By the exact key first; lists and .bib files often differ in case only. */
function findCitation(
  citations: ReadonlyMap<string, KeyedCitation>,
  key: string,
): KeyedCitation | null {
  const exact = citations.get(key);
  if (exact) return exact;
  const loose = [...citations].filter(([name]) => name.toLowerCase() === key.toLowerCase());
  return loose.length === 1 ? (loose[0]?.[1] ?? null) : null;
}

function columnOfFinding(
  finding: Finding,
  fields: ConstraintFields,
  columnOf: (field: ImportField) => string | null,
): string | null {
  for (const name of finding.fields) {
    const direct = isImportField(name) ? columnOf(name) : null;
    if (direct !== null) return direct;
    const from = fields.quantity === "opticalDepthRange" ? RANGE_FROM[name] : undefined;
    const column = from === undefined ? null : columnOf(from);
    if (column !== null) return column;
  }
  return null;
}

/** A list has one pair of columns for redshift ends; those of an optical depth over a range stand there too. */
const RANGE_FROM: Partial<Record<FieldName, ImportField>> = {
  rangeLow: "zLow",
  rangeHigh: "zHigh",
};

/** Text and number fields that are copied as they stand. */
const COPIED = [
  "rangeLow",
  "rangeHigh",
  "fraction",
  "fractionFrom",
  "fractionTo",
  "historyAssumed",
  "heliumAssumed",
  "truncationAssumed",
  "z",
  "zLow",
  "zHigh",
  "value",
  "plus",
  "minus",
  "limitBase",
  "limitSigma",
  "bandLow",
  "bandHigh",
  "furtherIntervals",
  "printedText",
  "priorForm",
  "priorVariable",
  "priorRange",
  "digitizingError",
  "alternativesGroup",
  "preprintVersion",
  "place",
  "page",
  "remark",
] as const satisfies readonly (ImportField & FieldName)[];

type WordReader = (field: WordField, word: string) => string | null;

function wordReader(words: readonly WordMatch[]): WordReader {
  const chosen = new Map(words.map((match) => [`${match.field}\n${match.word}`, match.value]));
  return (field, word) => {
    const choice = chosen.get(`${field}\n${word}`);
    if (choice === undefined) return proposeWords(field, word);
    return choice !== null && isWordChoice(field, choice) ? choice : null;
  };
}

function fieldsOf(
  columns: ReadonlyMap<ImportField, number>,
  cell: (field: ImportField) => string,
  readWord: WordReader,
): ConstraintFields {
  const fields = emptyFields();
  for (const name of COPIED) fields[name] = cell(name) === "" ? null : cell(name);

  const unmatched: string[] = [];
  const wordsOf = (field: WordField): string[] =>
    entriesOf(field, cell(field)).flatMap((word) => {
      const value = readWord(field, word);
      if (value === null) unmatched.push(`${importFieldName(field)}: "${word}"`);
      return value === null ? [] : [value];
    });
  const one = <T extends string>(field: WordField): T | null =>
    (wordsOf(field)[0] as T | undefined) ?? null;

  setQuantity(fields, one("quantity"));
  fields.species = one("species") ?? fields.species;
  fields.helium = one("helium");
  fields.scale = one("scale");
  fields.weighting = one("weighting");
  fields.zRole = one("zRole");
  fields.durationUnit = one("durationUnit") ?? fields.durationUnit;
  fields.kind = one("kind");
  fields.estimator = one("estimator");
  fields.versionRead = one("versionRead");
  fields.cosmicVariance = one("cosmicVariance");
  if (fields.digitizingError !== null) fields.readOffFigure = true;
  fields.methodTags = [...new Set(wordsOf("methodTags"))];
  fields.conditionedOn = [...new Set(wordsOf("conditionedOn"))];
  for (const name of RELATIONS) {
    const entries = entriesOf(name, cell(name));
    const numbers = entries.map((entry) => parseRecordNumber(entry));
    fields[name] = [
      ...new Set(numbers.filter((number) => number !== null).map(formatRecordNumber)),
    ];
    entries
      .filter((_, index) => numbers[index] === null)
      .forEach((entry) => unmatched.push(`${importFieldName(name)}: "${entry}"`));
  }
  const level = one<string>("level");
  if (level?.startsWith("other:")) {
    fields.level = "other";
    fields.levelPercent = level.slice("other:".length);
  } else {
    fields.level = level as ConstraintFields["level"];
  }
  fields.modelTags = columns.has("modelTags") ? entriesOf("modelTags", cell("modelTags")) : [];
  setData(fields, entriesOf("dataUsed", cell("dataUsed")));
  settleByQuantity(fields);
  if (unmatched.length > 0) {
    fields.remark = [fields.remark, `Not matched at import: ${unmatched.join(", ")}.`]
      .filter((part) => part !== null)
      .join(" ");
  }
  return fields;
}

function setQuantity(fields: ConstraintFields, choice: string | null): void {
  if (choice === null) return;
  const [name, from, to] = choice.split(":");
  switch (name) {
    case "neutralFraction":
    case "ionizedFraction":
    case "electronFraction":
      fields.quantity = "neutralFraction";
      fields.species =
        name === "neutralFraction"
          ? "neutral"
          : name === "ionizedFraction"
            ? "ionized"
            : "electron";
      break;
    case "duration":
      fields.quantity = "duration";
      if (from !== undefined && to !== undefined) {
        // From more neutral to less: the list names neutral fractions; the reverse order names ionized ones.
        fields.species = Number(from) >= Number(to) ? "neutral" : "ionized";
        fields.fractionFrom = from;
        fields.fractionTo = to;
        fields.durationUnit = "redshift";
      }
      break;
    case "redshiftAtFraction":
      fields.quantity = "redshiftAtFraction";
      if (from !== undefined) fields.fraction = from;
      break;
    case "opticalDepth":
    case "opticalDepthRange":
      fields.quantity = name;
      break;
  }
}

const DATA_UNKNOWN = /^(?:unknown|not stated|not given|none stated|n\/?a|\?)$/i;

function setData(fields: ConstraintFields, entries: string[]): void {
  if (entries.length === 0) return;
  const unknown = entries.every((entry) => DATA_UNKNOWN.test(entry));
  fields.dataKnown = !unknown;
  fields.dataUsed = unknown ? [] : [...new Set(entries)];
}

/** What belongs to a fraction only is not carried to the other quantities. */
function settleByQuantity(fields: ConstraintFields): void {
  if (fields.quantity === null || fields.quantity === "neutralFraction") return;
  if (fields.quantity === "opticalDepthRange") {
    fields.rangeLow ??= fields.zLow;
    fields.rangeHigh ??= fields.zHigh;
    fields.zLow = null;
    fields.zHigh = null;
  }
  fields.scale = null;
  fields.zRole = null;
}

/** What makes a row the same row in a later import: its paper and all it says, remarks left aside. */
const IDENTITY_LEFT_OUT: readonly FieldName[] = [
  "remark",
  "page",
  "versionRead",
  "preprintVersion",
];

/**
 * Text whose digest tells a row again, whoever imports it.
 *
 * @param citation - The paper's identity: its DOI or the registry's citation key.
 */
export function rowIdentity(fields: ConstraintFields, citation: string): string {
  const kept = Object.fromEntries(
    Object.entries(fields).filter(([name]) => !IDENTITY_LEFT_OUT.includes(name as FieldName)),
  );
  return canonicalize({ citation, fields: kept }) ?? "";
}
