/** The second reading: what an editor reads, when two texts agree, and what must be read again. */
import { parseDecimal } from "~shared/statement/decimal";
import type { ConstraintFields, FieldName } from "~shared/statement/fields";
import { emptyFields } from "~shared/statement/fields";
import { isNumberField, isOpen, relevantFields } from "~shared/statement/relevant";
import { openStatementFields } from "~shared/statement/required";
import { fieldText } from "~shared/statement/words";

/**
 * All an editor can be asked to read, in the order of the form. A first reading is always asked for this
 * whole list, so that it says nothing about what was submitted; what remains of it follows from the
 * editor's own choices (see readingFieldsFor).
 */
export const READING_FIELDS = [
  "quantity",
  "species",
  "helium",
  "scale",
  "weighting",
  "rangeLow",
  "rangeHigh",
  "fraction",
  "fractionFrom",
  "fractionTo",
  "durationUnit",
  "zRole",
  "z",
  "zLow",
  "zHigh",
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
  "methodTags",
] as const satisfies readonly FieldName[];
export type ReadingField = (typeof READING_FIELDS)[number];

/**
 * Fields that belong to a reading, given the quantity, species and kind chosen in it so far.
 *
 * @param reading - The editor's own choices; never the submission, whose choices would leak.
 */
export function readingFieldsFor(reading: ConstraintFields): ReadingField[] {
  const relevant = [...relevantFields(reading), "methodTags"];
  return READING_FIELDS.filter((name) => relevant.includes(name));
}

/** What a reading still lacks before it can be stored; limited to the fields asked for. */
export function readingMissing(
  reading: ConstraintFields,
  asked: readonly FieldName[] = READING_FIELDS,
): ReadingField[] {
  const missing = openStatementFields(reading);
  if (reading.quantity === "neutralFraction" && reading.weighting === null) {
    missing.push("weighting");
  }
  if (reading.methodTags.length === 0) missing.push("methodTags");
  return READING_FIELDS.filter((name) => missing.includes(name) && asked.includes(name));
}

/** Only the fields of a reading that its own choices call for; the rest is emptied before it is stored. */
export function tidyReading(reading: ConstraintFields): ConstraintFields {
  const kept = readingFieldsFor(reading);
  const tidy: ConstraintFields = { ...emptyFields() };
  for (const name of kept) copyField(name, reading, tidy);
  return tidy;
}

function copyField<K extends FieldName>(name: K, from: ConstraintFields, to: ConstraintFields) {
  to[name] = from[name];
}

/** A partial reading laid over the one before: fields asked for come from the new one. */
export function mergeReading(
  previous: ConstraintFields,
  next: ConstraintFields,
  asked: readonly FieldName[],
): ConstraintFields {
  const merged: ConstraintFields = { ...previous };
  for (const name of asked) copyField(name, next, merged);
  return tidyReading(merged);
}

/** Widths are compared by size: "-0.17" in the field for minus is 0.17. */
const WIDTHS: readonly FieldName[] = ["plus", "minus", "limitSigma"];

function isEmpty(held: unknown): boolean {
  if (held === null || held === undefined) return true;
  if (typeof held === "string") return held.trim() === "";
  return Array.isArray(held) && held.length === 0;
}

/**
 * Whether two contents of one field agree: numbers by their printed value (0.3 is 0.30), lists as sets,
 * texts without surrounding space. An open weighting counts as unknown.
 */
export function fieldsAgree<K extends FieldName>(
  name: K,
  a: ConstraintFields[K],
  b: ConstraintFields[K],
): boolean {
  if (name === "weighting") return (a ?? "unknown") === (b ?? "unknown");
  if (isEmpty(a) || isEmpty(b)) return isEmpty(a) && isEmpty(b);
  if (Array.isArray(a) && Array.isArray(b)) {
    const [left, right] = [new Set<string>(a), new Set<string>(b)];
    return left.size === right.size && [...left].every((entry) => right.has(entry));
  }
  if (typeof a === "string" && typeof b === "string") {
    if (isNumberField(name)) {
      const [left, right] = [parseDecimal(a), parseDecimal(b)];
      if (left && right) {
        return WIDTHS.includes(name) ? left.abs().eq(right.abs()) : left.eq(right);
      }
    }
    return a.trim() === b.trim();
  }
  return a === b;
}

export interface ComparedField {
  field: ReadingField;
  /** In words, as a person reads it; null when open. */
  reading: string | null;
  submitted: string | null;
  agrees: boolean;
}

function textOrNull(name: FieldName, fields: ConstraintFields): string | null {
  const text = fieldText(name, fields);
  return text === "" ? null : text;
}

/** Reading and submission side by side, in every field either side's choices call for; both open is left out. */
export function compareReading(
  reading: ConstraintFields,
  submitted: ConstraintFields,
): ComparedField[] {
  const called = new Set([...readingFieldsFor(reading), ...readingFieldsFor(submitted)]);
  return READING_FIELDS.filter(
    (name) => called.has(name) && !(isOpen(reading, name) && isOpen(submitted, name)),
  ).map((name) => ({
    field: name,
    reading: textOrNull(name, reading),
    submitted: textOrNull(name, submitted),
    agrees: fieldsAgree(name, reading[name], submitted[name]),
  }));
}

/** Fields whose change changes what all the others mean. */
const DECISIVE: readonly ReadingField[] = ["quantity", "kind", "species", "scale"];

/**
 * Fields of a resubmission to be read again: those that changed since the last submission and those in
 * which the last reading differed; everything when the quantity, kind, species or scale is among them.
 *
 * @param previousReading - The last stored reading, corrections included; null when there is none.
 * @param previousSubmitted - The submission it was compared with.
 * @param next - The resubmission.
 */
export function fieldsToReread(
  previousReading: ConstraintFields | null,
  previousSubmitted: ConstraintFields | null,
  next: ConstraintFields,
): ReadingField[] {
  if (previousReading === null || previousSubmitted === null) return [...READING_FIELDS];
  const again = READING_FIELDS.filter((name) => {
    const relevant = readingFieldsFor(next).includes(name);
    const changed = !fieldsAgree(name, previousSubmitted[name], next[name]);
    const differed =
      (readingFieldsFor(previousReading).includes(name) ||
        readingFieldsFor(previousSubmitted).includes(name)) &&
      !fieldsAgree(name, previousReading[name], previousSubmitted[name]);
    return DECISIVE.includes(name) ? changed || differed : relevant && (changed || differed);
  });
  return again.some((name) => DECISIVE.includes(name)) ? [...READING_FIELDS] : again;
}

/** Names of all fields, in the order of the record. */
export const ALL_FIELDS = Object.keys(emptyFields()) as FieldName[];

/** Fields that differ between two revisions as typed: 0.3 and 0.30 differ here, for the paper prints one of them. */
export function diffFields(before: ConstraintFields, after: ConstraintFields): FieldName[] {
  return ALL_FIELDS.filter((name) => {
    const [a, b] = [before[name], after[name]];
    if (isEmpty(a) || isEmpty(b)) return isEmpty(a) !== isEmpty(b);
    return Array.isArray(a) ? !fieldsAgree(name, a as never, b as never) : a !== b;
  });
}
