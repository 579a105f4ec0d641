import type { Background } from "~shared/cosmology/background";
import type { History } from "~shared/history/history";
import {
  type RowOptions,
  rowLikelihood,
  type RowToScore,
  type Score,
  scoreRows,
} from "~shared/likelihood";
import type { HistoryRow } from "./rows";

/** Level taken where a paper states none: the default decision of a fitting table. */
const DEFAULT_LEVEL = 0.6827;

export interface ScoredRows {
  rows: readonly RowToScore[];
  /** Left out before any model is asked, with the reason. */
  before: readonly { id: string; reason: string }[];
}

/**
 * Rows with the default decisions taken: of several answers to one question the preferred one, else
 * the first, stays; a level that is not stated is read as one sigma for two-sided values; a limit
 * that has no default form is a hard step.
 */
export function decideByDefault(rows: readonly HistoryRow[]): ScoredRows {
  const kept = new Map<string, HistoryRow>();
  for (const row of rows) {
    const group = groupOf(row);
    if (group === null) continue;
    const first = kept.get(group);
    if (!first || (row.fields.alternativesPreferred && !first.fields.alternativesPreferred)) {
      kept.set(group, row);
    }
  }
  const before: { id: string; reason: string }[] = [];
  const scored: RowToScore[] = [];
  for (const row of rows) {
    const group = groupOf(row);
    const chosen = group === null ? row : kept.get(group);
    if (chosen !== row) {
      before.push({
        id: row.number,
        reason: `One of several answers of its paper; ${chosen?.number ?? "another"} stands for them.`,
      });
      continue;
    }
    const options = optionsOf(row);
    scored.push({ id: row.number, asUsed: row.used, ...(options ? { options } : {}) });
  }
  return { rows: scored, before };
}

function groupOf(row: HistoryRow): string | null {
  const { alternativesGroup } = row.fields;
  return alternativesGroup ? `${row.citation.key}\u0000${alternativesGroup}` : null;
}

function optionsOf(row: HistoryRow): RowOptions | null {
  const plain = rowLikelihood(row.used);
  if (!("leftOut" in plain)) return null;
  if (plain.code === "levelNotStated" && row.used?.kind === "twoSided") {
    return { level: DEFAULT_LEVEL };
  }
  return plain.code === "limitNeedsForm" ? { form: "hardStep" } : null;
}

export interface HistoryScore extends Score {
  /** Every row that is left out, with its reason. */
  reasons: readonly { id: string; reason: string }[];
}

/** −2 ln L of a history over the decided rows. */
export function scoreHistory(
  decided: ScoredRows,
  history: History,
  background: Background,
): HistoryScore {
  const score = scoreRows(decided.rows, history, background);
  const reasons = [
    ...decided.before,
    ...score.rows.flatMap(({ id, reason }) => (reason === null ? [] : [{ id, reason }])),
  ];
  return { ...score, leftOut: reasons.length, reasons };
}
