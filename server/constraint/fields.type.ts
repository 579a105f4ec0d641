import { Field, InputType, ObjectType } from "type-graphql";

import * as enums from "~server/common/enums";
import { CURVE_LONGEST } from "~shared/statement/curve";
import { emptyFields, type ConstraintFields, type FieldName } from "~shared/statement/fields";

type Kind = object | "text" | "flag" | "texts";

/** GraphQL type of each field, once for reading and writing. A field without a row does not compile. */
const FIELD_TYPES: Record<FieldName, Kind> = {
  quantity: enums.QuantityEnum,
  species: enums.SpeciesEnum,
  helium: enums.HeliumEnum,
  scale: enums.ScaleEnum,
  weighting: enums.WeightingEnum,
  rangeLow: "text",
  rangeHigh: "text",
  fraction: "text",
  fractionFrom: "text",
  fractionTo: "text",
  durationUnit: enums.DurationUnitEnum,
  historyAssumed: "text",
  heliumAssumed: "text",
  truncationAssumed: "text",
  z: "text",
  zLow: "text",
  zHigh: "text",
  zRole: enums.RedshiftRoleEnum,
  kind: enums.StatementKindEnum,
  value: "text",
  plus: "text",
  minus: "text",
  limitBase: "text",
  limitSigma: "text",
  bandLow: "text",
  bandHigh: "text",
  curveTable: "text",
  curveColumn: enums.CurveColumnEnum,
  level: enums.LevelEnum,
  levelPercent: "text",
  estimator: enums.EstimatorEnum,
  furtherIntervals: "text",
  printedText: "text",
  methodTags: "texts",
  priorForm: "text",
  priorVariable: "text",
  priorRange: "text",
  modelTags: "texts",
  conditionedOn: "texts",
  cosmicVariance: enums.CosmicVarianceEnum,
  dataUsed: "texts",
  dataKnown: "flag",
  alternativesGroup: "text",
  alternativesPreferred: "flag",
  supersedes: "texts",
  erratumOf: "texts",
  reanalysisOf: "texts",
  subsetOf: "texts",
  versionRead: enums.VersionReadEnum,
  preprintVersion: "text",
  place: "text",
  page: "text",
  readOffFigure: "flag",
  digitizingError: "text",
  remark: "text",
};

export const FIELD_NAMES_IN_ORDER = Object.keys(FIELD_TYPES) as FieldName[];

function declareFields(target: object, input: boolean): void {
  for (const name of FIELD_NAMES_IN_ORDER) {
    const kind = FIELD_TYPES[name];
    if (kind === "texts") Field(() => [String], { nullable: input })(target, name);
    else {
      const type = kind === "text" ? String : kind === "flag" ? Boolean : kind;
      Field(() => type, { nullable: true })(target, name);
    }
  }
}

@ObjectType("ConstraintFields")
export class ConstraintFieldsType {}
// Its fields are declared from the table above.
export interface ConstraintFieldsType extends ConstraintFields {}
declareFields(ConstraintFieldsType.prototype, false);

@InputType()
export class ConstraintFieldsInput {}
export interface ConstraintFieldsInput extends Partial<ConstraintFields> {}
declareFields(ConstraintFieldsInput.prototype, true);

export function fieldsType(fields: ConstraintFields): ConstraintFieldsType {
  // Over an empty set, so that a field added later is null in older content.
  return Object.assign(new ConstraintFieldsType(), emptyFields(), fields);
}

/** Longest text kept in a field; the printed text has its own, shorter rule, a curve a longer one. */
const LONGEST = 2000;
const MOST_WORDS = 50;

/**
 * Input as content: trimmed, an empty text is an open field, lists without empty or double words.
 * Numbers stay as typed but for blanks around them.
 *
 * @returns The content, or the field that is too long to keep.
 */
export function fieldsFromInput(
  input: ConstraintFieldsInput,
): { fields: ConstraintFields } | { tooLong: FieldName } {
  const fields = emptyFields();
  const target = fields as unknown as Record<string, unknown>;
  for (const name of FIELD_NAMES_IN_ORDER) {
    const given: unknown = input[name];
    if (given === undefined || given === null) continue;
    if (Array.isArray(given)) {
      const words = [...new Set(given.map((word) => String(word).trim()).filter(Boolean))];
      if (words.length > MOST_WORDS || words.some((word) => word.length > 300)) {
        return { tooLong: name };
      }
      target[name] = words;
    } else if (typeof given === "string") {
      const text = given.trim();
      if (text.length > (name === "curveTable" ? CURVE_LONGEST : LONGEST)) return { tooLong: name };
      target[name] = text === "" ? null : text;
    } else target[name] = given;
  }
  return { fields };
}
