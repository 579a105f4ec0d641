import { DomainError } from "~shared/errors/DomainError";
import { chainDiagnostics, type ChainDiagnostics } from "~shared/inference/diagnostics";
import { maximumLikelihood, type MaximumLikelihood } from "~shared/inference/maximumLikelihood";
import { type Marginal, type Summary, summaryOf } from "~shared/inference/marginal";
import { DERIVED_NAMES, type DerivedName, type FitProblem } from "~shared/inference/problem";
import type { Task } from "~shared/inference/task";
import { RandomStream } from "~shared/numerics/random";

// Taken once: in a sandboxed realm every look-up of a global costs more than the arithmetic.
const { ceil, exp, floor, log, min, sqrt } = Math;

/** How to sample; a seed is all that must be given. */
export interface SamplerOptions {
  /** Whole number; equal seeds give equal chains. */
  readonly seed: number;
  /** Walkers of one ensemble, even, at least twice the parameters; default 32. */
  readonly walkers?: number;
  /** Steps kept of each walker; default 2000. */
  readonly steps?: number;
  /** Steps thrown away first; default a quarter of the steps. */
  readonly burn?: number;
  /** Independent ensembles, four or more for R̂; default 4. */
  readonly ensembles?: number;
  /** Stretch scale a, above 1; default 2. */
  readonly stretch?: number;
}

/** Draws of one ensemble. */
export interface EnsembleChain {
  /** Parameters, [steps, walkers, dimension]. */
  readonly draws: Float64Array;
  /** ln posterior of each draw, [steps, walkers]. */
  readonly logPosterior: Float64Array;
  readonly acceptance: number;
}

/** A posterior from independent ensembles, with how far to trust it. */
export interface SampledPosterior {
  readonly best: MaximumLikelihood;
  readonly seed: number;
  readonly walkers: number;
  readonly steps: number;
  readonly burn: number;
  readonly chains: readonly EnsembleChain[];
  readonly parameters: Readonly<Record<string, Summary>>;
  readonly derived: Readonly<Record<DerivedName, Summary | null>>;
  /** A quantile of a parameter or derived quantity by name; null for one the posterior does not hold. */
  quantile(name: string, p: number): number | null;
  /** Draws of each parameter and derived quantity by name, NaN for none; one array per chain, [steps, walkers]. */
  readonly values: Readonly<Record<string, readonly Float64Array[]>>;
  /** Parameters and derived quantities by name. */
  readonly diagnostics: Readonly<Record<string, ChainDiagnostics>>;
  /** Whether every parameter has an effective size of 2,000 or more and R̂ below 1.01. */
  readonly sound: boolean;
}

/** Effective size from which the product gives a verdict. */
export const ENOUGH_EFFECTIVE_DRAWS = 2000;
const LARGEST_R_HAT = 1.01;

/**
 * One affine-invariant ensemble by stretch moves, the two halves in turn.
 *
 * @param logPosterior - ln of an unnormalized density; −Infinity outside.
 * @param start - First places of the walkers, inside the support, [walkers, dimension].
 * @param dimension - Number of parameters.
 * @throws {DomainError} For an odd number of walkers, fewer than 2 × dimension, or a start outside.
 *
 * Source: Goodman & Weare (2010), CAMCoS 5, 65; halves as Foreman-Mackey et al. (2013), PASP 125, 306.
 */
