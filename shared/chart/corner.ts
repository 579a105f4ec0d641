/** Where the cells of a corner plot stand, and what its axes span. */
import type { DensityCurve, Ends, JointDensity } from "~shared/fit/request";

import type { Box } from "./marks";
import type { Interval } from "./scales";

export interface CornerLayout {
  /** Side of a cell, in drawing units. */
  readonly side: number;
  readonly height: number;
  /** Frame of the cell in a column and a row, counted from 0 at the upper left. */
  cell(column: number, row: number): Box;
}

/** Room for the tick labels and the symbol of an axis. */
const LEFT = 58;
const BELOW = 44;
const TOP = 6;
const RIGHT = 10;
const GAP = 6;

/** Square cells of a triangle with `count` columns that fills a width, none larger than `largest`. */
export function cornerLayout(width: number, count: number, largest = 190): CornerLayout {
  const room = (width - LEFT - RIGHT - (count - 1) * GAP) / count;
  const side = Math.max(20, Math.min(largest, Math.floor(room)));
  return {
    side,
    height: TOP + count * side + (count - 1) * GAP + BELOW,
    cell: (column, row) => {
      const left = LEFT + column * (side + GAP);
      const top = TOP + row * (side + GAP);
      return { left, right: left + side, top, bottom: top + side };
    },
  };
}

/** How far an axis reaches beyond the 95.45 % interval, in units of its width. */
const BEYOND = 0.35;

/** What an axis spans: the interval with some room, inside the places where the density is known. */
export function cornerSpan([low, high]: Ends, places: readonly number[]): Interval {
  const room = BEYOND * (high - low);
  const first = places[0] ?? low;
  const last = places[places.length - 1] ?? high;
  const span: Interval = [Math.max(first, low - room), Math.min(last, high + room)];
  return span[1] > span[0] ? span : [low - 0.5, high + 0.5];
}

/** The density of two quantities with a given one across, whichever way round it was computed; null without one. */
export function jointOf(
  joints: readonly JointDensity[],
  across: string,
  up: string,
): JointDensity | null {
  const found = joints.find(({ x, y }) => x === across && y === up);
  if (found) return found;
  const turned = joints.find(({ x, y }) => x === up && y === across);
  if (!turned) return null;
  const { xs, ys, density } = turned;
  return {
    ...turned,
    x: across,
    y: up,
    xs: ys,
    ys: xs,
    density: xs.flatMap((_x, column) => ys.map((_y, row) => density[row * xs.length + column]!)),
  };
}

/**
 * A curve scaled so that it encloses the same area as another one of peak 1: a prior drawn beside its
 * posterior is a density too, not a second curve of height 1.
 */
export function scaledToArea(curve: DensityCurve, like: DensityCurve): DensityCurve {
  const factor = areaUnder(like) / areaUnder(curve);
  return Number.isFinite(factor)
    ? { ...curve, density: curve.density.map((value) => value * factor) }
    : curve;
}

function areaUnder({ x, density }: DensityCurve): number {
  let sum = 0;
  for (let i = 1; i < x.length; i++) {
    sum += 0.5 * (density[i]! + density[i - 1]!) * (x[i]! - x[i - 1]!);
  }
  return sum;
}
