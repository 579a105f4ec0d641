/** A tabulated curve: from CSV text to checked rows as printed, and to the nodes a likelihood takes. */
import Big from "big.js";
import Papa from "papaparse";

import { parseDecimal } from "./decimal";
import type { ConstraintFields, CurveColumn } from "./fields";
import { HELIUM_PER_HYDROGEN } from "./helium";

export const CURVE_FEWEST_ROWS = 20;
export const CURVE_MOST_ROWS = 2000;
/** Longest text of a curve, in characters. */
export const CURVE_LONGEST = 100_000;

/** One row as printed. */
export interface CurveRow {
  /** Line of the text, from 1. */
  readonly line: number;
  /** The value as typed, in the record's species and scale. */
  readonly text: string;
  readonly value: Big;
  /** Density or ln L. */
  readonly height: number;
}

export interface CurveProblem {
  /** Line of the text, from 1; null for what concerns the whole. */
  readonly line: number | null;
  readonly message: string;
}

export interface ParsedCurve {
  /** Rows that could be read, in the order of the text, [n]. */
  readonly rows: readonly CurveRow[];
  /** Column names, where the first line holds some. */
  readonly header: readonly string[] | null;
  /** Why the text is no curve, in the order of its lines; empty where it is one. */
  readonly problems: readonly CurveProblem[];
}

/** Places and densities of a curve, [n] each. */
export interface CurveNodes {
  /** Strictly ascending. */
  readonly x: readonly number[];
  /** Density relative to the highest, in (0, 1]. */
  readonly p: readonly number[];
}

/** What a person can say about a printed curve at a glance; a second reading asks for it. */
export interface CurveFacts {
  rows: string;
  first: string;
  last: string;
  /** Value of the highest row. */
  peak: string;
}

const NUMBER = /^[+\-\u2212\u2013]?(\d+\.?\d*|\.\d+)(?:[eE][+\-\u2212]?\d{1,3})?$/;

/** A computed height may carry more digits and a longer exponent than a printed number. */
function heightOf(text: string): number | null {
  const plain = text.trim();
  if (plain.length > 40 || !NUMBER.test(plain)) return null;
  const value = Number(plain.replace(/[\u2212\u2013]/g, "-"));
  return Number.isFinite(value) ? value : null;
}

function separatorOf(lines: readonly string[]): string {
  const first = lines.find((line) => line.trim() !== "") ?? "";
  return [",", ";", "\t"].find((mark) => first.includes(mark)) ?? " ";
}

/** The last parsed texts: screens and lists ask for the same curve many times over. */
const remembered = new Map<string, ParsedCurve>();
const MOST_REMEMBERED = 32;

/**
 * Reads and checks the text of a curve. Lines that begin with # are comments; the first line may hold
 * column names; the columns stand apart by commas, semicolons, tabs or blanks.
 *
 * @param column - What the second column holds; while it is open (null) its sign is not checked.
 * @returns Rows and problems; any text may come in, nothing throws.
 */
export function parseCurve(text: string, column: CurveColumn | null): ParsedCurve {
  const key = `${column ?? ""}\n${text}`;
  const known = remembered.get(key);
  if (known) return known;
  const parsed = parse(text, column);
  remembered.set(key, parsed);
  if (remembered.size > MOST_REMEMBERED) remembered.delete(remembered.keys().next().value ?? "");
  return parsed;
}

function parse(text: string, column: CurveColumn | null): ParsedCurve {
  if (text.length > CURVE_LONGEST) {
    const message = `The curve has ${text.length} characters; ${CURVE_LONGEST} at most. Keep fewer rows or fewer digits.`;
    return { rows: [], header: null, problems: [{ line: null, message }] };
  }
  const lines = text
    .replace(/^\uFEFF/, "")
    .split(/\r\n|\r|\n/)
    .map((line) => (line.trimStart().startsWith("#") ? "" : line));
  const separator = separatorOf(lines);
  const { data } = Papa.parse<string[]>(
    lines.map((line) => (separator === " " ? line.trim().replace(/\s+/g, " ") : line)).join("\n"),
    { delimiter: separator, newline: "\n" },
  );

  const rows: CurveRow[] = [];
  const problems: CurveProblem[] = [];
  let header: string[] | null = null;
  data.forEach((cells, index) => {
    const line = index + 1;
    const held = withoutEmptyEnd(cells.map((cell) => cell.trim()));
    if (held.length === 0) return;
    const [first = "", second = ""] = held;
    if (held.length === 2 && rows.length === 0 && header === null && problems.length === 0) {
      if (parseDecimal(first) === null && heightOf(second) === null && !/^[\d.]/.test(first)) {
        header = held;
        return;
      }
    }
    const message = rowProblem(held, column);
    const value = parseDecimal(first);
    const height = heightOf(second);
    if (message !== null) problems.push({ line, message });
    else if (value && height !== null) rows.push({ line, text: first, value, height });
  });
  problems.push(
    ...orderProblems(rows),
    ...countProblems(rows, problems),
    ...zeroProblems(rows, column),
  );
  problems.sort((a, b) => (a.line ?? 0) - (b.line ?? 0));
  return { rows, header, problems };
}

