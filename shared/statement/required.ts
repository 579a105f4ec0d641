/** What must be given before a record can be submitted. */
import type { ConstraintFields, FieldName } from "./fields";
import { isFractionBearing, isLimit, isOpen, quotesNumbers } from "./relevant";

/** The role decides which redshifts a fraction needs. */
function redshiftFields(fields: ConstraintFields): FieldName[] {
  switch (fields.zRole) {
    case "binAverage":
    case "uncertain":
      return ["zLow", "zHigh"];
    case "sampleRange":
      return ["z", "zLow", "zHigh"];
    case "point":
      return ["z"];
    default:
      return isOpen(fields, "zLow") || isOpen(fields, "zHigh") ? ["z"] : [];
  }
}

function quantityNeeds(fields: ConstraintFields): FieldName[] {
  const names: FieldName[] = ["quantity"];
  if (isFractionBearing(fields.quantity)) names.push("species");
  if (isFractionBearing(fields.quantity) && fields.species === "electron") names.push("helium");
  switch (fields.quantity) {
    case "neutralFraction":
      return [...names, "scale", "zRole", ...redshiftFields(fields)];
    case "opticalDepthRange":
      return [...names, "rangeLow", "rangeHigh"];
    case "redshiftAtFraction":
      return [...names, "fraction"];
    case "duration":
      return [...names, "fractionFrom", "fractionTo", "durationUnit"];
    default:
      return names;
  }
}

function statementNeeds(fields: ConstraintFields): FieldName[] {
  if (fields.kind === null) return ["kind", "level"];
  if (fields.kind === "curve") {
    const quoted = quotesNumbers(fields);
    const interval: FieldName[] = quoted ? ["value", "plus", "minus", "estimator", "level"] : [];
    if (quoted && fields.level === "other") interval.push("levelPercent");
    return ["kind", "curveTable", "curveColumn", ...interval];
  }
  const level: FieldName[] = fields.level === "other" ? ["level", "levelPercent"] : ["level"];
  if (fields.kind === "twoSided") {
    return ["kind", "value", "plus", "minus", ...level, "estimator"];
  }
  if (isLimit(fields.kind)) {
    const own = !isOpen(fields, "limitBase") || !isOpen(fields, "limitSigma");
    return [
      "kind",
      ...(own ? (["limitBase", "limitSigma"] as const) : (["value"] as const)),
      ...level,
    ];
  }
  if (fields.kind === "band") return ["kind", "bandLow", "bandHigh", ...level];
  return ["kind"];
}

/** Fields of the quantity and the statement that are still open though a complete record needs them. */
export function openStatementFields(fields: ConstraintFields): FieldName[] {
  return [...quantityNeeds(fields), ...statementNeeds(fields)].filter((name) =>
    isOpen(fields, name),
  );
}

/** All open fields a submission needs, in the order of the form; the citation is asked for apart. */
export function openFields(fields: ConstraintFields): FieldName[] {
  const origin: FieldName[] = ["printedText", "methodTags", "dataKnown", "versionRead", "place"];
  const open = origin.filter((name) => isOpen(fields, name));
  if (fields.dataKnown === true && isOpen(fields, "dataUsed")) open.push("dataUsed");
  if (fields.readOffFigure === true && isOpen(fields, "digitizingError")) {
    open.push("digitizingError");
  }
  return [...openStatementFields(fields), ...open];
}
