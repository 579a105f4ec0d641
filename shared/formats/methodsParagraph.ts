/** The paragraph on a fitting table for a paper's section on methods, in LaTeX with natbib. */
import { FORM_WORDS } from "~shared/likelihood";
import { FAMILY_NAMES, familiesOf, METHOD_FAMILIES } from "~shared/methods/vocabulary";
import { DECISION_WORDS, type Decision } from "~shared/table/decision";

import type { FittingRow } from "./fittingRow";
import { latexText } from "./latexTable";

export interface DescribedTable {
  readonly registry: string;
  /** "release 2", or "the approved records up to event 411". */
  readonly source: string;
  /** Key of the release's citation; null for a table over the latest records. */
  readonly sourceKey: string | null;
  readonly address: string;
  readonly digest: string;
  /** The filter in words. */
  readonly filter: string;
  readonly rows: readonly FittingRow[];
  readonly decisions: readonly Decision[];
}

function plural(count: number, one: string, many = `${one}s`): string {
  return `${count === 1 ? "one" : count} ${count === 1 ? one : many}`;
}

function capital(words: string): string {
  return words.charAt(0).toUpperCase() + words.slice(1);
}

/** "a, b and c" */
function listed(words: readonly string[]): string {
  return words.length < 2
    ? (words[0] ?? "")
    : `${words.slice(0, -1).join(", ")} and ${words[words.length - 1] as string}`;
}

/** Ended by a line feed; every work of the rows in is cited once for each family that it serves. */
export function methodsParagraph(table: DescribedTable): string {
  const rowsIn = table.rows.filter(({ settled }) => settled.included);
  const out = table.rows.length - rowsIn.length;
  const sourceCitation = table.sourceKey === null ? "" : ` \\citep{${table.sourceKey}}`;
  return `${[
    `We use ${plural(rowsIn.length, "constraint")} from ${latexText(`${table.registry}, ${table.source}`)}${sourceCitation}, selected by: ${latexText(table.filter)} (\\url{${table.address}}, SHA-256 \\texttt{${table.digest.slice(0, 12)}}).`,
    `They come from ${listed(families(rowsIn))}.`,
    `As likelihoods we take ${listed(forms(rowsIn))}.`,
    ...(out > 0
      ? [`${capital(plural(out, "matching record"))} ${out === 1 ? "was" : "were"} left out.`]
      : []),
    ...decisionSentences(table.decisions),
    "The rows are multiplied as independent of one another, which is an assumption; the choices are ours, not the authors'.",
  ].join("\n")}\n`;
}

function families(rows: readonly FittingRow[]): string[] {
  return METHOD_FAMILIES.flatMap((family) => {
    const keys = rows
      .filter(({ record }) => familiesOf(record.fields.methodTags).includes(family))
      .map(({ record }) => record.citation.key);
    if (keys.length === 0) return [];
    const name = latexText(sentenceCase(FAMILY_NAMES[family]));
    return [`${name} \\citep{${[...new Set(keys)].sort().join(",")}}`];
  });
}

/** Lower case at the start, except for CMB, Lyα and the like. */
function sentenceCase(name: string): string {
  return /^[A-Z][a-z]/.test(name) && !name.startsWith("Ly")
    ? name.charAt(0).toLowerCase() + name.slice(1)
    : name;
}

function forms(rows: readonly FittingRow[]): string[] {
  const counts = new Map<string, number>();
  for (const { settled } of rows) {
    if ("leftOut" in settled.likelihood) continue;
    const words = FORM_WORDS[settled.likelihood.form];
    counts.set(words, (counts.get(words) ?? 0) + 1);
  }
  return [...counts].map(([words, count]) => `${latexText(words)} (${plural(count, "row")})`);
}

function decisionSentences(decisions: readonly Decision[]): string[] {
  return decisions.flatMap(({ kind, rows, options, taken }) => {
    const option = options.find(({ code }) => code === taken?.option);
    if (!taken || !option) return [];
    const why = taken.reason === null ? "as proposed" : `since: ${taken.reason}`;
    return [
      `${latexText(`${DECISION_WORDS[kind]} (${rows.join(", ")}): ${option.words}, ${why}.`)}`,
    ];
  });
}
