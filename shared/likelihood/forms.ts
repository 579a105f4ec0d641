import { DomainError } from "~shared/errors/DomainError";
import {
  KERNEL,
  type Kernel,
  minus2LnLOf,
  quantileMatchedCurvature,
  quantileMatchedScore,
  quantileMatchedSlope,
} from "~shared/likelihood/kernel";
import { requireFinite, requirePositive, requireProbability } from "~shared/numerics/require";
import { brentRoot } from "~shared/numerics/roots";
import { erf, normalCdf, normalPdf, normalQuantile, sigmasOfLevel } from "~shared/numerics/special";

/** The forms a statement can take in a fit; PHYSICS of each in its factory below. */
export const FORM_NAMES = [
  "twoPiece",
  "quantileMatched",
  "variableWidth",
  "gaussian",
  "halfGaussianBounded",
  "halfGaussianUnbounded",
  "flatThenGaussian",
  "smoothedStep",
  "hardStep",
  "band",
  "bandWideTails",
  "tabulated",
] as const;
/** A form by its name in the code; FORM_WORDS has it in words. */
export type FormName = (typeof FORM_NAMES)[number];

/** Each form's name in words. */
export const FORM_WORDS: Record<FormName, string> = {
  twoPiece: "two-piece",
  quantileMatched: "quantile-matched",
  variableWidth: "variable width",
  gaussian: "Gaussian",
  halfGaussianBounded: "half-Gaussian, bounded",
  halfGaussianUnbounded: "half-Gaussian, unbounded",
  flatThenGaussian: "flat, then Gaussian",
  smoothedStep: "smoothed step",
  hardStep: "hard step",
  band: "band",
  bandWideTails: "band, wide tails",
  tabulated: "tabulated",
};

/** Something a reader should know about a form with these numbers. */
export interface FormWarning {
  readonly code: "secondPeak" | "saysNothing" | "touchesEdge" | "innerZero";
  readonly text: string;
}

/** One likelihood in one variable, relative to its peak. */
export interface Form {
  readonly name: FormName;
  /** −2 ln L in words and symbols, the numbers filled in. */
  readonly formula: string;
  readonly kernel: Kernel;
  readonly packed: Float64Array;
  readonly warnings: readonly FormWarning[];
  /** Where L is not negligible (−2 ln L below about 80); an end is infinite where L does not fall. */
  readonly reach: readonly [low: number, high: number];
  /** Places where L or a derivative jumps. */
  readonly kinks: readonly number[];
  /** A place where −2 ln L is 0. */
  readonly peak: number;
  /** −2 ln L at x, relative to its peak; +Infinity outside the support, never NaN. */
  minus2LnL(x: number): number;
  /** Quantile of the density this form is on its own domain, closed form; null where there is none. */
  readonly quantile: ((p: number) => number) | null;
}

/** Which side a limit bounds: an upper limit allows what lies below it. */
export type LimitSide = "upper" | "lower";

/** −2 ln L = 80 is e⁻⁴⁰: nothing is lost by ending an integral there. */
const REACH = Math.sqrt(80);

function form(parts: Omit<Form, "minus2LnL" | "warnings"> & { warnings?: FormWarning[] }): Form {
  const { kernel, packed } = parts;
  return {
    ...parts,
    warnings: parts.warnings ?? [],
    minus2LnL: (x) => minus2LnLOf(kernel, packed, 0, x),
  };
}

/** A number as a formula shows it: four significant digits, no trailing zeros. */
function shown(value: number): string {
  return String(Number(value.toPrecision(4))).replace("-", "−");
}

/**
 * Two-piece normal: ((x−m)/σ−)² below m, ((x−m)/σ+)² above.
 *
 * @param m - Quoted value, the mode.
 * @param sigmaMinus - One-sigma width below, positive, unit of m.
 * @param sigmaPlus - One-sigma width above, positive, unit of m.
 * @throws {DomainError} If m is not finite or a width not positive.
 *
 * Source: Wallis (2014), Statistical Science 29, 106.
 */
