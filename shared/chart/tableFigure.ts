/** The figure of a table at a paper's width: rows in the plane of redshift and neutral fraction, legend, sources. */
import { FAMILY_NAMES, METHOD_FAMILIES, type MethodFamily } from "~shared/methods/vocabulary";
import type { AsUsed } from "~shared/statement/asUsed";

import { FAMILY_MARKS } from "./familyMarks";
import { markerPath } from "./markerPath";
import { markOf, type Box, type Mark, type MarkSizes, type Segment } from "./marks";
import { planePoint } from "./points";
import { linearScale, type Interval } from "./scales";
import { linearTicks } from "./ticks";

export interface FigureRow {
  readonly used: AsUsed;
  readonly family: MethodFamily;
  readonly levelStated: boolean;
  /** Tarrowin et al. 2025 */
  readonly source: string;
}

export interface TableFigure {
  readonly title: string;
  readonly rows: readonly FigureRow[];
  /** Lines at the foot. */
  readonly notes: readonly string[];
}

/** One column of a journal's page is 3.5 inches; units are points, so text of 8 is 8 points. */
export const FIGURE_WIDTH_INCHES = 3.5;
const WIDTH = 252;
const BOX: Box = { left: 34, right: 246, top: 8, bottom: 168 };
const SIZES: MarkSizes = {
  radius: 2.6,
  arrowLength: 13,
  head: 3.6,
  endTick: 3,
  bandWidth: 4,
  violinWidth: 11,
};
const INK = "#1B2730";
const LINE = 9;

function escape(text: string): string {
  return text
    .replace(/[\u0000-\u0008\u000b\u000c\u000e-\u001f]/g, "")
    .replaceAll("&", "&amp;")
    .replaceAll("<", "&lt;")
    .replaceAll(">", "&gt;")
    .replaceAll('"', "&quot;");
}

const round = (value: number): string => String(Number(value.toFixed(2)));

function line({ x1, y1, x2, y2 }: Segment, stroke: string, more = ""): string {
  return `<line x1="${round(x1)}" y1="${round(y1)}" x2="${round(x2)}" y2="${round(y2)}" stroke="${stroke}" stroke-width="0.6"${more}/>`;
}

function text(x: number, y: number, words: string, more = ""): string {
  return `<text x="${round(x)}" y="${round(y)}"${more}>${escape(words)}</text>`;
}

/** Whole redshifts that hold every point with its ends, 5 to 11 at least. */
function redshiftRange(rows: readonly FigureRow[]): Interval {
  const places = rows.flatMap(({ used }) => {
    const point = planePoint(used);
    return point === null ? [] : [point.z, ...(point.zEnds ?? [])];
  });
  return [
    Math.min(5, ...places.map((z) => Math.floor(z - 0.1))),
    Math.max(11, ...places.map((z) => Math.ceil(z + 0.1))),
  ];
}

/** The figure as one SVG document, 3.5 inches wide; the same rows give the same bytes. */
export function figureSvg({ title, rows, notes }: TableFigure): string {
  const redshifts = redshiftRange(rows);
  const zScale = linearScale(redshifts, [BOX.left, BOX.right]);
  const xScale = linearScale([-0.03, 1.03], [BOX.bottom, BOX.top]);
  const marks = rows.flatMap((row) => {
    const point = planePoint(row.used);
    const mark = point && markOf(point, zScale, xScale, BOX, SIZES);
    return mark ? [drawn({ ...mark, dashed: !row.levelStated }, row.family)] : [];
  });
  const legend = METHOD_FAMILIES.filter((family) => rows.some((row) => row.family === family));
  const left = rows.length - marks.length;
  const sources = wrapped(
    `Sources: ${[...new Set(rows.map(({ source }) => source))].join("; ")}.`,
    64,
  );
  const foot = [
    ...sources,
    ...(left > 0
      ? [`Not drawn: ${left} ${left === 1 ? "row" : "rows"} without a place in this plane.`]
      : []),
    ...notes.flatMap((note) => wrapped(note, 64)),
  ];
  const legendTop = BOX.bottom + 34;
  const footTop = legendTop + Math.ceil(legend.length / 2) * (LINE + 1) + 4;
  const height = footTop + foot.length * (LINE - 1) + 4;
  return [
    `<svg xmlns="http://www.w3.org/2000/svg" width="${FIGURE_WIDTH_INCHES}in" height="${round(height / 72)}in" viewBox="0 0 ${WIDTH} ${round(height)}" font-family="'Source Sans 3', Helvetica, Arial, sans-serif" font-size="7.5" fill="${INK}">`,
    `<title>${escape(title)}</title>`,
    `<rect width="${WIDTH}" height="${round(height)}" fill="#FFFFFF"/>`,
    ...axes(redshifts, zScale.at, xScale.at),
    ...marks,
    ...legend.map((family, index) => {
      const x = BOX.left + (index % 2) * 108;
      const y = legendTop + Math.floor(index / 2) * (LINE + 1);
      const { shape, light } = FAMILY_MARKS[family];
      const open = shape === "ring";
      return `<path transform="translate(${x} ${round(y - 2.5)})" d="${markerPath(shape, SIZES.radius)}" fill="${open ? "#FFFFFF" : light}" stroke="${open ? light : INK}" stroke-width="${open ? 1 : 0.4}"/>${text(x + 8, y, FAMILY_NAMES[family])}`;
    }),
    ...foot.map((words, index) =>
      text(4, footTop + index * (LINE - 1) + 6, words, ' font-size="6.5"'),
    ),
    "</svg>",
    "",
  ].join("\n");
}

