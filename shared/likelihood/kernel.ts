import { PolynomialTable } from "~shared/numerics/polynomialTable";
import { logErfc } from "~shared/numerics/special";

// Taken once: in a sandboxed realm every look-up of a global costs more than the arithmetic.
const { LN2, log, min } = Math;

/**
 * The arithmetic of every likelihood form, over numbers packed into one array: written once, used by
 * a single row on a screen and by a table of hundreds inside a fit, without allocation.
 * forms.ts packs the numbers and says where each form comes from.
 */
export const KERNEL = {
  /** No information: 0 everywhere. */
  flat: 0,
  /** centre, 1/σ below, 1/σ above */
  twoPiece: 1,
  /** see packQuantileMatched */
  quantileMatched: 2,
  /** m, V, V′ */
  variableWidth: 3,
  /** low, high, 1/σ of the tails; an end may be infinite */
  plateau: 4,
  /** place, direction (1 upper limit, −1 lower) / (√2 s) */
  smoothedStep: 5,
  /** low, high; an end may be infinite */
  hardStep: 6,
  /** n, 1/step of a uniform grid or 0, n places, n values of ln p over its peak */
  tabulated: 7,
} as const;
/** One of KERNEL. */
export type Kernel = (typeof KERNEL)[keyof typeof KERNEL];

/**
 * −2 ln L relative to its peak, at one model value.
 *
 * @param kernel - Which arithmetic, one of KERNEL.
 * @param p - Packed numbers; those of this row start at `at`.
 * @param at - Offset into p.
 * @param x - Model value; ±Infinity is allowed, NaN is not.
 * @returns A number ≥ 0 up to rounding, +Infinity outside the support; never NaN.
 */
export function minus2LnLOf(kernel: number, p: Float64Array, at: number, x: number): number {
  switch (kernel) {
    case KERNEL.twoPiece:
      return twoPieceOf(x - p[at]!, p[at + 1]!, p[at + 2]!);
    case KERNEL.plateau:
      return plateauOf(x, p[at]!, p[at + 1]!, p[at + 2]!);
    case KERNEL.variableWidth:
      return variableWidthOf(x - p[at]!, p[at + 1]!, p[at + 2]!);
    case KERNEL.smoothedStep:
      return smoothedStepOf((x - p[at]!) * p[at + 1]!);
    case KERNEL.quantileMatched:
      return quantileMatchedMinus2LnL(p, at, x);
    case KERNEL.hardStep:
      return x < p[at]! || x > p[at + 1]! ? Infinity : 0;
    case KERNEL.tabulated:
      return tabulatedMinus2LnL(p, at, x);
    default:
      return 0;
  }
}

/**
 * The same for a line of model values, added up: one choice of arithmetic for all of them. The smoothed
 * step comes from a table inside fits, good to 1e-10.
 *
 * @param values - Model values, from `from` on, [n]; NaN is not allowed.
 * @param out - −2 ln L is added to its first n numbers.
 */
export function addMinus2LnL(
  kernel: number,
  p: Float64Array,
  at: number,
  values: Float64Array,
  from: number,
  n: number,
  out: Float64Array,
): void {
  const p0 = p[at]!;
  const p1 = p[at + 1]!;
  const p2 = p[at + 2]!;
  switch (kernel) {
    case KERNEL.twoPiece:
      for (let j = 0; j < n; j++) out[j]! += twoPieceOf(values[from + j]! - p0, p1, p2);
      return;
    case KERNEL.plateau:
      for (let j = 0; j < n; j++) out[j]! += plateauOf(values[from + j]!, p0, p1, p2);
      return;
    case KERNEL.variableWidth:
      for (let j = 0; j < n; j++) out[j]! += variableWidthOf(values[from + j]! - p0, p1, p2);
      return;
    case KERNEL.smoothedStep:
      for (let j = 0; j < n; j++) out[j]! += tabulatedStep((values[from + j]! - p0) * p1);
      return;
    case KERNEL.tabulated:
      if (p1 > 0) addTabulatedEvenly(p, at, values, from, n, out);
      else for (let j = 0; j < n; j++) out[j]! += tabulatedMinus2LnL(p, at, values[from + j]!);
      return;
    case KERNEL.flat:
      return;
    default:
      for (let j = 0; j < n; j++) out[j]! += minus2LnLOf(kernel, p, at, values[from + j]!);
  }
}

/** d from the centre, 1/σ of each side. */
function twoPieceOf(d: number, perBelow: number, perAbove: number): number {
  const t = d < 0 ? d * perBelow : d * perAbove;
  return t * t;
}

function plateauOf(x: number, low: number, high: number, perSigma: number): number {
  const t = x < low ? (low - x) * perSigma : x > high ? (x - high) * perSigma : 0;
  return t * t;
}

function variableWidthOf(d: number, v: number, slope: number): number {
  const variance = v + slope * d;
  if (!(variance > 0) || d === -Infinity || d === Infinity) return Infinity;
  return (d * d) / variance;
}

function smoothedStepOf(t: number): number {
  return 2 * (LN2 - logErfc(t));
}

/** −2 ln ½ erfc(t) to 1e-10 from a table where t is not far out; made when a fit first needs it. */
let stepTable: PolynomialTable | null = null;

