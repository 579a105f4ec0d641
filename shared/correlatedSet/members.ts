/** Which records can stand in a matrix, and what their errors and flips mean for it. */
import { decimalPlaces, parseDecimal } from "~shared/statement/decimal";
import type { ConstraintFields } from "~shared/statement/fields";
import { levelProbability } from "~shared/statement/level";
import { QUANTITY_WORDS } from "~shared/statement/words";
import { sigmasOfLevel } from "~shared/numerics/special";

/** A record as a set needs it. */
export interface SetMember {
  /** FL-0042 */
  readonly number: string;
  /** What tells papers apart: an id or a key. */
  readonly citation: string | null;
  readonly fields: ConstraintFields;
}

/** Why a record can't be part of a set, as the end of a sentence, or null. */
export function whyNotMember(fields: ConstraintFields): string | null {
  switch (fields.kind) {
    case "twoSided":
      break;
    case "upperLimit":
    case "lowerLimit":
      return "is a limit: it has no error that a matrix could correlate";
    case "band":
      return "is a band: it has no central value that a matrix could be about";
    case "curve":
      return "is a tabulated curve: a matrix of errors says less than the curve does";
    case "qualitative":
      return "is qualitative: it has no number";
    case null:
      return "says nothing yet";
  }
  if ([fields.value, fields.plus, fields.minus].some((text) => parseDecimal(text) === null)) {
    return "has no value with two errors yet";
  }
  if (fields.quantity === "neutralFraction" && fields.zRole === "uncertain") {
    return "has an uncertain redshift, over which its likelihood is averaged: there is no one error left to correlate";
  }
  return null;
}

/**
 * Whether the record's number changes its sign on the way to as used: x = 1 − Q turns an ionized
 * fraction round. A redshift at a fraction or a duration keeps its sign.
 */
export function isFlipped(fields: ConstraintFields): boolean {
  return (
    fields.quantity === "neutralFraction" && fields.species !== null && fields.species !== "neutral"
  );
}

/** One sigma of a printed two-sided value, and how far its printed digits leave it open. */
export interface PrintedSigma {
  /** Average of minus and plus over k; in the units printed. */
  readonly sigma: number;
  /** Half a unit in the last printed place, over k. */
  readonly slack: number;
}

/** Null where the paper states no level: then nobody knows how many sigma the errors are. */
export function printedSigma(fields: ConstraintFields): PrintedSigma | null {
  const level = levelProbability(fields.level, fields.levelPercent);
  const [plus, minus] = [parseDecimal(fields.plus), parseDecimal(fields.minus)];
  if (level === null || plus === null || minus === null) return null;
  const k = sigmasOfLevel(level);
  const places = Math.min(decimalPlaces(fields.plus ?? ""), decimalPlaces(fields.minus ?? ""));
  return {
    sigma: plus.abs().plus(minus.abs()).toNumber() / 2 / k,
    slack: (0.5 * 10 ** -places) / k,
  };
}

/** "z 7.1", "z 6.5 to 7.5", or the quantity: what one row of the matrix is about, in words. */
export function memberWords(fields: ConstraintFields): string {
  const what = fields.quantity === null ? "Open" : QUANTITY_WORDS[fields.quantity];
  if (fields.quantity === "neutralFraction") {
    const z =
      fields.z ?? (fields.zLow && fields.zHigh ? `${fields.zLow} to ${fields.zHigh}` : null);
    return z === null ? what : `z ${z}`;
  }
  return what;
}