export function* sampleEnsemble(
  logPosterior: (theta: Float64Array) => number,
  start: Float64Array,
  dimension: number,
  {
    random,
    steps,
    burn,
    stretch = 2,
  }: { random: RandomStream; steps: number; burn: number; stretch?: number },
): Task<EnsembleChain> {
  const walkers = start.length / dimension;
  if (!Number.isInteger(walkers) || walkers % 2 !== 0 || walkers < 2 * dimension) {
    throw new DomainError("walkers", walkers, `even and at least ${2 * dimension}`);
  }
  const place = start.slice();
  const height = new Float64Array(walkers);
  const trial = new Float64Array(dimension);
  for (let w = 0; w < walkers; w++) {
    trial.set(place.subarray(w * dimension, (w + 1) * dimension));
    height[w] = logPosterior(trial);
    if (!(height[w]! > -Infinity))
      throw new DomainError(`start of walker ${w}`, height[w], "inside the support");
  }
  const draws = new Float64Array(steps * walkers * dimension);
  const kept = new Float64Array(steps * walkers);
  const half = walkers / 2;
  const rootLow = 1 / sqrt(stretch);
  const rootSpan = sqrt(stretch) - rootLow;
  let accepted = 0;
  for (let step = -burn; step < steps; step++) {
    for (let side = 0; side < 2; side++) {
      const others = side === 0 ? half : 0;
      for (let k = 0; k < half; k++) {
        const w = side * half + k;
        const other = others + random.below(half);
        // g(z) ∝ 1/√z on [1/a, a].
        const root = rootLow + rootSpan * random.uniform();
        const scale = root * root;
        for (let d = 0; d < dimension; d++) {
          const anchor = place[other * dimension + d]!;
          trial[d] = anchor + scale * (place[w * dimension + d]! - anchor);
        }
        const found = logPosterior(trial);
        // A logarithm is spared where the step climbs anyway.
        const gain = (dimension - 1) * log(scale) + found - height[w]!;
        if (gain >= 0 || random.uniform() < exp(gain)) {
          for (let d = 0; d < dimension; d++) place[w * dimension + d] = trial[d]!;
          height[w] = found;
          if (step >= 0) accepted++;
        }
      }
    }
    if (step >= 0) {
      draws.set(place, step * walkers * dimension);
      kept.set(height, step * walkers);
    }
    if ((step & 63) === 63) {
      yield { stage: "sampling", fraction: (step + burn) / (steps + burn) };
    }
  }
  return { draws, logPosterior: kept, acceptance: accepted / (steps * walkers) };
}

/**
 * Posterior of any number of parameters from independent seeded ensembles, with diagnostics.
 *
 * @param problem - A compiled table under one family.
 * @param options - Equal ones give equal chains, number for number, on one version of Node.
 * @returns Draws, summaries and diagnostics; `sound` says whether they carry a verdict.
 * @throws {DomainError} For fewer than four ensembles or options out of range.
 */
export function* samplePosterior(
  problem: FitProblem,
  {
    seed,
    walkers = 32,
    steps = 2000,
    burn = ceil(steps / 4),
    ensembles = 4,
    stretch = 2,
  }: SamplerOptions,
): Task<SampledPosterior> {
  if (ensembles < 4) throw new DomainError("ensembles", ensembles, "four or more");
  const { dimension } = problem;
  const best = yield* maximumLikelihood(problem);
  const chains: EnsembleChain[] = [];
  for (let e = 0; e < ensembles; e++) {
    const random = new RandomStream(seed + e * 0x9e3779b1);
    const start = startAround(problem, best, walkers, random);
    const task = sampleEnsemble((theta) => problem.logPosterior(theta), start, dimension, {
      random,
      steps,
      burn,
      stretch,
    });
    for (;;) {
      const part = task.next();
      if (part.done) {
        chains.push(part.value);
        break;
      }
      yield { stage: "sampling", fraction: (e + part.value.fraction) / ensembles };
    }
  }
  return yield* summarize(problem, best, chains, { seed, walkers, steps, burn });
}

/** Walkers scattered over the prior's part near the best point, wide enough that the burn-in shows. */
function startAround(
  problem: FitProblem,
  best: MaximumLikelihood,
  walkers: number,
  random: RandomStream,
): Float64Array {
  const { dimension, lows, highs } = problem;
  const start = new Float64Array(walkers * dimension);
  const theta = new Float64Array(dimension);
  for (let w = 0; w < walkers; w++) {
    let spread = 0.1;
    for (let tries = 0; ; tries++) {
      for (let d = 0; d < dimension; d++) {
        const width = highs[d]! - lows[d]!;
        theta[d] = best.theta[d]! + spread * width * random.normal();
      }
      if (problem.logPosterior(theta) > -Infinity) break;
      if (tries % 20 === 19) spread *= 0.5;
      if (tries > 2000)
        throw new DomainError("prior", "a best point", "inside the support with room around it");
    }
    start.set(theta, w * dimension);
  }
  return start;
}