function withoutEmptyEnd(cells: readonly string[]): string[] {
  const last = cells.findLastIndex((cell) => cell !== "");
  return cells.slice(0, last + 1);
}

function rowProblem(cells: readonly string[], column: CurveColumn | null): string | null {
  const [first = "", second = ""] = cells;
  if (cells.length > 2) {
    return `It has ${cells.length} columns. Keep two: the value, then the density or ln L.`;
  }
  if (cells.length < 2) return "It has one column. A row is a value, then its density or ln L.";
  if (parseDecimal(first) === null) return `"${short(first)}" is not a number.`;
  const height = heightOf(second);
  if (height === null) {
    return /^[+-]?(?:inf|nan)/i.test(second)
      ? `"${short(second)}" can't be drawn. Leave such a row out: the curve excludes what lies beyond its ends.`
      : `"${short(second)}" is not a number.`;
  }
  if (column === "density" && height < 0) {
    return `The density is ${second.replace("-", "\u2212")}; it can't be negative. Is the second column ln L?`;
  }
  return null;
}

function short(text: string): string {
  return text.length > 24 ? `${text.slice(0, 24)}…` : text;
}

function orderProblems(rows: readonly CurveRow[]): CurveProblem[] {
  const [first, second] = rows;
  if (!first || !second) return [];
  const falling = second.value.lt(first.value);
  for (let i = 1; i < rows.length; i++) {
    const [before, here] = [rows[i - 1]!, rows[i]!];
    if (falling ? here.value.lt(before.value) : here.value.gt(before.value)) continue;
    const message = here.value.eq(before.value)
      ? `The value ${here.text} stands there a second time.`
      : `The value ${here.text} follows ${before.text}: the values must ${falling ? "fall" : "rise"} from row to row.`;
    return [{ line: here.line, message }];
  }
  return [];
}

function countProblems(rows: readonly CurveRow[], unread: readonly CurveProblem[]): CurveProblem[] {
  const count = rows.length + unread.filter(({ line }) => line !== null).length;
  if (count > CURVE_MOST_ROWS) {
    return [{ line: null, message: `The curve has ${count} rows; ${CURVE_MOST_ROWS} at most.` }];
  }
  return count < CURVE_FEWEST_ROWS
    ? [
        {
          line: null,
          message: `The curve has ${count === 1 ? "one row" : `${count} rows`}; it needs ${CURVE_FEWEST_ROWS} at least to be drawn and used.`,
        },
      ]
    : [];
}

/** ln p is linear between rows, so a zero between positive densities has no meaning; at the ends it is trimmed. */
function zeroProblems(rows: readonly CurveRow[], column: CurveColumn | null): CurveProblem[] {
  if (column !== "density" || rows.length === 0) return [];
  const first = rows.findIndex(({ height }) => height > 0);
  const last = rows.findLastIndex(({ height }) => height > 0);
  if (first < 0 || first === last) {
    return [{ line: null, message: "The density is above zero at fewer than two places." }];
  }
  const zero = rows.slice(first, last + 1).find(({ height }) => height === 0);
  return zero
    ? [
        {
          line: zero.line,
          message: `The density is 0 at ${zero.text}, between places where it is not. Leave the row out, or give the small number the paper has there.`,
        },
      ]
    : [];
}

/**
 * The rows a likelihood takes, as printed: ascending, without zeros at the ends, densities over the
 * highest one.
 *
 * @returns Null where the text is no curve, or what its second column holds is open.
 */
export function curveAsPrinted(fields: ConstraintFields): CurveNodes | null {
  const kept = keptRows(fields);
  if (kept === null) return null;
  return { x: kept.rows.map(({ value }) => value.toNumber()), p: kept.densities };
}

interface KeptRows {
  /** Ascending, [n]. */
  rows: CurveRow[];
  /** Over the highest, [n]. */
  densities: number[];
  /** Rows left out at the ends because nothing is allowed there. */
  trimmed: number;
}

