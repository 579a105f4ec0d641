/** How well a chain knows the mean of one quantity. */
export interface ChainDiagnostics {
  /** Integrated autocorrelation time, steps; averaged over the ensembles. */
  readonly autocorrelationTime: number;
  /** Independent draws that all ensembles together are worth. */
  readonly effectiveSize: number;
  /** Standard error of the mean by Monte Carlo, sd/√(effective size). */
  readonly standardError: number;
  /** √((1 − 1/n) + variance of the ensembles' means / variance within), over independent ensembles. */
  readonly rHat: number;
}

/** Sokal's window: the sum ends at the first lag of at least this many autocorrelation times. */
const WINDOW = 5;

/**
 * Integrated autocorrelation time of one ensemble: the autocorrelation averaged over its walkers, summed
 * up to Sokal's window.
 *
 * @param draws - One quantity, [steps, walkers].
 * @returns Steps, at least 1/walkers short of nothing; NaN for a quantity that never changes.
 *
 * Source: Sokal (1996), Monte Carlo Methods in Statistical Mechanics; windows as Foreman-Mackey et al. (2013).
 */
export function autocorrelationTime(draws: Float64Array, steps: number, walkers: number): number {
  const count = steps * walkers;
  // Centred and scaled walker by walker, so that one sum over all of them is the averaged autocorrelation.
  const scaled = new Float64Array(count);
  for (let w = 0; w < walkers; w++) {
    let mean = 0;
    for (let k = w; k < count; k += walkers) mean += draws[k]! / steps;
    let variance = 0;
    for (let k = w; k < count; k += walkers) variance += (draws[k]! - mean) ** 2;
    const scale = 1 / Math.sqrt(variance * walkers);
    for (let k = w; k < count; k += walkers) scaled[k] = (draws[k]! - mean) * scale;
  }
  let time = 1;
  for (let lag = 1; lag < steps; lag++) {
    const apart = lag * walkers;
    let even = 0;
    let odd = 0;
    let k = 0;
    for (; k + apart + 1 < count; k += 2) {
      even += scaled[k]! * scaled[k + apart]!;
      odd += scaled[k + 1]! * scaled[k + apart + 1]!;
    }
    if (k + apart < count) even += scaled[k]! * scaled[k + apart]!;
    time += 2 * (even + odd);
    // Also ends where a walker never moved and there is no time.
    if (!(lag < WINDOW * time)) break;
  }
  return time;
}

/**
 * Diagnostics of one quantity over independent ensembles.
 *
 * @param chains - One array per ensemble, [steps, walkers] each; two or more for R̂ to mean something.
 */
export function chainDiagnostics(
  chains: readonly Float64Array[],
  steps: number,
  walkers: number,
): ChainDiagnostics {
  const count = steps * walkers;
  const means = chains.map((chain) => chain.reduce((sum, value) => sum + value, 0) / count);
  const within =
    chains.reduce(
      (sum, chain, c) =>
        sum + chain.reduce((part, value) => part + (value - means[c]!) ** 2, 0) / (count - 1),
      0,
    ) / chains.length;
  const grand = means.reduce((sum, value) => sum + value, 0) / means.length;
  const between = means.reduce((sum, value) => sum + (value - grand) ** 2, 0) / (means.length - 1);
  const time =
    chains.reduce((sum, chain) => sum + autocorrelationTime(chain, steps, walkers), 0) /
    chains.length;
  const effectiveSize = (chains.length * count) / Math.max(time, 1e-12);
  return {
    autocorrelationTime: time,
    effectiveSize,
    standardError: Math.sqrt(within / effectiveSize),
    rHat: Math.sqrt(1 - 1 / count + between / within),
  };
}
