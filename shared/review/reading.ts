/** The second reading: what an editor reads, when two texts agree, and what must be read again. */
import { currentTags } from "~shared/methods/vocabulary";
import { curveFacts } from "~shared/statement/curve";
import { parseDecimal } from "~shared/statement/decimal";
import type { ConstraintFields, FieldName } from "~shared/statement/fields";
import { emptyFields } from "~shared/statement/fields";
import { isNumberField, isOpen, relevantFields } from "~shared/statement/relevant";
import { openStatementFields } from "~shared/statement/required";
import { FIELD_NAMES, fieldText } from "~shared/statement/words";

/**
 * What is read of a tabulated curve in place of its rows. They belong to readings only: of a submission
 * they follow from its table.
 */
export const CURVE_FACTS = ["curveRows", "curveFirst", "curveLast", "curvePeak"] as const;
export type CurveFact = (typeof CURVE_FACTS)[number];

/** What an editor typed: fields of the record, and the facts of a curve. */
export type ReadingContent = ConstraintFields & Partial<Record<CurveFact, string | null>>;

const CURVE_FACT_NAMES: Record<CurveFact, string> = {
  curveRows: "Rows of the curve",
  curveFirst: "First value of the curve",
  curveLast: "Last value of the curve",
  curvePeak: "Value at its highest point",
};

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
  "curveColumn",
  ...CURVE_FACTS,
  "level",
  "levelPercent",
  "estimator",
  "methodTags",
] as const satisfies readonly (FieldName | CurveFact)[];
export type ReadingField = (typeof READING_FIELDS)[number];

/** Whether the field is one of a reading of a curve, and none of the record. */
export function isCurveFact(name: string): name is CurveFact {
  return (CURVE_FACTS as readonly string[]).includes(name);
}

/** A field of a reading or of the record by its name on the screen. */
export function readingFieldName(name: ReadingField | FieldName): string {
  return isCurveFact(name) ? CURVE_FACT_NAMES[name] : FIELD_NAMES[name];
}

/**
 * Content as it is read: the table of a curve by its facts. Of an editor who hands in the whole table
 * no more is kept either.
 */
export function readingOf(content: ReadingContent): ReadingContent {
  if (content.kind !== "curve" || content.curveTable === null) return content;
  const facts = curveFacts(content.curveTable, content.curveColumn);
  return {
    ...content,
    curveTable: null,
    ...(facts && {
      curveRows: facts.rows,
      curveFirst: facts.first,
      curveLast: facts.last,
      curvePeak: facts.peak,
    }),
  };
}

/**
 * Fields that belong to a reading, given the quantity, species and kind chosen in it so far.
 *
 * @param reading - The editor's own choices; never the submission, whose choices would leak.
 */
export function readingFieldsFor(reading: ReadingContent): ReadingField[] {
  const curve = reading.kind === "curve" ? CURVE_FACTS : [];
  const relevant: readonly string[] = [...relevantFields(reading), ...curve, "methodTags"];
  return READING_FIELDS.filter((name) => relevant.includes(name));
}

/** What a reading still lacks before it can be stored; limited to the fields asked for. */
export function readingMissing(
  reading: ReadingContent,
  asked: readonly ReadingField[] = READING_FIELDS,
): ReadingField[] {
  const missing: (FieldName | CurveFact)[] = openStatementFields(reading);
  if (reading.kind === "curve") {
    missing.push(...CURVE_FACTS.filter((name) => isEmpty(reading[name])));
  }
  if (reading.quantity === "neutralFraction" && reading.weighting === null) {
    missing.push("weighting");
  }
  if (reading.methodTags.length === 0) missing.push("methodTags");
  return READING_FIELDS.filter((name) => missing.includes(name) && asked.includes(name));
}

