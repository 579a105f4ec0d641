import { DomainError } from "~shared/errors/DomainError";
import type { FitProblem } from "~shared/inference/problem";
import type { Task } from "~shared/inference/task";

/** The best point of a fit, and how far it can be trusted. */
export interface MaximumLikelihood {
  /** Parameters, in the order of the problem, [dimension]. */
  readonly theta: Float64Array;
  readonly minus2LnL: number;
  /** Names of the parameters that lie at an end of their prior. */
  readonly atEdge: readonly string[];
  /** True where quite different parameters are as good: then only the height means something. */
  readonly degenerate: boolean;
}

/** Heights closer than this count as the same minimum … */
const SAME_HEIGHT = 1e-4;
/** … and places further apart than this part of the prior as different. */
const SAME_PLACE = 0.02;
const STARTS = 8;
const CANDIDATES = 256;

/**
 * Highest likelihood inside the prior's box: the best of a low-discrepancy scan are polished by
 * downhill simplex, restarted until it gains nothing, and tried along the edges they end near.
 *
 * Our own because the small libraries at hand have no bounds and no word about edges or degeneracy.
 *
 * @param problem - A compiled table under one family.
 * @returns The best point, whether it lies at an edge of the prior, and whether it is the only one.
 * @throws {DomainError} If no place was found where the likelihood is above zero.
 *
 * Source: Nelder & Mead (1965), Computer Journal 7, 308; scan after Halton (1960).
 */
export function* maximumLikelihood(problem: FitProblem): Task<MaximumLikelihood> {
  const { dimension, lows, highs } = problem;
  const objective = (unit: ArrayLike<number>): number => {
    const theta = toTheta(problem, unit);
    return problem.family.logPrior(theta) === -Infinity ? Infinity : problem.minus2LnL(theta);
  };

  const candidates: Point[] = [];
  for (let i = 1; i <= CANDIDATES; i++) {
    const theta = problem.family.fromUnit(
      Float64Array.from({ length: dimension }, (_, d) => halton(i, PRIMES[d]!)),
    );
    const place = theta.map((value, d) => (value - lows[d]!) / (highs[d]! - lows[d]!));
    candidates.push({ place, height: problem.minus2LnL(theta) });
  }
  candidates.sort(byHeight);
  const starts = spreadOut(candidates);

  const ends: Point[] = [];
  for (let s = 0; s < starts.length; s++) {
    ends.push(polish(objective, starts[s]!, dimension));
    yield { stage: "maximum likelihood", fraction: (s + 1) / (starts.length + 1) };
  }
  ends.sort(byHeight);
  let best = ends[0]!;
  if (best.height === Infinity) {
    throw new DomainError("rows", "this table", "allowed by at least one history inside the prior");
  }
  // Along an edge the simplex may have collapsed too early.
  for (let d = 0; d < dimension; d++) {
    for (const edge of [0, 1]) {
      if (Math.abs(best.place[d]! - edge) < 0.05)
        best = lower(best, alongEdge(objective, best, d, edge));
    }
  }
  ends.push(best);
  yield { stage: "maximum likelihood", fraction: 1 };

  const asGood = ends.filter(({ height }) => height < best.height + SAME_HEIGHT);
  const degenerate = asGood.some(({ place }) =>
    place.some((value, d) => Math.abs(value - best.place[d]!) > SAME_PLACE),
  );
  return {
    theta: toTheta(problem, best.place),
    minus2LnL: best.height,
    atEdge: problem.names.filter((_, d) => best.place[d]! < 1e-6 || best.place[d]! > 1 - 1e-6),
    degenerate,
  };

  function toTheta(_: FitProblem, unit: ArrayLike<number>): Float64Array {
    return Float64Array.from(
      { length: dimension },
      (__, d) => lows[d]! + unit[d]! * (highs[d]! - lows[d]!),
    );
  }
}

interface Point {
  /** Parameters scaled to the prior's box, each from 0 to 1. */
  readonly place: Float64Array;
  readonly height: number;
}
type Objective = (unit: ArrayLike<number>) => number;

