import type { Background } from "~shared/cosmology/background";
import { DomainError } from "~shared/errors/DomainError";
import { type History, type HistoryWarning, historyOf } from "~shared/history/history";
import { pchipSlopes } from "~shared/numerics/pchip";
import { gaussLegendre } from "~shared/numerics/quadrature";
import { brentRoot } from "~shared/numerics/roots";

const RULE = gaussLegendre(10);
/** Below this neutral fraction at its high end a table leaves optical depth beyond it. */
const LEAK_BELOW = 0.99;

/**
 * A history given as a table, joined by a monotone piecewise cubic; the end values hold outside.
 *
 * @param z - Redshifts, strictly increasing, not negative, [n], n ≥ 2.
 * @param x - Neutral fractions at those redshifts, each in [0, 1], [n].
 * @throws {DomainError} If the columns differ in length, z does not increase or x leaves [0, 1].
 *
 * Source: Fritsch & Butland (1984), SIAM J. Sci. Stat. Comput. 5, 300.
 */
export function tabulatedHistory(z: readonly number[], x: readonly number[]): History {
  const n = z.length;
  if (n < 2 || x.length !== n) {
    throw new DomainError(
      "table",
      `${n} and ${x.length} values`,
      "two equally long columns of 2 or more",
    );
  }
  const zs = Float64Array.from(z);
  const xs = Float64Array.from(x);
  for (let i = 0; i < n; i++) {
    if (!(zs[i]! >= 0 && zs[i]! < Infinity))
      throw new DomainError(`z[${i}]`, z[i], "zero or positive");
    if (!(xs[i]! >= 0 && xs[i]! <= 1)) throw new DomainError(`x[${i}]`, x[i], "from 0 to 1");
  }
  const slopes = pchipSlopes(zs, xs);
  const first = zs[0]!;
  const last = zs[n - 1]!;

  const cellOf = (at: number): number => {
    let low = 0;
    let high = n - 1;
    while (high - low > 1) {
      const middle = (low + high) >> 1;
      if (zs[middle]! <= at) low = middle;
      else high = middle;
    }
    return low;
  };
  const inCell = (i: number, at: number): number => {
    const h = zs[i + 1]! - zs[i]!;
    const t = (at - zs[i]!) / h;
    const s = 1 - t;
    return (
      s * s * ((1 + 2 * t) * xs[i]! + t * h * slopes[i]!) +
      t * t * ((1 + 2 * s) * xs[i + 1]! - s * h * slopes[i + 1]!)
    );
  };
  const neutral = (at: number): number =>
    at <= first ? xs[0]! : at >= last ? xs[n - 1]! : inCell(cellOf(at), at);
  /** ∫ x dz over a stretch of cell i, exact for the cubic. */
  const integralInCell = (i: number, from: number, to: number): number => {
    const middle = 0.5 * (from + to);
    return ((to - from) / 6) * (inCell(i, from) + 4 * inCell(i, middle) + inCell(i, to));
  };

  return historyOf({
    kind: "tabulated",
    parameters: {},
    breaks: [...zs],
    covered: [first, last],
    warnings: tableWarnings(zs, xs),
    x: neutral,
    ionized: (at) => 1 - neutral(at),
    hydrogenDepth: (background, z1, z2) => {
      let depth = 0;
      if (z1 < first) depth += (1 - xs[0]!) * background.depthBetween(z1, Math.min(z2, first));
      if (z2 > last) depth += (1 - xs[n - 1]!) * background.depthBetween(Math.max(z1, last), z2);
      for (let i = 0; i < n - 1; i++) {
        const from = Math.max(z1, zs[i]!);
        const to = Math.min(z2, zs[i + 1]!);
        if (to > from) depth += depthInCell(background, (at) => 1 - inCell(i, at), from, to);
      }
      return depth;
    },
    redshiftAtFraction: (f) => {
      if (xs[n - 1] === f) return last;
      for (let i = n - 2; i >= 0; i--) {
        if (xs[i] === f) return zs[i]!;
        // A cell is monotone, so that a root is there exactly when its ends lie on both sides.
        if ((xs[i]! - f) * (xs[i + 1]! - f) < 0) {
          return brentRoot((at) => inCell(i, at) - f, zs[i]!, zs[i + 1]!);
        }
      }
      return null;
    },
    integral: (zLow, zHigh) => {
      let sum = 0;
      if (zLow < first) sum += xs[0]! * (Math.min(zHigh, first) - zLow);
      if (zHigh > last) sum += xs[n - 1]! * (zHigh - Math.max(zLow, last));
      for (let i = 0; i < n - 1; i++) {
        const from = Math.max(zLow, zs[i]!);
        const to = Math.min(zHigh, zs[i + 1]!);
        if (to > from) sum += integralInCell(i, from, to);
      }
      return sum;
    },
  });
}

function depthInCell(
  background: Background,
  ionized: (z: number) => number,
  from: number,
  to: number,
): number {
  const { nodes, weights } = RULE;
  const u1 = Math.sqrt(1 + from);
  const u2 = Math.sqrt(1 + to);
  const panels = Math.ceil((u2 - u1) / 0.4);
  const half = (u2 - u1) / panels / 2;
  let sum = 0;
  for (let p = 0; p < panels; p++) {
    const centre = u1 + (2 * p + 1) * half;
    for (let i = 0; i < nodes.length; i++) {
      const u = centre + half * nodes[i]!;
      sum += weights[i]! * ionized(u * u - 1) * background.depthDensity(u);
    }
  }
  return sum * half;
}

function tableWarnings(z: Float64Array, x: Float64Array): HistoryWarning[] {
  const warnings: HistoryWarning[] = [];
  const end = x[x.length - 1]!;
  if (end < LEAK_BELOW) {
    warnings.push({
      code: "leaksAtHighRedshift",
      text: `The table ends at z = ${z[z.length - 1]} with a neutral fraction of ${end}; that value is held above it and adds optical depth.`,
    });
  }
  if (x.some((value, i) => i > 0 && value < x[i - 1]!)) {
    warnings.push({
      code: "notMonotone",
      text: "The neutral fraction falls with redshift somewhere in the table; a redshift at a fraction is the highest one.",
    });
  }
  return warnings;
}
