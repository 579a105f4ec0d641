/** Where the rows of a plot of posteriors by data set stand, and what their common axis spans. */
import type { DensityCurve, Ends } from "~shared/fit/request";

import type { Interval } from "./scales";

export interface RowPlace {
  /** Baseline of the words above the curve. */
  readonly label: number;
  readonly top: number;
  /** Foot of the curve. */
  readonly floor: number;
}

const TOP = 4;
const LABEL = 22;
const CURVE = 44;
const GAP = 10;

/** Rows from the top down; [n]. */
export function posteriorRows(n: number): { rows: RowPlace[]; bottom: number } {
  const rows = Array.from({ length: n }, (_unused, i) => {
    const start = TOP + i * (LABEL + CURVE + GAP);
    return { label: start + 15, top: start + LABEL, floor: start + LABEL + CURVE };
  });
  return { rows, bottom: TOP + n * (LABEL + CURVE + GAP) };
}

/** Part of its own 68.27 % interval that each row shows beyond it. */
const BEYOND = 0.4;

/**
 * The common axis: every row's 68.27 % interval with some room, and no farther than the densities are known,
 * so that one part which says next to nothing does not squeeze the others.
 */
export function rowsSpan(rows: readonly { interval68: Ends; density: DensityCurve }[]): Interval {
  const ends = rows.map(({ interval68: [low, high], density: { x } }) => {
    const room = BEYOND * (high - low);
    return [
      Math.max(x[0] ?? low, low - room),
      Math.min(x[x.length - 1] ?? high, high + room),
    ] as const;
  });
  const low = Math.min(...ends.map(([end]) => end));
  const high = Math.max(...ends.map(([, end]) => end));
  return high > low ? [low, high] : [low - 0.5, low + 0.5];
}
