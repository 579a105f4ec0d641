import { DomainError } from "~shared/errors/DomainError";
import {
  densityMarginal,
  type Marginal,
  simpsonWeights,
  SpreadHistogram,
  type Summary,
} from "~shared/inference/marginal";
import { maximumLikelihood, type MaximumLikelihood } from "~shared/inference/maximumLikelihood";
import { DERIVED_NAMES, type DerivedName, type FitProblem } from "~shared/inference/problem";
import type { Task } from "~shared/inference/task";

// Taken once: in a sandboxed realm every look-up of a global costs more than the arithmetic.
const { abs, exp, floor, log, max, min } = Math;

/** A posterior on a grid that was refined until its numbers stood still. */
export interface GridPosterior {
  readonly best: MaximumLikelihood;
  /** ln ∫ L × prior, likelihoods at peak 1 and the prior normalized. */
  readonly logEvidence: number;
  /** Parameters by name. */
  readonly parameters: Readonly<Record<string, Summary>>;
  /** Derived quantities by name; null where the posterior holds none. */
  readonly derived: Readonly<Record<DerivedName, Summary | null>>;
  /** A quantile of a parameter or derived quantity by name; null for one the posterior does not hold. */
  quantile(name: string, p: number): number | null;
  /** Points along each side of the last grid. */
  readonly points: number;
  /** Largest change in the last refinement, in widths (ln Z absolute); below the tolerance when it converged. */
  readonly lastChange: number;
  readonly converged: boolean;
  /** Where the posterior was kept, [dimension] each; L is below e⁻¹⁴ of its peak elsewhere. */
  readonly lows: readonly number[];
  readonly highs: readonly number[];
  /** ln of likelihood on the last grid, row-major with the first parameter outermost, [points^dimension]. */
  readonly logLikelihood: Float64Array;
}

/** How far a grid is refined, and what of it is kept. */
export interface GridOptions {
  /** Accepted change of means and interval ends in posterior widths, and of ln Z; default 5e-4. */
  readonly tolerance?: number;
  /** Most points along a side, default 1025. */
  readonly mostPoints?: number;
  /** Leave out derived quantities, for fits that only compare. */
  readonly withoutDerived?: boolean;
}

/** L below this of its peak is left out: e^(−28/2) ≈ 1e-6 at the edge of the box, far less in mass. */
const KEPT = 28;
const FIRST_POINTS = 65;

/**
 * Posterior of one or two parameters on a grid. The grid is drawn around what matters and doubled until
 * means, interval ends and ln Z change by less than the tolerance.
 *
 * @param problem - One or two parameters.
 * @throws {DomainError} For more: those belong to the sampler.
 */
export function* gridPosterior(
  problem: FitProblem,
  options: GridOptions = {},
): Task<GridPosterior> {
  const { tolerance = 5e-4, mostPoints = 1025, withoutDerived = false } = options;
  if (problem.dimension > 2) {
    throw new DomainError("dimension", problem.dimension, "one or two; use the sampler for more");
  }
  const best = yield* maximumLikelihood(problem);
  const box = yield* boxThatMatters(problem, best);
  let previous: Estimate | null = null;
  for (let points = FIRST_POINTS; ; points = 2 * points - 1) {
    const grid = yield* evaluateGrid(problem, box, points);
    const estimate = estimateFrom(problem, box, grid, points, best, withoutDerived);
    const change = previous ? largestChange(previous, estimate) : Infinity;
    const converged = change < tolerance;
    if (converged || 2 * points - 1 > mostPoints) {
      return {
        best,
        logEvidence: estimate.logEvidence,
        parameters: Object.fromEntries(
          problem.names.map((name, i) => [name, estimate.parameters[i]!.summary]),
        ),
        derived: Object.fromEntries(
          DERIVED_NAMES.map((name, i) => [name, estimate.derived[i]?.summary ?? null]),
        ) as Record<DerivedName, Summary | null>,
        quantile: (name, p) => {
          const parameter = problem.names.indexOf(name);
          if (parameter >= 0) return estimate.parameters[parameter]!.quantile(p);
          return estimate.derived[DERIVED_NAMES.indexOf(name as DerivedName)]?.quantile(p) ?? null;
        },
        points,
        lastChange: change,
        converged,
        lows: [...box.lows],
        highs: [...box.highs],
        logLikelihood: grid,
      };
    }
    previous = estimate;
  }
}

interface Box {
  readonly lows: Float64Array;
  readonly highs: Float64Array;
}

