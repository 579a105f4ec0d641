import type { Background } from "~shared/cosmology/background";
import { type History, historyOf } from "~shared/history/history";
import { gaussLegendre } from "~shared/numerics/quadrature";
import { requirePositive, requireWithin } from "~shared/numerics/require";
import { logistic } from "~shared/numerics/special";

// Taken once: in a sandboxed realm every look-up of a global costs more than the arithmetic.
const { abs, cbrt, ceil, exp, log, max, min, sqrt } = Math;

/** Width of the tanh unless said otherwise (Planck's convention). */
export const DEFAULT_DELTA_Z = 0.5;

/**
 * Where the deviation from a sharp step is cut into panels, in units of Δ_y from the place where it
 * starts. It falls as e^(−2s), so that later panels need fewer nodes and 1e-12 of it lies beyond the last.
 */
const PANELS = [
  { end: 0.9, rule: gaussLegendre(10) },
  { end: 2.2, rule: gaussLegendre(10) },
  { end: 4, rule: gaussLegendre(9) },
  { end: 7, rule: gaussLegendre(8) },
  { end: 14, rule: gaussLegendre(8) },
] as const;

/**
 * The symmetric history Q = ½[1 + tanh((y_re − y)/Δ_y)], y = (1+z)^1.5, Δ_y = 1.5 √(1+z_re) Δz.
 *
 * @param zRe - Midpoint redshift: x(z_re) = 0.5; above −1, scalar.
 * @param deltaZ - Width parameter Δz, positive, default 0.5. It is none of the usual durations:
 *   from x = 0.75 to 0.25 takes about 1.1 Δz.
 * @throws {DomainError} If zRe is negative or deltaZ not positive.
 *
 * Source: Lewis (2008), PRD 78, 023002.
 */
export function tanhHistory({
  zRe,
  deltaZ = DEFAULT_DELTA_Z,
}: {
  zRe: number;
  deltaZ?: number;
}): History {
  requireWithin("zRe", zRe, 0, 1000);
  requirePositive("deltaZ", deltaZ);
  const root = sqrt(1 + zRe);
  const yRe = (1 + zRe) * root;
  const deltaY = 1.5 * root * deltaZ;
  const slope = 2 / deltaY;

  const argument = (z: number): number => slope * ((1 + z) * sqrt(1 + z) - yRe);
  return historyOf({
    kind: "tanh",
    parameters: { zRe, deltaZ },
    breaks: [],
    covered: null,
    warnings: [],
    x: (z) => logistic(argument(z)),
    ionized: (z) => logistic(-argument(z)),
    hydrogenDepth: (background, z1, z2) => tanhDepth(background, zRe, deltaY, z1, z2),
    redshiftAtFraction: (f) => {
      const y = yRe + 0.5 * deltaY * log(f / (1 - f));
      return y >= 1 ? cbrt(y) ** 2 - 1 : null;
    },
    integral: (zLow, zHigh) => tanhIntegral(yRe, deltaY, deltaZ, zLow, zHigh),
  });
}

/**
 * ∫ Q dτ/du du, as the integral of a sharp step at z_re (from the background's table) plus the
 * deviations q = 1/(1 + e^{2|s|}) on either side. Each is an entire exponential from where it
 * starts, so that a range that holds only the tail keeps its relative digits.
 */
function tanhDepth(
  background: Background,
  zRe: number,
  deltaY: number,
  z1: number,
  z2: number,
): number {
  const u1 = sqrt(1 + z1);
  const u2 = sqrt(1 + z2);
  const uRe = sqrt(1 + zRe);
  const yRe = uRe * uRe * uRe;
  let depth = 0;
  if (z1 < zRe) {
    const top = min(u2, uRe);
    depth += background.depthBetween(z1, min(z2, zRe));
    depth -= deviation(background, yRe, deltaY, top, u1);
  }
  if (z2 > zRe) depth += deviation(background, yRe, deltaY, max(u1, uRe), u2);
  return depth;
}

/** ∫ 1/(1 + e^{2|s|}) dτ from u = start (nearest to z_re) to u = stop, positive either way. */
function deviation(
  background: Background,
  yRe: number,
  deltaY: number,
  start: number,
  stop: number,
): number {
  const direction = stop > start ? 1 : -1;
  const yStart = start * start * start;
  const rate = (2 / deltaY) * direction;
  let from = start;
  let total = 0;
  for (let p = 0; from !== stop;) {
    const panel = PANELS[p];
    if (!panel) break;
    const { nodes, weights } = panel.rule;
    const y = yStart + direction * deltaY * panel.end;
    let to = y > 1 ? cbrt(y) : 1;
    if ((to - stop) * direction >= 0) to = stop;
    // H(z) bends on the scale of u near today: wide steps are cut there.
    const widest = from < 2 || to < 2 ? 0.4 : 1.2;
    if (abs(to - from) > widest) to = from + direction * widest;
    else p++;
    const half = 0.5 * (to - from);
    const centre = 0.5 * (to + from);
    let sum = 0;
    for (let i = 0; i < nodes.length; i++) {
      const u = centre + half * nodes[i]!;
      const t = rate * (u * u * u - yRe);
      if (t < 700) sum += (weights[i]! / (1 + exp(t))) * background.depthDensity(u);
    }
    total += sum * abs(half);
    from = to;
  }
  return total;
}

/** ∫ x dz for the tanh; eight nodes a panel of 0.8 Δz hold 1e-13. */
function tanhIntegral(
  yRe: number,
  deltaY: number,
  deltaZ: number,
  zLow: number,
  zHigh: number,
): number {
  const { nodes, weights } = MEAN_RULE;
  // Beyond |s| = 20 the fraction is 0 or 1 to the last digit.
  const yBottom = yRe - 20 * deltaY;
  const bottom = yBottom > 1 ? cbrt(yBottom) ** 2 - 1 : 0;
  const top = cbrt(yRe + 20 * deltaY) ** 2 - 1;
  const from = min(max(zLow, bottom), zHigh);
  const to = max(min(zHigh, top), zLow);
  let total = zHigh > to ? zHigh - to : 0;
  if (!(to > from)) return total;
  const panels = ceil((to - from) / min(0.8 * deltaZ, 0.8));
  const half = (to - from) / panels / 2;
  const slope = 2 / deltaY;
  for (let p = 0; p < panels; p++) {
    const centre = from + (2 * p + 1) * half;
    for (let i = 0; i < nodes.length; i++) {
      const a = 1 + centre + half * nodes[i]!;
      total += half * weights[i]! * logistic(slope * (a * sqrt(a) - yRe));
    }
  }
  return total;
}
const MEAN_RULE = gaussLegendre(8);