function axes(
  redshifts: Interval,
  atZ: (z: number) => number,
  atX: (x: number) => number,
): string[] {
  const parts = [
    `<rect x="${BOX.left}" y="${BOX.top}" width="${BOX.right - BOX.left}" height="${BOX.bottom - BOX.top}" fill="none" stroke="${INK}" stroke-width="0.6"/>`,
  ];
  const wide = redshifts[1] - redshifts[0] > 12;
  for (const { position, major, value } of linearTicks(redshifts, wide ? 5 : 1, wide ? 1 : 0.2)) {
    const [x, size] = [atZ(position), major ? 4 : 2];
    parts.push(line({ x1: x, y1: BOX.bottom, x2: x, y2: BOX.bottom - size }, INK));
    parts.push(line({ x1: x, y1: BOX.top, x2: x, y2: BOX.top + size }, INK));
    if (major) parts.push(text(x, BOX.bottom + 9, String(value), ' text-anchor="middle"'));
  }
  for (const { position, major, value } of linearTicks([0, 1], 0.2, 0.05)) {
    const [y, size] = [atX(position), major ? 4 : 2];
    parts.push(line({ x1: BOX.left, y1: y, x2: BOX.left + size, y2: y }, INK));
    parts.push(line({ x1: BOX.right, y1: y, x2: BOX.right - size, y2: y }, INK));
    if (major) parts.push(text(BOX.left - 3, y + 2.5, value.toFixed(1), ' text-anchor="end"'));
  }
  const middle = 0.5 * (BOX.top + BOX.bottom);
  parts.push(
    `<text x="${(BOX.left + BOX.right) / 2}" y="${BOX.bottom + 20}" text-anchor="middle">Redshift <tspan font-style="italic">z</tspan></text>`,
    `<text transform="translate(9 ${middle}) rotate(-90)" text-anchor="middle">Neutral fraction <tspan font-style="italic">x</tspan><tspan dy="2" font-size="5.5">HI</tspan></text>`,
  );
  return parts;
}

function drawn(mark: Mark, family: MethodFamily): string {
  const { shape, light } = FAMILY_MARKS[family];
  const dash = mark.dashed ? ' stroke-dasharray="1.5 1.2"' : "";
  const parts: string[] = [];
  if (mark.band) {
    const { x, y, width, height } = mark.band;
    parts.push(
      `<rect x="${round(x)}" y="${round(y)}" width="${round(width)}" height="${round(height)}" fill="${light}" fill-opacity="0.2" stroke="${light}" stroke-width="0.6"${dash}/>`,
    );
  }
  if (mark.violin) {
    const points = mark.violin.map(([x, y]) => `${round(x)},${round(y)}`).join(" ");
    parts.push(
      `<polygon points="${points}" fill="${light}" fill-opacity="0.2" stroke="${light}" stroke-width="0.6"/>`,
    );
  }
  parts.push(...mark.bars.map((bar) => line(bar, light, dash)));
  parts.push(...mark.ends.map((end) => line(end, light)));
  if (mark.arrow) {
    parts.push(line(mark.arrow.shaft, light, dash));
    parts.push(
      `<polygon points="${mark.arrow.head.map(([x, y]) => `${round(x)},${round(y)}`).join(" ")}" fill="${light}"/>`,
    );
  }
  const open = mark.hollow || shape === "ring";
  parts.push(
    `<path transform="translate(${round(mark.x)} ${round(mark.y)})" d="${markerPath(shape, SIZES.radius)}" fill="${open ? "#FFFFFF" : light}" stroke="${open ? light : INK}" stroke-width="${open ? 0.9 : 0.4}"/>`,
  );
  return `<g>${parts.join("")}</g>`;
}

function wrapped(words: string, longest: number): string[] {
  const lines: string[] = [];
  let current = "";
  for (const word of words.split(/\s+/)) {
    if (current !== "" && current.length + 1 + word.length > longest) {
      lines.push(current);
      current = word;
    } else current = current === "" ? word : `${current} ${word}`;
  }
  return current === "" ? lines : [...lines, current];
}