/** The part of the prior where the likelihood is not negligible, found by zooming in. */
function* boxThatMatters(problem: FitProblem, best: MaximumLikelihood): Task<Box> {
  const { dimension } = problem;
  const n = FIRST_POINTS;
  let box: Box = { lows: problem.lows.slice(), highs: problem.highs.slice() };
  for (let round = 0; round < 12; round++) {
    const grid = yield* evaluateGrid(problem, box, n);
    let top = -0.5 * best.minus2LnL;
    for (const value of grid) if (value > top) top = value;
    const lows = new Float64Array(dimension);
    const highs = new Float64Array(dimension);
    let shrunk = false;
    for (let d = 0; d < dimension; d++) {
      const h = (box.highs[d]! - box.lows[d]!) / (n - 1);
      // The best point itself may stand between the nodes.
      let first = floor((best.theta[d]! - box.lows[d]!) / h);
      let last = first + 1;
      const stride = d === dimension - 1 ? 1 : n;
      for (let k = 0; k < grid.length; k++) {
        if (grid[k]! < top - 0.5 * KEPT) continue;
        const i = stride === 1 ? k % n : floor(k / n);
        if (i < first) first = i;
        if (i > last) last = i;
      }
      lows[d] = max(box.lows[d]!, box.lows[d]! + (first - 1) * h);
      highs[d] = min(box.highs[d]!, box.lows[d]! + (last + 1) * h);
      if (highs[d]! - lows[d]! < 0.6 * (box.highs[d]! - box.lows[d]!)) shrunk = true;
    }
    box = { lows, highs };
    if (!shrunk) break;
  }
  return box;
}

/** ln L at n points a side, handing over control after each row. */
function* evaluateGrid(problem: FitProblem, box: Box, n: number): Task<Float64Array> {
  const { dimension } = problem;
  const grid = new Float64Array(n ** dimension);
  const theta = new Float64Array(dimension);
  const step = (d: number): number => (box.highs[d]! - box.lows[d]!) / (n - 1);
  const place = (d: number, i: number): number =>
    i === n - 1 ? box.highs[d]! : box.lows[d]! + i * step(d);
  if (dimension === 1) {
    for (let i = 0; i < n; i++) {
      theta[0] = place(0, i);
      grid[i] = logLikelihood(problem, theta);
    }
    return grid;
  }
  const seconds = Float64Array.from({ length: n }, (_, j) => place(1, j));
  const along = problem.alongSecond(seconds);
  for (let i = 0; i < n; i++) {
    theta[0] = place(0, i);
    const line = grid.subarray(i * n, i * n + n);
    along(theta[0], line);
    for (let j = 0; j < n; j++) {
      theta[1] = seconds[j]!;
      line[j] = problem.family.logPrior(theta) === -Infinity ? -Infinity : -0.5 * line[j]!;
    }
    if (i % 16 === 15) yield { stage: `grid of ${n} × ${n}`, fraction: (i + 1) / n };
  }
  return grid;
}

function logLikelihood(problem: FitProblem, theta: Float64Array): number {
  return problem.family.logPrior(theta) === -Infinity ? -Infinity : -0.5 * problem.minus2LnL(theta);
}

interface Estimate {
  readonly logEvidence: number;
  readonly parameters: readonly Marginal[];
  readonly derived: readonly (Marginal | null)[];
}

function estimateFrom(
  problem: FitProblem,
  box: Box,
  grid: Float64Array,
  n: number,
  best: MaximumLikelihood,
  withoutDerived: boolean,
): Estimate {
  const { dimension } = problem;
  const top = -0.5 * best.minus2LnL;
  const steps = Array.from(
    { length: dimension },
    (_, d) => (box.highs[d]! - box.lows[d]!) / (n - 1),
  );
  const weights = steps.map((h) => simpsonWeights(n, h));
  const density = steps.map(() => new Float64Array(n));
  let mass = 0;
  if (dimension === 1) {
    for (let i = 0; i < n; i++) {
      density[0]![i] = exp(grid[i]! - top);
      mass += weights[0]![i]! * density[0]![i]!;
    }
  } else {
    for (let i = 0; i < n; i++) {
      let row = 0;
      for (let j = 0; j < n; j++) {
        const value = exp(grid[i * n + j]! - top);
        row += weights[1]![j]! * value;
        density[1]![j]! += weights[0]![i]! * value;
      }
      density[0]![i] = row;
      mass += weights[0]![i]! * row;
    }
  }
  // A one- or two-parameter family has the same prior density all over its box.
  const logPrior = problem.family.logPrior(best.theta);
  return {
    logEvidence: log(mass) + top + logPrior,
    parameters: density.map((values, d) => densityMarginal(box.lows[d]!, box.highs[d]!, values)),
    derived: withoutDerived ? [] : derivedMarginals(problem, box, grid, n, top, weights),
  };
}

