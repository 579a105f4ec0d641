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

/** States that a filter lets through which names none: withdrawn records are found only by name. */
export const STATES_UNLESS_SAID: readonly RecordState[] = ["current", "superseded"];

const MOST_WORDS = 12;
const LONGEST_WORD = 100;

/** The words of a filter's text, each of which must be found; no more and no longer than a person would type. */
export function searchWords({ text }: Pick<ConstraintFilter, "text">): string[] {
  const words = (text ?? "").trim().split(/\s+/).filter(Boolean);
  return words.slice(0, MOST_WORDS).map((word) => word.slice(0, LONGEST_WORD));
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
