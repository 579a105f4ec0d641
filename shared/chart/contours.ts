/** Lines of equal density of two quantities, as SVG paths. */
import { contours } from "d3-contour";

import type { Scale } from "./scales";

/** A density on a rectangle of places, at least 2 by 2. */
export interface DensityGrid {
  readonly xs: readonly number[];
  readonly ys: readonly number[];
  /** [ys, xs], row by row. */
  readonly density: readonly number[];
}

/**
 * The region where a density exceeds a level, as one path: rings of it and of its holes, to be filled by the
 * even-odd rule. A region that reaches the edge of the grid is closed along that edge.
 *
 * @param level - In the density's own unit.
 * @returns "" where the density nowhere exceeds the level.
 */
export function contourPath(
  { xs, ys, density }: DensityGrid,
  level: number,
  horizontal: Scale,
  vertical: Scale,
): string {
  const region = contours()
    .size([xs.length, ys.length])
    .contour([...density], level);
  return region.coordinates
    .flat()
    .map((ring) =>
      // The first and the last place of a ring are the same one.
      ring
        .slice(0, -1)
        .map(
          ([column = 0, row = 0], i) =>
            `${i === 0 ? "M" : "L"}${short(horizontal.at(placeAt(xs, column)))} ${short(vertical.at(placeAt(ys, row)))}`,
        )
        .join("")
        .concat("Z"),
    )
    .join("");
}

/** Place at a position of the contour, which counts from half a cell before the first place. */
function placeAt(places: readonly number[], position: number): number {
  const last = places.length - 1;
  const at = Math.min(last, Math.max(0, position - 0.5));
  const before = Math.min(last - 1, Math.floor(at));
  const start = places[before]!;
  return start + (at - before) * (places[before + 1]! - start);
}

const short = (value: number) => Math.round(value * 100) / 100;
