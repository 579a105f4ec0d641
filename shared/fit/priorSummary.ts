import { summaryOf } from "~shared/inference/marginal";

import type { QuantitySummary } from "./request";

/** Summary of independent draws; none where one of them has no value. */
export function summaryOfDraws(name: string, draws: Float64Array): QuantitySummary[] {
  const n = draws.length;
  const mean = draws.reduce((sum, value) => sum + value, 0) / n;
  if (!Number.isFinite(mean)) return [];
  const variance = draws.reduce((sum, value) => sum + (value - mean) ** 2, 0) / (n - 1);
  const sorted = draws.slice().sort();
  const quantile = (p: number): number => {
    const place = p * (n - 1);
    const i = Math.min(Math.floor(place), n - 2);
    return sorted[i]! + (place - i) * (sorted[i + 1]! - sorted[i]!);
  };
  return [{ name, ...summaryOf(mean, Math.sqrt(variance), quantile) }];
}
