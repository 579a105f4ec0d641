import type { ConstraintFields, FieldName } from "~shared/statement/fields";
import { relevantFields } from "~shared/statement/relevant";

/** Fields of "what the paper prints"; which of them are asked depends on quantity and statement. */
export const PRINTED_FIELDS: readonly FieldName[] = [
  "quantity",
  "species",
  "helium",
  "kind",
  "value",
  "plus",
  "minus",
  "limitBase",
  "limitSigma",
  "bandLow",
  "bandHigh",
  "curveTable",
  "curveColumn",
  "level",
  "levelPercent",
  "estimator",
  "durationUnit",
  "rangeLow",
  "rangeHigh",
  "fraction",
  "fractionFrom",
  "fractionTo",
  "z",
  "zLow",
  "zHigh",
  "zRole",
  "weighting",
  "scale",
  "historyAssumed",
  "heliumAssumed",
  "truncationAssumed",
  "furtherIntervals",
  "printedText",
];

/** Fields of "where it comes from". */
export const METHOD_FIELDS: readonly FieldName[] = [
  "methodTags",
  "dataUsed",
  "dataKnown",
  "conditionedOn",
  "priorForm",
  "priorVariable",
  "priorRange",
  "modelTags",
  "cosmicVariance",
  "alternativesGroup",
  "alternativesPreferred",
  "place",
  "page",
  "versionRead",
  "preprintVersion",
  "readOffFigure",
  "digitizingError",
  "remark",
];

const IN_WORDS: readonly FieldName[] = [
  "historyAssumed",
  "heliumAssumed",
  "truncationAssumed",
  "furtherIntervals",
  "printedText",
];

const BY_CHOICE: ReadonlySet<FieldName> = new Set<FieldName>(
  PRINTED_FIELDS.filter((name) => !IN_WORDS.includes(name)),
);

/**
 * Whether a field has a meaning for the quantity, statement and other choices made so far.
 * Fields of the method step always have one, save those that hang on another answer.
 */
export function isRelevant(name: FieldName, fields: ConstraintFields): boolean {
  if (BY_CHOICE.has(name)) return relevantFields(fields).includes(name);
  switch (name) {
    case "historyAssumed":
      return fields.quantity !== null && fields.quantity !== "neutralFraction";
    case "heliumAssumed":
    case "truncationAssumed":
      return fields.quantity === "opticalDepth" || fields.quantity === "opticalDepthRange";
    case "furtherIntervals":
      return fields.kind !== null && fields.kind !== "qualitative";
    case "preprintVersion":
      return fields.versionRead === "preprint";
    case "digitizingError":
      return fields.readOffFigure === true;
    default:
      return true;
  }
}

export type Stash = Partial<ConstraintFields>;

/**
 * Changes a field that decides which others are asked. What loses its meaning leaves the record
 * and waits in the stash, so that a slip of the finger between two segments costs no typing.
 */
export function changeShape<N extends FieldName>(
  fields: ConstraintFields,
  name: N,
  value: ConstraintFields[N],
  stash: Stash,
): { fields: ConstraintFields; stash: Stash } {
  const next: ConstraintFields = { ...fields, [name]: value };
  const kept: Stash = { ...stash };
  const set = next as unknown as Record<FieldName, unknown>;
  const store = kept as Record<string, unknown>;
  for (const other of [...PRINTED_FIELDS, ...METHOD_FIELDS]) {
    if (other === name) continue;
    if (!isRelevant(other, next)) {
      if (set[other] !== null && !Array.isArray(set[other])) {
        store[other] = set[other];
        set[other] = null;
      }
    } else if (set[other] === null && store[other] !== undefined && !isRelevant(other, fields)) {
      set[other] = store[other];
      delete store[other];
    }
  }
  return { fields: next, stash: kept };
}
