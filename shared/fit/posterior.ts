/** The posterior of one table under one family, by grid or sampler, with everything that results are made of. */
import type { Background } from "~shared/cosmology/background";
import {
  DERIVED_NAMES,
  type FitFamily,
  FitProblem,
  type GridPosterior,
  gridPosterior,
  type MaximumLikelihood,
  sampledEvidence,
  type SampledPosterior,
  samplePosterior,
  type Task,
} from "~shared/inference";
import type { Summary } from "~shared/inference/marginal";
import { rowLikelihood } from "~shared/likelihood";
import { CompiledTable } from "~shared/likelihood/compile";
import { specOf, type TableLikelihood } from "~shared/table/tableLikelihood";

import { type Cloud, drawCloud, gridCloud } from "./cloud";
import { excludedEverywhere } from "./excluded";
import { asFitError, FitError } from "./fitError";
import type { Convergence, FitRequest, QuantitySummary } from "./request";

/** What is common to all fits of one job. */
export interface FitSetting {
  readonly request: FitRequest;
  readonly family: FitFamily;
  readonly background: Background;
}

export interface FitPosterior {
  readonly problem: FitProblem;
  readonly method: "grid" | "sampler";
  readonly best: MaximumLikelihood;
  readonly parameters: Readonly<Record<string, Summary>>;
  readonly derived: Readonly<Record<string, Summary | null>>;
  readonly logEvidence: { readonly value: number; readonly error: number } | null;
  readonly convergence: readonly Convergence[];
  readonly grid: { readonly points: number; readonly lastChange: number } | null;
  /** Whether a grid settled, or chains carry a verdict. */
  readonly sound: boolean;
  /** For drawing; made when asked for. */
  cloud(): Cloud;
}

/** What a fit needs no more than to be compared with others. */
export interface Effort {
  /** Shifts to two digits are enough. */
  readonly coarse?: boolean;
  /** Also ln evidence of a sampled posterior. */
  readonly evidence?: boolean;
}

/** Accepted change of means and intervals in widths at the last refinement; what is left is less. */
const TOLERANCE = 1e-3;
/** The same where fits are only compared. */
const COARSE_TOLERANCE = 5e-3;
/** A standard error of ln Z from which it says nothing. */
const USELESS_EVIDENCE = 0.5;
/** Draws kept for drawing. */
const CLOUD_DRAWS = 32_000;

/**
 * A table under the setting's family.
 *
 * @throws {FitError} If a row has no likelihood, or a group can't be.
 */
export function problemOf(setting: FitSetting, table: TableLikelihood): FitProblem {
  return new FitProblem(compiled(table), setting.family, setting.background);
}

function compiled(table: TableLikelihood): CompiledTable {
  for (const { number, used, options } of table.rows) {
    const likelihood = rowLikelihood(used, options);
    if ("leftOut" in likelihood) {
      throw new FitError(`${number} has no likelihood: ${likelihood.leftOut}`);
    }
  }
  try {
    return new CompiledTable(specOf(table));
  } catch (error) {
    throw asFitError(error);
  }
}

/**
 * Fits a table.
 *
 * @throws {FitError} If no history inside the prior is allowed by the table.
 */
export function* fitPosterior(
  setting: FitSetting,
  table: TableLikelihood,
  effort: Effort = {},
): Task<FitPosterior> {
  try {
    return yield* fitProblem(setting, problemOf(setting, table), effort);
  } catch (error) {
    throw asFitError(error);
  }
}

/** The same for a table that is compiled already. */
export function* fitProblem(
  setting: FitSetting,
  problem: FitProblem,
  effort: Effort = {},
): Task<FitPosterior> {
  try {
    return bySampler(setting)
      ? yield* sampled(problem, setting.request, effort)
      : yield* onGrid(problem, effort);
  } catch (error) {
    throw excludedEverywhere(problem, error) ?? asFitError(error);
  }
}

