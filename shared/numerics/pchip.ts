import { DomainError } from "~shared/errors/DomainError";

/**
 * Slopes of the monotone piecewise cubic through (x, y): weighted harmonic means inside,
 * three-point formulas at the ends.
 *
 * @param x - Strictly increasing abscissae, [n], n ≥ 2.
 * @param y - Ordinates, [n].
 * @returns Slopes at the nodes, [n].
 * @throws {DomainError} If the lengths differ, n < 2 or x does not increase.
 *
 * Source: Fritsch & Butland (1984), SIAM J. Sci. Stat. Comput. 5, 300; ends as in PCHIP (SLATEC).
 */
export function pchipSlopes(x: ArrayLike<number>, y: ArrayLike<number>): Float64Array {
  const n = x.length;
  if (n < 2 || y.length !== n) {
    throw new DomainError(
      "table",
      `${n} and ${y.length} values`,
      "two equally long columns of 2 or more",
    );
  }
  const slopes = new Float64Array(n);
  const h = new Float64Array(n - 1);
  const secant = new Float64Array(n - 1);
  for (let i = 0; i < n - 1; i++) {
    h[i] = x[i + 1]! - x[i]!;
    if (!(h[i]! > 0)) throw new DomainError(`x[${i + 1}]`, x[i + 1], `above ${x[i]}`);
    secant[i] = (y[i + 1]! - y[i]!) / h[i]!;
  }
  if (n === 2) return slopes.fill(secant[0]!);
  for (let i = 1; i < n - 1; i++) {
    const before = secant[i - 1]!;
    const after = secant[i]!;
    if (before * after <= 0) continue;
    const w1 = 2 * h[i]! + h[i - 1]!;
    const w2 = h[i]! + 2 * h[i - 1]!;
    slopes[i] = (w1 + w2) / (w1 / before + w2 / after);
  }
  slopes[0] = endSlope(h[0]!, h[1]!, secant[0]!, secant[1]!);
  slopes[n - 1] = endSlope(h[n - 2]!, h[n - 3]!, secant[n - 2]!, secant[n - 3]!);
  return slopes;
}

function endSlope(h0: number, h1: number, secant0: number, secant1: number): number {
  const slope = ((2 * h0 + h1) * secant0 - h0 * secant1) / (h0 + h1);
  if (Math.sign(slope) !== Math.sign(secant0)) return 0;
  if (Math.sign(secant0) !== Math.sign(secant1) && Math.abs(slope) > 3 * Math.abs(secant0)) {
    return 3 * secant0;
  }
  return slope;
}
