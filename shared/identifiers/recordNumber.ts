/** Numbers a record is quoted by: FL-0042, and FL-0042.3 with its revision. */
import { DomainError } from "~shared/errors/DomainError";

/**
 * The quotable number of a record.
 *
 * @param number - Whole, from 1.
 * @throws {DomainError} For anything else.
 */
export function formatRecordNumber(number: number): string {
  if (!Number.isSafeInteger(number) || number < 1) {
    throw new DomainError("number", number, "a whole number from 1");
  }
  return `FL-${String(number).padStart(4, "0")}`;
}

/** The number with its revision: FL-0042.3. */
export function formatQuotable(number: number, ordinal: number): string {
  if (!Number.isSafeInteger(ordinal) || ordinal < 1) {
    throw new DomainError("ordinal", ordinal, "a whole number from 1");
  }
  return `${formatRecordNumber(number)}.${ordinal}`;
}

/** Reads "FL-0042", "fl-42" or "FL-0042.3" (the revision is left aside); null for anything else. */
export function parseRecordNumber(text: string): number | null {
  const digits = /^\s*fl-?0*([1-9]\d{0,8})(?:\.\d{1,6})?\s*$/i.exec(text)?.[1];
  return digits === undefined ? null : Number(digits);
}

/** Reads "FL-0042.3" whole; null for anything else, a number without its revision included. */
export function parseQuotable(text: string): { number: number; ordinal: number } | null {
  const number = parseRecordNumber(text);
  const ordinal = /\.0*([1-9]\d{0,5})\s*$/.exec(text)?.[1];
  return number === null || ordinal === undefined ? null : { number, ordinal: Number(ordinal) };
}
