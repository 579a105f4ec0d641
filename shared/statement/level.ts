/** Credible levels: their probability and their width in sigma. */
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
