import { DomainError } from "~shared/errors/DomainError";
import { distributionOf } from "~shared/likelihood/distribution";
import type { Form } from "~shared/likelihood/forms";
import { type ModelRequest, sameRequest } from "~shared/likelihood/modelRequest";
import { gaussLegendre } from "~shared/numerics/quadrature";
import { goldenMinimum } from "~shared/numerics/roots";
import type { Quantity } from "~shared/statement/fields";

// Taken once: in a sandboxed realm every look-up of a global costs more than the arithmetic.
const { exp, log, max, min, sqrt } = Math;

/** What an alternatives mixture needs of a member. */
export interface MixtureMember {
  readonly shape: Form;
  readonly evaluatedIn: "linear" | "log10";
  readonly quantity: Quantity;
  readonly request: ModelRequest;
}

/**
 * Several answers to one question, of which one is right: the equal mixture (1/n) Σ p_i of the
 * members' densities, each normalized over [0, 1] for fractions and the real line otherwise.
 */
export interface Mixture {
  /** ln of weight over area of each member, [n]. */
  readonly logWeights: Float64Array;
  /** ln of the density −2 ln L is relative to. */
  readonly logPeak: number;
  /** Whether −2 ln L is relative to the peak over a common x, or to the mean of the members' peaks. */
  readonly commonPeak: boolean;
  /** −2 ln of the mixture, given each member's −2 ln L relative to its own peak, [n]. */
  minus2LnL(members: ArrayLike<number>): number;
}

/**
 * @param members - The alternatives, n ≥ 1, all of one quantity.
 * @throws {DomainError} If there is none, or a member can't be normalized (a limit on an optical depth).
 */
export function mixtureOf(members: readonly MixtureMember[]): Mixture {
  const n = members.length;
  const [first] = members;
  if (!first) throw new DomainError("members", 0, "one alternative or more");
  const logWeights = Float64Array.from(members, (member, i) => {
    const area = areaOf(member);
    if (area === null) throw new DomainError(`members[${i}]`, member.shape.name, "normalizable");
    return -log(n) - log(area);
  });
  const commonPeak = members.every(
    (member) =>
      sameRequest(member.request, first.request) && member.evaluatedIn === first.evaluatedIn,
  );
  const logPeak = commonPeak
    ? highestLogDensity(members, logWeights)
    : logSum(logWeights, new Float64Array(n));
  return {
    logWeights,
    logPeak,
    commonPeak,
    minus2LnL: (values) => mixtureMinus2LnL(logWeights, 0, n, logPeak, values, 0),
  };
}

/**
 * The arithmetic of a mixture over packed numbers, without allocation.
 *
 * @param logWeights - Those of this mixture start at `at`, [n].
 * @param values - The members' −2 ln L, starting at `from`, [n].
 */
export function mixtureMinus2LnL(
  logWeights: ArrayLike<number>,
  at: number,
  n: number,
  logPeak: number,
  values: ArrayLike<number>,
  from: number,
): number {
  let top = -Infinity;
  for (let i = 0; i < n; i++) top = max(top, logWeights[at + i]! - 0.5 * values[from + i]!);
  if (top === -Infinity) return Infinity;
  let sum = 0;
  for (let i = 0; i < n; i++) sum += exp(logWeights[at + i]! - 0.5 * values[from + i]! - top);
  return -2 * (top + log(sum) - logPeak);
}

/**
 * Standard deviation of an equal mixture of Gaussians on the real line.
 *
 * @param means - Of the members, any unit, [n], n ≥ 1.
 * @param sigmas - Of the members, same unit, [n].
 * @returns In that unit.
 */
export function equalMixtureSd(means: readonly number[], sigmas: readonly number[]): number {
  const n = means.length;
  const mean = means.reduce((sum, m) => sum + m, 0) / n;
  const second = means.reduce((sum, m, i) => sum + (m - mean) ** 2 + sigmas[i]! ** 2, 0) / n;
  return sqrt(second);
}

/** Below this log10 of a fraction nothing is left of an area in x. */
const LOWEST_LOG = -16;

/** ∫ L over the range of the member's quantity, in x also where L is a function of log10 x. */
function areaOf({ shape, evaluatedIn, quantity }: MixtureMember): number | null {
  if (evaluatedIn === "linear") {
    const range = quantity === "neutralFraction" ? ([0, 1] as const) : shape.reach;
    return distributionOf(shape, range)?.area ?? null;
  }
  const from = max(shape.reach[0], LOWEST_LOG);
  const to = min(shape.reach[1], 0);
  const edges = [from, ...shape.kinks.filter((t) => t > from && t < to), to];
  const { nodes, weights } = gaussLegendre(10);
  let area = 0;
  for (let e = 0; e + 1 < edges.length; e++) {
    const panels = 32;
    const half = (edges[e + 1]! - edges[e]!) / panels / 2;
    for (let p = 0; p < panels; p++) {
      const centre = edges[e]! + (2 * p + 1) * half;
      for (let i = 0; i < nodes.length; i++) {
        const t = centre + half * nodes[i]!;
        area += half * weights[i]! * Math.LN10 * 10 ** t * exp(-0.5 * shape.minus2LnL(t));
      }
    }
  }
  return area > 0 ? area : null;
}

/** ln of the highest value of Σ w_i p_i over a common variable. */
function highestLogDensity(members: readonly MixtureMember[], logWeights: Float64Array): number {
  const values = new Float64Array(members.length);
  const heightAt = (x: number): number => {
    members.forEach(({ shape }, i) => (values[i] = shape.minus2LnL(x)));
    return logSum(logWeights, values);
  };
  const [first] = members;
  const fraction = first!.quantity === "neutralFraction";
  const low = fraction
    ? first!.evaluatedIn === "log10"
      ? LOWEST_LOG
      : 0
    : min(...members.map(({ shape }) => shape.reach[0]));
  const high = fraction
    ? first!.evaluatedIn === "log10"
      ? 0
      : 1
    : max(...members.map(({ shape }) => shape.reach[1]));
  const places = new Set<number>();
  const steps = 1000;
  for (let i = 0; i <= steps; i++) places.add(low + ((high - low) * i) / steps);
  for (const { shape } of members) {
    for (const place of [shape.peak, ...shape.kinks]) {
      if (place >= low && place <= high) places.add(place);
    }
  }
  const ordered = [...places].sort((a, b) => a - b);
  const heights = ordered.map(heightAt);
  let best = 0;
  heights.forEach((height, i) => {
    if (height > heights[best]!) best = i;
  });
  const place = goldenMinimum(
    (x) => -heightAt(x),
    ordered[max(0, best - 1)]!,
    ordered[min(ordered.length - 1, best + 1)]!,
    1e-9 * (high - low),
  );
  return max(heights[best]!, heightAt(place));
}

function logSum(logWeights: ArrayLike<number>, values: ArrayLike<number>): number {
  return -0.5 * mixtureMinus2LnL(logWeights, 0, logWeights.length, 0, values, 0);
}
