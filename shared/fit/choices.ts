import type { Task } from "~shared/inference";

import { fitPosterior, type FitSetting } from "./posterior";
import type { ChangedFit, ChoicesResult, OtherChoice } from "./request";
import { byLargest, comparable, meansOf, NO_SHIFT, part, shiftsBetween } from "./shifts";

/** Refits a table with each of its choices made otherwise, the one that moves most first. */
export function* withOtherChoices(
  setting: FitSetting,
  others: readonly OtherChoice[],
): Task<ChoicesResult> {
  const full = yield* fitPosterior(setting, setting.request.table, {
    coarse: true,
    evidence: false,
  });
  const changes: ChangedFit[] = [];
  for (const [index, { about, rows, words, table }] of others.entries()) {
    const fitted = yield* part(comparable(setting, table), "other choices", index, others.length);
    changes.push(
      "failed" in fitted
        ? { about, rows, words, midpoint: null, tau: null, ...NO_SHIFT, failed: fitted.failed }
        : {
            ...{ about, rows, words, failed: null },
            ...meansOf(fitted),
            ...shiftsBetween(full, fitted),
          },
    );
  }
  return { kind: "choices", ...meansOf(full), changes: changes.sort(byLargest) };
}
