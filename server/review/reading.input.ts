import { Field, InputType } from "type-graphql";

import { ConstraintFieldsInput, fieldsFromInput } from "~server/constraint/fields.type";
import { CURVE_FACTS, type ReadingContent, type ReadingField } from "~shared/review/reading";
import type { FieldName } from "~shared/statement/fields";

/** Facts of a curve are one number each. */
const LONGEST_FACT = 60;

@InputType({
  description:
    "What an editor reads in the paper. Of a tabulated curve the rows are not typed again: their number, the first and the last value and that of the highest row are.",
})
export class ReadingInput extends ConstraintFieldsInput {
  @Field(() => String, { nullable: true }) curveRows?: string | null;
  @Field(() => String, { nullable: true }) curveFirst?: string | null;
  @Field(() => String, { nullable: true }) curveLast?: string | null;
  @Field(() => String, { nullable: true }) curvePeak?: string | null;
}
// Its inherited fields are declared from a table.
export interface ReadingInput extends ConstraintFieldsInput {}

/**
 * Input as a reading: trimmed, an empty text is an open field.
 *
 * @returns The reading, or the field that is too long to keep.
 */
export function readingFromInput(
  input: ReadingInput,
): { reading: ReadingContent } | { tooLong: ReadingField | FieldName } {
  const parsed = fieldsFromInput(input);
  if ("tooLong" in parsed) return parsed;
  const reading: ReadingContent = parsed.fields;
  for (const name of CURVE_FACTS) {
    const text = input[name]?.trim() ?? "";
    if (text.length > LONGEST_FACT) return { tooLong: name };
    if (text !== "") reading[name] = text;
  }
  return { reading };
}
