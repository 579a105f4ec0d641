import type { ConstraintFields } from "~shared/statement/fields";

/** Name and formula of the likelihood form that a row has by default, for a table's files. */
export function likelihoodWords(_fields: ConstraintFields): {
  likelihoodForm: string | null;
  likelihoodFormula: string | null;
} {
  return { likelihoodForm: null, likelihoodFormula: null };
}
