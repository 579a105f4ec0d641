/** A correlated set: records of one paper with the matrix that the paper prints for them. */
import { REVISION_STATES, type RevisionState } from "~shared/review/states";

export const MATRIX_KINDS = ["correlation", "covariance"] as const;
export type MatrixKind = (typeof MATRIX_KINDS)[number];

export const MATRIX_KIND_WORDS: Record<MatrixKind, string> = {
  correlation: "Correlation matrix",
  covariance: "Covariance matrix",
};

/** What the paper prints about the set; a draft may leave anything open. */
export interface SetContent {
  label: string | null;
  /** Record numbers (FL-0042) in the order of the matrix's rows, [n]. */
  members: string[];
  matrixKind: MatrixKind | null;
  /** Lower triangle as printed: row i holds i + 1 entries, "" while open; the other half mirrors it. */
  triangle: string[][];
  /** Table, figure, section. */
  place: string | null;
  page: string | null;
  note: string | null;
}

/** Records a set can have; a paper's matrix is seldom larger than its page. */
export const MOST_MEMBERS = 40;
export const LONGEST_SET_LABEL = 120;
export const LONGEST_SET_TEXT = 2000;
/** No printed number needs more. */
export const LONGEST_ENTRY = 40;

/** States of a set: those of a revision, and withdrawn for an approved one that a maintainer took back. */
export const SET_STATES = [...REVISION_STATES, "withdrawn"] as const;
export type SetState = RevisionState | "withdrawn";

/** Which state a set may move to. Adding a state without a row does not compile. */
export const NEXT_SET_STATES: Record<SetState, readonly SetState[]> = {
  draft: ["submitted", "discarded"],
  submitted: ["inReview", "discarded"],
  inReview: ["approved", "returned", "submitted"], // back to submitted: the claim ended
  returned: [], // the answer is a new set
  approved: ["withdrawn"],
  withdrawn: [],
  discarded: [],
};

export function emptySetContent(): SetContent {
  return {
    label: null,
    members: [],
    matrixKind: null,
    triangle: [],
    place: null,
    page: null,
    note: null,
  };
}

/** The triangle at another size: what stands in it is kept, new entries are open. */
export function fitTriangle(triangle: readonly (readonly string[])[], size: number): string[][] {
  return Array.from({ length: size }, (_, row) =>
    Array.from({ length: row + 1 }, (_entry, column) => triangle[row]?.[column] ?? ""),
  );
}

/** The entry for two members in either order; "" while it is open. */
export function entryAt(
  triangle: readonly (readonly string[])[],
  row: number,
  column: number,
): string {
  return triangle[Math.max(row, column)]?.[Math.min(row, column)] ?? "";
}

/**
 * The members in another order, or some of them, with their entries.
 *
 * @param keep - Places of the members that stay, in their new order, [m].
 */
export function rearrange(content: SetContent, keep: readonly number[]): SetContent {
  return {
    ...content,
    members: keep.map((at) => content.members[at] ?? ""),
    triangle: keep.map((at, row) =>
      keep.slice(0, row + 1).map((other) => entryAt(content.triangle, at, other)),
    ),
  };
}