export function twoPiece(m: number, sigmaMinus: number, sigmaPlus: number): Form {
  requireFinite("m", m);
  requirePositive("sigmaMinus", sigmaMinus);
  requirePositive("sigmaPlus", sigmaPlus);
  const below = sigmaMinus / (sigmaMinus + sigmaPlus);
  return form({
    name: "twoPiece",
    formula: `((x − ${shown(m)})/${shown(sigmaMinus)})² below ${shown(m)}, ((x − ${shown(m)})/${shown(sigmaPlus)})² above`,
    kernel: KERNEL.twoPiece,
    packed: Float64Array.of(m, 1 / sigmaMinus, 1 / sigmaPlus),
    reach: [m - REACH * sigmaMinus, m + REACH * sigmaPlus],
    kinks: [m],
    peak: m,
    quantile: (p) => {
      requireProbability("p", p);
      return p < below
        ? m + sigmaMinus * normalQuantile((0.5 * p) / below)
        : m + sigmaPlus * normalQuantile(0.5 + (0.5 * (p - below)) / (1 - below));
    },
  });
}

/**
 * Gaussian: ((q−m)/σ)².
 *
 * @param m - Quoted value, any unit.
 * @param sigma - One-sigma width, positive, unit of m.
 * @throws {DomainError} If m is not finite or sigma not positive.
 */
export function gaussian(m: number, sigma: number): Form {
  requirePositive("sigma", sigma);
  return {
    ...twoPiece(m, sigma, sigma),
    name: "gaussian",
    formula: `((q − ${shown(m)})/${shown(sigma)})²`,
    kinks: [],
  };
}

/** Above this ratio of the two widths a quantile-matched density has a second peak. */
export const SECOND_PEAK_RATIO = 2.4;

/**
 * Quantile-matched density L = φ(u) du/dx over its global peak, where the normal score u(x) passes
 * through (m−σ−, −1), (m, 0), (m+σ+, 1) — for a level below one sigma through (m−minus, −k),
 * (m, 0), (m+plus, k) — as a quintic Hermite on each side, straight beyond.
 * Its quantiles are exactly the quoted ones.
 *
 * @param median - Quoted median, any unit.
 * @param sigmaMinus - One-sigma width below, minus/k, positive.
 * @param sigmaPlus - One-sigma width above, plus/k, positive.
 * @param k - Sigmas that the quoted level spans; matters only below 1. Default 1.
 * @throws {DomainError} If the median is not finite or a width or k not positive.
 *
 * Source: this registry's own convention; slopes as Fritsch & Butland (1984).
 */
export function quantileMatched(
  median: number,
  sigmaMinus: number,
  sigmaPlus: number,
  k = 1,
): Form {
  requireFinite("median", median);
  requirePositive("sigmaMinus", sigmaMinus);
  requirePositive("sigmaPlus", sigmaPlus);
  requirePositive("k", k);
  const packed = packQuantileMatched(median, sigmaMinus, sigmaPlus, Math.min(k, 1));
  const peak = quantileMatchedPeak(packed);
  const slope = quantileMatchedSlope(packed, 0, peak);
  const score = quantileMatchedScore(packed, 0, peak);
  packed[7] = score * score - 2 * Math.log(slope);
  const ratio = Math.max(sigmaMinus / sigmaPlus, sigmaPlus / sigmaMinus);
  const low = packed[0]!;
  const high = packed[2]!;
  return form({
    name: "quantileMatched",
    formula: `u² − 2 ln u′ over its least value, u(x) the normal score through ${shown(low)}, ${shown(median)}, ${shown(high)}`,
    kernel: KERNEL.quantileMatched,
    packed,
    reach: [median - (REACH + 1) * sigmaMinus, median + (REACH + 1) * sigmaPlus],
    kinks: [low, median, high],
    peak,
    warnings:
      ratio > SECOND_PEAK_RATIO
        ? [
            {
              code: "secondPeak",
              text: `The wider side is ${shown(ratio)} times the narrower: above ${SECOND_PEAK_RATIO} the quantile-matched density has a second peak. Two-piece is proposed.`,
            },
          ]
        : [],
    quantile: (p) => {
      const target = normalQuantile(p);
      const f = (x: number): number => quantileMatchedScore(packed, 0, x) - target;
      if (target <= packed[3]!) return low + (target - packed[3]!) / packed[5]!;
      if (target >= packed[4]!) return high + (target - packed[4]!) / packed[6]!;
      return target === 0 ? median : brentRoot(f, low, high);
    },
  });
}

