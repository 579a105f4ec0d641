/** What a list of constraints is filtered by; mirrors the API's input of the same name. */
import type { Quantity, StatementKind, VersionRead, Weighting } from "~shared/statement/fields";
import type { MethodFamily } from "~shared/methods/vocabulary";
import type { RecordState } from "~shared/review/states";

export interface ConstraintFilter {
  /** Free text over authors, title, key, number, printed text, data used. */
  text?: string | null;
  families?: readonly MethodFamily[] | null;
  tags?: readonly string[] | null;
  quantities?: readonly Quantity[] | null;
  kinds?: readonly StatementKind[] | null;
  weightings?: readonly Weighting[] | null;
  versions?: readonly VersionRead[] | null;
  /** Current and superseded records unless said. */
  states?: readonly RecordState[] | null;
  zFrom?: number | null;
  zTo?: number | null;
  yearFrom?: number | null;
  yearTo?: number | null;
}

export const CONSTRAINT_SORTS = [
  "redshift",
  "redshiftDescending",
  "newest",
  "year",
  "number",
] as const;
export type ConstraintSort = (typeof CONSTRAINT_SORTS)[number];

export const SORT_WORDS: Record<ConstraintSort, string> = {
  redshift: "Redshift, low first",
  redshiftDescending: "Redshift, high first",
  newest: "Newest first",
  year: "Year of the paper",
  number: "Number",
};

/** A filter without open or empty entries, lists without repeats in the vocabulary's order: one form per meaning. */
export type CanonicalFilter = { [K in keyof ConstraintFilter]?: NonNullable<ConstraintFilter[K]> };
