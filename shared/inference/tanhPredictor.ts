import type { Background } from "~shared/cosmology/background";
import { tanhHistory } from "~shared/history/tanh";
import type { FitParameter } from "~shared/inference/families";
import { depthSurfaces, type Predictor, rootsPredictor } from "~shared/inference/predictor";
import type { ModelRequests } from "~shared/likelihood/compile";
import { HermiteTable } from "~shared/numerics/hermiteTable";
import { gaussLegendre } from "~shared/numerics/quadrature";
import { logistic } from "~shared/numerics/special";

// Taken once: in a sandboxed realm every look-up of a global costs more than the arithmetic.
const { cbrt, exp, floor, log, sqrt } = Math;

/**
 * How a bin is integrated: the widest bin in units of Δz, nodes a panel, panels. The tanh's poles lie
 * π/2 Δz off the axis, which leaves 1e-10 or less for each.
 */
const RULES = [
  { widest: 0.3, order: 4, panels: 1 },
  { widest: 0.75, order: 6, panels: 1 },
  ...Array.from({ length: 8 }, (_, i) => ({ widest: 1.1 * 2 ** i, order: 8, panels: 2 ** i })),
] as const;

/** Places y = (1+z)^1.5 of a bin's nodes and their weights, for each rule; found when first needed. */
interface Bin {
  readonly low: number;
  readonly width: number;
  readonly yLow: number;
  readonly yHigh: number;
  readonly nodes: ({ y: Float64Array; weights: Float64Array } | null)[];
}

/** Beyond this |t| the logistic function is computed, so that tails keep their relative digits. */
const TABLE_END = 12;
/** Good to 2e-11: |f⁗| is below 0.13. */
const LOGISTIC = new HermiteTable(
  logistic,
  (t) => logistic(t) * logistic(-t),
  -TABLE_END,
  TABLE_END,
  64,
);

function tabulatedLogistic(t: number): number {
  if (t >= -TABLE_END && t < TABLE_END) return LOGISTIC.at(t);
  if (t > 40) return 1;
  return t > 0 ? 1 / (1 + exp(-t)) : exp(t) / (1 + exp(t));
}

/**
 * The tanh family without objects: one exponential a point, optical depths from a surface over the
 * prior's box. Agrees with tanhHistory to 1e-10 in x and 1e-8 of the largest optical depth.
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
    yLow: (1 + low) * sqrt(1 + low),
    yHigh: (1 + requests.binHighs[i]!) * sqrt(1 + requests.binHighs[i]!),
    nodes: RULES.map(() => null),
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
      out[at++] = tabulatedLogistic(rate * (yPoints[i]! - yRe));
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
  const tLow = rate * (bin.yLow - yRe);
  if (tLow > 30) return 1;
  // Far below the transition the mean is under 1e-11 and one panel says so.
  const negligible = rate * (bin.yHigh - yRe) < -26;
  let r = negligible ? 2 : 0;
  while (!negligible && r < RULES.length - 1 && bin.width > RULES[r]!.widest * deltaZ) r++;
  const { y, weights } = (bin.nodes[r] ??= nodesOf(bin, RULES[r]!));
  let sum = 0;
  for (let k = 0; k < y.length; k++) sum += weights[k]! * tabulatedLogistic(rate * (y[k]! - yRe));
  return sum;
}

function nodesOf(
  { low, width }: Bin,
  { order, panels }: { order: number; panels: number },
): { y: Float64Array; weights: Float64Array } {
  const rule = gaussLegendre(order);
  const half = width / panels / 2;
  const y = new Float64Array(order * panels);
  const weights = new Float64Array(order * panels);
  for (let k = 0; k < y.length; k++) {
    const a = 1 + low + (2 * floor(k / order) + 1 + rule.nodes[k % order]!) * half;
    y[k] = a * sqrt(a);
    weights[k] = rule.weights[k % order]! / (2 * panels);
  }
  return { y, weights };
}
