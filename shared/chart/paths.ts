/** Curves and areas as SVG paths. */
import type { Scale } from "./scales";

/** n positions from one end to the other, both included; [n]. */
export function spread(start: number, end: number, n: number): number[] {
  return Array.from({ length: n }, (_unused, i) => start + ((end - start) * i) / (n - 1));
}

/**
 * A curve as a path of straight pieces.
 *
 * @param xs - Positions along the horizontal axis, in its unit; [n].
 * @param ys - Values over them; [n].
 */
export function linePath(
  xs: readonly number[],
  ys: readonly number[],
  horizontal: Scale,
  vertical: Scale,
): string {
  return xs
    .map(
      (x, i) =>
        `${i === 0 ? "M" : "L"}${short(horizontal.at(x))} ${short(vertical.at(ys[i] ?? 0))}`,
    )
    .join("");
}

/** The area between a curve and a floor given in drawing units. */
export function areaPath(
  xs: readonly number[],
  ys: readonly number[],
  horizontal: Scale,
  vertical: Scale,
  floor: number,
): string {
  if (xs.length === 0) return "";
  const first = horizontal.at(xs[0] as number);
  const last = horizontal.at(xs[xs.length - 1] as number);
  return `${linePath(xs, ys, horizontal, vertical)}L${short(last)} ${short(floor)}L${short(first)} ${short(floor)}Z`;
}

/**
 * The area between two curves over the same places.
 *
 * @param xs - Positions along the horizontal axis, in its unit; [n].
 * @param lows, highs - Lower and upper curve over them; [n].
 */
export function bandPath(
  xs: readonly number[],
  lows: readonly number[],
  highs: readonly number[],
  horizontal: Scale,
  vertical: Scale,
): string {
  if (xs.length === 0) return "";
  const back = [...xs.keys()]
    .reverse()
    .map((i) => `L${short(horizontal.at(xs[i]!))} ${short(vertical.at(lows[i]!))}`)
    .join("");
  return `${linePath(xs, highs, horizontal, vertical)}${back}Z`;
}

/**
 * The part of a curve between two positions, with its ends there interpolated; for shading an interval.
 *
 * @param xs - Ascending; [n].
 */
export function cutCurve(
  xs: readonly number[],
  ys: readonly number[],
  [from, to]: readonly [number, number],
): { xs: number[]; ys: number[] } {
  const valueAt = (x: number): number => {
    const after = xs.findIndex((place) => place >= x);
    if (after <= 0) return ys[after === 0 ? 0 : ys.length - 1] ?? 0;
    const [x0, x1] = [xs[after - 1]!, xs[after]!];
    return ys[after - 1]! + ((x - x0) / (x1 - x0)) * (ys[after]! - ys[after - 1]!);
  };
  const low = Math.max(from, xs[0] ?? from);
  const high = Math.min(to, xs[xs.length - 1] ?? to);
  if (!(high > low)) return { xs: [], ys: [] };
  const inner = [...xs.keys()].filter((i) => xs[i]! > low && xs[i]! < high);
  return {
    xs: [low, ...inner.map((i) => xs[i]!), high],
    ys: [valueAt(low), ...inner.map((i) => ys[i]!), valueAt(high)],
  };
}

/**
 * Opacity of the fog where the neutral fraction is x. The exponent lets it thin out visibly
 * before the fraction reaches zero.
 */
export function fogOpacity(x: number): number {
  return Math.min(1, Math.max(0, x)) ** 1.15;
}

/** Stops of the fog's horizontal gradient; [n] of offset 0–1 and opacity 0–1. */
export function fogStops(
  zStart: number,
  zEnd: number,
  xAt: (z: number) => number,
  n = 25,
): { offset: number; opacity: number }[] {
  return spread(zStart, zEnd, n).map((z, i) => ({
    offset: i / (n - 1),
    opacity: fogOpacity(xAt(z)),
  }));
}

// A hundredth of a drawing unit is below what a screen can show.
const short = (value: number) => Math.round(value * 100) / 100;
