/** Densities of one quantity and of two together, for drawing. */
import type { FitProblem } from "~shared/inference";

import { type Cloud, type Spans, spansOf } from "./cloud";
import type { DensityCurve, Ends, JointDensity } from "./request";

// Taken once: in a sandboxed realm every look-up of a global costs more than the arithmetic.
const { ceil, exp, floor, max, min, sqrt } = Math;

const CURVE_BINS = 96;
/** Levels of the contours. */
const LEVELS = [0.6827, 0.9545] as const;
/** Probability left out on either side of a drawing. */
const BEYOND = 0.001;

/** Places of even bins. */
interface Axis {
  readonly low: number;
  readonly high: number;
  readonly bins: number;
  readonly centres: readonly number[];
}

/** A quantity ready to be drawn. */
export interface Drawn {
  readonly name: string;
  readonly spans: Spans;
  /** Where it is drawn. */
  readonly ends: Ends;
  readonly sd: number;
}

/**
 * Where a quantity lies and how wide it is.
 *
 * @param support - The ends of a parameter's prior; null for a derived quantity.
 * @returns Null where no history has a value, or all have the same.
 */
function drawn(cloud: Cloud, name: string, support: Ends | null): Drawn | null {
  const spans = spansOf(cloud, cloud.columns.get(name)!);
  let low = Infinity;
  let high = -Infinity;
  let mass = 0;
  let first = 0;
  let second = 0;
  for (let c = 0; c < cloud.masses.length; c++) {
    const a = spans.lows[c]!;
    const b = spans.highs[c]!;
    if (Number.isNaN(a)) continue;
    low = min(low, a);
    high = max(high, b);
    mass += cloud.masses[c]!;
    first += 0.5 * cloud.masses[c]! * (a + b);
    second += (cloud.masses[c]! * (a * a + a * b + b * b)) / 3;
  }
  if (!(high > low)) return null;
  const fine = histogram(cloud, spans, axisOf([low, high], 4096));
  const step = (high - low) / fine.length;
  const beyond = (from: number, towards: 1 | -1): number => {
    let sum = 0;
    let i = from;
    while (i >= 0 && i < fine.length && sum + fine[i]! < BEYOND * mass) {
      sum += fine[i]!;
      i += towards;
    }
    return i;
  };
  const inside: Ends = [low + beyond(0, 1) * step, low + (beyond(fine.length - 1, -1) + 1) * step];
  const margin = 0.06 * (inside[1] - inside[0]);
  const [least, most] = support ?? [low, high];
  const ends: Ends = [
    inside[0] - margin < least + margin ? least : inside[0] - margin,
    inside[1] + margin > most - margin ? most : inside[1] + margin,
  ];
  return { name, spans, ends, sd: sqrt(max(0, second / mass - (first / mass) ** 2)) };
}

/** What of these quantities can be drawn: parameters within their prior, derived ones as far as they reach. */
export function picturesOf(
  problem: FitProblem,
  cloud: Cloud,
  quantities: readonly { readonly name: string }[],
): Drawn[] {
  return quantities.flatMap(({ name }) => {
    const d = problem.names.indexOf(name);
    const picture = drawn(cloud, name, d < 0 ? null : [problem.lows[d]!, problem.highs[d]!]);
    return picture ? [picture] : [];
  });
}

/** The curve of one quantity. */
export function densityCurve(cloud: Cloud, { name, spans, ends, sd }: Drawn): DensityCurve {
  const axis = axisOf(ends, CURVE_BINS);
  const bins = histogram(cloud, spans, axis);
  smooth(bins, 1, CURVE_BINS, 1, kernelOf(cloud, axis, sd, -1 / 5));
  return { name, x: axis.centres, density: scaled(bins) };
}

/** Two quantities together, `side` bins each way. */
export function jointDensity(cloud: Cloud, x: Drawn, y: Drawn, side: number): JointDensity {
  const across = axisOf(x.ends, side);
  const up = axisOf(y.ends, side);
  const bins = new Float64Array(side * side);
  const perX = side / (across.high - across.low);
  const perY = side / (up.high - up.low);
  for (let c = 0; c < cloud.masses.length; c++) {
    const a = (x.spans.lows[c]! - across.low) * perX;
    const b = (x.spans.highs[c]! - across.low) * perX;
    const e = (y.spans.lows[c]! - up.low) * perY;
    const f = (y.spans.highs[c]! - up.low) * perY;
    if (Number.isNaN(a + b + e + f)) continue;
    const mass = cloud.masses[c]!;
    const lastX = min(side - 1, b === a ? floor(a) : ceil(b) - 1);
    const lastY = min(side - 1, f === e ? floor(e) : ceil(f) - 1);
    for (let j = max(0, floor(e)); j <= lastY; j++) {
      const partY = f === e ? 1 : (min(f, j + 1) - max(e, j)) / (f - e);
      for (let i = max(0, floor(a)); i <= lastX; i++) {
        const partX = b === a ? 1 : (min(b, i + 1) - max(a, i)) / (b - a);
        bins[j * side + i]! += mass * partX * partY;
      }
    }
  }
  smooth(bins, side, side, side, kernelOf(cloud, across, x.sd, -1 / 6));
  smooth(bins, side, side, 1, kernelOf(cloud, up, y.sd, -1 / 6), side);
  const density = scaled(bins);
  const [level68, level95] = levelsOf(density);
  return { x: x.name, y: y.name, xs: across.centres, ys: up.centres, density, level68, level95 };
}

