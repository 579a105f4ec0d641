import { distributionOf, type Range } from "~shared/likelihood/distribution";
import type { Form } from "~shared/likelihood/forms";
import { gaussLegendre } from "~shared/numerics/quadrature";

/**
 * What a quoted summary loses of a curve: D_KL(curve‖summary) = ∫ p ln(p/q) dx in nats, both
 * normalized over the range.
 *
 * @param curve - The tabulated curve p.
 * @param summary - The form of the quoted numbers q.
 * @param range - Range of the variable; [0, 1] for a fraction.
 * @returns Not negative; +Infinity where the summary excludes what the curve allows; null when one of
 *   them can't be normalized there.
 *
 * Source: Kullback & Leibler (1951), Ann. Math. Stat. 22, 79.
 */
export function informationLoss(curve: Form, summary: Form, range: Range): number | null {
  const p = distributionOf(curve, range);
  const q = distributionOf(summary, range);
  if (p === null || q === null) return null;
  const from = Math.max(range[0], curve.reach[0]);
  const to = Math.min(range[1], curve.reach[1]);
  const edges = [
    from,
    ...[...curve.kinks, ...summary.kinks].filter((x) => x > from && x < to).sort((a, b) => a - b),
    to,
  ];
  const { nodes, weights } = gaussLegendre(10);
  const constant = Math.log(q.area) - Math.log(p.area);
  let loss = 0;
  for (let e = 0; e + 1 < edges.length; e++) {
    const panels = 4;
    const half = (edges[e + 1]! - edges[e]!) / panels / 2;
    for (let k = 0; k < panels; k++) {
      const centre = edges[e]! + (2 * k + 1) * half;
      for (let i = 0; i < nodes.length; i++) {
        const x = centre + half * nodes[i]!;
        const mp = curve.minus2LnL(x);
        const density = Math.exp(-0.5 * mp) / p.area;
        if (density > 0) {
          loss += half * weights[i]! * density * (0.5 * (summary.minus2LnL(x) - mp) + constant);
        }
      }
    }
  }
  // Rounding may leave a loss of nothing just below zero.
  return Math.max(0, loss);
}
