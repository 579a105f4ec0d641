import { leaveOneOut, type Task, type TermInfluence } from "~shared/inference";
import { specOf } from "~shared/table/tableLikelihood";

import { fitPosterior, fitProblem, type FitSetting } from "./posterior";
import type { LeaveOneOutResult, LeftOutTerm } from "./request";
import { byLargest } from "./shifts";

/** What each term does to midpoint and optical depth, the term that moves them most first. */
export function* withoutEach(setting: FitSetting): Task<LeaveOneOutResult> {
  const { table } = setting.request;
  // As coarse as the fits it is compared with, so that what a grid leaves out falls out of the difference.
  const full = yield* fitPosterior(setting, table, { coarse: true, evidence: false });
  const influences = yield* leaveOneOut(full.problem, full, specOf(table), {
    refit: (rest) => fitProblem(setting, rest, { coarse: true, evidence: false }),
  });
  const widths = {
    midpoint: full.derived["midpoint"]?.sd ?? 0,
    tau: full.derived["tau"]?.sd ?? 0,
  };
  return {
    kind: "leaveOneOut",
    terms: influences.map((influence) => leftOutTerm(influence, widths)).sort(byLargest),
  };
}

function leftOutTerm(
  { id, members, minus2LnL, pull, shift }: TermInfluence,
  widths: { midpoint: number; tau: number },
): LeftOutTerm {
  const midpoint = finite(shift["midpoint"]);
  const tau = finite(shift["tau"]);
  return {
    term: id,
    members,
    minus2LnL,
    pull,
    midpointShift: midpoint * widths.midpoint,
    midpointShiftInWidths: midpoint,
    tauShift: tau * widths.tau,
    tauShiftInWidths: tau,
  };
}

function finite(value: number | undefined): number {
  return value !== undefined && Number.isFinite(value) ? value : 0;
}