function axisOf([low, high]: Ends, bins: number): Axis {
  const step = (high - low) / bins;
  return {
    low,
    high,
    bins,
    centres: Array.from({ length: bins }, (_, i) => rounded(low + (i + 0.5) * step, 7)),
  };
}

/** Mass in each bin; what lies beyond the axis is left out. */
function histogram({ masses }: Cloud, { lows, highs }: Spans, axis: Axis): Float64Array {
  const { low, high, bins } = axis;
  const out = new Float64Array(bins);
  const per = bins / (high - low);
  for (let c = 0; c < masses.length; c++) {
    const a = (lows[c]! - low) * per;
    const b = (highs[c]! - low) * per;
    if (!(b >= 0 && a <= bins)) continue;
    if (b - a < 1e-9) {
      out[min(bins - 1, max(0, floor(a)))]! += masses[c]!;
      continue;
    }
    const each = masses[c]! / (b - a);
    const last = min(bins - 1, floor(b));
    for (let i = max(0, floor(a)); i <= last; i++) out[i]! += each * (min(b, i + 1) - max(a, i));
  }
  return out;
}

/** Weights of a Gaussian kernel over whole bins, as wide as the number of draws asks for; one bin for a grid. */
function kernelOf(cloud: Cloud, axis: Axis, sd: number, power: number): number[] {
  if (cloud.effectiveSize === Infinity) return [1];
  const width = (1.06 * sd * cloud.effectiveSize ** power * axis.bins) / (axis.high - axis.low);
  const reach = min(axis.bins - 1, ceil(3.5 * width));
  return Array.from({ length: reach + 1 }, (_, k) => exp(-0.5 * (k / width) ** 2));
}

/**
 * Smooths lines of bins in place; what would fall beyond an end is folded back.
 *
 * @param lines - How many, `next` apart.
 * @param step - From one bin of a line to the next.
 */
function smooth(
  bins: Float64Array,
  lines: number,
  length: number,
  next: number,
  kernel: readonly number[],
  step = 1,
): void {
  if (kernel.length < 2) return;
  const total = kernel.reduce((sum, weight, k) => sum + (k === 0 ? weight : 2 * weight), 0);
  const folded = (i: number): number => (i < 0 ? -1 - i : i >= length ? 2 * length - 1 - i : i);
  const line = new Float64Array(length);
  for (let l = 0; l < lines; l++) {
    line.fill(0);
    for (let i = 0; i < length; i++) {
      const value = bins[l * next + i * step]! / total;
      if (value === 0) continue;
      line[i]! += kernel[0]! * value;
      for (let k = 1; k < kernel.length; k++) {
        line[folded(i - k)]! += kernel[k]! * value;
        line[folded(i + k)]! += kernel[k]! * value;
      }
    }
    for (let i = 0; i < length; i++) bins[l * next + i * step] = line[i]!;
  }
}

/** The largest at 1, to the digits a drawing shows. */
function scaled(bins: Float64Array): number[] {
  const top = bins.reduce((most, value) => max(most, value), 0);
  return Array.from(bins, (value) => rounded(value / top, 3));
}

/** Densities above which each level's probability lies. */
function levelsOf(density: readonly number[]): [number, number] {
  const sorted = Float64Array.from(density).sort().reverse();
  const total = sorted.reduce((sum, value) => sum + value, 0);
  const [level68, level95] = LEVELS.map((level) => {
    let sum = 0;
    for (const value of sorted) {
      sum += value;
      if (sum >= level * total) return value;
    }
    return 0;
  });
  return [level68!, level95!];
}

/** A number with this many digits, so that a result stays small; tiny ones become nothing. */
export function rounded(value: number, digits: number): number {
  return Math.abs(value) < 1e-12 ? 0 : Number(value.toPrecision(digits));
}