/**
 * Density of a quantile-matched form, normalized on the real line.
 *
 * @param matched - A form made by quantileMatched.
 * @param x - Where, unit of the median.
 * @returns 1 / unit of x, not negative.
 */
export function quantileMatchedDensity(matched: Form, x: number): number {
  const slope = quantileMatchedSlope(matched.packed, 0, x);
  return slope > 0 ? slope * normalPdf(quantileMatchedScore(matched.packed, 0, x)) : 0;
}

/**
 * Cumulative distribution of a quantile-matched form on the real line.
 *
 * @param matched - A form made by quantileMatched.
 * @param x - Where, unit of the median.
 * @returns In [0, 1].
 */
export function quantileMatchedCdf(matched: Form, x: number): number {
  return normalCdf(quantileMatchedScore(matched.packed, 0, x));
}

function packQuantileMatched(
  median: number,
  sigmaMinus: number,
  sigmaPlus: number,
  score: number,
): Float64Array {
  const h0 = sigmaMinus * score;
  const h1 = sigmaPlus * score;
  const d0 = 1 / sigmaMinus;
  const d1 = 1 / sigmaPlus;
  const w1 = 2 * h1 + h0;
  const w2 = h1 + 2 * h0;
  const slope = (w1 + w2) / (w1 / d0 + w2 / d1);
  const curvature = (2 * (d1 - d0)) / (h0 + h1);
  const packed = new Float64Array(20);
  packed.set([median - h0, median, median + h1, -score, score, d0, d1, 0]);
  packed.set(quintic(h0, -score, 0, d0, slope, 0, curvature), 8);
  packed.set(quintic(h1, 0, score, slope, d1, curvature, 0), 14);
  return packed;
}

/** Coefficients in t from 0 to 1 of the quintic with these values, slopes and curvatures at its ends. */
function quintic(
  h: number,
  v0: number,
  v1: number,
  s0: number,
  s1: number,
  k0: number,
  k1: number,
): number[] {
  const c1 = h * s0;
  const c2 = 0.5 * h * h * k0;
  const value = v1 - v0 - c1 - c2;
  const slope = h * s1 - c1 - 2 * c2;
  const curvature = h * h * k1 - 2 * c2;
  return [
    v0,
    c1,
    c2,
    10 * value - 4 * slope + 0.5 * curvature,
    -15 * value + 7 * slope - curvature,
    6 * value - 3 * slope + 0.5 * curvature,
  ];
}

/** Place of the global peak; outside the nodes the density only falls, so that it lies between them. */
function quantileMatchedPeak(packed: Float64Array): number {
  const low = packed[0]!;
  const high = packed[2]!;
  const steps = 400;
  const heightAt = (x: number): number => {
    const slope = quantileMatchedSlope(packed, 0, x);
    const u = quantileMatchedScore(packed, 0, x);
    return slope > 0 ? u * u - 2 * Math.log(slope) : Infinity;
  };
  let best = low;
  let least = Infinity;
  for (let i = 0; i <= steps; i++) {
    const x = low + ((high - low) * i) / steps;
    const height = heightAt(x);
    if (height < least) {
      least = height;
      best = x;
    }
  }
  // d/dx (½u² − ln u′) = u u′ − u″/u′ changes sign at the peak.
  const derivative = (x: number): number => {
    const slope = quantileMatchedSlope(packed, 0, x);
    return (
      quantileMatchedScore(packed, 0, x) * slope - quantileMatchedCurvature(packed, 0, x) / slope
    );
  };
  const left = Math.max(low, best - (high - low) / steps);
  const right = Math.min(high, best + (high - low) / steps);
  return derivative(left) < 0 && derivative(right) > 0 ? brentRoot(derivative, left, right) : best;
}

