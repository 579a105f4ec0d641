/** Geometry of one drawn statement, in drawing units, and finding the one that was meant by a touch. */
import type { PlanePoint } from "./points";
import type { Scale } from "./scales";

export interface Box {
  left: number;
  right: number;
  top: number;
  bottom: number;
}

export interface Segment {
  x1: number;
  y1: number;
  x2: number;
  y2: number;
}

export interface Mark {
  x: number;
  y: number;
  /** Error bars and bins; [n]. */
  bars: Segment[];
  /** End ticks of a bin; [n]. */
  ends: Segment[];
  /** Shaft of a limit, from the marker's edge to the head, and the head's three corners. */
  arrow: { shaft: Segment; head: readonly [number, number][] } | null;
  band: { x: number; y: number; width: number; height: number } | null;
  /** Outline of a half violin, closed by its base; [n]. */
  violin: readonly (readonly [number, number])[] | null;
  hollow: boolean;
  dashed: boolean;
}

export interface MarkSizes {
  /** Radius of a marker. */
  radius: number;
  /** From the marker's centre to the tip of an arrow. */
  arrowLength: number;
  /** Width and length of an arrow's head. */
  head: number;
  /** Length of a bin's end tick. */
  endTick: number;
  bandWidth: number;
  /** How far the half violin of a curve stands out at its peak. */
  violinWidth: number;
}

/** Sizes of the look on a wide screen. */
export const WIDE_SIZES: MarkSizes = {
  radius: 6,
  arrowLength: 34,
  head: 8,
  endTick: 7,
  bandWidth: 9,
  violinWidth: 26,
};

/** Sizes of the look on a phone. */
export const PHONE_SIZES: MarkSizes = {
  radius: 4.8,
  arrowLength: 26.8,
  head: 8,
  endTick: 7,
  bandWidth: 7,
  violinWidth: 20,
};

/**
 * Geometry of a point in the plane.
 *
 * @param zScale, xScale - Scales of redshift and neutral fraction.
 * @param box - Frame of the chart; bars and bands end at it.
 * @param sizes - Sizes of the markers, in drawing units.
 * @returns Null where the marker itself stands outside the frame.
 */
export function markOf(
  point: PlanePoint,
  zScale: Scale,
  xScale: Scale,
  box: Box,
  sizes: MarkSizes,
): Mark | null {
  const x = zScale.at(point.z);
  const y = xScale.at(point.x);
  if (x < box.left - 0.5 || x > box.right + 0.5 || y < box.top - 0.5 || y > box.bottom + 0.5) {
    return null;
  }
  const inX = (position: number) => clamp(position, box.left, box.right);
  const inY = (position: number) => clamp(position, box.top, box.bottom);
  const bars: Segment[] = [];
  const ends: Segment[] = [];
  if (point.xEnds) {
    const [low, high] = point.xEnds;
    bars.push({ x1: x, y1: inY(xScale.at(low)), x2: x, y2: inY(xScale.at(high)) });
  }
  if (point.zEnds) {
    const [a, b] = [zScale.at(point.zEnds[0]), zScale.at(point.zEnds[1])];
    bars.push({ x1: inX(a), y1: y, x2: inX(b), y2: y });
    if (point.bin) {
      for (const end of [a, b]) {
        if (end !== inX(end)) continue; // a bin that leaves the frame has no end inside it
        ends.push({ x1: end, y1: y - sizes.endTick / 2, x2: end, y2: y + sizes.endTick / 2 });
      }
    }
  }
  return {
    x,
    y,
    bars,
    ends,
    arrow: point.arrow ? arrowOf(point.arrow, x, y, xScale, box, sizes) : null,
    band: point.band ? bandOf(point.band, x, y, zScale, xScale, box, sizes) : null,
    violin: point.violin ? violinOf(point.violin, x, y, zScale, xScale, box, sizes) : null,
    hollow: point.hollow,
    dashed: !point.levelStated,
  };
}

