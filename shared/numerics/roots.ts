import { DomainError } from "~shared/errors/DomainError";

/**
 * A root of f between a and b, where f changes sign, by Brent's method.
 *
 * Our own because no small kept library offers it with a stated accuracy.
 *
 * @param f - Continuous function of one variable.
 * @param a - One end of the bracket.
 * @param b - The other end.
 * @param tolerance - Accepted absolute error of the root, default 1e-14 (floored by rounding).
 * @throws {DomainError} If f has one sign at both ends, or is not a number there.
 *
 * Source: Brent (1973), Algorithms for Minimization without Derivatives, chapter 4.
 */
export function brentRoot(
  f: (t: number) => number,
  a: number,
  b: number,
  tolerance = 1e-14,
): number {
  let previous = a;
  let best = b;
  let fPrevious = f(previous);
  let fBest = f(best);
  if (!(fPrevious * fBest <= 0))
    throw new DomainError("bracket", `[${a}, ${b}]`, "a change of sign");
  let opposite = previous;
  let fOpposite = fPrevious;
  let step = best - previous;
  let before = step;
  for (let i = 0; i < 200; i++) {
    if (fBest > 0 === fOpposite > 0) {
      opposite = previous;
      fOpposite = fPrevious;
      step = before = best - previous;
    }
    if (Math.abs(fOpposite) < Math.abs(fBest)) {
      previous = best;
      best = opposite;
      opposite = previous;
      fPrevious = fBest;
      fBest = fOpposite;
      fOpposite = fPrevious;
    }
    const allowed = 2 * Number.EPSILON * Math.abs(best) + 0.5 * tolerance;
    const half = 0.5 * (opposite - best);
    if (Math.abs(half) <= allowed || fBest === 0) return best;
    if (Math.abs(before) >= allowed && Math.abs(fPrevious) > Math.abs(fBest)) {
      const s = fBest / fPrevious;
      let p: number;
      let q: number;
      if (previous === opposite) {
        p = 2 * half * s;
        q = 1 - s;
      } else {
        const r = fBest / fOpposite;
        const t = fPrevious / fOpposite;
        p = s * (2 * half * t * (t - r) - (best - previous) * (r - 1));
        q = (t - 1) * (r - 1) * (s - 1);
      }
      if (p > 0) q = -q;
      p = Math.abs(p);
      if (2 * p < Math.min(3 * half * q - Math.abs(allowed * q), Math.abs(before * q))) {
        before = step;
        step = p / q;
      } else {
        step = before = half;
      }
    } else {
      step = before = half;
    }
    previous = best;
    fPrevious = fBest;
    best += Math.abs(step) > allowed ? step : half > 0 ? allowed : -allowed;
    fBest = f(best);
  }
  return best;
}

/**
 * Place of the minimum of f in [a, b] by golden sections; f should have one minimum there.
 *
 * @param tolerance - Accepted absolute error of the place, default 1e-10. A minimum's place is
 *   never known better than about the square root of rounding, its height is.
 */
export function goldenMinimum(
  f: (t: number) => number,
  a: number,
  b: number,
  tolerance = 1e-10,
): number {
  const ratio = (Math.sqrt(5) - 1) / 2;
  let low = Math.min(a, b);
  let high = Math.max(a, b);
  let c = high - ratio * (high - low);
  let d = low + ratio * (high - low);
  let fc = f(c);
  let fd = f(d);
  while (high - low > tolerance) {
    if (fc < fd) {
      high = d;
      d = c;
      fd = fc;
      c = high - ratio * (high - low);
      fc = f(c);
    } else {
      low = c;
      c = d;
      fc = fd;
      d = low + ratio * (high - low);
      fd = f(d);
    }
    if (c >= d) break;
  }
  return 0.5 * (low + high);
}