/**
 * Variable width: (x−m)²/(V + V′(x−m)), +∞ where the denominator is not positive. The widths are the
 * quoted ones, so that −2 ln L is k² at both quoted ends.
 *
 * @param m - Quoted value.
 * @param minus - Quoted width below, positive.
 * @param plus - Quoted width above, positive.
 * @param k - Sigmas that the quoted level spans, positive; V = minus·plus/k², V′ = (plus − minus)/k².
 * @throws {DomainError} If m is not finite or a width or k not positive.
 *
 * Source: Barlow (2004), arXiv:physics/0406120, linear variance.
 */
export function variableWidth(m: number, minus: number, plus: number, k: number): Form {
  requireFinite("m", m);
  requirePositive("minus", minus);
  requirePositive("plus", plus);
  requirePositive("k", k);
  const variance = (minus * plus) / (k * k);
  const change = (plus - minus) / (k * k);
  // d² = 80 (V + V′d): the two places where −2 ln L is 80.
  const root = Math.sqrt(1600 * change * change + 80 * variance);
  return form({
    name: "variableWidth",
    formula: `(x − ${shown(m)})²/(${shown(variance)} + ${shown(change)} (x − ${shown(m)})), +∞ where the denominator is not positive`,
    kernel: KERNEL.variableWidth,
    packed: Float64Array.of(m, variance, change),
    reach: [m + 40 * change - root, m + 40 * change + root],
    kinks: [],
    peak: m,
    quantile: null,
  });
}

/**
 * Width of a half-Gaussian on [0, 1] about 0 that leaves the fraction C of its area below the limit:
 * [Φ(L/s) − ½]/[Φ(1/s) − ½] = C.
 *
 * @param limit - Upper limit L, between 0 and C.
 * @param level - C, between 0 and 1.
 * @returns The width s; Infinity where the limit excludes no more than a flat prior does (L ≥ C).
 * @throws {DomainError} If limit or level is not strictly between 0 and 1.
 */
export function boundedHalfGaussianWidth(limit: number, level: number): number {
  requireProbability("limit", limit);
  requireProbability("level", level);
  if (limit >= level) return Infinity;
  // Solved for r = 1/s: the area is a smooth function of it, C → limit as r → 0, → 1 as r → ∞.
  const area = (r: number): number => erf(limit * r * Math.SQRT1_2) / erf(r * Math.SQRT1_2) - level;
  // Without the bound at 1 the width is limit/k: r at least that makes the area at least C.
  const high = (sigmasOfLevel(level) / limit) * (1 + 1e-9);
  let low = Math.min(1, high / 2);
  while (area(low) > 0 && low > 1e-9) low /= 2;
  return low <= 1e-9 ? Infinity : 1 / brentRoot(area, low, high);
}

/**
 * Half-Gaussian about 0 (upper limit) or 1 (lower) within [0, 1], the width solved so that the
 * fraction C of its area lies on the allowed side.
 *
 * @param side - Upper or lower limit.
 * @param limit - The limit, strictly between 0 and 1.
 * @param level - C, strictly between 0 and 1.
 * @throws {DomainError} If limit or level is outside its range.
 */
export function halfGaussianBounded(side: LimitSide, limit: number, level: number): Form {
  const allowed = side === "upper" ? limit : 1 - limit;
  const sigma = boundedHalfGaussianWidth(allowed, level);
  const centre = side === "upper" ? 0 : 1;
  if (sigma === Infinity)
    return { ...saysNothing(side, limit, level), name: "halfGaussianBounded" };
  const whole = erf(Math.SQRT1_2 / sigma);
  /** Distance from the centre that holds the fraction q of the area. */
  const distance = (q: number): number => sigma * normalQuantile(0.5 + 0.5 * q * whole);
  return form({
    name: "halfGaussianBounded",
    formula: `((x − ${centre})/${shown(sigma)})² on 0 to 1`,
    kernel: KERNEL.twoPiece,
    packed: Float64Array.of(centre, 1 / sigma, 1 / sigma),
    reach: side === "upper" ? [0, Math.min(1, REACH * sigma)] : [Math.max(0, 1 - REACH * sigma), 1],
    kinks: [],
    peak: centre,
    quantile: (p) => {
      requireProbability("p", p);
      return side === "upper" ? distance(p) : 1 - distance(1 - p);
    },
  });
}

