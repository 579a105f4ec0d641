/** A fitting table as a paper prints it: LaTeX with booktabs, errors above and below, limits with their sign. */
import { FORM_WORDS } from "~shared/likelihood";
import { notationAsUsed, percentText, type Notation } from "~shared/statement/notation";

import { oneLine } from "./columnFile/columnFile";
import type { FittingRow } from "./fittingRow";

const SPECIAL: Readonly<Record<string, string>> = {
  "\\": "\\textbackslash{}",
  "{": "\\{",
  "}": "\\}",
  "#": "\\#",
  $: "\\$",
  "%": "\\%",
  "&": "\\&",
  _: "\\_",
  "~": "\\textasciitilde{}",
  "^": "\\textasciicircum{}",
  "<": "\\textless{}",
  ">": "\\textgreater{}",
  "|": "\\textbar{}",
  '"': "''",
  "\u2212": "$-$",
  "\u00b1": "$\\pm$",
  "\u00d7": "$\\times$",
  "\u2026": "\\ldots{}",
  α: "$\\alpha$",
  β: "$\\beta$",
  δ: "$\\delta$",
  Δ: "$\\Delta$",
  λ: "$\\lambda$",
  μ: "$\\mu$",
  ρ: "$\\rho$",
  σ: "$\\sigma$",
  τ: "$\\tau$",
  χ: "$\\chi$",
};

/** A text that LaTeX sets as it reads; letters with accents stay, as LaTeX has read UTF-8 since 2018. */
export function latexText(text: string): string {
  return [...oneLine(text)].map((letter) => SPECIAL[letter] ?? letter).join("");
}

const SYMBOLS: Record<Notation["symbol"], string> = {
  xHI: "x_\\mathrm{HI}",
  xHII: "x_\\mathrm{HII}",
  xe: "x_\\mathrm{e}",
  logxHI: "\\log_{10} x_\\mathrm{HI}",
  logxHII: "\\log_{10} x_\\mathrm{HII}",
  logxe: "\\log_{10} x_\\mathrm{e}",
  tau: "\\tau",
  tauRange: "\\tau",
  z: "z",
  dz: "\\Delta z",
  dt: "\\Delta t",
};

/** The statement in mathematics: "$x_\mathrm{HI} = 0.42^{+0.19}_{-0.17}$". */
export function latexStatement(notation: Notation): string {
  const argument = notation.argument === "" ? "" : `(${notation.argument})`;
  const unit = notation.unit === "" ? "" : `\\,\\mathrm{${notation.unit}}`;
  const minus = (text: string): string => text.replace(/\u2212/g, "-");
  const symbol = `${SYMBOLS[notation.symbol]}${argument}`;
  if (notation.low !== null || notation.high !== null) {
    return `$${symbol} = ${minus(notation.low ?? "?")}$--$${minus(notation.high ?? "?")}${unit}$`;
  }
  if (notation.value === null) return `$${symbol}$`;
  return `$${symbol} ${notation.relation} ${minus(notation.value)}${errors(notation)}${unit}$`;
}

function errors({ plus, minus, limitSigma, relation }: Notation): string {
  if (limitSigma !== null) return relation === ">" ? ` - ${limitSigma}` : ` + ${limitSigma}`;
  if (plus === null && minus === null) return "";
  if (plus === minus) return ` \\pm ${plus}`;
  return `^{+${plus ?? "?"}}_{-${minus ?? "?"}}`;
}

/**
 * In pieces: a table environment that needs the packages booktabs and natbib. A long table is for
 * the author to break; rows come one by one, so that any number can be written.
 *
 * @param caption - Plain text.
 * @param rows - As `latexRow` writes them.
 * @param notes - Lines below the table, plain text.
 */
export async function* latexTable(
  caption: string,
  notes: readonly string[],
  rows: Iterable<string> | AsyncIterable<string>,
): AsyncGenerator<string> {
  yield [
    "% Needs \\usepackage{booktabs} and \\usepackage{natbib}.",
    "\\begin{table}",
    "\\centering",
    `\\caption{${latexText(caption)}}`,
    "\\begin{tabular}{llllll}",
    "\\toprule",
    "Source & Redshift & Constraint & Level & Likelihood & Record \\\\",
    "\\midrule",
    "",
  ].join("\n");
  for await (const row of rows) yield `${row} \\\\\n`;
  yield [
    "\\bottomrule",
    "\\end{tabular}",
    ...notes.map((note) => `\\par\\smallskip\\footnotesize ${latexText(note)}`),
    "\\end{table}",
    "",
  ].join("\n");
}

/** A row without its end: source, redshift, constraint, level, likelihood and record. */
export function latexRow({ record, settled }: FittingRow): string {
  const { used, likelihood, options } = settled;
  const level = used?.level ?? options.level ?? null;
  return [
    `\\citet{${record.citation.key}}`,
    redshift(settled.used),
    used === null ? "" : latexStatement(notationAsUsed(used)),
    level === null ? "not stated" : `${percentText(level).replace(" %", "\\,\\%")}`,
    "leftOut" in likelihood ? "" : latexText(FORM_WORDS[likelihood.form]),
    latexText(record.quotable),
  ].join(" & ");
}

function redshift(used: FittingRow["settled"]["used"]): string {
  if (used === null || used.quantity !== "neutralFraction") return "";
  const { z, zLow, zHigh } = used;
  if (zLow !== null && zHigh !== null) {
    const range = `${zLow}--${zHigh}`;
    return z === null ? range : `${z} (${range})`;
  }
  return z === null ? "" : String(z);
}
