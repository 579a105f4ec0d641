import type { Form } from "~shared/likelihood/forms";
import { gaussLegendre } from "~shared/numerics/quadrature";
import { requireProbability } from "~shared/numerics/require";
import { brentRoot } from "~shared/numerics/roots";

/** Range of a variable; ends may be infinite. */
export type Range = readonly [low: number, high: number];

const RULE = gaussLegendre(10);
const CELLS = 64;

/** A likelihood normalized over a finite range, under a flat prior there. */
export interface Distribution {
  /** ∫ L dx over the range, L at its peak being 1; unit of x. */
  readonly area: number;
  cdf(x: number): number;
  /** @throws {DomainError} If p is not strictly between 0 and 1. */
  quantile(p: number): number;
}

/**
 * The form as a density over a range, by quadrature between its kinks.
 *
 * @param form - The likelihood; its kinks split the integral.
 * @param range - Lowest and highest value of the variable; an end may be infinite.
 * @returns Null when L does not fall towards an infinite end, or is zero all over the range.
 */
export function distributionOf(form: Form, [low, high]: Range): Distribution | null {
  const from = Math.max(low, form.reach[0]);
  const to = Math.min(high, form.reach[1]);
  if (!(to > from) || !Number.isFinite(from) || !Number.isFinite(to)) return null;
  const edges = cellEdges(form, from, to);
  const cumulative = new Float64Array(edges.length);
  for (let i = 0; i + 1 < edges.length; i++) {
    cumulative[i + 1] = cumulative[i]! + areaBetween(form, edges[i]!, edges[i + 1]!);
  }
  const area = cumulative[edges.length - 1]!;
  if (!(area > 0)) return null;

  const cumulated = (x: number): number => {
    if (x <= from) return 0;
    if (x >= to) return area;
    const i = lastAtOrBelow(edges, x);
    return cumulative[i]! + areaBetween(form, edges[i]!, x);
  };
  return {
    area,
    cdf: (x) => cumulated(x) / area,
    quantile: (p) => {
      requireProbability("p", p);
      const target = p * area;
      const i = Math.min(lastAtOrBelow(cumulative, target), edges.length - 2);
      return brentRoot(
        (x) => cumulative[i]! + areaBetween(form, edges[i]!, x) - target,
        edges[i]!,
        edges[i + 1]!,
      );
    },
  };
}

function cellEdges(form: Form, from: number, to: number): number[] {
  const edges = new Set<number>([from, to]);
  for (let i = 1; i < CELLS; i++) edges.add(from + ((to - from) * i) / CELLS);
  for (const kink of form.kinks) if (kink > from && kink < to) edges.add(kink);
  return [...edges].sort((a, b) => a - b);
}

function areaBetween(form: Form, a: number, b: number): number {
  const { nodes, weights } = RULE;
  const half = 0.5 * (b - a);
  const centre = 0.5 * (a + b);
  let sum = 0;
  for (let i = 0; i < nodes.length; i++) {
    sum += weights[i]! * Math.exp(-0.5 * form.minus2LnL(centre + half * nodes[i]!));
  }
  return sum * half;
}

/** Index of the last value ≤ target in an ascending array that starts at or below it. */
function lastAtOrBelow(ascending: ArrayLike<number>, target: number): number {
  let low = 0;
  let high = ascending.length - 1;
  while (high > low) {
    const middle = (low + high + 1) >> 1;
    if (ascending[middle]! <= target) low = middle;
    else high = middle - 1;
  }
  return low;
}