/** A limit that excludes no more than a flat prior does carries nothing. */
function saysNothing(side: LimitSide, limit: number, level: number): Form {
  return form({
    name: "halfGaussianBounded",
    formula: "0",
    kernel: KERNEL.flat,
    packed: new Float64Array(1),
    reach: [0, 1],
    kinks: [],
    peak: side === "upper" ? 0 : 1,
    warnings: [
      {
        code: "saysNothing",
        text: `A flat prior on 0 to 1 already puts ${shown(100 * (side === "upper" ? limit : 1 - limit))} % on the allowed side of ${shown(limit)}: at ${shown(100 * level)} % this limit says nothing.`,
      },
    ],
    quantile: (p) => requireProbability("p", p),
  });
}

/**
 * Half-Gaussian with the width of an unbounded variable: (x/(limit/k))² for an upper limit,
 * ((1−x)/((1−limit)/k))² for a lower limit on a fraction.
 *
 * @param side - Upper or lower limit; lower ones need a variable that ends at 1.
 * @param limit - The limit; positive for an upper, below 1 for a lower one.
 * @param k - Sigmas that the level spans, positive.
 * @throws {DomainError} If the limit lies on the wrong side or k is not positive.
 */
export function halfGaussianUnbounded(side: LimitSide, limit: number, k: number): Form {
  requirePositive("k", k);
  const centre = side === "upper" ? 0 : 1;
  const sigma = requirePositive("limit's distance", side === "upper" ? limit : 1 - limit) / k;
  return form({
    name: "halfGaussianUnbounded",
    formula: `((x − ${centre})/${shown(sigma)})²`,
    kernel: KERNEL.twoPiece,
    packed: Float64Array.of(centre, 1 / sigma, 1 / sigma),
    reach: side === "upper" ? [0, REACH * sigma] : [1 - REACH * sigma, 1],
    kinks: [],
    peak: centre,
    quantile: (p) => {
      requireProbability("p", p);
      return side === "upper"
        ? sigma * normalQuantile(0.5 + 0.5 * p)
        : 1 - sigma * normalQuantile(1 - 0.5 * p);
    },
  });
}

/**
 * Flat, then Gaussian: 0 on the allowed side of the base, ((x−base)/s)² beyond.
 *
 * @param side - Upper or lower limit.
 * @param base - Where the fall begins.
 * @param s - One-sigma width of the fall: own sigma over k, positive.
 * @throws {DomainError} If base is not finite or s not positive.
 */
export function flatThenGaussian(side: LimitSide, base: number, s: number): Form {
  requireFinite("base", base);
  requirePositive("s", s);
  const low = side === "upper" ? -Infinity : base;
  const high = side === "upper" ? base : Infinity;
  return form({
    name: "flatThenGaussian",
    formula: `0 ${side === "upper" ? "up to" : "from"} ${shown(base)}, ((x − ${shown(base)})/${shown(s)})² ${side === "upper" ? "above" : "below"}`,
    kernel: KERNEL.plateau,
    packed: Float64Array.of(low, high, 1 / s),
    reach: side === "upper" ? [-Infinity, base + REACH * s] : [base - REACH * s, Infinity],
    kinks: [base],
    peak: base,
    quantile: null,
  });
}

/**
 * Smoothed step: −2 ln ½ erfc((x−u)/(√2 s)) for an upper limit; a lower limit mirrors.
 *
 * @param side - Upper or lower limit.
 * @param place - Where L is one half.
 * @param s - Width of the step, positive.
 * @throws {DomainError} If place is not finite or s not positive.
 */
