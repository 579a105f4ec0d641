/** Parts that the rules' sentences share. */
import type { ConstraintFields, FieldName } from "./fields";
import { isOpen, NUMBER_FIELDS, relevantFields } from "./relevant";
import type { NumberField } from "./relevant";
import { FIELD_NAMES, withTrueMinus } from "./words";

/** A field's name inside a sentence. */
export function inSentence(name: FieldName): string {
  const words = FIELD_NAMES[name];
  return words.charAt(0).toLowerCase() + words.slice(1);
}

/** The typed text in a message: short, with a true minus. */
export function typed(text: string | null): string {
  const words = (text ?? "").trim();
  return withTrueMinus(words.length > 24 ? `${words.slice(0, 24)}…` : words);
}

/** Number fields that the quantity and kind use and that are not open. */
export function relevantNumbers(fields: ConstraintFields): NumberField[] {
  const relevant = relevantFields(fields);
  return NUMBER_FIELDS.filter((name) => relevant.includes(name) && !isOpen(fields, name));
}