function keptRows(fields: ConstraintFields): KeptRows | null {
  const { kind, curveTable, curveColumn } = fields;
  if (kind !== "curve" || curveTable === null || curveColumn === null) return null;
  const { rows, problems } = parseCurve(curveTable, curveColumn);
  if (problems.length > 0) return null;
  const rising = rows[1]!.value.gt(rows[0]!.value) ? [...rows] : [...rows].reverse();
  const top = Math.max(...rising.map(({ height }) => height));
  const densities = rising.map(({ height }) =>
    curveColumn === "density" ? height / top : Math.exp(height - top),
  );
  // ln L may fall so far at the ends that its exponential is zero.
  const first = densities.findIndex((density) => density > 0);
  const last = densities.findLastIndex((density) => density > 0);
  const inside = densities.slice(first, last + 1);
  if (inside.length < 2 || inside.includes(0)) return null;
  return {
    rows: rising.slice(first, last + 1),
    densities: inside,
    trimmed: rising.length - inside.length,
  };
}

/** How many rows of zero density at the ends a likelihood leaves out. */
export function trimmedRows(fields: ConstraintFields): number {
  return keptRows(fields)?.trimmed ?? 0;
}

/**
 * The nodes as used, for the tabulated form: neutral, ascending, in log10 of the neutral fraction where
 * the record is evaluated there. A likelihood keeps its height when its variable is changed, so only
 * the places move.
 *
 * @returns Null where the fields hold no curve, or one that can't be used.
 */
export function curveNodes(fields: ConstraintFields): CurveNodes | null {
  const kept = keptRows(fields);
  if (kept === null || fields.quantity === null) return null;
  const places = kept.rows.map(({ value }) => placeAsUsed(fields, value));
  if (places.some((place) => place === null || !Number.isFinite(place))) return null;
  const x = places as number[];
  const flipped = x[0]! > x[x.length - 1]!;
  const nodes = flipped
    ? { x: [...x].reverse(), p: [...kept.densities].reverse() }
    : { x, p: kept.densities };
  // A power of ten can bring two distant logarithms to one number.
  return nodes.x.every((place, i) => i === 0 || place > nodes.x[i - 1]!) ? nodes : null;
}

/** The node as used of each line of the text that has one; rows of zero density at the ends have none. */
export function nodesByLine(
  fields: ConstraintFields,
): ReadonlyMap<number, { x: number; p: number }> {
  const nodes = curveNodes(fields);
  const rows = keptRows(fields)?.rows ?? [];
  if (nodes === null) return new Map();
  const last = rows.length - 1;
  const turned = rows.length > 0 && nodes.x[0] !== placeAsUsed(fields, rows[0]!.value);
  return new Map(
    rows.map(({ line }, i) => {
      const at = turned ? last - i : i;
      return [line, { x: nodes.x[at]!, p: nodes.p[at]! }];
    }),
  );
}

/** One place of the curve in the registry's convention; decimal as long as nothing is computed. */
function placeAsUsed(fields: ConstraintFields, printed: Big): number | null {
  if (fields.quantity !== "neutralFraction") return printed.toNumber();
  const { species, scale, helium } = fields;
  if (species === null || scale === null) return null;
  if (species === "neutral") return printed.toNumber();
  if (species === "electron" && helium !== "included" && helium !== "notIncluded") return null;
  const computed = scale === "log10" || (species === "electron" && helium === "included");
  if (!computed) return new Big(1).minus(printed).toNumber();
  const linear = scale === "log10" ? 10 ** printed.toNumber() : printed.toNumber();
  return (
    1 -
    (species === "electron" && helium === "included" ? linear / (1 + HELIUM_PER_HYDROGEN) : linear)
  );
}

/** What stands in a curve at a glance; null where the text is no curve. */
export function curveFacts(text: string | null, column: CurveColumn | null): CurveFacts | null {
  if (text === null) return null;
  const { rows, problems } = parseCurve(text, column);
  const [first, last] = [rows[0], rows[rows.length - 1]];
  if (problems.length > 0 || !first || !last) return null;
  const peak = rows.reduce((best, row) => (row.height > best.height ? row : best), first);
  return { rows: String(rows.length), first: first.text, last: last.text, peak: peak.text };
}

/** A curve in one line: "41 rows from 0.00 to 1.00, highest at 0.32"; "" where the text is no curve. */
export function curveText(text: string | null, column: CurveColumn | null): string {
  const facts = curveFacts(text, column);
  return facts === null
    ? ""
    : `${facts.rows} rows from ${facts.first} to ${facts.last}, highest at ${facts.peak}`.replace(
        /(^| )-/g,
        "$1\u2212",
      );
}