const PRIMES = [2, 3, 5, 7, 11, 13, 17, 19, 23, 29, 31, 37] as const;

function halton(index: number, base: number): number {
  let value = 0;
  let part = 1 / base;
  for (let i = index; i > 0; i = Math.floor(i / base)) {
    value += part * (i % base);
    part /= base;
  }
  return value;
}

function byHeight(a: Point, b: Point): number {
  return a.height - b.height;
}

function lower(a: Point, b: Point): Point {
  return b.height < a.height ? b : a;
}

/** The lowest candidates that are not all in one place. */
function spreadOut(candidates: readonly Point[]): Point[] {
  const chosen: Point[] = [];
  for (const candidate of candidates) {
    if (chosen.length === STARTS) break;
    const near = chosen.some((other) =>
      other.place.every((value, d) => Math.abs(value - candidate.place[d]!) < 0.08),
    );
    if (!near) chosen.push(candidate);
  }
  return chosen;
}

function polish(f: Objective, start: Point, dimension: number): Point {
  let best = start;
  let step = 0.1;
  for (let round = 0; round < 12; round++) {
    const found = simplex(f, best, step, dimension);
    const gain = best.height - found.height;
    best = lower(best, found);
    if (round > 1 && !(gain > 1e-12)) break;
    step = round % 2 === 0 ? 0.02 : 0.002;
  }
  return best;
}

function alongEdge(f: Objective, start: Point, fixed: number, edge: number): Point {
  const dimension = start.place.length;
  const free = Array.from({ length: dimension }, (_, d) => d).filter((d) => d !== fixed);
  const full = (reduced: ArrayLike<number>): Float64Array => {
    const place = Float64Array.from(start.place);
    place[fixed] = edge;
    free.forEach((d, i) => (place[d] = reduced[i]!));
    return place;
  };
  const place = Float64Array.from(free, (d) => start.place[d]!);
  if (free.length === 0) return { place: full([]), height: f(full([])) };
  const objective = (reduced: ArrayLike<number>): number => f(full(reduced));
  const found = polish(objective, { place, height: objective(place) }, free.length);
  return { place: full(found.place), height: found.height };
}

/** Nelder–Mead with steps clipped to the box. */
function simplex(f: Objective, start: Point, step: number, dimension: number): Point {
  const clip = (value: number): number => Math.min(1, Math.max(0, value));
  const at = (place: Float64Array): Point => ({ place, height: f(place) });
  let points: Point[] = [start];
  for (let d = 0; d < dimension; d++) {
    const place = Float64Array.from(start.place);
    place[d] = place[d]! + step <= 1 ? place[d]! + step : place[d]! - step;
    points.push(at(place));
  }
  for (let i = 0; i < 200 * dimension; i++) {
    points.sort(byHeight);
    const best = points[0]!;
    const worst = points[dimension]!;
    const size = Math.max(
      ...points.map(({ place }) =>
        place.reduce((most, value, d) => Math.max(most, Math.abs(value - best.place[d]!)), 0),
      ),
    );
    if (size < 1e-11 || (size < 1e-7 && worst.height - best.height < 1e-13)) break;
    const centre = new Float64Array(dimension);
    for (let p = 0; p < dimension; p++) {
      for (let d = 0; d < dimension; d++) centre[d]! += points[p]!.place[d]! / dimension;
    }
    const along = (factor: number): Point =>
      at(centre.map((value, d) => clip(value + factor * (value - worst.place[d]!))));
    const reflected = along(1);
    if (reflected.height < best.height) {
      points[dimension] = lower(reflected, along(2));
    } else if (reflected.height < points[dimension - 1]!.height) {
      points[dimension] = reflected;
    } else {
      const contracted = along(reflected.height < worst.height ? 0.5 : -0.5);
      if (contracted.height < Math.min(reflected.height, worst.height)) {
        points[dimension] = contracted;
      } else {
        points = points.map((point) =>
          point === best ? best : at(point.place.map((value, d) => 0.5 * (value + best.place[d]!))),
        );
      }
    }
  }
  return points.reduce(lower);
}
