import type { Background } from "~shared/cosmology/background";
import type { History } from "~shared/history/history";
import { type Mixture, mixtureOf } from "~shared/likelihood/mixture";
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
  /** Label shared by the alternatives of one paper; they are never multiplied. */
  readonly alternativesGroup?: string | null;
  /** Whether the paper prefers this alternative: then it stands for the group. */
  readonly alternativesPreferred?: boolean | null;
}

/** One row against a history. */
export interface RowScore {
  readonly id: string;
  /** The model's value of the row's quantity; null where it has none. */
  readonly model: number | null;
  /** −2 ln L relative to its peak; null when the row is left out. */
  readonly minus2LnL: number | null;
  /** The alternatives group whose equal mixture the row is part of: its own −2 ln L is not in the sum. */
  readonly mixture: string | null;
  /** Why the row is left out, in words; null when it is scored. */
  readonly reason: string | null;
  readonly code: LeftOutCode | null;
}

/** A table of rows against a history. */
export interface Score {
  readonly rows: readonly RowScore[];
  /** −2 ln L of the equal mixtures that stand for alternatives without a preferred one. */
  readonly mixtures: readonly { readonly group: string; readonly minus2LnL: number }[];
  /** Sum of −2 ln L over the scored rows and mixtures; they are taken as independent. */
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
 *   Alternatives of one paper enter once: the preferred one, or else the equal mixture of all.
 */
export function scoreRows(
  rows: readonly RowToScore[],
  history: History,
  background: Background,
): Score {
  const passedOver = rowsPassedOver(rows);
  const members = new Map<string, MixtureMembers>();
  let total = 0;
  let scored = 0;
  const results = rows.map((row, i): RowScore => {
    const out = (reason: string, code: LeftOutCode, model: number | null = null): RowScore => ({
      id: row.id,
      model,
      minus2LnL: null,
      mixture: null,
      reason,
      code,
    });
    if (passedOver.has(i)) {
      return out(
        "Another alternative of the paper, the preferred one, is used.",
        "anotherAlternative",
      );
    }
    const likelihood = likelihoodOf(row);
    if ("leftOut" in likelihood) return out(likelihood.leftOut, likelihood.code);
    const answer = likelihood.evaluate(history, background);
    if (answer.minus2LnL === null) return out(answer.reason!, answer.code!, answer.model);
    scored++;
    const group = mixtureGroup(row);
    if (group === null) total += answer.minus2LnL;
    else {
      const known = members.get(group) ?? { likelihoods: [], values: [] };
      known.likelihoods.push(likelihood);
      known.values.push(answer.minus2LnL);
      members.set(group, known);
    }
    return {
      id: row.id,
      model: answer.model,
      minus2LnL: answer.minus2LnL,
      mixture: group,
      reason: null,
      code: null,
    };
  });
  const mixtures = [...members].map(([group, { likelihoods, values }]) => ({
    group,
    minus2LnL: mixtureOfRows(likelihoods).minus2LnL(values),
  }));
  for (const { minus2LnL } of mixtures) total += minus2LnL;
  return { rows: results, mixtures, minus2LnL: total, scored, leftOut: rows.length - scored };
}

interface MixtureMembers {
  readonly likelihoods: RowLikelihood[];
  readonly values: number[];
}

/** The group whose mixture a row belongs to; null for a row that stands for itself. */
function mixtureGroup(row: RowToScore): string | null {
  return row.alternativesPreferred ? null : (row.alternativesGroup ?? null);
}

/** Alternatives beside a preferred one, by index. */
function rowsPassedOver(rows: readonly RowToScore[]): Set<number> {
  const preferred = new Map<string, number>();
  rows.forEach(({ alternativesGroup, alternativesPreferred }, i) => {
    if (alternativesGroup && alternativesPreferred && !preferred.has(alternativesGroup)) {
      preferred.set(alternativesGroup, i);
    }
  });
  const passed = new Set<number>();
  rows.forEach(({ alternativesGroup }, i) => {
    const chosen = alternativesGroup ? preferred.get(alternativesGroup) : undefined;
    if (chosen !== undefined && chosen !== i) passed.add(i);
  });
  return passed;
}

/** Mixtures by their members: a slider asks for the same ones again and again. */
const knownMixtures = new WeakMap<
  RowLikelihood,
  { of: readonly RowLikelihood[]; mixture: Mixture }
>();

function mixtureOfRows(likelihoods: readonly RowLikelihood[]): Mixture {
  const [first] = likelihoods;
  const known = knownMixtures.get(first!);
  if (
    known &&
    known.of.length === likelihoods.length &&
    known.of.every((row, i) => row === likelihoods[i])
  ) {
    return known.mixture;
  }
  const mixture = mixtureOf(likelihoods);
  knownMixtures.set(first!, { of: likelihoods, mixture });
  return mixture;
}
