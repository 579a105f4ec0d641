/** What the rules say about a tabulated curve, and about the interval quoted beside it. */
import { curveAsPrinted, parseCurve, type CurveRow, type ParsedCurve } from "./curve";
import { curveSummary, type CurveSummary, trapezoidArea } from "./curveSummary";
import { decimalPlaces, parseDecimal } from "./decimal";
import type { ConstraintFields } from "./fields";
import { error, mustAnswer, note } from "./finding";
import type { Finding } from "./finding";
import { levelProbability } from "./level";
import { ESTIMATOR_WORDS, withTrueMinus } from "./words";

/** How far the area under a density may lie from one. */
const AREA_TOLERANCE = 0.02;
/** Problems of single lines that are said one by one. */
const MOST_LINES_SAID = 5;
/** A curve that ends higher than this part of its peak is cut off; e⁻², where a drawing of it ends. */
const CUT_OFF = Math.exp(-2);
/** Part of the quoted width by which an end may differ from the curve's own before it must be answered. */
const WIDTH_PART = 0.2;

/** Bounds of the printed value; null on a side that is open. */
export interface CurveRange {
  low: number | null;
  high: number | null;
  words: string;
}

/** Everything to be said about the curve of a record; nothing for other kinds of statement. */
export function curveFindings(fields: ConstraintFields, range: CurveRange): Finding[] {
  if (fields.kind !== "curve" || fields.curveTable === null) return [];
  const parsed = parseCurve(fields.curveTable, fields.curveColumn);
  const outside = parsed.rows.filter(
    ({ value }) =>
      (range.low !== null && value.lt(range.low)) || (range.high !== null && value.gt(range.high)),
  );
  const found = [...problemFindings(parsed), ...rangeFindings(outside, range)];
  if (found.length > 0 || fields.curveColumn === null) return found;
  return [
    ...areaFindings(fields, parsed.rows),
    ...cutOffFindings(fields, range),
    ...columnFindings(fields, parsed.rows),
    ...quotedFindings(fields),
  ];
}

function problemFindings({ problems }: ParsedCurve): Finding[] {
  const said = problems
    .slice(0, MOST_LINES_SAID)
    .map(({ line, message }) =>
      error(
        line === null ? "curve" : `curve.line${line}`,
        ["curveTable"],
        line === null ? message : `Line ${line} of the curve: ${withMinus(message)}`,
      ),
    );
  const more = problems.length - said.length;
  return more > 0
    ? [
        ...said,
        error(
          "curve.more",
          ["curveTable"],
          `${more === 1 ? "One more line of the curve has" : `${more} more lines of the curve have`} such a problem.`,
        ),
      ]
    : said;
}

