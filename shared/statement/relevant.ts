/** Which fields a quantity and a kind of statement ask for: one list for the form, the rules and the second reading. */
import type { ConstraintFields, FieldName } from "./fields";

/** Quantities whose own numbers or ends are fractions of a species. */
export function isFractionBearing(quantity: ConstraintFields["quantity"]): boolean {
  return (
    quantity === "neutralFraction" || quantity === "redshiftAtFraction" || quantity === "duration"
  );
}

/** Whether the statement is one bound. */
export function isLimit(kind: ConstraintFields["kind"]): boolean {
  return kind === "upperLimit" || kind === "lowerLimit";
}

/** Whether the statement has a best value: its marker is filled. A limit, a band and words have none. */
export function hasBestValue(kind: ConstraintFields["kind"]): boolean {
  return kind === "twoSided" || kind === "curve";
}

/** Fields that say what the quantity is. */
export function quantityFields(fields: ConstraintFields): FieldName[] {
  const names: FieldName[] = ["quantity"];
  if (isFractionBearing(fields.quantity)) {
    names.push("species");
    if (fields.species === "electron") names.push("helium");
  }
  switch (fields.quantity) {
    case "neutralFraction":
      names.push("scale", "weighting", "zRole", "z", "zLow", "zHigh");
      break;
    case "opticalDepthRange":
      names.push("rangeLow", "rangeHigh");
      break;
    case "redshiftAtFraction":
      names.push("fraction");
      break;
    case "duration":
      names.push("fractionFrom", "fractionTo", "durationUnit");
      break;
  }
  return names;
}

/** Fields that say what is stated about it. */
export function statementFields(fields: ConstraintFields): FieldName[] {
  const names: FieldName[] = ["kind"];
  switch (fields.kind) {
    case "twoSided":
      names.push("value", "plus", "minus", "estimator");
      break;
    case "upperLimit":
    case "lowerLimit":
      names.push("value", "limitBase", "limitSigma");
      break;
    case "band":
      names.push("bandLow", "bandHigh");
      break;
    case "curve": {
      names.push("curveTable", "curveColumn", "value", "plus", "minus");
      if (!quotesNumbers(fields)) return names;
      names.push("estimator");
      break;
    }
    default:
      return names;
  }
  names.push("level");
  if (fields.level === "other") names.push("levelPercent");
  return names;
}

/** Whether a number of an interval stands beside a curve: level and estimator are asked for then. */
export function quotesNumbers(fields: ConstraintFields): boolean {
  return (["value", "plus", "minus"] as const).some((name) => !isOpen(fields, name));
}

/** Fields of both lists: those whose content counts; what else was typed before a choice changed is not used. */
export function relevantFields(fields: ConstraintFields): FieldName[] {
  return [...quantityFields(fields), ...statementFields(fields)];
}

/** Fields that hold one number. */
export const NUMBER_FIELDS = [
  "rangeLow",
  "rangeHigh",
  "fraction",
  "fractionFrom",
  "fractionTo",
  "z",
  "zLow",
  "zHigh",
  "value",
  "plus",
  "minus",
  "limitBase",
  "limitSigma",
  "bandLow",
  "bandHigh",
  "levelPercent",
] as const satisfies readonly FieldName[];
export type NumberField = (typeof NUMBER_FIELDS)[number];

/** Whether the field holds one number. */
export function isNumberField(name: FieldName): name is NumberField {
  return (NUMBER_FIELDS as readonly FieldName[]).includes(name);
}

/** Whether a field is open: nothing chosen, nothing typed, an empty list. */
export function isOpen(fields: ConstraintFields, name: FieldName): boolean {
  const held = fields[name];
  if (held === null || held === undefined) return true;
  if (typeof held === "string") return held.trim() === "";
  return Array.isArray(held) && held.length === 0;
}
