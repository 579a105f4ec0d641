/** The second reading of a matrix: entry by entry, numbers by their printed value. */
import { parseDecimal } from "~shared/statement/decimal";

import { fitTriangle, MATRIX_KIND_WORDS, type MatrixKind } from "./content";

/** What an editor reads again: the kind of matrix and its lower triangle. */
export interface SetReadingContent {
  matrixKind: MatrixKind | null;
  triangle: string[][];
}

export interface ComparedEntry {
  /** From 0; null for the kind of matrix. */
  row: number | null;
  column: number | null;
  reading: string;
  submitted: string;
  agrees: boolean;
}

/** A correlation matrix has ones on its diagonal: nothing to read there. */
export function isReadAgain(kind: MatrixKind | null, row: number, column: number): boolean {
  return kind !== "correlation" || row !== column;
}

/** The reading at the size of the set, with the ones of a correlation matrix filled in. */
export function tidySetReading(reading: SetReadingContent, size: number): SetReadingContent {
  return {
    matrixKind: reading.matrixKind,
    triangle: fitTriangle(reading.triangle, size).map((entries, row) =>
      entries.map((text, column) =>
        isReadAgain(reading.matrixKind, row, column) ? text.trim() : "1",
      ),
    ),
  };
}

/** Why a reading can't be stored yet, as a sentence, or null. */
export function setReadingMissing(reading: SetReadingContent): string | null {
  if (reading.matrixKind === null) {
    return "Say whether the paper prints covariances or correlations.";
  }
  const entries = reading.triangle.flat();
  const open = entries.filter((text) => text === "").length;
  if (open > 0) {
    return open === 1 ? "One entry is open." : `${open} entries are open.`;
  }
  const strange = entries.find((text) => parseDecimal(text) === null);
  return strange === undefined ? null : `“${strange.slice(0, 40)}” is not a number.`;
}

function sameNumber(a: string, b: string): boolean {
  const [left, right] = [parseDecimal(a), parseDecimal(b)];
  return left !== null && right !== null && left.eq(right);
}

/** Reading and submission side by side, the kind of matrix first; sizes are the same. */
export function compareSetReading(
  reading: SetReadingContent,
  submitted: SetReadingContent,
): ComparedEntry[] {
  const words = (kind: MatrixKind | null): string => (kind === null ? "" : MATRIX_KIND_WORDS[kind]);
  return [
    {
      row: null,
      column: null,
      reading: words(reading.matrixKind),
      submitted: words(submitted.matrixKind),
      agrees: reading.matrixKind === submitted.matrixKind,
    },
    ...submitted.triangle.flatMap((entries, row) =>
      entries.map((text, column) => {
        const read = reading.triangle[row]?.[column] ?? "";
        return { row, column, reading: read, submitted: text, agrees: sameNumber(read, text) };
      }),
    ),
  ];
}
