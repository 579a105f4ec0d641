import type { Background } from "~shared/cosmology/background";
import { type Predictor, rootsPredictor } from "~shared/inference/predictor";
import type { ModelRequests } from "~shared/likelihood/compile";
import { gaussLegendre } from "~shared/numerics/quadrature";

/**
 * The monotone free form without objects. Between fixed redshifts x is a sum of four fixed
 * functions times values and slopes, so that points, bins and optical depths are dot products.
 *
 * @param z - All redshifts, the two fixed ends included, [n + 2]; x is 0 at the first and 1 at the last.
 */
export function freeFormPredictor(
  requests: ModelRequests,
  background: Background,
  z: readonly number[],
): Predictor {
  const n = z.length;
  const nodes = Float64Array.from(z);
  const first = nodes[0]!;
  const last = nodes[n - 1]!;
  const { points, binLows, binHighs, depthLows, depthHighs } = requests;
  // Row r: constant, weights of x [n], weights of the slopes [n].
  const stride = 1 + 2 * n;
  const linear = points.length + binLows.length + depthLows.length;
  const weights = new Float64Array(linear * stride);
  let row = 0;
  for (const at of points) addPoint(weights, row++ * stride, nodes, at, 1);
  binLows.forEach((low, i) => {
    const high = binHighs[i]!;
    const width = high - low;
    addIntegral(weights, row * stride, nodes, low, high, () => 1 / width);
    const above = Math.max(0, high - Math.max(low, last)) / width;
    weights[row++ * stride]! += above;
  });
  depthLows.forEach((z1, i) => {
    const z2 = depthHighs[i]!;
    // ∫ Q w = ∫ w up to the last node − ∫ x w between the nodes.
    const density = (at: number): number => {
      const u = Math.sqrt(1 + at);
      return (-(1 + background.fHe) * background.depthDensity(u)) / (2 * u);
    };
    addIntegral(weights, row * stride, nodes, z1, z2, density);
    if (z1 < last) {
      weights[row * stride]! +=
        (1 + background.fHe) * background.depthBetween(z1, Math.min(z2, last));
    }
    weights[row++ * stride]! += background.secondHeliumDepth(z1, z2);
  });

  const x = new Float64Array(n);
  const slopes = new Float64Array(n);
  const widths = Float64Array.from({ length: n - 1 }, (_, i) => nodes[i + 1]! - nodes[i]!);
  const roots = rootsPredictor(requests, background);
  const redshiftAt = (f: number): number => {
    for (let i = n - 2; i >= 0; i--) {
      if (x[i + 1]! >= f && x[i]! < f) return rootInCell(nodes, x, slopes, i, f);
    }
    return Number.NaN;
  };
  return (theta, out) => {
    x[0] = 0;
    for (let i = 1; i < n - 1; i++) x[i] = theta[i - 1]!;
    x[n - 1] = 1;
    monotoneSlopes(widths, x, slopes);
    for (let r = 0; r < linear; r++) {
      const at = r * stride;
      let sum = weights[at]!;
      for (let i = 0; i < n; i++) {
        sum += weights[at + 1 + i]! * x[i]! + weights[at + 1 + n + i]! * slopes[i]!;
      }
      out[r] = r < points.length ? Math.min(1, Math.max(0, sum)) : sum;
    }
    if (first >= 0) roots(redshiftAt, out);
  };
}

/** Fritsch–Butland slopes as in pchipSlopes, without allocation. */
function monotoneSlopes(h: Float64Array, x: Float64Array, slopes: Float64Array): void {
  const n = x.length;
  if (n === 2) {
    slopes.fill((x[1]! - x[0]!) / h[0]!);
    return;
  }
  for (let i = 1; i < n - 1; i++) {
    const before = (x[i]! - x[i - 1]!) / h[i - 1]!;
    const after = (x[i + 1]! - x[i]!) / h[i]!;
    if (before * after <= 0) {
      slopes[i] = 0;
      continue;
    }
    const w1 = 2 * h[i]! + h[i - 1]!;
    const w2 = h[i]! + 2 * h[i - 1]!;
    slopes[i] = (w1 + w2) / (w1 / before + w2 / after);
  }
  slopes[0] = endSlope(h[0]!, h[1]!, (x[1]! - x[0]!) / h[0]!, (x[2]! - x[1]!) / h[1]!);
  slopes[n - 1] = endSlope(
    h[n - 2]!,
    h[n - 3]!,
    (x[n - 1]! - x[n - 2]!) / h[n - 2]!,
    (x[n - 2]! - x[n - 3]!) / h[n - 3]!,
  );
}

function endSlope(h0: number, h1: number, secant0: number, secant1: number): number {
  const slope = ((2 * h0 + h1) * secant0 - h0 * secant1) / (h0 + h1);
  if (Math.sign(slope) !== Math.sign(secant0)) return 0;
  if (Math.sign(secant0) !== Math.sign(secant1) && Math.abs(slope) > 3 * Math.abs(secant0)) {
    return 3 * secant0;
  }
  return slope;
}

/** Adds factor × x(z) to the row of weights at `at`. */
function addPoint(
  weights: Float64Array,
  at: number,
  nodes: Float64Array,
  z: number,
  factor: number,
): void {
  const n = nodes.length;
  if (z <= nodes[0]!) return;
  if (z >= nodes[n - 1]!) {
    weights[at + n]! += factor;
    return;
  }
  let i = 0;
  while (nodes[i + 1]! <= z) i++;
  const h = nodes[i + 1]! - nodes[i]!;
  const t = (z - nodes[i]!) / h;
  const s = 1 - t;
  weights[at + 1 + i]! += factor * s * s * (1 + 2 * t);
  weights[at + 2 + i]! += factor * t * t * (1 + 2 * s);
  weights[at + 1 + n + i]! += factor * s * s * t * h;
  weights[at + 2 + n + i]! -= factor * t * t * s * h;
}

/** Adds ∫ x(z) density(z) dz over the part of [low, high] between the nodes. */
function addIntegral(
  weights: Float64Array,
  at: number,
  nodes: Float64Array,
  low: number,
  high: number,
  density: (z: number) => number,
): void {
  const rule = gaussLegendre(10);
  for (let i = 0; i + 1 < nodes.length; i++) {
    const from = Math.max(low, nodes[i]!);
    const to = Math.min(high, nodes[i + 1]!);
    if (!(to > from)) continue;
    const panels = Math.ceil((to - from) / 1.5);
    const half = (to - from) / panels / 2;
    for (let p = 0; p < panels; p++) {
      const centre = from + (2 * p + 1) * half;
      for (let k = 0; k < rule.nodes.length; k++) {
        const z = centre + half * rule.nodes[k]!;
        addPoint(weights, at, nodes, z, half * rule.weights[k]! * density(z));
      }
    }
  }
}

/** The root of x = f in a cell whose ends lie on both sides: bisection, then it is a cubic's. */
function rootInCell(
  nodes: Float64Array,
  x: Float64Array,
  slopes: Float64Array,
  i: number,
  f: number,
): number {
  const h = nodes[i + 1]! - nodes[i]!;
  let low = 0;
  let high = 1;
  for (let k = 0; k < 46; k++) {
    const t = 0.5 * (low + high);
    const s = 1 - t;
    const value =
      s * s * ((1 + 2 * t) * x[i]! + t * h * slopes[i]!) +
      t * t * ((1 + 2 * s) * x[i + 1]! - s * h * slopes[i + 1]!);
    if (value < f) low = t;
    else high = t;
  }
  return nodes[i]! + h * 0.5 * (low + high);
}