/** Only the fields of a reading that its own choices call for; the rest is emptied before it is stored. */
export function tidyReading(reading: ReadingContent): ReadingContent {
  const kept = readingFieldsFor(reading);
  const read = readingOf(reading);
  const tidy: ReadingContent = { ...emptyFields() };
  for (const name of kept) copyField(name, read, tidy);
  return tidy;
}

function copyField<K extends ReadingField>(name: K, from: ReadingContent, to: ReadingContent) {
  to[name] = from[name];
}

/** A partial reading laid over the one before: fields asked for come from the new one. */
export function mergeReading(
  previous: ReadingContent,
  next: ReadingContent,
  asked: readonly ReadingField[],
): ReadingContent {
  const merged: ReadingContent = { ...previous };
  const read = readingOf(next);
  for (const name of asked) copyField(name, read, merged);
  return tidyReading(merged);
}

/** Widths are compared by size: "-0.17" in the field for minus is 0.17. */
const WIDTHS: readonly string[] = ["plus", "minus", "limitSigma"];

function isEmpty(held: unknown): boolean {
  if (held === null || held === undefined) return true;
  if (typeof held === "string") return held.trim() === "";
  return Array.isArray(held) && held.length === 0;
}

/**
 * Whether two contents of one field agree: numbers by their printed value (0.3 is 0.30), lists as sets,
 * texts without surrounding space. An open weighting counts as unknown.
 */
export function fieldsAgree<K extends FieldName | CurveFact>(
  name: K,
  a: ReadingContent[K],
  b: ReadingContent[K],
): boolean {
  if (name === "weighting") return (a ?? "unknown") === (b ?? "unknown");
  if (isEmpty(a) || isEmpty(b)) return isEmpty(a) && isEmpty(b);
  if (Array.isArray(a) && Array.isArray(b)) {
    // A retired method and the one that took it over are one.
    const entries = (list: string[]) => new Set(name === "methodTags" ? currentTags(list) : list);
    const [left, right] = [entries(a), entries(b)];
    return left.size === right.size && [...left].every((entry) => right.has(entry));
  }
  if (typeof a === "string" && typeof b === "string") {
    if (isCurveFact(name) || isNumberField(name)) {
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

function textOrNull(name: ReadingField, content: ReadingContent): string | null {
  const text = isCurveFact(name) ? content[name] : fieldText(name, content);
  return text === "" ? null : (text ?? null);
}

/** What was read or submitted of one field in words; null when it is open. */
export function readingText(name: ReadingField, content: ReadingContent): string | null {
  return textOrNull(name, readingOf(content));
}

function openIn(content: ReadingContent, name: ReadingField): boolean {
  return isCurveFact(name) ? isEmpty(content[name]) : isOpen(content, name);
}

/** Reading and submission side by side, in every field either side's choices call for; both open is left out. */
export function compareReading(
  reading: ReadingContent,
  submission: ConstraintFields,
): ComparedField[] {
  const submitted = readingOf(submission);
  const called = new Set([...readingFieldsFor(reading), ...readingFieldsFor(submitted)]);
  return READING_FIELDS.filter(
    (name) => called.has(name) && !(openIn(reading, name) && openIn(submitted, name)),
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
  previousReading: ReadingContent | null,
  previousSubmitted: ConstraintFields | null,
  next: ConstraintFields,
): ReadingField[] {
  if (previousReading === null || previousSubmitted === null) return [...READING_FIELDS];
  const [before, after] = [readingOf(previousSubmitted), readingOf(next)];
  // A row changed inside a curve changes none of its facts: they are read anew all the same.
  const otherTable = previousSubmitted.curveTable !== next.curveTable;
  const again = READING_FIELDS.filter((name) => {
    const relevant = readingFieldsFor(after).includes(name);
    const changed =
      (isCurveFact(name) && otherTable) || !fieldsAgree(name, before[name], after[name]);
    const differed =
      (readingFieldsFor(previousReading).includes(name) ||
        readingFieldsFor(before).includes(name)) &&
      !fieldsAgree(name, previousReading[name], before[name]);
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
