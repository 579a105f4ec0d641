import {
  isCurveFact,
  readingFieldName,
  readingMissing,
  type ReadingContent,
  type ReadingField,
} from "~shared/review/reading";
import type { ConstraintFields, FieldName } from "~shared/statement/fields";
import { isNumberField, isOpen } from "~shared/statement/relevant";
import { CHOICE_WORDS, FIELD_NAMES } from "~shared/statement/words";

/** A field's name in a sentence or a head; what is no field of the record is the paper itself. */
export function fieldName(field: string): string {
  if (isCurveFact(field)) return readingFieldName(field);
  return FIELD_NAMES[field as FieldName] ?? "The paper";
}

/** Of a field that is asked alone, a paper may print nothing: the redshift has other ends, the limit another form. */
const MAY_STAY_OPEN: ReadonlySet<FieldName> = new Set<FieldName>([
  "value",
  "limitBase",
  "limitSigma",
  "z",
  "zLow",
  "zHigh",
]);

/** What an editor has yet to type before the reading can be stored. */
export function stillToRead(
  reading: ReadingContent,
  asked: readonly (FieldName | ReadingField)[],
): readonly (FieldName | ReadingField)[] {
  // Asked again is only what changed or differed: the rest of the statement is not in this reading.
  return asked.includes("quantity")
    ? readingMissing(reading, asked as readonly ReadingField[])
    : asked.filter((name) =>
        isCurveFact(name)
          ? !reading[name]?.trim()
          : isOpen(reading, name) && !MAY_STAY_OPEN.has(name),
      );
}

export function isNumber(field: string): boolean {
  return isCurveFact(field) || isNumberField(field as FieldName);
}

/**
 * The submission with what the editor read in place of it, so that the two can be drawn. The
 * comparison holds words; those of a choice are turned back into its value.
 */
export function asRead(
  submission: ConstraintFields,
  comparison: readonly { field: string; reading?: string | null; agrees: boolean }[],
): ConstraintFields {
  const read = { ...submission } as unknown as Record<string, unknown>;
  for (const { field, reading, agrees } of comparison) {
    if (agrees || field === "methodTags" || isCurveFact(field)) continue;
    const words = CHOICE_WORDS[field as FieldName];
    const value = words
      ? (Object.entries(words).find(([, word]) => word === reading)?.[0] ?? null)
      : (reading ?? null);
    read[field] = value;
  }
  return read as unknown as ConstraintFields;
}
