import type { ConstraintFields, FieldName } from "~shared/statement/fields";

type Shape = Pick<
  ConstraintFields,
  "quantity" | "kind" | "species" | "level" | "versionRead" | "readOffFigure"
>;

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

/**
 * Whether a field has a meaning for this quantity and statement.
 * Fields of the method step always have one, save those that hang on another answer.
 */
export function isRelevant(name: FieldName, shape: Shape): boolean {
  const { quantity, kind, species, level } = shape;
  const fraction = quantity === "neutralFraction";
  const limit = kind === "upperLimit" || kind === "lowerLimit";
  const numbers = kind !== null && kind !== "qualitative";
  switch (name) {
    case "species":
      return fraction || quantity === "redshiftAtFraction" || quantity === "duration";
    case "helium":
      return species === "electron" && isRelevant("species", shape);
    case "scale":
    case "weighting":
    case "z":
    case "zLow":
    case "zHigh":
    case "zRole":
      return fraction;
    case "rangeLow":
    case "rangeHigh":
      return quantity === "opticalDepthRange";
    case "fraction":
      return quantity === "redshiftAtFraction";
    case "fractionFrom":
    case "fractionTo":
    case "durationUnit":
      return quantity === "duration";
    case "historyAssumed":
      return quantity !== null && !fraction;
    case "value":
      return kind === "twoSided" || limit;
    case "plus":
    case "minus":
    case "estimator":
      return kind === "twoSided";
    case "limitBase":
    case "limitSigma":
      return limit;
    case "bandLow":
    case "bandHigh":
      return kind === "band";
    case "level":
    case "furtherIntervals":
      return numbers;
    case "levelPercent":
      return numbers && level === "other";
    case "preprintVersion":
      return shape.versionRead === "preprint";
    case "digitizingError":
      return shape.readOffFigure === true;
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
