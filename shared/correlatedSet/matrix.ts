/** The matrix of a set: printed entries as numbers, correlations as printed and as used. */
import { CholeskyDecomposition, EigenvalueDecomposition, Matrix } from "ml-matrix";

import { parseDecimal } from "~shared/statement/decimal";

import { entryAt, type SetContent } from "./content";
import { isFlipped, type SetMember } from "./members";

/** The whole matrix as numbers, [n, n]; null while an entry is open or is no number. */
export function matrixNumbers(
  triangle: readonly (readonly string[])[],
  size: number,
): number[][] | null {
  const numbers = Array.from({ length: size }, (_, row) =>
    Array.from(
      { length: size },
      (_entry, column) => parseDecimal(entryAt(triangle, row, column))?.toNumber() ?? null,
    ),
  );
  return numbers.some((row) => row.includes(null)) ? null : (numbers as number[][]);
}

/**
 * Correlations of a printed matrix, ρ_ij = C_ij / √(C_ii C_jj) for a covariance.
 *
 * @returns [n, n] with ones on the diagonal; null while an entry is missing or a variance isn't positive.
 */
export function correlations(
  content: Pick<SetContent, "matrixKind" | "triangle">,
  size: number,
): number[][] | null {
  const printed = matrixNumbers(content.triangle, size);
  if (printed === null || content.matrixKind === null) return null;
  if (content.matrixKind === "correlation") return printed;
  const sigmas = printed.map((row, i) => Math.sqrt(row[i] ?? NaN));
  if (sigmas.some((sigma) => !(sigma > 0))) return null;
  return printed.map((row, i) =>
    row.map((entry, j) => (i === j ? 1 : entry / ((sigmas[i] ?? NaN) * (sigmas[j] ?? NaN)))),
  );
}

/**
 * Correlations as used: where exactly one of two members is turned round (x = 1 − Q), their
 * correlation changes its sign; where both are, it stays.
 *
 * @param rho - As printed, [n, n].
 * @param members - In the order of the matrix, [n].
 */
export function usedCorrelations(
  rho: readonly (readonly number[])[],
  members: readonly Pick<SetMember, "fields">[],
): number[][] {
  const flips = members.map(({ fields }) => isFlipped(fields));
  return rho.map((row, i) =>
    // 0 − 0 rather than −0, which would be drawn with a sign.
    row.map((entry, j) => (flips[i] === flips[j] ? entry : 0 - entry)),
  );
}

/** Whether a symmetric matrix is positive definite, by Cholesky. */
export function isPositiveDefinite(matrix: readonly (readonly number[])[]): boolean {
  return new CholeskyDecomposition(new Matrix(matrix.map((row) => [...row]))).isPositiveDefinite();
}

/** The smallest eigenvalue of a symmetric matrix. */
export function smallestEigenvalue(matrix: readonly (readonly number[])[]): number {
  const { realEigenvalues } = new EigenvalueDecomposition(
    new Matrix(matrix.map((row) => [...row])),
    { assumeSymmetric: true },
  );
  return Math.min(...realEigenvalues);
}
