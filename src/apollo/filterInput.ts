import type { ConstraintFilter as FilterInput } from "~graphql/generated/graphql";
import type { CanonicalFilter } from "~shared/filter/filter";

/** A filter as a variable of an operation, whose lists are its own. */
export function filterInput(filter: CanonicalFilter): FilterInput {
  const copies = Object.entries(filter).map(([name, value]) => [
    name,
    Array.isArray(value) ? [...(value as readonly unknown[])] : value,
  ]);
  return Object.fromEntries(copies) as FilterInput;
}
