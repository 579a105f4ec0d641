import type { Background } from "~shared/cosmology/background";
import type { History } from "~shared/history/history";
import {
  correlatedSet,
  type CorrelatedSet,
  marginalCorrelation,
  quadraticForm,
} from "~shared/likelihood/correlatedSet";
import {
  rowLikelihood,
  type RowLeftOut,
  type RowLikelihood,
} from "~shared/likelihood/rowLikelihood";
import type { RowScore, RowToScore } from "~shared/likelihood/scoreRows";

/** Two-sided values with their correlation matrix. */
export interface SetToScore {
  readonly id: string;
  /** In the order of the matrix; those without a row here are dropped, [n]. */
  readonly members: readonly string[];
  /** As used, [n, n]. */
  readonly rho: readonly (readonly number[])[];
}

export interface SetScore {
  readonly id: string;
  /** The members that count, in the order of the matrix. */
  readonly members: readonly string[];
  /** χ² = tᵀ ρ⁻¹ t over those members: of a part, by the exact marginal. */
  readonly minus2LnL: number;
  /** Whether every member of the set counts. */
  readonly whole: boolean;
  /** Results of the rows given; a row's own −2 ln L is t², which is not in the sum. */
  readonly rows: readonly RowScore[];
}

/** Two-piece likelihoods of members; a slider asks for the same ones again and again. */
const known = new WeakMap<RowToScore, RowLikelihood | RowLeftOut>();

function memberLikelihood(row: RowToScore): RowLikelihood | RowLeftOut {
  let likelihood = known.get(row);
  if (!likelihood) {
    // A residual in sigma needs one error on each side, whatever the estimator.
    likelihood = rowLikelihood(row.asUsed, { ...row.options, form: "twoPiece" });
    known.set(row, likelihood);
  }
  return likelihood;
}

/**
 * −2 ln L of a history against a correlated set.
 *
 * @param rows - Rows of its members, in any order; others are ignored.
 */
export function scoreSet(
  set: SetToScore,
  rows: readonly RowToScore[],
  history: History,
  background: Background,
): SetScore {
  const byId = new Map(rows.map((row) => [row.id, row]));
  const counted: number[] = [];
  const residuals: number[] = [];
  const results: RowScore[] = [];
  set.members.forEach((id, at) => {
    const row = byId.get(id);
    if (!row) return;
    const likelihood = memberLikelihood(row);
    if ("leftOut" in likelihood) {
      const { leftOut: reason, code } = likelihood;
      results.push({ id, model: null, minus2LnL: null, mixture: null, reason, code });
      return;
    }
    const { model, minus2LnL, reason, code } = likelihood.evaluate(history, background);
    const scored = model !== null && minus2LnL !== null;
    results.push({
      id,
      model,
      minus2LnL,
      mixture: null,
      reason: scored ? null : (reason ?? "The history has no value there."),
      code: scored ? null : (code ?? "outsideTable"),
    });
    if (!scored) return;
    const place = likelihood.evaluatedIn === "log10" ? Math.log10(model) : model;
    counted.push(at);
    residuals.push(Math.sign(place - likelihood.shape.peak) * Math.sqrt(minus2LnL));
  });
  return {
    id: set.id,
    members: counted.map((at) => set.members[at] ?? ""),
    minus2LnL:
      counted.length === 0
        ? 0
        : quadraticForm(inverseOf(set, counted).inverse, 0, residuals, counted.length),
    whole: counted.length === set.members.length,
    rows: results,
  };
}

/** Inverses by the members that count. */
const inverses = new WeakMap<SetToScore, Map<string, CorrelatedSet>>();

function inverseOf(set: SetToScore, counted: readonly number[]): CorrelatedSet {
  const ofSet = inverses.get(set) ?? new Map<string, CorrelatedSet>();
  inverses.set(set, ofSet);
  const key = counted.join(",");
  let inverse = ofSet.get(key);
  if (!inverse) {
    inverse = correlatedSet(marginalCorrelation(set.rho, counted));
    ofSet.set(key, inverse);
  }
  return inverse;
}
