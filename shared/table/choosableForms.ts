import { FORM_NAMES, rowLikelihood, type FormName, type RowOptions } from "~shared/likelihood";
import type { AsUsed } from "~shared/statement/asUsed";

/**
 * Likelihood forms that fit a statement, its default first.
 *
 * @param options - What is decided about the row beside its form: a level, a width.
 */
export function choosableForms(used: AsUsed | null, options: RowOptions): FormName[] {
  if (used === null) return [];
  const { form: _chosen, ...others } = options;
  const byDefault = rowLikelihood(used, others);
  const first = "leftOut" in byDefault ? [] : [byDefault.form];
  const fitting = FORM_NAMES.filter(
    (form) => !first.includes(form) && !("leftOut" in rowLikelihood(used, { ...others, form })),
  );
  return [...first, ...fitting];
}
