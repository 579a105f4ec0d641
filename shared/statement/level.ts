/** Credible levels: their probability and their width in sigma. */
import { DomainError } from "~shared/errors/DomainError";

import { parseDecimal } from "./decimal";
import type { Level } from "./fields";

/** Probability of each named level; one sigma is 0.6827 and a printed 68 % is 0.68: the record keeps which. */
export const LEVEL_PROBABILITY: Record<Exclude<Level, "other" | "notStated">, number> = {
  oneSigma: 0.6827,
  percent68: 0.68,
  percent90: 0.9,
  percent95: 0.95,
  twoSigma: 0.9545,
};

/**
 * Probability a statement's level stands for.
 *
 * @param level - The level's name, or null while open.
 * @param levelPercent - Percent as printed, read only for "other".
 * @returns Between 0 and 1, both excluded; null when not stated, open or not a percentage.
 */
export function levelProbability(level: Level | null, levelPercent: string | null): number | null {
  if (level === null || level === "notStated") return null;
  if (level !== "other") return LEVEL_PROBABILITY[level];
  const percent = parseDecimal(levelPercent);
  if (percent === null || percent.lte(0) || percent.gte(100)) return null;
  const probability = percent.div(100).toNumber();
  return probability > 0 && probability < 1 ? probability : null;
}

/**
 * Half-width in sigma of the central interval of a standard normal: k = quantile of (1 + C)/2.
 *
 * @param probability - C, between 0 and 1, both excluded.
 * @throws {DomainError} Outside that range.
 */
export function sigmasAtLevel(probability: number): number {
  if (!(probability > 0 && probability < 1)) {
    throw new DomainError("probability", probability, "between 0 and 1, both excluded");
  }
  // The upper tail (1 − C)/2 keeps its digits for levels near one.
  return -normalQuantile((1 - probability) / 2);
}

function ratio(r: number, over: readonly number[], under: readonly number[]): number {
  const sum = (terms: readonly number[]) => terms.reduceRight((total, term) => total * r + term, 0);
  return sum(over) / sum(under);
}

/**
 * Standard normal quantile for 0 < p < 1, relative error about 1e-16.
 * Source: Wichura (1988), Applied Statistics 37, 477, algorithm AS 241 (PPND16).
 */
function normalQuantile(p: number): number {
  const q = p - 0.5;
  if (Math.abs(q) <= 0.425) return q * ratio(0.180625 - q * q, CENTRE_OVER, CENTRE_UNDER);
  const r = Math.sqrt(-Math.log(q < 0 ? p : 1 - p));
  const size = r <= 5 ? ratio(r - 1.6, NEAR_OVER, NEAR_UNDER) : ratio(r - 5, FAR_OVER, FAR_UNDER);
  return q < 0 ? -size : size;
}

const CENTRE_OVER = [
  3.387132872796366608, 133.14166789178437745, 1971.5909503065514427, 13731.693765509461125,
  45921.953931549871457, 67265.770927008700853, 33430.575583588128105, 2509.0809287301226727,
];
const CENTRE_UNDER = [
  1, 42.313330701600911252, 687.1870074920579083, 5394.1960214247511077, 21213.794301586595867,
  39307.89580009271061, 28729.085735721942674, 5226.495278852854561,
];
const NEAR_OVER = [
  1.42343711074968357734, 4.6303378461565452959, 5.7694972214606914055, 3.64784832476320460504,
  1.27045825245236838258, 0.24178072517745061177, 0.0227238449892691845833,
  7.7454501427834140764e-4,
];
const NEAR_UNDER = [
  1, 2.05319162663775882187, 1.6763848301838038494, 0.68976733498510000455, 0.14810397642748007459,
  0.0151986665636164571966, 5.475938084995344946e-4, 1.05075007164441684324e-9,
];
const FAR_OVER = [
  6.6579046435011037772, 5.4637849111641143699, 1.7848265399172913358, 0.29656057182850489123,
  0.026532189526576123093, 0.0012426609473880784386, 2.71155556874348757815e-5,
  2.01033439929228813265e-7,
];
const FAR_UNDER = [
  1, 0.59983220655588793769, 0.13692988092273580531, 0.0148753612908506148525,
  7.868691311456132591e-4, 1.8463183175100546818e-5, 1.4215117583164458887e-7,
  2.04426310338993978564e-15,
];
