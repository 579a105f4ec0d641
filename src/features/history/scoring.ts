import type { Background } from "~shared/cosmology/background";
import type { History } from "~shared/history/history";
import {
  type RowScore,
  type RowToScore,
  type Score,
  scoreRows,
  scoreSet,
  type SetScore,
  type SetToScore,
} from "~shared/likelihood";
import { NO_CHOICES, type ConditionPath, type TableSurroundings } from "~shared/table/decision";
import { settleTable } from "~shared/table/settleTable";
import type { HistoryRow } from "@/charts/rows";

export interface ScoredRows {
  rows: readonly RowToScore[];
  /** Left out before any model is asked, with the reason. */
  before: readonly { id: string; reason: string }[];
  /** The same rows: what a model says there is still shown, and counts nowhere. */
  aside: readonly RowToScore[];
  /** Correlated sets with the rows of theirs that are in, at least two; the rest stand in `rows`. */
  sets: readonly { set: SetToScore; rows: readonly RowToScore[] }[];
}

/** What the registry knows of the rows beside their content, as the API gives it. */
export interface RowSurroundings {
  overlaps: TableSurroundings["overlaps"];
  conditions: readonly ConditionPath[];
  sets: readonly SetToScore[];
}

export const NO_SURROUNDINGS: RowSurroundings = { overlaps: [], conditions: [], sets: [] };

/**
 * Rows with the default decisions taken, the same that a new fitting table proposes: alternatives
 * as their mixture or the preferred one, of rows that share data a largest set, no row without a level,
 * no row that contains another. Rows of a correlated set count together, a part by the exact marginal.
 */
export function decideByDefault(
  rows: readonly HistoryRow[],
  { overlaps, conditions, sets }: RowSurroundings = NO_SURROUNDINGS,
): ScoredRows {
  const ways = new Map<string, ConditionPath[]>();
  for (const way of conditions) {
    const [number = ""] = way.through;
    ways.set(number, [...(ways.get(number) ?? []), way]);
  }
  const settled = settleTable(
    rows.map(({ number, fields, citation, state }) => ({
      number,
      fields,
      state,
      citation: citation.key,
      shortName: citation.shortName,
      year: citation.year ?? null,
      supersededBy: null,
    })),
    { overlaps, conditions: ways, sets: sets.map((set) => ({ ...set, label: set.id })) },
    NO_CHOICES,
  );
  const before: { id: string; reason: string }[] = [];
  const scored: RowToScore[] = [];
  const aside: RowToScore[] = [];
  settled.rows.forEach((row, index) => {
    const used = rows[index]?.used ?? null;
    const { number: id, reason, options, mixture } = row;
    const open = Object.keys(options).length === 0 ? {} : { options };
    const toScore: RowToScore = { id, asUsed: used, ...open };
    if (row.included) {
      // Labels of two papers may be alike: the paper tells them apart.
      const group = mixture === null ? null : `${rows[index]?.citation.key}: ${mixture}`;
      scored.push(group === null ? toScore : { ...toScore, alternativesGroup: group });
    } else {
      before.push({ id, reason: `${(reason ?? "Left out").replace(/\.$/, "")}.` });
      aside.push(toScore);
    }
  });
  const together = new Set(settled.sets.flatMap(({ members }) => members));
  return {
    rows: scored.filter(({ id }) => !together.has(id)),
    before,
    aside,
    sets: settled.sets.map(({ id, members, rho }) => ({
      set: { id, members, rho },
      rows: scored.filter((row) => members.includes(row.id)),
    })),
  };
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