function withMinus(text: string): string {
  return text.replace(/(^|[\s"])-(?=[\d.])/g, "$1\u2212");
}

function rangeFindings(outside: readonly CurveRow[], range: CurveRange): Finding[] {
  const [first] = outside;
  if (!first) return [];
  const more = outside.length > 1 ? `, like ${outside.length - 1} more` : "";
  return [
    error(
      "outsideRange.curveTable",
      ["curveTable"],
      `Line ${first.line} of the curve: ${withTrueMinus(first.text)} can't be${more}: ${range.words}. Look at the quantity and scale chosen, and leave out rows that lie beyond.`,
    ),
  ];
}

/** Only the shape enters a likelihood, so a density that is scaled otherwise is answered, not refused. */
function areaFindings(fields: ConstraintFields, rows: readonly CurveRow[]): Finding[] {
  if (fields.curveColumn !== "density") return [];
  const area = trapezoidArea(
    rows.map(({ value, height }) => ({ value: value.toNumber(), height })),
  );
  if (Math.abs(area - 1) <= AREA_TOLERANCE) return [];
  return [
    mustAnswer(
      "curveArea",
      ["curveTable", "curveColumn"],
      `The area under the density is ${Number(area.toPrecision(3))}, not 1. Look whether rows are missing, or the density is of another variable or relative to its peak; only its shape is used.`,
    ),
  ];
}

/** A natural end of the quantity cuts nothing off. */
function cutOffFindings(fields: ConstraintFields, range: CurveRange): Finding[] {
  const nodes = curveAsPrinted(fields);
  if (nodes === null) return [];
  const last = nodes.x.length - 1;
  const ends = [
    { at: nodes.x[0]!, height: nodes.p[0]!, wall: range.low },
    { at: nodes.x[last]!, height: nodes.p[last]!, wall: range.high },
  ].filter(
    ({ at, height, wall }) => height > CUT_OFF && (wall === null || Math.abs(at - wall) > 0.02),
  );
  if (ends.length === 0) return [];
  const words = ends.map(
    ({ at, height }) =>
      `${withTrueMinus(String(Number(at.toPrecision(6))))} at ${Math.round(height * 100)} % of its peak`,
  );
  return [
    note(
      "curveCutOff",
      ["curveTable"],
      `The curve ends at ${words.join(" and at ")}. A likelihood allows nothing beyond: look whether the paper's curve goes on.`,
    ),
  ];
}

/** ln L is rarely positive everywhere, and a density rises and falls: a column of the other kind shows. */
function columnFindings(fields: ConstraintFields, rows: readonly CurveRow[]): Finding[] {
  const heights = rows.map(({ height }) => height);
  const span = Math.max(...heights) - Math.min(...heights);
  if (fields.curveColumn !== "lnLikelihood" || span > 1 || Math.min(...heights) < 0) return [];
  return [
    mustAnswer(
      "curveColumnDoubt",
      ["curveColumn"],
      `The second column runs from ${Number(Math.min(...heights).toPrecision(3))} to ${Number(Math.max(...heights).toPrecision(3))} and is read as ln L, so that the curve hardly prefers any value. Is it a density?`,
    ),
  ];
}

// ---- The quoted interval

function own(fields: ConstraintFields, summary: CurveSummary): { name: string; at: number }[] {
  const all = [
    { word: "median", name: "median", at: summary.median },
    { word: "mean", name: "mean", at: summary.mean },
    { word: "mode", name: "highest point", at: summary.mode },
  ];
  switch (fields.estimator) {
    case "median":
    case "mean":
    case "mode":
      return all.filter(({ word }) => word === fields.estimator);
    case "bestFit":
      return all.filter(({ word }) => word === "mode");
    default:
      return all;
  }
}

/** Half a step of the last printed digit, and of the curve's own rows where those are wider. */
function digitsOf(text: string): number {
  return 0.5 * 10 ** -decimalPlaces(text);
}

/**
 * Where the curve's own centre or ends lie elsewhere than the quoted ones, beyond the printed digits and
 * half a row. Small differences are noted: papers round, smooth and marginalize; large ones are answered.
 */
function quotedFindings(fields: ConstraintFields): Finding[] {
  const nodes = curveAsPrinted(fields);
  const value = parseDecimal(fields.value)?.toNumber();
  const plus = parseDecimal(fields.plus)?.abs().toNumber();
  const minus = parseDecimal(fields.minus)?.abs().toNumber();
  const level = levelProbability(fields.level, fields.levelPercent);
  if (nodes === null || value === undefined || plus === undefined || minus === undefined) return [];
  const summary = curveSummary(nodes, level ?? 0.6827);
  const row = (0.5 * (nodes.x[nodes.x.length - 1]! - nodes.x[0]!)) / (nodes.x.length - 1);
  const width = 0.5 * (plus + minus);
  const found: { large: boolean; words: string; field: "value" | "plus" | "minus" }[] = [];

  const centres = own(fields, summary);
  const nearest = centres.reduce((a, b) =>
    Math.abs(b.at - value) < Math.abs(a.at - value) ? b : a,
  );
  const atCentre =
    digitsOf(fields.value ?? "") + (nearest.name === "highest point" ? 2 * row : row);
  if (Math.abs(nearest.at - value) > atCentre) {
    const estimator = ESTIMATOR_WORDS[fields.estimator ?? "notStated"].toLowerCase();
    found.push({
      field: "value",
      large: Math.abs(nearest.at - value) > atCentre + WIDTH_PART * width,
      words: `its ${nearest.name} is ${shown(nearest.at, fields.value)}, quoted is ${typed(fields.value)} (${estimator})`,
    });
  }
  if (level !== null) {
    const differs = ([low, high]: readonly [number, number]) =>
      Math.abs(value - minus - low) + Math.abs(value + plus - high);
    const ends =
      differs(summary.highest) < differs(summary.central) ? summary.highest : summary.central;
    const sides = [
      { field: "minus", at: ends[0], quoted: value - minus, name: "lower" },
      { field: "plus", at: ends[1], quoted: value + plus, name: "upper" },
    ] as const;
    for (const { field, at, quoted, name } of sides) {
      const allowed = digitsOf(fields.value ?? "") + digitsOf(fields[field] ?? "") + row;
      const off = Math.abs(at - quoted);
      if (off <= allowed) continue;
      found.push({
        field,
        large: off > allowed + WIDTH_PART * width,
        words: `its ${name} end at that level is ${shown(at, fields[field])}, quoted is ${shown(quoted, fields[field])}`,
      });
    }
  }
  if (found.length === 0) return [];
  const large = found.some((one) => one.large);
  const message = `The curve and the quoted interval differ: ${found.map(({ words }) => words).join("; ")}.`;
  const at = found.map(({ field }) => field);
  return large
    ? [
        mustAnswer(
          "curveUnlikeQuoted",
          [...at, "curveTable"],
          `${message} Look at the level, at the variable of the curve and whether both are of the same result, and say why they differ.`,
        ),
      ]
    : [note("curveUnlikeQuoted", [...at, "curveTable"], `${message} The curve is what is used.`)];
}

function typed(text: string | null): string {
  return withTrueMinus((text ?? "").trim());
}

function shown(value: number, like: string | null): string {
  return withTrueMinus(value.toFixed(Math.max(2, decimalPlaces(like ?? ""))));
}
