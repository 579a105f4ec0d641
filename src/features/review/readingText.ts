import type { ConstraintFields, FieldName } from "~shared/statement/fields";
import { isNumberField } from "~shared/statement/relevant";
import { CHOICE_WORDS, FIELD_NAMES } from "~shared/statement/words";

/** A field's name in a sentence or a head; what is no field of the record is the paper itself. */
export function fieldName(field: string): string {
  return FIELD_NAMES[field as FieldName] ?? "The paper";
}

export function isNumber(field: string): boolean {
  return isNumberField(field as FieldName);
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
    if (agrees || field === "methodTags") continue;
    const words = CHOICE_WORDS[field as FieldName];
    const value = words
      ? (Object.entries(words).find(([, word]) => word === reading)?.[0] ?? null)
      : (reading ?? null);
    read[field] = value;
  }
  return read as unknown as ConstraintFields;
}
