/** Numbers a correlated set is quoted by: FLS-0003. */
import { DomainError } from "~shared/errors/DomainError";

/**
 * The quotable number of a correlated set.
 *
 * @param number - Whole, from 1.
 * @throws {DomainError} For anything else.
 */
export function formatSetNumber(number: number): string {
  if (!Number.isSafeInteger(number) || number < 1) {
    throw new DomainError("number", number, "a whole number from 1");
  }
  return `FLS-${String(number).padStart(4, "0")}`;
}

/** Reads "FLS-0003" or "fls3"; null for anything else, a record's number too. */
export function parseSetNumber(text: string): number | null {
  const digits = /^\s*fls-?0*([1-9]\d{0,8})\s*$/i.exec(text)?.[1];
  return digits === undefined ? null : Number(digits);
}
