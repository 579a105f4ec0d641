import { DomainError } from "~shared/errors/DomainError";
import type { FitProblem } from "~shared/inference";

import { FitError } from "./fitError";

/** Histories looked at to find who excludes them all. */
const LOOKED_AT = 256;

/**
 * Who is to blame when no history inside the prior has a likelihood.
 *
 * @param error - What a fit ended with.
 * @returns Null for any other failure.
 */
export function excludedEverywhere(problem: FitProblem, error: unknown): FitError | null {
  if (!(error instanceof DomainError) || error.argument !== "rows") return null;
  const { terms } = problem.table;
  const allowed = new Array<boolean>(terms.length).fill(false);
  const answered = new Set<string>();
  for (const theta of places(problem)) {
    problem.termValues(theta).forEach((value, t) => {
      if (value < Infinity) allowed[t] = true;
    });
    problem.modelValues(theta).forEach((value, i) => {
      if (!Number.isNaN(value)) answered.add(problem.table.rowIds[i]!);
    });
  }
  const unanswered = problem.table.rowIds.filter((id) => !answered.has(id));
  if (unanswered.length > 0) {
    return new FitError(
      `No history of this family inside the prior has what ${listed(unanswered)} ${unanswered.length === 1 ? "states" : "state"}: take ${unanswered.length === 1 ? "it" : "them"} out, or choose another family or wider priors.`,
    );
  }
  const alone = terms.filter((_, t) => !allowed[t]).flatMap(({ members }) => members);
  return new FitError(
    alone.length > 0
      ? `${listed(alone)} ${alone.length === 1 ? "excludes" : "exclude"} every history of this family inside the prior: the likelihood is zero everywhere.`
      : "The rows together exclude every history of this family that was tried inside the prior: the likelihood is zero everywhere.",
  );
}

/** Places spread evenly over the prior. */
function* places({ dimension, family }: FitProblem): Generator<Float64Array> {
  // Additive recurrence with the root of x^(d+1) = x + 1: even in any number of dimensions.
  let root = 2;
  for (let i = 0; i < 50; i++) root = (1 + root) ** (1 / (dimension + 1));
  for (let k = 1; k <= LOOKED_AT; k++) {
    yield family.fromUnit(
      Float64Array.from({ length: dimension }, (_, d) => (k * root ** -(d + 1)) % 1),
    );
  }
}

function listed(numbers: readonly string[]): string {
  const shown =
    numbers.length > 6 ? [...numbers.slice(0, 5), `${numbers.length - 5} more`] : numbers;
  return shown.length < 2
    ? shown.join("")
    : `${shown.slice(0, -1).join(", ")} and ${shown[shown.length - 1]}`;
}
