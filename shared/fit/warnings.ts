/** What must be said beside a fit, in plain sentences. */
import { ENOUGH_EFFECTIVE_DRAWS } from "~shared/inference/ensembleSampler";

import { quantityWords } from "./quantityWords";
import type { FitPosterior, FitSetting } from "./posterior";

/**
 * @param cut - Names of parameters whose posterior runs into an end of their prior.
 */
export function warningsOf(
  { request }: FitSetting,
  posterior: FitPosterior,
  cut: readonly string[],
): string[] {
  const { rows } = request.table;
  const warnings: string[] = [];
  if (rows.length === 0) {
    warnings.push("No row takes part: what is shown is the prior itself.");
  }
  warnings.push(...unsoundWords(posterior));
  if (rows.length > 0) {
    const { atEdge, degenerate } = posterior.best;
    if (degenerate) {
      warnings.push(
        "Quite different histories fit equally well: only the height of the best point means something, not its place.",
      );
    }
    const edges = [...new Set([...(degenerate ? [] : atEdge), ...cut])];
    // The ends of a free form's values are those of a fraction, and no choice.
    if (edges.length > 0 && request.family.kind !== "freeForm") {
      const names = edges.map((name) => quantityWords(name).symbol).join(", ");
      warnings.push(
        `The fit runs into an end of the prior of ${names}: best point and intervals depend on where that end is.`,
      );
    }
  }
  warnings.push(
    "The posterior depends on the family of histories and on the prior: see beside it what the prior alone implies for optical depth and midpoint.",
  );
  if (request.family.kind === "tanh") {
    warnings.push("A tanh history can't show a long early tail.");
  }
  const limits = rows.filter(
    ({ used }) => used.kind === "upperLimit" || used.kind === "lowerLimit",
  );
  if (limits.length > 0) {
    warnings.push(`Limits take part (${numbered(limits)}): −2 ln L per row is no goodness of fit.`);
  }
  const depths = rows.filter(
    ({ used }) => used.quantity === "opticalDepth" || used.quantity === "opticalDepthRange",
  );
  if (depths.length > 0) {
    warnings.push(
      `The optical depth of ${numbered(depths)} came from a history family of its own, with helium and weighting assumed.`,
    );
  }
  const massWeighted = rows.filter(
    ({ used }) => used.quantity === "neutralFraction" && used.weighting === "mass",
  );
  if (massWeighted.length > 0) {
    warnings.push(
      `${numbered(massWeighted)} ${massWeighted.length === 1 ? "is" : "are"} mass-weighted and used as a volume average: no conversion is made.`,
    );
  }
  return warnings;
}

function unsoundWords({
  sound,
  grid,
  convergence,
  problem,
  method,
  logEvidence,
}: FitPosterior): string[] {
  const words: string[] = [];
  if (!sound && grid) {
    words.push(
      `Not converged: the last refinement of the grid to ${grid.points} points a side still moved a number by ${grid.lastChange.toPrecision(2)} of its width. This is no verdict.`,
    );
  }
  if (!sound && method === "sampler") {
    const known = convergence.filter(({ name }) => problem.names.includes(name));
    const least = Math.min(...known.map(({ effectiveSize }) => effectiveSize));
    const most = Math.max(...known.map(({ rHat }) => rHat));
    words.push(
      known.length < problem.names.length
        ? "Not converged: the chains did not move in every parameter. This is no verdict."
        : least < ENOUGH_EFFECTIVE_DRAWS
          ? `Too few effective draws: ${Math.round(least)} of the ${ENOUGH_EFFECTIVE_DRAWS} that a verdict takes. This is no verdict; take more steps.`
          : `Not converged: R̂ is ${most.toFixed(3)}, where a verdict takes less than 1.01. This is no verdict; take more steps.`,
    );
  }
  if (method === "sampler" && logEvidence === null) {
    words.push("The evidence could not be found well enough from the chains, and is left out.");
  }
  return words;
}

function numbered(rows: readonly { readonly number: string }[]): string {
  const numbers = rows.map(({ number }) => number);
  return numbers.length > 6
    ? `${numbers.slice(0, 5).join(", ")} and ${numbers.length - 5} more`
    : numbers.join(", ");
}
