import { DomainError } from "~shared/errors/DomainError";

// Taken once: in a sandboxed realm every look-up of a global costs more than the arithmetic.
const { cos } = Math;

const DEGREE = 3;
const N = DEGREE + 1;

/**
 * A smooth function of one variable as a cubic in each of many even cells: for functions that a fit
 * asks millions of times and whose library call costs more than all the rest.
 */
export class PolynomialTable {
  /** Coefficients of each cell in s from 0 to 1, ascending powers, [cells + 1, 4]. */
  private readonly coefficients: Float64Array;

  /**
   * @param f - The function; smooth on the scale of a cell.
   * @param low - First place.
   * @param high - Last place; the methods below answer for low ≤ t ≤ high only. One cell more is kept,
   *   for arguments that round up to it.
   * @param perUnit - Cells per unit of t: the error is |f⁗|/(3072 perUnit⁴) at most (Chebyshev's bound
   *   on each cell).
   * @throws {DomainError} Unless high is above low and the cells are whole.
   */
  constructor(
    f: (t: number) => number,
    readonly low: number,
    readonly high: number,
    private readonly perUnit: number,
  ) {
    const cells = (high - low) * perUnit;
    if (!(cells >= 1 && Number.isInteger(cells))) {
      throw new DomainError("cells", cells, "a whole number of 1 or more");
    }
    this.coefficients = new Float64Array((cells + 1) * N);
    const places = Float64Array.from(
      { length: N },
      (_, j) => 0.5 - 0.5 * cos((Math.PI * (j + 0.5)) / N),
    );
    const differences = new Float64Array(N);
    for (let cell = 0; cell <= cells; cell++) {
      for (let j = 0; j < N; j++) differences[j] = f(low + (cell + places[j]!) / perUnit);
      for (let k = 1; k < N; k++) {
        for (let j = N - 1; j >= k; j--) {
          differences[j] = (differences[j]! - differences[j - 1]!) / (places[j]! - places[j - k]!);
        }
      }
      // Newton's form, multiplied out from the innermost bracket.
      const c = this.coefficients.subarray(cell * N, cell * N + N);
      c[0] = differences[DEGREE]!;
      for (let k = DEGREE - 1; k >= 0; k--) {
        for (let i = DEGREE - k; i > 0; i--) c[i] = c[i - 1]! - places[k]! * c[i]!;
        c[0] = differences[k]! - places[k]! * c[0]!;
      }
    }
  }

  /** The function at t, low ≤ t ≤ high (not checked). */
  at(t: number): number {
    const c = this.coefficients;
    const place = (t - this.low) * this.perUnit;
    const cell = place | 0;
    const s = place - cell;
    const i = N * cell;
    return c[i]! + s * (c[i + 1]! + s * (c[i + 2]! + s * c[i + 3]!));
  }

  /**
   * Sets out[at + j] to f(factor × scales[j]) for from ≤ j < to: one value for each place of a line,
   * without a call between them. Every argument must lie in low ≤ t ≤ high (not checked).
   */
  setScaled(
    scales: Float64Array,
    factor: number,
    from: number,
    to: number,
    out: Float64Array,
    at: number,
  ): void {
    const c = this.coefficients;
    const perScale = factor * this.perUnit;
    const origin = -this.low * this.perUnit;
    for (let j = from; j < to; j++) {
      const place = scales[j]! * perScale + origin;
      const cell = place | 0;
      const s = place - cell;
      const i = N * cell;
      out[at + j] = c[i]! + s * (c[i + 1]! + s * (c[i + 2]! + s * c[i + 3]!));
    }
  }

  /** Adds weight × f(factor × scales[j]) to out[at + j]; otherwise as setScaled. */
  addScaled(
    scales: Float64Array,
    factor: number,
    weight: number,
    from: number,
    to: number,
    out: Float64Array,
    at: number,
  ): void {
    const c = this.coefficients;
    const perScale = factor * this.perUnit;
    const origin = -this.low * this.perUnit;
    for (let j = from; j < to; j++) {
      const place = scales[j]! * perScale + origin;
      const cell = place | 0;
      const s = place - cell;
      const i = N * cell;
      out[at + j]! += weight * (c[i]! + s * (c[i + 1]! + s * (c[i + 2]! + s * c[i + 3]!)));
    }
  }
}