export function smoothedStep(side: LimitSide, place: number, s: number): Form {
  requireFinite("place", place);
  requirePositive("s", s);
  const upper = side === "upper";
  return form({
    name: "smoothedStep",
    formula: upper
      ? `−2 ln ½ erfc((x − ${shown(place)})/(√2 × ${shown(s)}))`
      : `−2 ln ½ erfc((${shown(place)} − x)/(√2 × ${shown(s)}))`,
    kernel: KERNEL.smoothedStep,
    packed: Float64Array.of(place, (upper ? 1 : -1) / (Math.SQRT2 * s)),
    reach: upper ? [-Infinity, place + REACH * s] : [place - REACH * s, Infinity],
    // No kink, but where a quadrature and a drawing have to look.
    kinks: [place],
    peak: upper ? -Infinity : Infinity,
    quantile: null,
  });
}

/**
 * Hard step: 0 on the allowed side, the limit included, +∞ beyond.
 *
 * @param side - Upper or lower limit.
 * @param limit - The limit, any unit.
 * @throws {DomainError} If the limit is not finite.
 */
export function hardStep(side: LimitSide, limit: number): Form {
  requireFinite("limit", limit);
  const low = side === "upper" ? -Infinity : limit;
  const high = side === "upper" ? limit : Infinity;
  return form({
    name: "hardStep",
    formula: `0 ${side === "upper" ? "up to" : "from"} ${shown(limit)}, +∞ ${side === "upper" ? "above" : "below"}`,
    kernel: KERNEL.hardStep,
    packed: Float64Array.of(low, high),
    reach: [low, high],
    kinks: [limit],
    peak: limit,
    quantile: null,
  });
}

/**
 * Tail width of a band such that a flat prior on the real line puts exactly C inside: W(1−C)/(C√(2π)).
 *
 * @param low - Lower end.
 * @param high - Upper end, above low.
 * @param level - C, strictly between 0 and 1.
 * @returns One-sigma width of the tails, unit of the ends.
 * @throws {DomainError} If the ends are out of order or the level is outside its range.
 */
export function bandTailSigma(low: number, high: number, level: number): number {
  requireProbability("level", level);
  requirePositive("width", high - low);
  return ((high - low) * (1 - level)) / (level * Math.sqrt(2 * Math.PI));
}

/**
 * Band: 0 inside [low, high], (distance/s)² outside.
 *
 * @param low - Lower end.
 * @param high - Upper end, above low.
 * @param level - C, the probability inside, strictly between 0 and 1.
 * @param range - Range of the variable; a band that touches its end is warned of.
 * @throws {DomainError} If the ends are not finite and ordered or the level is outside its range.
 */
export function band(
  low: number,
  high: number,
  level: number,
  range: readonly [number, number] = [-Infinity, Infinity],
): Form {
  requireFinite("low", low);
  requireFinite("high", high);
  const s = bandTailSigma(low, high, level);
  return bandForm("band", low, high, s, range);
}

/**
 * Band with wide tails: 0 inside, (distance/w)² outside with w = half-width/k.
 *
 * @param low - Lower end.
 * @param high - Upper end, above low.
 * @param k - Sigmas that the quoted level spans, positive.
 * @param range - Range of the variable; a band that touches its end is warned of.
 * @throws {DomainError} As `band`, with k positive in place of the level.
 */
export function bandWideTails(
  low: number,
  high: number,
  k: number,
  range: readonly [number, number] = [-Infinity, Infinity],
): Form {
  requireFinite("low", low);
  requireFinite("high", high);
  requirePositive("k", k);
  return bandForm("bandWideTails", low, high, requirePositive("width", high - low) / 2 / k, range);
}

function bandForm(
  name: FormName,
  low: number,
  high: number,
  s: number,
  range: readonly [number, number],
): Form {
  // Area of both half-Gaussian tails together.
  const tails = s * Math.sqrt(2 * Math.PI);
  const whole = high - low + tails;
  const touches = low <= range[0] || high >= range[1];
  return form({
    name,
    formula: `0 from ${shown(low)} to ${shown(high)}, (distance/${shown(s)})² outside`,
    kernel: KERNEL.plateau,
    packed: Float64Array.of(low, high, 1 / s),
    reach: [low - REACH * s, high + REACH * s],
    kinks: [low, high],
    peak: 0.5 * (low + high),
    warnings: touches
      ? [
          {
            code: "touchesEdge",
            text: "The band touches the end of the range of its quantity: a limit is proposed.",
          },
        ]
      : [],
    quantile: (p) => {
      requireProbability("p", p);
      const area = p * whole;
      if (area < tails / 2) return low + s * normalQuantile(area / tails);
      if (area > whole - tails / 2) return high - s * normalQuantile((whole - area) / tails);
      return low + (area - tails / 2);
    },
  });
}

