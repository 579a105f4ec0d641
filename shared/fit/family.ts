import { type FitFamily, freeFormFamily, powerLawFamily, tanhFamily } from "~shared/inference";
import { RandomStream } from "~shared/numerics/random";

import { FitError } from "./fitError";
import type { FamilyChoice } from "./request";

/** Most redshifts of a free form that a person may ask for. */
export const MOST_REDSHIFTS = 8;

/**
 * The engine's family for a choice.
 *
 * @throws {FitError} For more redshifts than a free form may have.
 * @throws {DomainError} For priors with their ends out of order.
 */
export function familyOf(choice: FamilyChoice): FitFamily {
  switch (choice.kind) {
    case "tanh":
      return tanhFamily(choice);
    case "powerLaw":
      return powerLawFamily(choice);
    case "freeForm":
      if (choice.redshifts.length > MOST_REDSHIFTS) {
        throw new FitError(`A free form takes ${MOST_REDSHIFTS} redshifts at most.`);
      }
      return freeFormFamily(choice.redshifts, choice.ends);
  }
}

/**
 * Independent draws from a family's prior.
 *
 * @returns [count, dimension]
 */
export function priorDraws(family: FitFamily, count: number, seed: number): Float64Array {
  const random = new RandomStream(seed);
  const dimension = family.parameters.length;
  const draws = new Float64Array(count * dimension);
  const unit = new Float64Array(dimension);
  for (let k = 0; k < count; k++) {
    for (let d = 0; d < dimension; d++) unit[d] = random.uniform();
    draws.set(family.fromUnit(unit), k * dimension);
  }
  return draws;
}