/**
 * Distributions of the derived quantities. Along each line of the grid a cell's mass is spread evenly
 * between the values at its ends; lines run along the parameter in which the quantity changes most, so
 * that their sum is a smooth quadrature over the other.
 */
function derivedMarginals(
  problem: FitProblem,
  box: Box,
  grid: Float64Array,
  n: number,
  top: number,
  weights: readonly Float64Array[],
): (Marginal | null)[] {
  const { dimension } = problem;
  const cut = top - 0.5 * KEPT;
  const values = derivedOnGrid(problem, box, grid, n, cut);
  return values.map((value) => {
    let low = Infinity;
    let high = -Infinity;
    for (let k = 0; k < grid.length; k++) {
      if (value[k]! < low) low = value[k]!;
      if (value[k]! > high) high = value[k]!;
    }
    if (!(high > low)) return null;
    const histogram = new SpreadHistogram(low, high);
    const along = dimension === 2 && changesMoreAlongLast(value, grid, n, cut) ? 1 : 0;
    const lines = dimension === 1 ? 1 : n;
    // Steps in k from one cell of a line to the next, and from one line to the next.
    const step = along === 1 || dimension === 1 ? 1 : n;
    const next = along === 1 ? n : 1;
    for (let line = 0; line < lines; line++) {
      const across = dimension === 1 ? 1 : weights[1 - along]![line]!;
      for (let i = 0; i + 1 < n; i++) {
        const a = line * next + i * step;
        const b = a + step;
        const va = value[a]!;
        const vb = value[b]!;
        if (va !== va || vb !== vb) continue;
        // Two halves of a cell keep the slope of the density inside it to second order.
        const middle = 0.5 * (va + vb);
        const pa = exp(grid[a]! - top);
        const pb = exp(grid[b]! - top);
        histogram.add(va, middle, across * (3 * pa + pb));
        histogram.add(middle, vb, across * (pa + 3 * pb));
      }
    }
    return histogram.marginal();
  });
}

/** Each derived quantity on the grid, NaN where the likelihood is negligible. */
function derivedOnGrid(
  problem: FitProblem,
  box: Box,
  grid: Float64Array,
  n: number,
  cut: number,
): Float64Array[] {
  const { dimension } = problem;
  const theta = new Float64Array(dimension);
  const out = new Float64Array(DERIVED_NAMES.length);
  const values = DERIVED_NAMES.map(() => new Float64Array(grid.length).fill(Number.NaN));
  const place = (d: number, i: number): number =>
    i === n - 1 ? box.highs[d]! : box.lows[d]! + (i * (box.highs[d]! - box.lows[d]!)) / (n - 1);
  for (let k = 0; k < grid.length; k++) {
    if (grid[k]! < cut) continue;
    theta[0] = place(0, dimension === 1 ? k : floor(k / n));
    if (dimension === 2) theta[1] = place(1, k % n);
    problem.derived(theta, out);
    for (let q = 0; q < values.length; q++) values[q]![k] = out[q]!;
  }
  return values;
}

function changesMoreAlongLast(
  value: Float64Array,
  grid: Float64Array,
  n: number,
  cut: number,
): boolean {
  let first = 0;
  let last = 0;
  for (let i = 0; i + 1 < n; i++) {
    for (let j = 0; j + 1 < n; j++) {
      const k = i * n + j;
      if (grid[k]! < cut || grid[k + 1]! < cut || grid[k + n]! < cut) continue;
      const mass = exp(grid[k]! - cut);
      const down = abs(value[k + n]! - value[k]!);
      const right = abs(value[k + 1]! - value[k]!);
      if (down === down && right === right) {
        first += mass * down;
        last += mass * right;
      }
    }
  }
  return last > first;
}

function largestChange(a: Estimate, b: Estimate): number {
  let change = abs(a.logEvidence - b.logEvidence);
  const compare = (p: Marginal | null | undefined, q: Marginal | null | undefined): void => {
    if (!p || !q) return;
    const width = q.summary.sd;
    if (!(width > 0)) return;
    const numbers = (s: Summary): number[] => [s.mean, s.median, ...s.interval68, ...s.interval95];
    const before = numbers(p.summary);
    numbers(q.summary).forEach((value, i) => {
      change = max(change, abs(value - before[i]!) / width);
    });
  };
  b.parameters.forEach((marginal, i) => compare(a.parameters[i], marginal));
  b.derived.forEach((marginal, i) => compare(a.derived[i], marginal));
  return change;
}