/**
 * Tabulated curve: ln p linear between nodes, over its peak, +∞ outside. Outer zeros are trimmed; a
 * zero between positive values is refused, since ln p has no value there.
 *
 * @param x - Places, strictly increasing, [n].
 * @param p - Density or likelihood at those places, not negative, any normalization, [n].
 * @throws {DomainError} If the columns don't fit, fewer than two positive values remain, or one
 *   between positive values is zero.
 */
export function tabulated(x: readonly number[], p: readonly number[]): Form {
  if (x.length !== p.length) {
    throw new DomainError(
      "curve",
      `${x.length} and ${p.length} values`,
      "two equally long columns",
    );
  }
  x.forEach((value, i) => {
    requireFinite(`x[${i}]`, value);
    if (i > 0 && !(value > x[i - 1]!)) throw new DomainError(`x[${i}]`, value, `above ${x[i - 1]}`);
  });
  p.forEach((value, i) => {
    if (!(value >= 0 && value < Infinity))
      throw new DomainError(`p[${i}]`, value, "zero or positive");
  });
  const first = p.findIndex((value) => value > 0);
  const last = p.findLastIndex((value) => value > 0);
  const n = last - first + 1;
  if (first < 0 || n < 2)
    throw new DomainError("curve", "too little", "positive at two places or more");
  const xs = x.slice(first, last + 1);
  const ps = p.slice(first, last + 1);
  const zero = ps.findIndex((value) => value === 0);
  if (zero >= 0) throw new DomainError(`p[${first + zero}]`, 0, "positive between positive values");
  const top = Math.max(...ps);
  const step = (xs[n - 1]! - xs[0]!) / (n - 1);
  const uniform = xs.every((value, i) => Math.abs(value - xs[0]! - i * step) < 1e-13 * step);
  const packed = new Float64Array(2 + 2 * n);
  packed[0] = n;
  packed[1] = uniform ? 1 / step : 0;
  packed.set(xs, 2);
  packed.set(
    ps.map((value) => Math.log(value / top)),
    2 + n,
  );
  return form({
    name: "tabulated",
    formula: `−2 ln(p/max p), ln p linear between ${n} nodes from ${shown(xs[0]!)} to ${shown(xs[n - 1]!)}, +∞ outside`,
    kernel: KERNEL.tabulated,
    packed,
    reach: [xs[0]!, xs[n - 1]!],
    kinks: xs,
    peak: xs[ps.indexOf(top)]!,
    quantile: tabulatedQuantile(xs, packed.slice(2 + n)),
  });
}

/** Quantile of a density whose logarithm is linear in each cell, closed form. */
function tabulatedQuantile(xs: readonly number[], lnp: Float64Array): (p: number) => number {
  const cumulative = new Float64Array(xs.length);
  for (let i = 0; i + 1 < xs.length; i++) {
    const rise = lnp[i + 1]! - lnp[i]!;
    const mean = Math.abs(rise) < 1e-12 ? 1 : Math.expm1(rise) / rise;
    cumulative[i + 1] = cumulative[i]! + (xs[i + 1]! - xs[i]!) * Math.exp(lnp[i]!) * mean;
  }
  return (p) => {
    requireProbability("p", p);
    const target = p * cumulative[xs.length - 1]!;
    let i = 0;
    while (i + 2 < xs.length && cumulative[i + 1]! < target) i++;
    const h = xs[i + 1]! - xs[i]!;
    const rise = lnp[i + 1]! - lnp[i]!;
    const part = (target - cumulative[i]!) / (h * Math.exp(lnp[i]!));
    return xs[i]! + h * (Math.abs(rise) < 1e-12 ? part : Math.log1p(part * rise) / rise);
  };
}
