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
