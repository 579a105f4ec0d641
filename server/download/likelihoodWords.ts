import { rowLikelihood } from "~shared/likelihood";
import { asUsed } from "~shared/statement/asUsed";
import type { ConstraintFields } from "~shared/statement/fields";

/** Name and formula of the likelihood form that a row has by default, or why it has none. */
export function likelihoodWords(fields: ConstraintFields): {
  likelihoodForm: string | null;
  likelihoodFormula: string | null;
} {
  const row = rowLikelihood(asUsed(fields));
  return "leftOut" in row
    ? { likelihoodForm: null, likelihoodFormula: row.leftOut }
    : { likelihoodForm: row.form, likelihoodFormula: row.formula };
}
