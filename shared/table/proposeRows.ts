/** Which rows of a filtered list a fitting table takes by default, and why it leaves the others out. */
import { conditionChains, conditionChainWords, conditionsIn } from "~shared/dependence/conditions";
import { comparableDataName } from "~shared/dependence/dataName";
import { rowLikelihood } from "~shared/likelihood";
import { carriesTag, familiesOf } from "~shared/methods/vocabulary";
import type { RecordState } from "~shared/review/states";
import { asUsed, type AsUsed } from "~shared/statement/asUsed";
import { curveNodes } from "~shared/statement/curve";
import type { ConstraintFields } from "~shared/statement/fields";

import { atSeparateRedshifts } from "./separateRedshifts";

/** An approved record as the proposal needs it. */
export interface CandidateRow {
  /** FL-0042 */
  number: string;
  fields: ConstraintFields;
  /** What tells papers apart: an id or a key. */
  citation: string;
  /** Year of the paper. */
  year: number | null;
  /** Current unless said. */
  state?: RecordState;
}

export interface ProposedRow {
  number: string;
  included: boolean;
  /** Why it is left out, as a sentence; null for a row that is in. */
  reason: string | null;
  /** What to know about a row that is in. */
  cautions: string[];
}

interface Weighed extends CandidateRow {
  used: AsUsed | null;
  data: ReadonlyMap<string, string>;
  reason: string | null;
  /** Which correlated set it is part of. */
  set: number | null;
}

/**
 * Proposes rows in and out. Left out are what no likelihood can take, all but one of several
 * alternatives, rows that share named data with a better one, and joint inferences beside other rows.
 *
 * @param candidates - In any order; numbers are unique.
 * @param sets - Members of each correlated set: their matrix says what they share, so that they
 *   don't stand against each other.
 * @returns One row for each candidate, in the order given. The same candidates in another order
 *   are proposed alike.
 */
export function proposeRows(
  candidates: readonly CandidateRow[],
  sets: readonly { readonly members: readonly string[] }[] = [],
): ProposedRow[] {
  const setOf = new Map(sets.flatMap(({ members }, at) => members.map((number) => [number, at])));
  const rows: Weighed[] = candidates.map((row) => ({
    ...row,
    used: asUsed(row.fields),
    data: namedData(row.fields),
    reason: lifeless(row.state) ?? unusable(row.fields),
    set: setOf.get(row.number) ?? null,
  }));
  for (const row of rows) row.reason ??= withoutLikelihood(row.used);
  keepOneAlternative(rows);
  leaveJointInferenceOut(rows);
  keepOneOfOverlapping(rows);
  return rows.map((row) => ({
    number: row.number,
    included: row.reason === null,
    reason: row.reason,
    cautions: row.reason === null ? cautions(row, rows) : [],
  }));
}

function lifeless(state: RecordState | undefined): string | null {
  if (state === "superseded") return "Superseded by another record";
  return state === "withdrawn" ? "Withdrawn" : null;
}

function unusable(fields: ConstraintFields): string | null {
  if (fields.kind === "qualitative") return "Qualitative statement";
  if (fields.kind === "curve") {
    return curveNodes(fields) === null ? "Tabulated curve without its nodes" : null;
  }
  if (fields.level === "notStated") return "Level not stated";
  return null;
}

/** What no default form takes, such as a mass-weighted fraction, waits for a person's decision. */
function withoutLikelihood(used: AsUsed | null): string | null {
  if (used === null) return "Not complete enough to use";
  const row = rowLikelihood(used);
  return "leftOut" in row ? row.leftOut.replace(/\.$/, "") : null;
}

function namedData(fields: ConstraintFields): Map<string, string> {
  if (fields.dataKnown === false) return new Map();
  const named = new Map(fields.dataUsed.map((name) => [comparableDataName(name), name] as const));
  named.delete("");
  return named;
}

/** Plain digits in a number compare as numbers: FL-10000 comes after FL-9999. */
function byNumber(a: CandidateRow, b: CandidateRow): number {
  return a.number.length - b.number.length || (a.number < b.number ? -1 : 1);
}

