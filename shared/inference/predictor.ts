import type { Background } from "~shared/cosmology/background";
import type { History } from "~shared/history/history";
import type { FitParameter } from "~shared/inference/families";
import type { ModelRequests } from "~shared/likelihood/compile";
import { Surface } from "~shared/numerics/surface";

/** Answers a table's requests. */
export interface Predictor {
  /**
   * For one set of parameters.
   *
   * @param theta - Parameters, inside the box of the family.
   * @param out - Filled as ModelRequests says, [requests.size]; NaN where there is no such value.
   */
  (theta: ArrayLike<number>, out: Float64Array): void;
  /**
   * For whole lines of a grid at once, where a family has a faster way than point by point.
   *
   * @param seconds - Values of the second parameter, ascending, [n].
   */
  readonly along?: (seconds: Float64Array) => LinePredictor;
}

/**
 * Answers a table's requests for one value of the first parameter and all of the second.
 *
 * @param first - The first parameter.
 * @param out - Filled, [requests.size, n]: a request's answers stand together.
 */
export type LinePredictor = (first: number, out: Float64Array) => void;

/**
 * Any family's predictor, through the one interface of histories. A new family starts with this.
 *
 * @param history - The history at a point of the family's box.
 */
export function historyPredictor(
  requests: ModelRequests,
  background: Background,
  history: (theta: ArrayLike<number>) => History,
): Predictor {
  const { points, binLows, binHighs, depthLows, depthHighs } = requests;
  const others = rootsPredictor(requests, background);
  return (theta, out) => {
    const model = history(theta);
    let at = 0;
    for (let i = 0; i < points.length; i++) out[at++] = model.x(points[i]!);
    for (let i = 0; i < binLows.length; i++) {
      out[at++] = model.binMean(binLows[i]!, binHighs[i]!);
    }
    for (let i = 0; i < depthLows.length; i++) {
      out[at++] = model.opticalDepth(background, depthLows[i]!, depthHighs[i]!);
    }
    others((f) => model.redshiftAtFraction(f) ?? Number.NaN, out);
  };
}

/**
 * The redshifts at fractions and the durations, given how a family finds a redshift (NaN for none).
 * Their answers stand `stride` apart from `column` on: 1 and 0 for one set of parameters.
 */
export function rootsPredictor(
  requests: ModelRequests,
  background: Background,
): (
  redshiftAt: (f: number) => number,
  out: Float64Array,
  stride?: number,
  column?: number,
) => void {
  const { fractions, durations } = requests;
  const first = requests.size - fractions.length - durations.length;
  return (redshiftAt, out, stride = 1, column = 0) => {
    let at = first * stride + column;
    for (let i = 0; i < fractions.length; i++, at += stride) out[at] = redshiftAt(fractions[i]!);
    for (let i = 0; i < durations.length; i++, at += stride) {
      const { f1, f2, myr } = durations[i]!;
      const from = redshiftAt(f1);
      const to = redshiftAt(f2);
      out[at] =
        myr && from === from && to === to
          ? 1000 * (background.age(to) - background.age(from))
          : from - to;
    }
  };
}

/** An optical depth over the two parameters of a family. */
export interface DepthSurface {
  value(a: number, b: number): number;
  /** For one value of the first parameter and all of `seconds`: fills out from `at` on, [n]. */
  along(seconds: Float64Array): (a: number, out: Float64Array, at: number) => void;
}

/** How well an interpolated optical depth must agree with the integral, relative to its largest. */
const DEPTH_TOLERANCE = 1e-8;

/**
 * Optical depths of a two-parameter family by interpolation over the prior's box, each checked against
 * the integral between its nodes; by the integral itself where a surface does not hold the digits.
 *
 * @param parameters - The two, with the ends of their priors.
 * @param history - The history at (first, second).
 * @returns One for each of the table's optical depths, in their order, good to 1e-8 of its largest value.
 */
export function depthSurfaces(
  requests: ModelRequests,
  background: Background,
  parameters: readonly FitParameter[],
  history: (a: number, b: number) => History,
): DepthSurface[] {
  const [first, second] = parameters;
  const box = {
    low: [first!.low, second!.low] as const,
    high: [first!.high, second!.high] as const,
  };
  return Array.from(requests.depthLows, (z1, i) => {
    const z2 = requests.depthHighs[i]!;
    const exact = (a: number, b: number): number => history(a, b).opticalDepth(background, z1, z2);
    return (
      Surface.of(exact, box, DEPTH_TOLERANCE) ?? {
        value: exact,
        along: (seconds) => (a, out, at) => {
          for (let j = 0; j < seconds.length; j++) out[at + j] = exact(a, seconds[j]!);
        },
      }
    );
  });
}
