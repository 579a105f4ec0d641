import type { Background } from "~shared/cosmology/background";
import type { History } from "~shared/history/history";
import {
  type LeftOutCode,
  type RowLeftOut,
  rowLikelihood,
  type RowLikelihood,
  type RowOptions,
} from "~shared/likelihood/rowLikelihood";
import type { AsUsed } from "~shared/statement/asUsed";

/** A row to be scored; `id` comes back with its result. */
export interface RowToScore {
  readonly id: string;
  readonly asUsed: AsUsed | null;
  readonly options?: RowOptions;
}

export interface RowScore {
  readonly id: string;
  /** The model's value of the row's quantity; null where it has none. */
  readonly model: number | null;
  /** −2 ln L relative to its peak; null when the row is left out. */
  readonly minus2LnL: number | null;
  /** Why the row is left out, in words; null when it is scored. */
  readonly reason: string | null;
  readonly code: LeftOutCode | null;
}

export interface Score {
  readonly rows: readonly RowScore[];
  /** Sum of −2 ln L over the scored rows; they are taken as independent. */
  readonly minus2LnL: number;
  readonly scored: number;
  readonly leftOut: number;
}

/** Likelihoods of statements with default choices; a slider asks for the same ones again and again. */
const defaults = new WeakMap<AsUsed, RowLikelihood | RowLeftOut>();

function likelihoodOf({ asUsed, options }: RowToScore): RowLikelihood | RowLeftOut {
  if (asUsed === null || options !== undefined) return rowLikelihood(asUsed, options);
  let known = defaults.get(asUsed);
  if (!known) {
    known = rowLikelihood(asUsed);
    defaults.set(asUsed, known);
  }
  return known;
}

/**
 * −2 ln L of a history against rows, one by one and in sum, and why rows are left out.
 *
 * @param rows - Statements as used, with what a table decided about them, [n].
 * @param history - The model.
 * @param background - Cosmology for optical depths and times.
 * @returns Results in the order of the rows, [n]. The sum takes rows as independent: an assumption.
 */
export function scoreRows(
  rows: readonly RowToScore[],
  history: History,
  background: Background,
): Score {
  let total = 0;
  let scored = 0;
  const results = rows.map((row): RowScore => {
    const likelihood = likelihoodOf(row);
    if ("leftOut" in likelihood) {
      const { leftOut: reason, code } = likelihood;
      return { id: row.id, model: null, minus2LnL: null, reason, code };
    }
    const { model, minus2LnL, reason, code } = likelihood.evaluate(history, background);
    if (minus2LnL === null) {
      return { id: row.id, model, minus2LnL, reason: reason ?? null, code: code ?? null };
    }
    total += minus2LnL;
    scored++;
    return { id: row.id, model, minus2LnL, reason: null, code: null };
  });
  return { rows: results, minus2LnL: total, scored, leftOut: rows.length - scored };
}
