/** A posterior as masses, for drawing: the cells of a grid, or draws. */
import { DERIVED_NAMES, type FitProblem, type GridPosterior } from "~shared/inference";

// Taken once: in a sandboxed realm every look-up of a global costs more than the arithmetic.
const { exp, max, min } = Math;

/**
 * Masses, each spread evenly between the values at its corners. A draw has one corner: itself.
 */
export interface Cloud {
  /** Parameters of each place, [places, dimension]. */
  readonly theta: Float64Array;
  readonly dimension: number;
  /** Parameters and derived quantities by name, NaN for none; [places] each. */
  readonly columns: ReadonlyMap<string, Float64Array>;
  /** First corner of each mass, an index of a place; [masses]. */
  readonly cells: Int32Array;
  /** From a mass's first corner to all of them. */
  readonly corners: readonly number[];
  /** Their sum is 1; [masses]. */
  readonly masses: Float64Array;
  /** Independent draws they are worth; infinite for a grid. */
  readonly effectiveSize: number;
}

/** Points along a side that a drawing needs. */
const DRAWN_POINTS = 129;
/** Masses below this part of the largest are left out. */
const NEGLIGIBLE = 1e-6;

/** A grid's posterior, every second, fourth ... point of it. */
export function gridCloud(problem: FitProblem, posterior: GridPosterior): Cloud {
  const { dimension } = problem;
  const { points, lows, highs, logLikelihood } = posterior;
  const stride = max(1, (points - 1) / (DRAWN_POINTS - 1));
  const n = (points - 1) / stride + 1;
  const places = n ** dimension;
  const top = logLikelihood.reduce((most, value) => max(most, value), -Infinity);
  const density = new Float64Array(places);
  const theta = new Float64Array(places * dimension);
  const at = (d: number, i: number): number =>
    i === n - 1 ? highs[d]! : lows[d]! + (i * (highs[d]! - lows[d]!)) / (n - 1);
  for (let k = 0; k < places; k++) {
    const i = dimension === 1 ? k : (k / n) | 0;
    const j = k % n;
    const source = dimension === 1 ? i * stride : i * stride * points + j * stride;
    density[k] = exp(logLikelihood[source]! - top);
    theta[k * dimension] = at(0, i);
    if (dimension === 2) theta[k * 2 + 1] = at(1, j);
  }
  const corners = dimension === 1 ? [0, 1] : [0, 1, n, n + 1];
  const cells: number[] = [];
  const masses: number[] = [];
  for (let k = 0; k < places; k++) {
    const i = dimension === 1 ? k : (k / n) | 0;
    if (i === n - 1 || (dimension === 2 && k % n === n - 1)) continue;
    let mass = 0;
    for (const corner of corners) mass += density[k + corner]!;
    if (mass < corners.length * NEGLIGIBLE) continue;
    cells.push(k);
    masses.push(mass);
  }
  const used = new Uint8Array(places);
  for (const cell of cells) for (const corner of corners) used[cell + corner] = 1;
  return {
    theta,
    dimension,
    columns: columnsOf(problem, theta, (k) => used[k] === 1),
    cells: Int32Array.from(cells),
    corners,
    masses: normalized(masses),
    effectiveSize: Infinity,
  };
}

/** Draws of equal weight. */
export function drawCloud(problem: FitProblem, theta: Float64Array, effectiveSize: number): Cloud {
  const places = theta.length / problem.dimension;
  return {
    theta,
    dimension: problem.dimension,
    columns: columnsOf(problem, theta, () => true),
    cells: Int32Array.from({ length: places }, (_, k) => k),
    corners: [0],
    masses: new Float64Array(places).fill(1 / places),
    effectiveSize,
  };
}

function normalized(masses: readonly number[]): Float64Array {
  const total = masses.reduce((sum, mass) => sum + mass, 0);
  return Float64Array.from(masses, (mass) => mass / total);
}

function columnsOf(
  problem: FitProblem,
  theta: Float64Array,
  wanted: (place: number) => boolean,
): Map<string, Float64Array> {
  const { dimension } = problem;
  const places = theta.length / dimension;
  const derived = DERIVED_NAMES.map(() => new Float64Array(places).fill(Number.NaN));
  const parameters = problem.names.map((_, d) =>
    Float64Array.from({ length: places }, (__, k) => theta[k * dimension + d]!),
  );
  const out = new Float64Array(DERIVED_NAMES.length);
  for (let k = 0; k < places; k++) {
    if (!wanted(k)) continue;
    problem.derived(theta.subarray(k * dimension, (k + 1) * dimension), out);
    for (let q = 0; q < out.length; q++) derived[q]![k] = out[q]!;
  }
  return new Map([
    ...problem.names.map((name, d): [string, Float64Array] => [name, parameters[d]!]),
    ...DERIVED_NAMES.map((name, q): [string, Float64Array] => [name, derived[q]!]),
  ]);
}

/** The ends between which a quantity lies over each mass; NaN where a corner has none. [masses] each. */
export interface Spans {
  readonly lows: Float64Array;
  readonly highs: Float64Array;
}

/** Spans of one quantity, given at each place. */
export function spansOf({ cells, corners }: Cloud, column: Float64Array): Spans {
  const lows = new Float64Array(cells.length);
  const highs = new Float64Array(cells.length);
  for (let c = 0; c < cells.length; c++) {
    const k = cells[c]!;
    let low = column[k]!;
    let high = low;
    for (const corner of corners) {
      const value = column[k + corner]!;
      low = min(low, value);
      high = max(high, value);
    }
    lows[c] = low;
    highs[c] = high;
  }
  return { lows, highs };
}
