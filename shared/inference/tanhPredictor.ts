import type { Background } from "~shared/cosmology/background";
import { tanhHistory } from "~shared/history/tanh";
import type { FitParameter } from "~shared/inference/families";
import { depthSurfaces, type Predictor, rootsPredictor } from "~shared/inference/predictor";
import type { ModelRequests } from "~shared/likelihood/compile";
import { gaussLegendre } from "~shared/numerics/quadrature";

// Taken once: in a sandboxed realm every look-up of a global costs more than the arithmetic.
const { cbrt, exp, log, sqrt } = Math;

const RULE = gaussLegendre(8);
/** A bin is cut into 1, 2, 4 … panels, as narrow as the width of the tanh needs. */
const MOST_DOUBLINGS = 7;

/** Places y = (1+z)^1.5 of a bin's nodes for each number of panels; found when first needed. */
interface Bin {
  readonly low: number;
  readonly width: number;
  readonly nodes: (Float64Array | null)[];
}

/**
 * The tanh family without objects: one exponential a point, optical depths from a surface over the
 * prior's box. Agrees with tanhHistory to 1e-10 in x and 1e-9 in optical depth.
 */
export function tanhPredictor(
  requests: ModelRequests,
  background: Background,
  parameters: readonly FitParameter[],
): Predictor {
  const yPoints = requests.points.map((z) => (1 + z) * sqrt(1 + z));
  const bins: Bin[] = Array.from(requests.binLows, (low, i) => ({
    low,
    width: requests.binHighs[i]! - low,
    nodes: new Array<Float64Array | null>(MOST_DOUBLINGS + 1).fill(null),
  }));
  const depths = depthSurfaces(requests, background, parameters, (zRe, deltaZ) =>
    tanhHistory({ zRe, deltaZ }),
  );
  const roots = rootsPredictor(requests, background);
  const hasRoots = requests.fractions.length + requests.durations.length > 0;

  return (theta, out) => {
    const zRe = theta[0]!;
    const deltaZ = theta[1]!;
    const root = sqrt(1 + zRe);
    const yRe = (1 + zRe) * root;
    const rate = 2 / (1.5 * root * deltaZ);
    let at = 0;
    for (let i = 0; i < yPoints.length; i++) {
      const t = rate * (yPoints[i]! - yRe);
      if (t > 0) out[at++] = 1 / (1 + exp(-t));
      else {
        const e = exp(t);
        out[at++] = e / (1 + e);
      }
    }
    for (let i = 0; i < bins.length; i++) out[at++] = binMean(bins[i]!, yRe, rate, deltaZ);
    for (let i = 0; i < depths.length; i++) out[at++] = depths[i]!(zRe, deltaZ);
    if (hasRoots) {
      roots((f) => {
        const y = yRe + log(f / (1 - f)) / rate;
        return y >= 1 ? cbrt(y) ** 2 - 1 : Number.NaN;
      }, out);
    }
  };
}

function binMean(bin: Bin, yRe: number, rate: number, deltaZ: number): number {
  let doublings = 0;
  // Eight nodes a panel of 1.2 Δz hold 5e-12 (the tanh's poles lie π/2 Δz off the axis).
  for (let w = bin.width; w > 1.2 * deltaZ && doublings < MOST_DOUBLINGS; w /= 2) doublings++;
  const nodes = (bin.nodes[doublings] ??= nodesOf(bin, 1 << doublings));
  const { weights } = RULE;
  let sum = 0;
  for (let k = 0; k < nodes.length; k++) {
    sum += weights[k & 7]! / (1 + exp(rate * (yRe - nodes[k]!)));
  }
  return sum / (2 << doublings);
}

function nodesOf({ low, width }: Bin, panels: number): Float64Array {
  const half = width / panels / 2;
  return Float64Array.from({ length: 8 * panels }, (_, k) => {
    const a = 1 + low + (2 * (k >> 3) + 1 + RULE.nodes[k & 7]!) * half;
    return a * sqrt(a);
  });
}