function included(rows: readonly Weighed[]): Weighed[] {
  return rows.filter((row) => row.reason === null);
}

/** Several answers of one paper to one question are never multiplied. */
function keepOneAlternative(rows: readonly Weighed[]): void {
  const groups = new Map<string, Weighed[]>();
  for (const row of included(rows)) {
    const label = row.fields.alternativesGroup?.trim().toLowerCase();
    if (!label) continue;
    const key = JSON.stringify([row.citation, label]);
    groups.set(key, [...(groups.get(key) ?? []), row]);
  }
  for (const members of groups.values()) {
    const ordered = [...members].sort(byNumber);
    const preferred = ordered.filter((row) => row.fields.alternativesPreferred === true);
    const kept = preferred.at(-1) ?? ordered.at(-1);
    for (const row of ordered) {
      if (row === kept) continue;
      row.reason = `Alternative answer to the same question as ${kept?.number ?? ""}`;
    }
  }
}

function isJoint(row: CandidateRow): boolean {
  return carriesTag(row.fields.methodTags, "jointInference");
}

function leaveJointInferenceOut(rows: readonly Weighed[]): void {
  const others = included(rows).filter((row) => !isJoint(row));
  if (others.length === 0) return;
  for (const row of included(rows).filter(isJoint)) {
    row.reason = "Joint inference: it contains other constraints";
  }
}

/** Better first: published, then the later paper, then the earlier record. */
function byPreference(a: Weighed, b: Weighed): number {
  const published = (row: Weighed): number => (row.fields.versionRead === "preprint" ? 1 : 0);
  return published(a) - published(b) || (b.year ?? 0) - (a.year ?? 0) || byNumber(a, b);
}

function keepOneOfOverlapping(rows: readonly Weighed[]): void {
  const kept: Weighed[] = [];
  for (const row of included(rows).sort(byPreference)) {
    const other = kept.find((better) => overlaps(row, better));
    if (!other) {
      kept.push(row);
      continue;
    }
    const shared = [...row.data].find(([name]) => other.data.has(name))?.[1] ?? "data";
    row.reason = `Shares ${shared} with ${other.number}`;
  }
}

/** Joint inferences without anything else beside them overlap with each other, too. */
function overlaps(a: Weighed, b: Weighed): boolean {
  if (isJoint(a) && isJoint(b)) return true;
  if (a.set !== null && a.set === b.set) return false;
  if (![...a.data.keys()].some((name) => b.data.has(name))) return false;
  // One paper cuts one sample into bins: parts at separate redshifts are different data.
  return !(a.citation === b.citation && atSeparateRedshifts(a.used, b.used));
}

function isCmb(row: CandidateRow): boolean {
  return familiesOf(row.fields.methodTags).includes("cmb");
}

function cautions(row: Weighed, rows: readonly Weighed[]): string[] {
  const others = included(rows).filter((other) => other !== row);
  const said: string[] = [];
  if (row.fields.dataKnown === false) said.push("The data it uses are unknown");
  const byNumber = new Map(rows.map((one) => [one.number, one.fields]));
  const chains = conditionChains(row.number, (number) =>
    conditionsIn(byNumber.get(number)?.conditionedOn ?? []),
  );
  const cmb = others.find(isCmb);
  for (const chain of chains) {
    const met = [...chain.through.slice(1), chain.on].filter((number) =>
      others.some((other) => other.number === number),
    );
    const direct = chain.through.length === 1;
    if (chain.on === "cmb" && cmb) {
      const words = direct ? "Conditioned on a CMB prior" : conditionChainWords(chain);
      said.push(`${words}, and ${cmb.number} is in the table`);
    } else if (met.length > 0) {
      const words = direct
        ? `Conditioned on ${chain.on}, which is`
        : `${conditionChainWords(chain)};`;
      said.push(direct ? `${words} in the table` : `${words} in the table: ${met.join(", ")}`);
    }
  }
  const part = others.find(
    (other) =>
      other.citation === row.citation &&
      !(row.set !== null && row.set === other.set) &&
      [...row.data.keys()].some((name) => other.data.has(name)),
  );
  if (part) said.push(`Another redshift of the same sample is in the table: ${part.number}`);
  return said;
}