/**
 * The smoothed step inside fits, good to 1e-10.
 *
 * @param t - Distance beyond the place over √2 s; any number.
 * @returns −2 ln ½ erfc(t).
 */
export function tabulatedStep(t: number): number {
  stepTable ??= new PolynomialTable(smoothedStepOf, -6, 8, 128);
  return t >= stepTable.low && t <= stepTable.high ? stepTable.at(t) : smoothedStepOf(t);
}

/*
 * Layout of a quantile-matched row:
 *  0 low node, 1 median, 2 high node, 3 score at the low node, 4 score at the high node,
 *  5 slope below the low node, 6 slope above the high node, 7 the least of u² − 2 ln u′,
 *  8–13 and 14–19 the quintics of the two sides in t from 0 to 1.
 */
const LEFT = 8;
const RIGHT = 14;

/**
 * Normal score u(x) of a quantile-matched row.
 *
 * @param p - Packed numbers; those of the row start at `at`.
 * @param x - Model value, any number.
 * @returns In standard deviations.
 */
export function quantileMatchedScore(p: Float64Array, at: number, x: number): number {
  const low = p[at]!;
  const median = p[at + 1]!;
  const high = p[at + 2]!;
  if (x <= low) return p[at + 3]! + (x - low) * p[at + 5]!;
  if (x >= high) return p[at + 4]! + (x - high) * p[at + 6]!;
  const c = at + (x < median ? LEFT : RIGHT);
  const t = x < median ? (x - low) / (median - low) : (x - median) / (high - median);
  return (
    p[c]! + t * (p[c + 1]! + t * (p[c + 2]! + t * (p[c + 3]! + t * (p[c + 4]! + t * p[c + 5]!))))
  );
}

/**
 * du/dx of a quantile-matched row; arguments as for the score.
 *
 * @returns 1 / unit of x; not positive where very lopsided widths turn the score around.
 */
export function quantileMatchedSlope(p: Float64Array, at: number, x: number): number {
  const low = p[at]!;
  const median = p[at + 1]!;
  const high = p[at + 2]!;
  if (x <= low) return p[at + 5]!;
  if (x >= high) return p[at + 6]!;
  const c = at + (x < median ? LEFT : RIGHT);
  const width = x < median ? median - low : high - median;
  const t = x < median ? (x - low) / width : (x - median) / width;
  return (
    (p[c + 1]! +
      t * (2 * p[c + 2]! + t * (3 * p[c + 3]! + t * (4 * p[c + 4]! + t * 5 * p[c + 5]!)))) /
    width
  );
}

/**
 * d²u/dx² of a quantile-matched row; arguments as for the score.
 *
 * @returns 1 / unit of x squared; 0 beyond the nodes.
 */
export function quantileMatchedCurvature(p: Float64Array, at: number, x: number): number {
  const low = p[at]!;
  const median = p[at + 1]!;
  const high = p[at + 2]!;
  if (x <= low || x >= high) return 0;
  const c = at + (x < median ? LEFT : RIGHT);
  const width = x < median ? median - low : high - median;
  const t = x < median ? (x - low) / width : (x - median) / width;
  return (
    (2 * p[c + 2]! + t * (6 * p[c + 3]! + t * (12 * p[c + 4]! + t * 20 * p[c + 5]!))) /
    (width * width)
  );
}

function quantileMatchedMinus2LnL(p: Float64Array, at: number, x: number): number {
  const u = quantileMatchedScore(p, at, x);
  const slope = quantileMatchedSlope(p, at, x);
  // Very lopsided widths can turn the score around: no density there.
  if (!(slope > 0)) return Infinity;
  return u * u - 2 * log(slope) - p[at + 7]!;
}

function tabulatedMinus2LnL(p: Float64Array, at: number, x: number): number {
  const n = p[at]!;
  const xs = at + 2;
  const lnp = xs + n;
  const first = p[xs]!;
  if (!(x >= first && x <= p[xs + n - 1]!)) return Infinity;
  let i: number;
  const perStep = p[at + 1]!;
  if (perStep > 0) {
    i = min(((x - first) * perStep) | 0, n - 2);
  } else {
    i = 0;
    let high = n - 1;
    while (high - i > 1) {
      const middle = (i + high) >> 1;
      if (p[xs + middle]! <= x) i = middle;
      else high = middle;
    }
  }
  const t = (x - p[xs + i]!) / (p[xs + i + 1]! - p[xs + i]!);
  return -2 * (p[lnp + i]! + t * (p[lnp + i + 1]! - p[lnp + i]!));
}

function addTabulatedEvenly(
  p: Float64Array,
  at: number,
  values: Float64Array,
  from: number,
  n: number,
  out: Float64Array,
): void {
  const nodes = p[at]!;
  const perStep = p[at + 1]!;
  const xs = at + 2;
  const lnp = xs + nodes;
  const first = p[xs]!;
  const last = p[xs + nodes - 1]!;
  for (let j = 0; j < n; j++) {
    const x = values[from + j]!;
    if (!(x >= first && x <= last)) {
      out[j] = Infinity;
      continue;
    }
    const i = min(((x - first) * perStep) | 0, nodes - 2);
    const low = p[xs + i]!;
    const v = p[lnp + i]!;
    out[j]! -= 2 * (v + ((x - low) / (p[xs + i + 1]! - low)) * (p[lnp + i + 1]! - v));
  }
}
