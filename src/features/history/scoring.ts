import type { Background } from "~shared/cosmology/background";
import type { History } from "~shared/history/history";
import {
  type RowOptions,
  rowLikelihood,
  type RowScore,
  type RowToScore,
  type Score,
  scoreRows,
  scoreSet,
  type SetScore,
  type SetToScore,
} from "~shared/likelihood";
import { proposeRows } from "~shared/table/proposeRows";
import type { HistoryRow } from "./rows";

export interface ScoredRows {
  rows: readonly RowToScore[];
  /** Left out before any model is asked, with the reason. */
  before: readonly { id: string; reason: string }[];
  /** The same rows: what a model says there is still shown, and counts nowhere. */
  aside: readonly RowToScore[];
  /** Correlated sets with the rows of theirs that are in, at least two; the rest stand in `rows`. */
  sets: readonly { set: SetToScore; rows: readonly RowToScore[] }[];
}

/**
 * Rows with the default decisions taken, the same that a new fitting table proposes: one of several
 * answers to a question, one of rows that share data, no row without a level. A limit that has no
 * default form is a hard step. Rows of a correlated set count together, a part by the exact marginal.
 */
export function decideByDefault(
  rows: readonly HistoryRow[],
  correlated: readonly SetToScore[] = [],
): ScoredRows {
  const proposals = proposeRows(
    rows.map(({ number, fields, citation, state }) => ({
      number,
      fields,
      state,
      citation: citation.key,
      year: citation.year,
    })),
    correlated,
  );
  const before: { id: string; reason: string }[] = [];
  const scored: RowToScore[] = [];
  const aside: RowToScore[] = [];
  rows.forEach((row, index) => {
    const reason = proposals[index]?.reason ?? null;
    if (reason !== null) before.push({ id: row.number, reason: `${reason}.` });
    const list = reason === null ? scored : aside;
    list.push({ id: row.number, asUsed: row.used, ...optionsOf(row) });
  });
  const sets = correlated.flatMap((set) => {
    const members = scored.filter(({ id }) => set.members.includes(id));
    return members.length > 1 ? [{ set, rows: members }] : [];
  });
  const together = new Set(sets.flatMap(({ rows: members }) => members.map(({ id }) => id)));
  return { rows: scored.filter(({ id }) => !together.has(id)), before, aside, sets };
}

function optionsOf(row: HistoryRow): { options?: RowOptions } {
  const plain = rowLikelihood(row.used);
  const needsForm = "leftOut" in plain && plain.code === "limitNeedsForm";
  return needsForm ? { options: { form: "hardStep" } } : {};
}

export interface HistoryScore extends Score {
  /** What the history says at a row, and the row's −2 ln L, whether it counts or not. */
  at(id: string): RowScore | undefined;
  /** Every row that is left out, with its reason. */
  reasons: readonly { id: string; reason: string }[];
  /** −2 ln L of each correlated set of which two rows or more are in. */
  sets: readonly SetScore[];
}

/** −2 ln L of a history over the decided rows. */
export function scoreHistory(
  decided: ScoredRows,
  history: History,
  background: Background,
): HistoryScore {
  const alone = scoreRows(decided.rows, history, background);
  const sets = decided.sets.map(({ set, rows }) => scoreSet(set, rows, history, background));
  const rows = [...alone.rows, ...sets.flatMap((set) => set.rows)];
  const score: Score = {
    ...alone,
    rows,
    minus2LnL: sets.reduce((sum, set) => sum + set.minus2LnL, alone.minus2LnL),
    scored: sets.reduce((sum, set) => sum + set.members.length, alone.scored),
  };
  const reasons = [
    ...decided.before,
    ...score.rows.flatMap(({ id, reason }) => (reason === null ? [] : [{ id, reason }])),
  ];
  let aside: readonly RowScore[] | null = null;
  const at = (id: string): RowScore | undefined => {
    const counted = score.rows.find((row) => row.id === id);
    if (counted) return counted;
    aside ??= scoreRows(decided.aside, history, background).rows;
    return aside.find((row) => row.id === id);
  };
  return { ...score, leftOut: reasons.length, reasons, at, sets };
}
