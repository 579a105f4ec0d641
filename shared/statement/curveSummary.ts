/** What a curve says itself, to hold against the interval a paper quotes of it. */
import type { CurveNodes } from "./curve";

/** A curve by numbers of its own, in its own variable. */
export interface CurveSummary {
  median: number;
  mean: number;
  mode: number;
  /** Interval with equal tails at the level asked for. */
  central: readonly [low: number, high: number];
  /** Interval of highest density at that level. */
  highest: readonly [low: number, high: number];
}

/** Points between two rows: the logarithm of the density is linear there, as in the likelihood. */
const FINE = 16;

/**
 * Median, mean, mode and intervals of a curve under a flat prior in its variable, within its ends.
 *
 * @param nodes - Ascending places, densities above zero, two or more.
 * @param level - Probability of the intervals, between 0 and 1.
 */
export function curveSummary({ x, p }: CurveNodes, level: number): CurveSummary {
  const places: number[] = [x[0]!];
  const heights: number[] = [p[0]!];
  for (let i = 0; i + 1 < x.length; i++) {
    const rise = Math.log(p[i + 1]! / p[i]!);
    for (let k = 1; k <= FINE; k++) {
      const part = k / FINE;
      places.push(x[i]! + part * (x[i + 1]! - x[i]!));
      heights.push(p[i]! * Math.exp(part * rise));
    }
  }
  const cumulative = [0];
  let moment = 0;
  for (let i = 0; i + 1 < places.length; i++) {
    const area = 0.5 * (places[i + 1]! - places[i]!) * (heights[i]! + heights[i + 1]!);
    cumulative.push(cumulative[i]! + area);
    moment += area * 0.5 * (places[i]! + places[i + 1]!);
  }
  const total = cumulative[cumulative.length - 1]!;
  const quantile = (probability: number): number => {
    const target = probability * total;
    let i = 0;
    while (i + 2 < places.length && cumulative[i + 1]! < target) i++;
    const cell = cumulative[i + 1]! - cumulative[i]!;
    const part = cell > 0 ? (target - cumulative[i]!) / cell : 0;
    return places[i]! + part * (places[i + 1]! - places[i]!);
  };
  const tail = (1 - level) / 2;
  return {
    median: quantile(0.5),
    mean: moment / total,
    mode: x[p.indexOf(Math.max(...p))]!,
    central: [quantile(tail), quantile(1 - tail)],
    highest: shortest(quantile, level),
  };
}

/** The shortest interval that holds the level; of a curve with one peak, that of highest density. */
function shortest(
  quantile: (probability: number) => number,
  level: number,
): readonly [number, number] {
  const steps = 200;
  let best: readonly [number, number] = [quantile(0), quantile(level)];
  for (let i = 1; i <= steps; i++) {
    const from = (i / steps) * (1 - level);
    const here = [quantile(from), quantile(from + level)] as const;
    if (here[1] - here[0] < best[1] - best[0]) best = here;
  }
  return best;
}

/** Area under the rows as printed by trapezoids. */
export function trapezoidArea(rows: readonly { value: number; height: number }[]): number {
  let area = 0;
  for (let i = 0; i + 1 < rows.length; i++) {
    const [a, b] = [rows[i]!, rows[i + 1]!];
    area += 0.5 * Math.abs(b.value - a.value) * (a.height + b.height);
  }
  return area;
}
