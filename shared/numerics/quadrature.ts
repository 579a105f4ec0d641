import { DomainError } from "~shared/errors/DomainError";

/** Nodes and weights of a rule on [−1, 1]; both [n]. */
export interface QuadratureRule {
  readonly nodes: Float64Array;
  readonly weights: Float64Array;
}

const rules = new Map<number, QuadratureRule>();

/**
 * Gauss–Legendre rule on [−1, 1], exact for polynomials of degree 2n − 1; kept after first use.
 *
 * @param n - Number of nodes, 1 to 200.
 * @throws {DomainError} If n is not a whole number in that range.
 *
 * Source: Newton's method on the Legendre recurrence from Tricomi's starting values.
 */
export function gaussLegendre(n: number): QuadratureRule {
  const known = rules.get(n);
  if (known) return known;
  if (!Number.isInteger(n) || n < 1 || n > 200) {
    throw new DomainError("n", n, "a whole number from 1 to 200");
  }
  const nodes = new Float64Array(n);
  const weights = new Float64Array(n);
  for (let i = 0; i < (n + 1) >> 1; i++) {
    let t = Math.cos((Math.PI * (i + 0.75)) / (n + 0.5));
    let slope = 1;
    for (let step = 0; step < 100; step++) {
      let previous = 1;
      let current = t;
      for (let k = 2; k <= n; k++) {
        const next = ((2 * k - 1) * t * current - (k - 1) * previous) / k;
        previous = current;
        current = next;
      }
      slope = (n * (t * current - previous)) / (t * t - 1);
      const change = current / slope;
      t -= change;
      if (Math.abs(change) < 1e-15) break;
    }
    if (n === 1) {
      t = 0;
      slope = 1;
    }
    const weight = 2 / ((1 - t * t) * slope * slope);
    nodes[i] = -t;
    nodes[n - 1 - i] = t;
    weights[i] = weight;
    weights[n - 1 - i] = weight;
  }
  const rule = { nodes, weights };
  rules.set(n, rule);
  return rule;
}

/**
 * ∫ f over [a, b] by `panels` equal Gauss–Legendre panels of `order` nodes each.
 * For integrands known to be smooth on that scale; no error estimate.
 *
 * @param a - Lower end, finite.
 * @param b - Upper end, finite; below a the integral changes its sign.
 * @param panels - Whole number of panels, 1 or more.
 * @param order - Nodes a panel, 1 to 200.
 * @returns Unit of f times unit of t.
 * @throws {DomainError} If there is no rule of that order.
 */
export function integratePanels(
  f: (t: number) => number,
  a: number,
  b: number,
  panels: number,
  order: number,
): number {
  const { nodes, weights } = gaussLegendre(order);
  const half = (b - a) / panels / 2;
  let sum = 0;
  for (let p = 0; p < panels; p++) {
    const centre = a + (2 * p + 1) * half;
    for (let i = 0; i < order; i++) sum += weights[i]! * f(centre + half * nodes[i]!);
  }
  return sum * half;
}

/**
 * ∫ f over [a, b] by bisection until two Gauss–Legendre orders agree.
 *
 * @param f - Integrand, finite on [a, b]; kinks are fine, they cost bisections.
 * @param tolerance - Accepted error relative to the largest panel found, default 1e-12.
 * @returns The integral; 0 when a = b.
 */
export function integrateAdaptive(
  f: (t: number) => number,
  a: number,
  b: number,
  tolerance = 1e-12,
): number {
  const whole = integratePanels(f, a, b, 4, 10);
  const scale = Math.max(
    Math.abs(whole),
    integratePanels((t) => Math.abs(f(t)), a, b, 2, 10),
  );
  return bisect(f, a, b, integratePanels(f, a, b, 1, 10), tolerance * scale, 0);
}

function bisect(
  f: (t: number) => number,
  a: number,
  b: number,
  coarse: number,
  error: number,
  depth: number,
): number {
  const middle = 0.5 * (a + b);
  const left = integratePanels(f, a, middle, 1, 10);
  const right = integratePanels(f, middle, b, 1, 10);
  if (Math.abs(left + right - coarse) <= error || depth >= 40) return left + right;
  // The error bound is not halved: each accepted panel is far better than its estimate.
  return (
    bisect(f, a, middle, left, error, depth + 1) + bisect(f, middle, b, right, error, depth + 1)
  );
}