function* summarize(
  problem: FitProblem,
  best: MaximumLikelihood,
  chains: readonly EnsembleChain[],
  run: { seed: number; walkers: number; steps: number; burn: number },
): Task<SampledPosterior> {
  const { dimension } = problem;
  const { walkers, steps } = run;
  const count = steps * walkers;
  const names = [...problem.names, ...DERIVED_NAMES];
  const theta = new Float64Array(dimension);
  const out = new Float64Array(DERIVED_NAMES.length);
  // One column per quantity and chain, [steps, walkers].
  const columns = names.map(() => chains.map(() => new Float64Array(count)));
  for (let c = 0; c < chains.length; c++) {
    const { draws } = chains[c]!;
    for (let k = 0; k < count; k++) {
      // A walker that stayed where it was has its quantities already.
      let moved = k < walkers;
      for (let d = 0; d < dimension; d++) {
        theta[d] = draws[k * dimension + d]!;
        if (!moved && theta[d] !== draws[(k - walkers) * dimension + d]!) moved = true;
        columns[d]![c]![k] = theta[d]!;
      }
      if (moved) problem.derived(theta, out);
      for (let q = 0; q < out.length; q++) {
        const column = columns[dimension + q]![c]!;
        column[k] = moved ? out[q]! : column[k - walkers]!;
      }
      if ((k & 4095) === 4095) {
        yield { stage: "derived quantities", fraction: (c + k / count) / chains.length };
      }
    }
  }
  const marginals = columns.map(sampleMarginal);
  const diagnostics: Record<string, ChainDiagnostics> = {};
  for (let i = 0; i < names.length; i++) {
    diagnostics[names[i]!] = chainDiagnostics(columns[i]!, steps, walkers);
    yield { stage: "diagnostics", fraction: (i + 1) / names.length };
  }
  const summary = (i: number): Summary | null => marginals[i]?.summary ?? null;
  return {
    ...run,
    best,
    chains,
    parameters: Object.fromEntries(problem.names.map((name, i) => [name, summary(i)!])),
    derived: Object.fromEntries(
      DERIVED_NAMES.map((name, q) => [name, summary(dimension + q)]),
    ) as Record<DerivedName, Summary | null>,
    quantile: (name, p) => marginals[names.indexOf(name)]?.quantile(p) ?? null,
    values: Object.fromEntries(names.map((name, i) => [name, columns[i]!])),
    diagnostics,
    sound: problem.names.every((name) => {
      const { effectiveSize, rHat } = diagnostics[name]!;
      return effectiveSize >= ENOUGH_EFFECTIVE_DRAWS && rHat < LARGEST_R_HAT;
    }),
  };
}

/** The distribution of draws: type-7 quantiles of all chains together; null when a draw has none. */
function sampleMarginal(chains: readonly Float64Array[]): Marginal | null {
  const all = new Float64Array(chains.reduce((sum, { length }) => sum + length, 0));
  let at = 0;
  for (const chain of chains) {
    all.set(chain, at);
    at += chain.length;
  }
  let mean = 0;
  for (const value of all) mean += value / all.length;
  if (Number.isNaN(mean)) return null;
  let variance = 0;
  for (const value of all) variance += (value - mean) ** 2 / (all.length - 1);
  all.sort();
  const quantile = (p: number): number => {
    const place = p * (all.length - 1);
    const i = min(floor(place), all.length - 2);
    return all[i]! + (place - i) * (all[i + 1]! - all[i]!);
  };
  return { summary: summaryOf(mean, sqrt(variance), quantile), quantile };
}
