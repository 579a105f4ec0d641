/** How far midpoint and optical depth move from one fit to another. */
import type { Task } from "~shared/inference";
import type { Summary } from "~shared/inference/marginal";
import type { TableLikelihood } from "~shared/table/tableLikelihood";

import { FitError } from "./fitError";
import { type FitPosterior, fitPosterior, type FitSetting } from "./posterior";

/** Means of the two quantities that comparisons are about. */
export interface Means {
  readonly midpoint: number | null;
  readonly tau: number | null;
}

export interface Shifts {
  readonly midpointShift: number;
  readonly midpointShiftInWidths: number;
  readonly tauShift: number;
  readonly tauShiftInWidths: number;
}

export const NO_SHIFT: Shifts = {
  midpointShift: 0,
  midpointShiftInWidths: 0,
  tauShift: 0,
  tauShiftInWidths: 0,
};

type Held = Pick<FitPosterior, "derived">;

export function meansOf({ derived }: Held): Means {
  return { midpoint: derived["midpoint"]?.mean ?? null, tau: derived["tau"]?.mean ?? null };
}

/** The means of `other` minus those of `full`, also in widths of `full`; 0 where one holds no such quantity. */
export function shiftsBetween(full: Held, other: Held): Shifts {
  const midpoint = shift(full.derived["midpoint"], other.derived["midpoint"]);
  const tau = shift(full.derived["tau"], other.derived["tau"]);
  return {
    midpointShift: midpoint.by,
    midpointShiftInWidths: midpoint.inWidths,
    tauShift: tau.by,
    tauShiftInWidths: tau.inWidths,
  };
}

function shift(
  from: Summary | null | undefined,
  to: Summary | null | undefined,
): { by: number; inWidths: number } {
  if (!from || !to) return { by: 0, inWidths: 0 };
  const by = to.mean - from.mean;
  return { by, inWidths: from.sd > 0 ? by / from.sd : 0 };
}

/** The larger of the two shifts, in widths. */
export function largest({ midpointShiftInWidths, tauShiftInWidths }: Shifts): number {
  return Math.max(Math.abs(midpointShiftInWidths), Math.abs(tauShiftInWidths));
}

/** Sorts by the larger of the two shifts, what failed last; equal ones keep their order. */
export function byLargest(
  a: Shifts & { readonly failed?: string | null },
  b: Shifts & { readonly failed?: string | null },
): number {
  return Number(Boolean(a.failed)) - Number(Boolean(b.failed)) || largest(b) - largest(a);
}

/** A fit good enough to compare, or why there is none. */
export function* comparable(
  setting: FitSetting,
  table: TableLikelihood,
): Task<FitPosterior | { readonly failed: string }> {
  try {
    return yield* fitPosterior(setting, table, { coarse: true, evidence: false });
  } catch (error) {
    if (error instanceof FitError) return { failed: error.message };
    throw error;
  }
}

/** Reports how far a number of equal parts is, in place of the stages within each. */
export function* part<T>(task: Task<T>, stage: string, index: number, count: number): Task<T> {
  for (;;) {
    const step = task.next();
    if (step.done) return step.value;
    yield { stage, fraction: (index + 0.5) / count };
  }
}
