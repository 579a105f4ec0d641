/** A matrix pasted as text: a square one must be symmetric, a lower triangle is taken as it is. */
import { parseDecimal } from "~shared/statement/decimal";

import { MOST_MEMBERS } from "./content";

const LONGEST_PASTE = 40_000;

/**
 * Reads rows of numbers, parted by blanks, tabs, commas, semicolons or the & of a TeX table.
 *
 * @returns The lower triangle as printed, or why it is none, as a sentence.
 */
export function readMatrixText(text: string): { triangle: string[][] } | { problem: string } {
  if (text.length > LONGEST_PASTE) return { problem: "This is longer than any printed matrix." };
  const rows = text
    .split(/\r?\n|\\\\/)
    .map((line) => line.split(/[\s,;&]+/).filter(Boolean))
    .filter((row) => row.length > 0);
  if (rows.length === 0) return { problem: "There is no row." };
  if (rows.length > MOST_MEMBERS) return { problem: `A set has at most ${MOST_MEMBERS} records.` };
  for (const [at, row] of rows.entries()) {
    const strange = row.find((entry) => parseDecimal(entry) === null);
    if (strange !== undefined) {
      return { problem: `Row ${at + 1}: “${strange.slice(0, 40)}” is not a number.` };
    }
  }
  if (rows.every((row, at) => row.length === at + 1)) return { triangle: rows };
  if (!rows.every((row) => row.length === rows.length)) {
    return { problem: "The rows are neither a square nor a lower triangle with its diagonal." };
  }
  for (const [i, row] of rows.entries()) {
    for (let j = 0; j < i; j++) {
      const [below, above] = [parseDecimal(row[j] ?? null), parseDecimal(rows[j]?.[i] ?? null)];
      if (!below || !above || !below.eq(above)) {
        return {
          problem: `Not symmetric: row ${i + 1}, column ${j + 1} is ${row[j]}, and row ${j + 1}, column ${i + 1} is ${rows[j]?.[i]}.`,
        };
      }
    }
  }
  return { triangle: rows.map((row, at) => row.slice(0, at + 1)) };
}
