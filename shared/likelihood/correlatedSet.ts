import { CholeskyDecomposition, Matrix } from "ml-matrix";

import { DomainError } from "~shared/errors/DomainError";

/** A set of two-sided values with a correlation matrix. */
export interface CorrelatedSet {
  /** Inverse of the correlation matrix, row-major, [n, n]. */
  readonly inverse: Float64Array;
  /**
   * χ² = tᵀ ρ⁻¹ t with t_i = r_i over the sigma on the residual's side.
   * @param t - Residuals in sigma, [n].
   */
  chiSquared(t: ArrayLike<number>): number;
}

/**
 * @param rho - Correlation matrix, [n, n]: symmetric, ones on the diagonal, positive definite.
 * @throws {DomainError} If it is not such a matrix.
 */
export function correlatedSet(rho: readonly (readonly number[])[]): CorrelatedSet {
  const n = rho.length;
  if (n === 0) throw new DomainError("rho", "an empty matrix", "of one row or more");
  rho.forEach((row, i) => {
    if (row.length !== n) throw new DomainError(`rho[${i}]`, `${row.length} values`, `of ${n}`);
    row.forEach((value, j) => {
      if (!(Math.abs(value) <= 1)) throw new DomainError(`rho[${i}][${j}]`, value, "from -1 to 1");
      if (Math.abs(value - rho[j]![i]!) > 1e-9) {
        throw new DomainError(`rho[${i}][${j}]`, value, "the same on both sides of the diagonal");
      }
    });
    if (Math.abs(row[i]! - 1) > 1e-9) throw new DomainError(`rho[${i}][${i}]`, row[i], "1");
  });
  // The library wants it symmetric to the last bit, and ones that are.
  const matrix = new Matrix(
    rho.map((row, i) => row.map((value, j) => (i === j ? 1 : 0.5 * (value + rho[j]![i]!)))),
  );
  const cholesky = new CholeskyDecomposition(matrix);
  if (!cholesky.isPositiveDefinite()) {
    throw new DomainError("rho", "this matrix", "positive definite");
  }
  const inverse = Float64Array.from(cholesky.solve(Matrix.eye(n)).to1DArray());
  return { inverse, chiSquared: (t) => quadraticForm(inverse, 0, t, n) };
}

/**
 * Part of a correlated set: the exact marginal, rows and columns dropped before the inverse is taken.
 *
 * @param rho - The full matrix, [n, n].
 * @param keep - Indices of the members kept, in order, [m].
 * @returns The correlation matrix of those members, [m, m].
 * @throws {DomainError} If an index lies outside the matrix.
 */
export function marginalCorrelation(
  rho: readonly (readonly number[])[],
  keep: readonly number[],
): number[][] {
  return keep.map((i) =>
    keep.map((j) => {
      const value = rho[i]?.[j];
      if (value === undefined) throw new DomainError("keep", `${i}, ${j}`, "inside the matrix");
      return value;
    }),
  );
}

/**
 * tᵀ A t over packed numbers, without allocation.
 *
 * @param a - Symmetric matrix, row-major [n, n], its first number at `at`.
 * @param t - Residuals in sigma, [n].
 * @returns +Infinity where a residual is infinite; never NaN.
 */
export function quadraticForm(
  a: ArrayLike<number>,
  at: number,
  t: ArrayLike<number>,
  n: number,
): number {
  let sum = 0;
  for (let i = 0; i < n; i++) {
    const ti = t[i]!;
    if (ti === Infinity || ti === -Infinity) return Infinity;
    sum += a[at + i * n + i]! * ti * ti;
    for (let j = 0; j < i; j++) sum += 2 * a[at + i * n + j]! * ti * t[j]!;
  }
  return sum;
}