function arrowOf(
  arrow: NonNullable<PlanePoint["arrow"]>,
  x: number,
  y: number,
  xScale: Scale,
  box: Box,
  sizes: MarkSizes,
): Mark["arrow"] {
  const vertical = arrow.along === "x";
  // Larger fractions are drawn higher up: smaller drawing coordinates.
  const sign = vertical ? -arrow.direction : arrow.direction;
  const start = (vertical ? y : x) + sign * sizes.radius;
  // A limit says nothing beyond the possible fractions, so its arrow ends there.
  const wall = vertical
    ? clamp(xScale.at(arrow.direction > 0 ? 1 : 0), box.top, box.bottom)
    : arrow.direction > 0
      ? box.right
      : box.left;
  const wanted = (vertical ? y : x) + sign * sizes.arrowLength;
  const tip = sign > 0 ? Math.min(wanted, wall) : Math.max(wanted, wall);
  const room = (tip - start) * sign;
  const head = Math.min(sizes.head, Math.max(0, room));
  if (head < 2) return null;
  const neck = tip - sign * head;
  const half = sizes.head / 2;
  return vertical
    ? {
        shaft: { x1: x, y1: start, x2: x, y2: neck },
        head: [
          [x - half, neck],
          [x + half, neck],
          [x, tip],
        ],
      }
    : {
        shaft: { x1: start, y1: y, x2: neck, y2: y },
        head: [
          [neck, y - half],
          [neck, y + half],
          [tip, y],
        ],
      };
}

function bandOf(
  band: NonNullable<PlanePoint["band"]>,
  x: number,
  y: number,
  zScale: Scale,
  xScale: Scale,
  box: Box,
  sizes: MarkSizes,
): Mark["band"] {
  if (band.along === "x") {
    const a = clamp(xScale.at(band.ends[1]), box.top, box.bottom);
    const b = clamp(xScale.at(band.ends[0]), box.top, box.bottom);
    return { x: x - sizes.bandWidth / 2, y: a, width: sizes.bandWidth, height: b - a };
  }
  const a = clamp(zScale.at(band.ends[0]), box.left, box.right);
  const b = clamp(zScale.at(band.ends[1]), box.left, box.right);
  return { x: a, y: y - sizes.bandWidth / 2, width: b - a, height: sizes.bandWidth };
}

/** To the right of the redshift of a fraction, above the fraction of a redshift. */
function violinOf(
  violin: NonNullable<PlanePoint["violin"]>,
  x: number,
  y: number,
  zScale: Scale,
  xScale: Scale,
  box: Box,
  sizes: MarkSizes,
): Mark["violin"] {
  const vertical = violin.along === "x";
  const place = (value: number) =>
    vertical
      ? clamp(xScale.at(value), box.top, box.bottom)
      : clamp(zScale.at(value), box.left, box.right);
  const point = (value: number, height: number): readonly [number, number] =>
    vertical
      ? [clamp(x + height * sizes.violinWidth, box.left, box.right), place(value)]
      : [place(value), clamp(y - height * sizes.violinWidth, box.top, box.bottom)];
  const { at, height } = violin;
  const ends = [at[0]!, at[at.length - 1]!] as const;
  return [point(ends[0], 0), ...at.map((value, i) => point(value, height[i]!)), point(ends[1], 0)];
}

/**
 * The point nearest to a touch, so that crowded markers need no aim.
 *
 * @param reach - Farthest distance that still counts, in drawing units.
 * @returns Index into `marks`, or null where none is in reach; the first of equal ones.
 */
export function nearestMark(
  marks: readonly ({ x: number; y: number } | null)[],
  x: number,
  y: number,
  reach: number,
): number | null {
  let best: number | null = null;
  let shortest = reach;
  marks.forEach((mark, index) => {
    if (mark === null) return;
    const distance = Math.hypot(mark.x - x, mark.y - y);
    if (distance < shortest || (distance === shortest && best === null)) {
      shortest = distance;
      best = index;
    }
  });
  return best;
}

function clamp(value: number, low: number, high: number): number {
  return Math.min(high, Math.max(low, value));
}
