import type { History } from "~shared/history/history";
import { integrateAdaptive } from "~shared/numerics/quadrature";

/**
 * −2 ln of the likelihood averaged over an uncertain redshift: −2 ln of the mean of L(x(z)) over
 * [zLow, zHigh].
 *
 * @param minus2LnL - −2 ln L of the row at a model value, relative to its peak.
 * @param history - The model; its breaks split the integral.
 * @param zLow - Lower end of the redshift.
 * @param zHigh - Upper end, above zLow.
 * @returns −2 ln relative to the same peak; +Infinity where L is zero throughout.
 */
export function averagedMinus2LnL(
  minus2LnL: (model: number) => number,
  history: Pick<History, "x" | "breaks">,
  zLow: number,
  zHigh: number,
): number {
  // The least value is taken out, so that a very unlikely history does not underflow.
  let least = Infinity;
  const samples = 128;
  for (let i = 0; i <= samples; i++) {
    least = Math.min(least, minus2LnL(history.x(zLow + ((zHigh - zLow) * i) / samples)));
  }
  if (least === Infinity) return Infinity;
  const likelihood = (z: number): number => Math.exp(-0.5 * (minus2LnL(history.x(z)) - least));
  const ends = [zLow, ...history.breaks.filter((z) => z > zLow && z < zHigh), zHigh];
  let area = 0;
  for (let i = 0; i + 1 < ends.length; i++) {
    area += integrateAdaptive(likelihood, ends[i]!, ends[i + 1]!, 1e-11);
  }
  return least - 2 * Math.log(area / (zHigh - zLow));
}
