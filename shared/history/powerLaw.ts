import type { Background } from "~shared/cosmology/background";
import { DomainError } from "~shared/errors/DomainError";
import { type History, historyOf } from "~shared/history/history";
import { gaussLegendre } from "~shared/numerics/quadrature";
import { requirePositive, requireWithin } from "~shared/numerics/require";

// Taken once: in a sandboxed realm every look-up of a global costs more than the arithmetic.
const { exp, expm1, log1p, max, min, sqrt } = Math;

/** Where the first sources switch on unless said otherwise (Planck intermediate results XLVII). */
export const DEFAULT_Z_EARLY = 20;

const RULE = gaussLegendre(16);

/**
 * The redshift-asymmetric history: Q = 1 up to z_end, ((z_early − z)/(z_early − z_end))^α up to
 * z_early, 0 beyond.
 *
 * @param zEnd - Redshift at which hydrogen is ionized, not negative.
 * @param alpha - Exponent, positive.
 * @param zEarly - Redshift of the first sources, above zEnd, default 20.
 * @throws {DomainError} If a parameter is outside its range.
 *
 * Source: Douspis et al. (2015), A&A 580, L4; Planck intermediate results XLVII (2016), A&A 596, A108.
 */
export function powerLawHistory({
  zEnd,
  alpha,
  zEarly = DEFAULT_Z_EARLY,
}: {
  zEnd: number;
  alpha: number;
  zEarly?: number;
}): History {
  requireWithin("zEnd", zEnd, 0, 1000);
  requirePositive("alpha", alpha);
  if (!(zEarly > zEnd && zEarly < Infinity))
    throw new DomainError("zEarly", zEarly, `above zEnd, ${zEnd}`);
  const span = zEarly - zEnd;

  const ionized = (z: number): number =>
    z <= zEnd ? 1 : z >= zEarly ? 0 : ((zEarly - z) / span) ** alpha;
  /** ∫ Q dz from z to z_early, closed form. */
  const ionizedAbove = (z: number): number =>
    z >= zEarly
      ? 0
      : z <= zEnd
        ? zEnd - z + span / (alpha + 1)
        : (span / (alpha + 1)) * ((zEarly - z) / span) ** (alpha + 1);

  return historyOf({
    kind: "powerLaw",
    parameters: { zEnd, alpha, zEarly },
    breaks: [zEnd, zEarly],
    covered: null,
    warnings: [],
    // expm1 keeps the digits of a small neutral fraction just above z_end.
    x: (z) => (z <= zEnd ? 0 : z >= zEarly ? 1 : -expm1(alpha * log1p((zEnd - z) / span))),
    ionized,
    hydrogenDepth: (background, z1, z2) => {
      let depth = 0;
      if (z1 < zEnd) depth += background.depthBetween(z1, min(z2, zEnd));
      const from = max(z1, zEnd);
      const to = min(z2, zEarly);
      if (to > from) depth += powerDepth(background, alpha, zEarly, span, from, to);
      return depth;
    },
    redshiftAtFraction: (f) => zEarly - span * exp(log1p(-f) / alpha),
    integral: (zLow, zHigh) => {
      if (zLow >= zEnd && zHigh <= zEarly && alpha * (zHigh - zEnd) < 0.01 * span) {
        // Close above z_end the closed form is a difference of nearly equal numbers.
        return smallIntegral(alpha, zEnd, span, zLow, zHigh);
      }
      return zHigh - zLow - (ionizedAbove(zLow) - ionizedAbove(zHigh));
    },
  });
}

/**
 * ∫ Q dτ/du du over [from, to] inside [z_end, z_early]. With (z_early − z)/span = v² the corner of a
 * small exponent at z_early is smooth enough for Gauss–Legendre panels.
 */
function powerDepth(
  background: Background,
  alpha: number,
  zEarly: number,
  span: number,
  from: number,
  to: number,
): number {
  const { nodes, weights } = RULE;
  const vLow = sqrt(max(0, zEarly - to) / span);
  const vHigh = sqrt((zEarly - from) / span);
  let total = 0;
  // Halving towards v = 0 meets the branch point there; the last sliver holds below 1e-13.
  let high = vHigh;
  for (let p = 0; p < 60 && high > vLow; p++) {
    // H(z) bends on the scale of 1 + z: no panel may more than double it.
    const a = 1 + zEarly - span * high * high;
    const doubled = sqrt(max(0, 1 + zEarly - 2 * a) / span);
    let low = p < 59 ? max(vLow, 0.5 * high, doubled) : vLow;
    if (low - vLow < 1e-3 * high) low = vLow;
    const half = 0.5 * (high - low);
    const centre = 0.5 * (high + low);
    let sum = 0;
    for (let i = 0; i < nodes.length; i++) {
      const v = centre + half * nodes[i]!;
      const u = sqrt(1 + zEarly - span * v * v);
      // Q dτ/dz |dz/dv|, with dz = 2u du and dz = −2 span v dv.
      sum += weights[i]! * v ** (2 * alpha + 1) * (background.depthDensity(u) / u);
    }
    const part = sum * half;
    total += part;
    high = low;
    if (part < 1e-17 * total) break;
  }
  return span * total;
}

/** ∫ x dz close above z_end by quadrature of −expm1, where x is tiny but smooth. */
function smallIntegral(
  alpha: number,
  zEnd: number,
  span: number,
  zLow: number,
  zHigh: number,
): number {
  const { nodes, weights } = RULE;
  const half = 0.5 * (zHigh - zLow);
  const centre = 0.5 * (zHigh + zLow);
  let sum = 0;
  for (let i = 0; i < nodes.length; i++) {
    const z = centre + half * nodes[i]!;
    sum -= weights[i]! * expm1(alpha * log1p((zEnd - z) / span));
  }
  return sum * half;
}
