import { brentRoot } from "~shared/numerics/roots";
import { pchipSlopes } from "~shared/numerics/pchip";

// Taken once: in a sandboxed realm every look-up of a global costs more than the arithmetic.
const { max, min, sqrt } = Math;

/** One quantity under a posterior. */
export interface Summary {
  readonly mean: number;
  readonly sd: number;
  readonly median: number;
  /** Equal-tailed interval of 68.27 %. */
  readonly interval68: readonly [low: number, high: number];
  /** Equal-tailed interval of 95.45 %. */
  readonly interval95: readonly [low: number, high: number];
}

/** Levels of the two intervals. */
export const INTERVAL_LEVELS = [0.6827, 0.9545] as const;

/**
 * The ends of an equal-tailed interval.
 *
 * @param quantile - Of the distribution, for 0 < p < 1.
 * @param level - Probability inside, strictly between 0 and 1.
 * @returns Its ends, unit of the quantiles.
 */
export function equalTailed(
  quantile: (p: number) => number,
  level: number,
): [low: number, high: number] {
  return [quantile(0.5 * (1 - level)), quantile(0.5 * (1 + level))];
}

/** A quantity's distribution: its summary and any quantile. */
export interface Marginal {
  readonly summary: Summary;
  quantile(p: number): number;
}

/**
 * The marginal of a parameter from its density at even places: Simpson moments, and a cumulative
 * integral of the monotone cubic through it.
 *
 * @param low - First place.
 * @param high - Last place.
 * @param density - At even places, an odd number of them, not normalized, [n].
 */
export function densityMarginal(low: number, high: number, density: Float64Array): Marginal {
  const n = density.length;
  const h = (high - low) / (n - 1);
  const places = Float64Array.from({ length: n }, (_, i) => low + i * h);
  const weights = simpsonWeights(n, h);
  let mass = 0;
  let first = 0;
  for (let i = 0; i < n; i++) {
    mass += weights[i]! * density[i]!;
    first += weights[i]! * density[i]! * places[i]!;
  }
  const mean = first / mass;
  let second = 0;
  for (let i = 0; i < n; i++) second += weights[i]! * density[i]! * (places[i]! - mean) ** 2;

  const slopes = pchipSlopes(places, density);
  const cumulative = new Float64Array(n);
  for (let i = 0; i + 1 < n; i++) {
    cumulative[i + 1] = cumulative[i]! + cellIntegral(density, slopes, i, h, 1);
  }
  const total = cumulative[n - 1]!;
  const quantile = (p: number): number => {
    const target = p * total;
    let i = 0;
    let top = n - 1;
    while (top - i > 1) {
      const middle = (i + top) >> 1;
      if (cumulative[middle]! <= target) i = middle;
      else top = middle;
    }
    const excess = (t: number): number =>
      cumulative[i]! + cellIntegral(density, slopes, i, h, t) - target;
    const t = excess(1) <= 0 ? 1 : brentRoot(excess, 0, 1, 1e-12);
    return places[i]! + t * h;
  };
  return { summary: summaryOf(mean, sqrt(max(0, second / mass)), quantile), quantile };
}

/** ∫ of the cubic in cell i from its left end over the part t of it. */
function cellIntegral(
  y: Float64Array,
  slopes: Float64Array,
  i: number,
  h: number,
  t: number,
): number {
  const y0 = y[i]!;
  const s0 = h * slopes[i]!;
  const rise = y[i + 1]! - y0;
  const s1 = h * slopes[i + 1]!;
  const c2 = 3 * rise - 2 * s0 - s1;
  const c3 = s0 + s1 - 2 * rise;
  return h * t * (y0 + t * (s0 / 2 + t * (c2 / 3 + t * (c3 / 4))));
}

/**
 * Composite Simpson weights for an odd number of even places.
 *
 * @param n - How many places, odd, 3 or more.
 * @param h - Distance between them.
 * @returns [n]; their sum is (n − 1) h.
 */
export function simpsonWeights(n: number, h: number): Float64Array {
  return Float64Array.from({ length: n }, (_, i) =>
    i === 0 || i === n - 1 ? h / 3 : i % 2 === 1 ? (4 * h) / 3 : (2 * h) / 3,
  );
}

/**
 * Mean, width, median and both intervals of a distribution.
 *
 * @param quantile - For 0 < p < 1.
 */
export function summaryOf(mean: number, sd: number, quantile: (p: number) => number): Summary {
  return {
    mean,
    sd,
    median: quantile(0.5),
    interval68: equalTailed(quantile, INTERVAL_LEVELS[0]),
    interval95: equalTailed(quantile, INTERVAL_LEVELS[1]),
  };
}

/**
 * A quantity's distribution gathered from masses that are each spread evenly between two values:
 * sorting masses at points instead would bias intervals by half a cell.
 */
export class SpreadHistogram {
  private readonly mass: Float64Array;
  private readonly perBin: number;
  private total = 0;
  private first = 0;
  private second = 0;

  /**
   * @param low - Least value.
   * @param high - Greatest value, above low.
   * @param bins - How finely the cumulative distribution is kept.
   */
  constructor(
    private readonly low: number,
    private readonly high: number,
    private readonly bins = 8192,
  ) {
    this.mass = new Float64Array(bins);
    this.perBin = bins / (high - low);
  }

  /** Adds a mass spread evenly from a to b (in either order). */
  add(a: number, b: number, mass: number): void {
    this.total += mass;
    this.first += 0.5 * mass * (a + b);
    this.second += (mass * (a * a + a * b + b * b)) / 3;
    let from = (min(a, b) - this.low) * this.perBin;
    let to = (max(a, b) - this.low) * this.perBin;
    from = min(max(from, 0), this.bins);
    to = min(max(to, 0), this.bins);
    const start = min(from | 0, this.bins - 1);
    const stop = min(to | 0, this.bins - 1);
    if (start === stop) {
      this.mass[start]! += mass;
      return;
    }
    const each = mass / (to - from);
    this.mass[start]! += each * (start + 1 - from);
    for (let i = start + 1; i < stop; i++) this.mass[i]! += each;
    this.mass[stop]! += each * (to - stop);
  }

  /** The distribution of all that was added; null when there is no mass. */
  marginal(): Marginal | null {
    if (!(this.total > 0)) return null;
    const cumulative = new Float64Array(this.bins + 1);
    for (let i = 0; i < this.bins; i++) cumulative[i + 1] = cumulative[i]! + this.mass[i]!;
    const whole = cumulative[this.bins]!;
    const quantile = (p: number): number => {
      const target = p * whole;
      let i = 0;
      let top = this.bins;
      while (top - i > 1) {
        const middle = (i + top) >> 1;
        if (cumulative[middle]! <= target) i = middle;
        else top = middle;
      }
      const inside = this.mass[i]! > 0 ? (target - cumulative[i]!) / this.mass[i]! : 0;
      return this.low + (i + min(1, max(0, inside))) / this.perBin;
    };
    const mean = this.first / this.total;
    const sd = sqrt(max(0, this.second / this.total - mean * mean));
    return { summary: summaryOf(mean, sd, quantile), quantile };
  }
}
