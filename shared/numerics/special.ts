import erfLibrary from "@stdlib/math-base-special-erf";
import erfcLibrary from "@stdlib/math-base-special-erfc";
import erfcInverse from "@stdlib/math-base-special-erfcinv";
import erfcScaled from "@stdlib/math-base-special-erfcx";
import erfInverse from "@stdlib/math-base-special-erfinv";
import { requireProbability } from "~shared/numerics/require";

// Taken once: in a sandboxed realm every look-up of a global costs more than the arithmetic.
const { exp, log } = Math;

/**
 * Error function, from stdlib.
 *
 * @param x - Any real number.
 * @returns In [−1, 1].
 */
export function erf(x: number): number {
  return erfLibrary(x);
}

/**
 * Complementary error function 1 − erf(x), from stdlib; exact in relative terms until it underflows.
 *
 * @param x - Any real number.
 * @returns In [0, 2]; 0 above x ≈ 26.5.
 */
export function erfc(x: number): number {
  return erfcLibrary(x);
}

/**
 * Natural log of erfc(x), with full relative precision for any x, also where erfc underflows.
 * Uses erfc(x) = erfcx(x) exp(−x²) above zero.
 *
 * @param x - Any number, infinite ones included.
 * @returns At most ln 2; −Infinity at +Infinity.
 */
export function logErfc(x: number): number {
  if (x <= 0) return log(erfcLibrary(x));
  // erfcx underflows gently (1/(x√π)), so that the product below never does.
  return x === Infinity ? -Infinity : log(erfcScaled(x)) - x * x;
}

/**
 * Standard normal cumulative distribution Φ(x).
 *
 * @param x - In standard deviations; any number.
 * @returns In [0, 1].
 */
export function normalCdf(x: number): number {
  return 0.5 * erfcLibrary(-x * Math.SQRT1_2);
}

/**
 * Standard normal density φ(x).
 *
 * @param x - In standard deviations; any number.
 * @returns From 0 to 0.3989.
 */
export function normalPdf(x: number): number {
  return exp(-0.5 * x * x) * 0.3989422804014327;
}

/**
 * Standard normal quantile Φ⁻¹(p).
 *
 * @param p - Probability, 0 < p < 1.
 * @throws {DomainError} If p is not strictly between 0 and 1.
 */
export function normalQuantile(p: number): number {
  requireProbability("p", p);
  // erfcinv keeps the digits of a small p; the upper half mirrors.
  return p < 0.5 ? -Math.SQRT2 * erfcInverse(2 * p) : Math.SQRT2 * erfInverse(2 * p - 1);
}

/**
 * How many standard deviations a central level spans on each side: k = Φ⁻¹((1 + C)/2).
 *
 * @param level - Probability C of the central interval, 0 < C < 1; 0.68 gives 0.99446.
 * @throws {DomainError} If the level is not strictly between 0 and 1.
 */
export function sigmasOfLevel(level: number): number {
  requireProbability("level", level);
  return Math.SQRT2 * erfInverse(level);
}

/**
 * Logistic function 1/(1 + e^−t): ½(1 + tanh(t/2)) without losing digits in the tails.
 *
 * @param t - Any number.
 * @returns In [0, 1].
 */
export function logistic(t: number): number {
  if (t >= 0) return 1 / (1 + exp(-t));
  const e = exp(t);
  return e / (1 + e);
}
