/** x(z) under a posterior, and of one history. */
import type { Background } from "~shared/cosmology/background";
import type { FitFamily } from "~shared/inference";
import type { ModelRequests } from "~shared/likelihood/compile";

import type { Cloud } from "./cloud";
import { rounded } from "./densities";
import type { FamilyChoice, HistoryBand } from "./request";

// Taken once: in a sandboxed realm every look-up of a global costs more than the arithmetic.
const { floor, max, min, round } = Math;

const STEP = 0.1;
const LOWEST = 4;
const HIGHEST = 20;
/** Bins of x from 0 to 1. */
const BINS = 4096;
/** Draws enough for quantiles that are drawn. */
const MOST_DRAWS = 8000;
const PROBABILITIES = [0.02275, 0.15865, 0.5, 0.84135, 0.97725] as const;

/** Redshifts of the band: 4 to 20 in steps of 0.1, and as far as a free form goes. */
export function bandRedshifts(family: FamilyChoice): number[] {
  const [low, high] = family.kind === "freeForm" ? family.ends : [LOWEST, HIGHEST];
  const from = round(min(low, LOWEST) / STEP);
  const to = round(max(high, HIGHEST) / STEP);
  return Array.from({ length: to - from + 1 }, (_, i) => rounded((from + i) * STEP, 6));
}

function requestsAt(z: readonly number[]): ModelRequests {
  const none = new Float64Array(0);
  return {
    points: Float64Array.from(z),
    binLows: none,
    binHighs: none,
    depthLows: none,
    depthHighs: none,
    fractions: none,
    durations: [],
    size: z.length,
  };
}

/** x at each redshift for one history. */
export function historyAt(
  family: FitFamily,
  background: Background,
  z: readonly number[],
  theta: ArrayLike<number>,
): number[] {
  const out = new Float64Array(z.length);
  family.predictor(requestsAt(z), background)(theta, out);
  return Array.from(out, (value) => rounded(value, 5));
}

/** Quantiles of x at each redshift. */
export function historyBand(
  family: FitFamily,
  background: Background,
  z: readonly number[],
  cloud: Cloud,
): HistoryBand {
  const { theta, dimension, corners } = cloud;
  const stride = corners.length === 1 ? max(1, floor(cloud.cells.length / MOST_DRAWS)) : 1;
  const cells = cloud.cells.filter((_, c) => c % stride === 0);
  const masses = cloud.masses.filter((_, c) => c % stride === 0);

  // Each place once, a place's answers together.
  const n = z.length;
  const predict = family.predictor(requestsAt(z), background);
  const slot = new Int32Array(theta.length / dimension).fill(-1);
  let places = 0;
  for (const cell of cells) {
    for (const corner of corners) if (slot[cell + corner]! < 0) slot[cell + corner] = places++;
  }
  const x = new Float32Array(places * n);
  const out = new Float64Array(n);
  for (let k = 0; k < slot.length; k++) {
    const at = slot[k]!;
    if (at < 0) continue;
    predict(theta.subarray(k * dimension, (k + 1) * dimension), out);
    x.set(out, at * n);
  }
  const from = cells.map((cell) => slot[cell]! * n);
  const others = corners.slice(1).map((corner) => cells.map((cell) => slot[cell + corner]! * n));

  const quantiles = PROBABILITIES.map(() => new Array<number>(n));
  const mass = new Float64Array(BINS);
  for (let i = 0; i < n; i++) {
    mass.fill(0);
    for (let c = 0; c < cells.length; c++) {
      let a = x[from[c]! + i]!;
      let b = a;
      for (const other of others) {
        const value = x[other[c]! + i]!;
        if (value < a) a = value;
        else if (value > b) b = value;
      }
      spread(mass, a * BINS, b * BINS, masses[c]!);
    }
    PROBABILITIES.forEach((p, q) => (quantiles[q]![i] = quantileOf(mass, p)));
  }
  const [low95, low68, median, high68, high95] = quantiles;
  return {
    z,
    low95: low95!,
    low68: low68!,
    median: median!,
    high68: high68!,
    high95: high95!,
  };
}

function spread(mass: Float64Array, a: number, b: number, amount: number): void {
  const first = min(BINS - 1, a | 0);
  const last = min(BINS - 1, b | 0);
  if (first === last) {
    mass[first]! += amount;
    return;
  }
  const each = amount / (b - a);
  mass[first]! += each * (first + 1 - a);
  for (let k = first + 1; k < last; k++) mass[k]! += each;
  mass[last]! += each * (b - last);
}

function quantileOf(mass: Float64Array, p: number): number {
  let total = 0;
  for (let k = 0; k < BINS; k++) total += mass[k]!;
  const target = p * total;
  let sum = 0;
  for (let k = 0; k < BINS; k++) {
    const next = sum + mass[k]!;
    // The first bin holds what is ionized all but fully.
    if (next >= target) return k === 0 ? 0 : rounded((k + (target - sum) / mass[k]!) / BINS, 4);
    sum = next;
  }
  return 1;
}