/**
 * Whether this fit goes by the sampler: when asked for, beyond two parameters, and for a free form of two, whose
 * order cuts the box along a diagonal that no grid settles on.
 */
function bySampler({ request, family }: FitSetting): boolean {
  const { length } = family.parameters;
  return request.method === "sampler" || length > 2 || (family.kind === "freeForm" && length > 1);
}

function* onGrid(problem: FitProblem, { coarse = false }: Effort): Task<FitPosterior> {
  const posterior: GridPosterior = yield* gridPosterior(problem, {
    tolerance: coarse ? COARSE_TOLERANCE : TOLERANCE,
  });
  const { best, parameters, derived, logEvidence, points, lastChange, converged } = posterior;
  return {
    problem,
    method: "grid",
    best,
    parameters,
    derived,
    logEvidence: Number.isFinite(logEvidence) ? { value: logEvidence, error: 0 } : null,
    convergence: [],
    grid: { points, lastChange },
    sound: converged,
    cloud: () => gridCloud(problem, posterior),
  };
}

function* sampled(
  problem: FitProblem,
  { sampler }: FitRequest,
  { evidence = true }: Effort,
): Task<FitPosterior> {
  const { seed, walkers, steps } = sampler;
  const posterior = yield* samplePosterior(problem, { seed, walkers, steps });
  const { best, parameters, derived, diagnostics, sound } = posterior;
  const convergence = [...problem.names, ...DERIVED_NAMES].flatMap((name): Convergence[] => {
    const { autocorrelationTime, effectiveSize, rHat } = diagnostics[name]!;
    return [autocorrelationTime, effectiveSize, rHat].every(Number.isFinite)
      ? [{ name, autocorrelationTime, effectiveSize, rHat }]
      : [];
  });
  return {
    problem,
    method: "sampler",
    best,
    parameters,
    derived,
    logEvidence: evidence ? yield* evidenceOf(problem, posterior, seed) : null,
    convergence,
    grid: null,
    sound,
    cloud: () => {
      const least = Math.min(...problem.names.map((name) => diagnostics[name]!.effectiveSize));
      return drawCloud(problem, thinned(posterior), Number.isFinite(least) ? least : 1);
    },
  };
}

function* evidenceOf(
  problem: FitProblem,
  posterior: SampledPosterior,
  seed: number,
): Task<FitPosterior["logEvidence"]> {
  const { logEvidence, error } = yield* sampledEvidence(problem, posterior, seed);
  return Number.isFinite(logEvidence) && error < USELESS_EVIDENCE
    ? { value: logEvidence, error }
    : null;
}

/** Every so many draws of all chains, [draws, dimension]. */
function thinned({ chains, steps, walkers }: SampledPosterior): Float64Array {
  const each = steps * walkers;
  const dimension = chains[0]!.draws.length / each;
  const stride = Math.max(1, Math.ceil((each * chains.length) / CLOUD_DRAWS));
  const places: number[] = [];
  for (const { draws } of chains) {
    for (let k = 0; k < each; k += stride) {
      for (let d = 0; d < dimension; d++) places.push(draws[k * dimension + d]!);
    }
  }
  return Float64Array.from(places);
}

/** Summaries of the parameters, then of the derived quantities that the posterior holds. */
export function quantitiesOf({
  problem,
  parameters,
  derived,
}: Pick<FitPosterior, "problem" | "parameters" | "derived">): QuantitySummary[] {
  const named: [string, Summary | null | undefined][] = [
    ...problem.names.map((name): [string, Summary] => [name, parameters[name]!]),
    ...DERIVED_NAMES.map((name): [string, Summary | null] => [name, derived[name] ?? null]),
  ];
  return named.flatMap(([name, summary]) =>
    summary && Number.isFinite(summary.mean) && Number.isFinite(summary.sd)
      ? [{ name, ...summary }]
      : [],
  );
}
