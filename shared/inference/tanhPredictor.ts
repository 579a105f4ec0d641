import type { Background } from "~shared/cosmology/background";
import { tanhHistory } from "~shared/history/tanh";
import type { FitParameter } from "~shared/inference/families";
import {
  depthSurfaces,
  type LinePredictor,
  type Predictor,
  rootsPredictor,
} from "~shared/inference/predictor";
import type { ModelRequests } from "~shared/likelihood/compile";
import { PolynomialTable } from "~shared/numerics/polynomialTable";
import { gaussLegendre } from "~shared/numerics/quadrature";
import { logistic } from "~shared/numerics/special";

// Taken once: in a sandboxed realm every look-up of a global costs more than the arithmetic.
const { abs, cbrt, exp, floor, log, sqrt } = Math;

/**
 * How a bin is integrated: the widest bin in units of Δz, nodes a panel, panels. The tanh's poles lie
 * π/2 Δz off the axis; the worst error met over places and widths is 2e-11 (a test looks again).
 */
const RULES = [
  ...(
    [
      ...[[0.28, 4] as const, [0.5, 5] as const, [0.75, 6] as const, [1.05, 7] as const],
      ...[[1.4, 8] as const, [1.9, 10] as const, [2.5, 12] as const, [3.5, 16] as const],
    ] as const
  ).map(([widest, order]) => ({ widest, order, panels: 1 })),
  ...Array.from({ length: 6 }, (_, i) => ({ widest: 4.6 * 2 ** i, order: 20, panels: 2 ** i })),
];
/** For bins the transition is far from. */
const ROUGH_RULE = 3;

/** Places y = (1+z)^1.5 of a bin's nodes and their weights, for each rule; found when first needed. */
interface Bin {
  readonly low: number;
  readonly width: number;
  readonly yLow: number;
  readonly yHigh: number;
  readonly nodes: ({ y: Float64Array; weights: Float64Array } | null)[];
}

/** Beyond this |t| the logistic function is computed. */
const TABLE_END = 40;
/**
 * Good to 1e-11, and to 1e-10 of its value in the tail, whose derivatives fall as it does itself: a
 * limit in log10 x asks for those digits.
 */
const LOGISTIC = new PolynomialTable(logistic, -TABLE_END, TABLE_END, 48);

function tabulatedLogistic(t: number): number {
  return t >= -TABLE_END && t <= TABLE_END ? LOGISTIC.at(t) : farLogistic(t);
}

/** 1 to the last digit above the table, the exponential below it. */
function farLogistic(t: number): number {
  return t > 0 ? 1 : exp(t);
}

/**
 * The tanh family without objects: x from a table, optical depths from a surface over the
 * prior's box. Agrees with tanhHistory to 1e-10 in x and 1e-8 of the largest optical depth.
 *
 * @param parameters - z_re and Δz with the ends of their priors.
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

  const point = (theta: ArrayLike<number>, out: Float64Array): void => {
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
    for (let i = 0; i < depths.length; i++) out[at++] = depths[i]!.value(zRe, deltaZ);
    if (hasRoots) {
      roots((f) => redshiftAt(f, yRe, rate), out);
    }
  };

  const along = (widths: Float64Array): LinePredictor => {
    const n = widths.length;
    const rates = new Float64Array(n);
    const depthLines = depths.map((depth) => depth.along(widths));
    return (zRe, out) => {
      const root = sqrt(1 + zRe);
      const yRe = (1 + zRe) * root;
      for (let j = 0; j < n; j++) rates[j] = 2 / (1.5 * root * widths[j]!);
      let at = 0;
      for (let i = 0; i < yPoints.length; i++, at += n) {
        const dy = yPoints[i]! - yRe;
        const start = tableStart(rates, dy, 0, n);
        for (let j = 0; j < start; j++) out[at + j] = farLogistic(rates[j]! * dy);
        LOGISTIC.setScaled(rates, dy, start, n, out, at);
      }
      for (let i = 0; i < bins.length; i++, at += n) {
        out.fill(0, at, at + n);
        addBinMeans(bins[i]!, yRe, rates, widths, out, at);
      }
      for (let i = 0; i < depthLines.length; i++, at += n) depthLines[i]!(zRe, out, at);
      if (!hasRoots) return;
      for (let j = 0; j < n; j++) {
        const rate = rates[j]!;
        roots((f) => redshiftAt(f, yRe, rate), out, n, j);
      }
    };
  };
  return Object.assign(point, { along });
}

/** Redshift at which x = f, NaN for none. */
function redshiftAt(f: number, yRe: number, rate: number): number {
  const y = yRe + log(f / (1 - f)) / rate;
  return y >= 1 ? cbrt(y) ** 2 - 1 : Number.NaN;
}

/** First place from `from` on, before `to`, where descending values are at most `limit`. */
function firstAtMost(values: Float64Array, limit: number, from: number, to: number): number {
  let low = from;
  let high = to;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (values[middle]! <= limit) high = middle;
    else low = middle + 1;
  }
  return low;
}

/** First place from `from` on where rate × |dy| is inside the table; rates descend. */
function tableStart(rates: Float64Array, dy: number, from: number, to: number): number {
  const distance = abs(dy);
  return distance * rates[from]! <= TABLE_END
    ? from
    : firstAtMost(rates, TABLE_END / distance, from, to);
}

/** Adds the mean of x over a bin to a line, each stretch of widths by the rule it needs. */
function addBinMeans(
  bin: Bin,
  yRe: number,
  rates: Float64Array,
  widths: Float64Array,
  out: Float64Array,
  at: number,
): void {
  const n = rates.length;
  let to = n;
  for (let r = 0; r < RULES.length && to > 0; r++) {
    const last = r === RULES.length - 1;
    // Widths ascend: the widest ones come last and take the fewest nodes.
    let from = to;
    while (from > 0 && (last || bin.width <= RULES[r]!.widest * widths[from - 1]!)) from--;
    if (from === to) continue;
    const { y, weights } = (bin.nodes[r] ??= nodesOf(bin, RULES[r]!));
    for (let k = 0; k < y.length; k++) {
      const dy = y[k]! - yRe;
      const weight = weights[k]!;
      const start = tableStart(rates, dy, from, to);
      for (let j = from; j < start; j++) out[at + j]! += weight * farLogistic(rates[j]! * dy);
      LOGISTIC.addScaled(rates, dy, weight, start, to, out, at);
    }
    to = from;
  }
}

function binMean(bin: Bin, yRe: number, rate: number, deltaZ: number): number {
  const tLow = rate * (bin.yLow - yRe);
  if (tLow > 30) return 1;
  // Far below the transition the mean is under 1e-11 and one panel says so.
  const negligible = rate * (bin.yHigh - yRe) < -26;
  let r = negligible ? ROUGH_RULE : 0;
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
