import { emptyFields, type ConstraintFields, type FieldName } from "~shared/statement/fields";

/**
 * What one paper usually says once for all its constraints: kept by "add another from this paper".
 * Numbers, level, place and printed text belong to the one constraint and are typed anew.
 */
const KEPT: readonly FieldName[] = [
  "quantity",
  "species",
  "helium",
  "scale",
  "weighting",
  "historyAssumed",
  "heliumAssumed",
  "truncationAssumed",
  "methodTags",
  "priorForm",
  "priorVariable",
  "priorRange",
  "modelTags",
  "conditionedOn",
  "cosmicVariance",
  "dataUsed",
  "dataKnown",
  "versionRead",
  "preprintVersion",
];

/** The context of a paper, as a start for its next constraint. */
export function contextOf(fields: ConstraintFields): ConstraintFields {
  const kept = Object.fromEntries(KEPT.map((name) => [name, fields[name]]));
  return { ...emptyFields(), ...kept };
}
