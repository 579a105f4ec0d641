import { FAMILY_MARKS } from "~shared/chart/familyMarks";
import { markerPath } from "~shared/chart/markerPath";
import { FIGURE_WIDTH_INCHES, figureSvg, type FigureRow } from "~shared/chart/tableFigure";
import { FAMILY_NAMES, type MethodFamily } from "~shared/methods/vocabulary";
import { asUsed } from "~shared/statement/asUsed";
import type { ConstraintFields } from "~shared/statement/fields";

import { buildFields } from "../buildFields";

function row(
  changes: Partial<ConstraintFields> = {},
  family: MethodFamily = "dampingWing",
  source = "Tarrowin et al. 2025",
): FigureRow {
  const fields = buildFields(changes);
  const used = asUsed(fields);
  if (!used) throw new Error("the statement can't be used");
  return { used, family, levelStated: fields.level !== "notStated", source };
}

const figure = (rows: readonly FigureRow[], notes: readonly string[] = []) =>
  figureSvg({ title: "Wings & forests", rows, notes });

/** What is drawn of each row, in the rows' order. */
const groups = (svg: string) => [...svg.matchAll(/<g>.*<\/g>/g)].map(([group]) => group);
/** Words of every text element. */
const texts = (svg: string) =>
  [...svg.matchAll(/<text[^>]*>([^<]*)<\/text>/g)].map(([, words]) => words);
/** Where the marker of a drawn row stands. */
function place(group: string | undefined): [number, number] {
  const [, x, y] = /translate\((\S+) (\S+)\)/.exec(group ?? "") ?? [];
  return [Number(x), Number(y)];
}

// The frame: redshift 5 to 11 from 34 to 246, fraction −0.03 to 1.03 from 168 up to 8, in points.
const zAt = (z: number) => 34 + ((z - 5) / 6) * 212;
const xAt = (x: number) => 168 - ((x + 0.03) / 1.06) * 160;

it("is one column of a journal wide, with a height in the same unit as its box", () => {
  expect(FIGURE_WIDTH_INCHES).toBe(3.5); // common practice
  const [, width, height, boxWidth, boxHeight] =
    /width="([\d.]+)in" height="([\d.]+)in" viewBox="0 0 (\d+) ([\d.]+)"/.exec(figure([row()])) ??
    [];
  // 72 points make an inch.
  expect(Number(boxWidth)).toBe(72 * Number(width));
  expect(Number(boxHeight) / 72).toBeCloseTo(Number(height), 2);
});

it("gives the same bytes for the same rows, and ends with a line feed", () => {
  expect(figure([row()])).toBe(figure([row()]));
  expect(figure([row()])).toMatch(/<\/svg>\n$/);
});

it("is well-formed: every element that is opened is closed, in turn", () => {
  const svg = figure(
    [row(), row({ kind: "upperLimit", value: "0.3" }, "darkPixels", 'A "B" <C> & D')],
    ["a < b"],
  );
  const open: string[] = [];
  for (const [, closing, name, own] of svg.matchAll(/<(\/?)([a-z]+)[^<>]*?(\/?)>/g)) {
    if (closing) expect(open.pop()).toBe(name);
    else if (!own) open.push(name!);
  }
  expect(open).toEqual([]);
  expect(svg).not.toMatch(/&(?!amp;|lt;|gt;|quot;)/);
});

it("sets names as text, whatever they hold", () => {
  const svg = figureSvg({
    title: '<script>"x"</script>\u0001',
    rows: [row({}, "cmb", "A & B 2024")],
    notes: ["1 < 2"],
  });
  expect(svg).toContain("<title>&lt;script&gt;&quot;x&quot;&lt;/script&gt;</title>");
  expect(texts(svg)).toContain("Sources: A &amp; B 2024.");
  expect(texts(svg)).toContain("1 &lt; 2");
});

it("puts a row where its redshift and its fraction stand", () => {
  const [group] = groups(figure([row({ z: "8", value: "0.5", plus: "0.2", minus: "0.1" })]));
  expect(place(group)).toEqual([expect.closeTo(zAt(8), 1), expect.closeTo(xAt(0.5), 1)]);
  const [, x1, y1, x2, y2] =
    /<line x1="(\S+)" y1="(\S+)" x2="(\S+)" y2="(\S+)"/.exec(group ?? "") ?? [];
  expect([x1, x2].map(Number)).toEqual([140, 140]); // the middle of 34 and 246
  expect(Number(y1)).toBeCloseTo(xAt(0.4), 1);
  expect(Number(y2)).toBeCloseTo(xAt(0.7), 1);
});

it("fills the marker of a value and opens that of a limit", () => {
  const [value, limit] = groups(
    figure([row({}, "cmb"), row({ kind: "upperLimit", value: "0.6" }, "cmb")]),
  );
  const { shape, light } = FAMILY_MARKS.cmb;
  const path = `d="${markerPath(shape, 2.6)}"`;
  expect(value).toContain(`${path} fill="${light}"`);
  expect(limit).toContain(`${path} fill="#FFFFFF" stroke="${light}"`);
  expect(value).not.toContain("<polygon");
});

it("points an upper limit down and a lower limit up", () => {
  const tips = groups(
    figure([row({ kind: "upperLimit", value: "0.5" }), row({ kind: "lowerLimit", value: "0.5" })]),
  ).map((group) => {
    const [, points = ""] = /<polygon points="([^"]+)"/.exec(group) ?? [];
    return Number(points.split(" ")[2]?.split(",")[1]) - place(group)[1];
  });
  // The look's arrow is 13 points long from the marker's middle; down is a larger coordinate.
  expect(tips[0]).toBeCloseTo(13, 1);
  expect(tips[1]).toBeCloseTo(-13, 1);
});

it("dashes a row whose level is not stated, and no other", () => {
  const [stated, open] = groups(figure([row(), row({ level: "notStated" })]));
  expect(stated).not.toContain("stroke-dasharray");
  expect(open).toContain("stroke-dasharray");
});

it("draws a band as a box between its ends, a bin with its end ticks", () => {
  const [band, bin] = groups(
    figure([
      row({ kind: "band", bandLow: "0.2", bandHigh: "0.6" }),
      row({ zRole: "binAverage", z: null, zLow: "6", zHigh: "7" }),
    ]),
  );
  const [, y, height] = /<rect x="\S+" y="(\S+)" width="4" height="(\S+)"/.exec(band ?? "") ?? [];
  expect(Number(y)).toBeCloseTo(xAt(0.6), 1);
  expect(Number(height)).toBeCloseTo(xAt(0.2) - xAt(0.6), 1);
  const lines = [...(bin ?? "").matchAll(/<line x1="(\S+)" y1="(\S+)" x2="(\S+)" y2="(\S+)"/g)];
  const ticks = lines.filter(([, x1, y1, x2, y2]) => x1 === x2 && Number(y2) - Number(y1) === 3);
  expect(ticks.map(([, x]) => Number(x))).toEqual([
    expect.closeTo(zAt(6), 1),
    expect.closeTo(zAt(7), 1),
  ]);
});

it("draws a tabulated curve as its outline", () => {
  const used = row({ kind: "curve" }).used;
  const curve = { x: [0.2, 0.4, 0.6], p: [0.5, 1, 0.5] };
  const [group] = groups(figure([{ ...row(), used: { ...used, curve } }]));
  const [, points = ""] = /<polygon points="([^"]+)"/.exec(group ?? "") ?? [];
  const outline = points.split(" ").map((pair) => pair.split(",").map(Number));
  expect(outline).toHaveLength(5); // three nodes and two ends of the base
  expect(outline[2]![1]).toBeCloseTo(xAt(0.4), 1);
  expect(outline[2]![0]! - outline[0]![0]!).toBeCloseTo(11, 1);
});

it("names the families it holds, in the vocabulary's order, and each source once", () => {
  const svg = figure([
    row({}, "other", "A 2024"),
    row({}, "darkPixels", "B 2024"),
    row({}, "other", "A 2024"),
  ]);
  const names = texts(svg).filter((words) =>
    (Object.values(FAMILY_NAMES) as (string | undefined)[]).includes(words),
  );
  expect(names).toEqual(["Dark pixels", "Other"]);
  expect(texts(svg)).toContain("Sources: A 2024; B 2024.");
});

it("opens the ring of other methods in the legend and in the plane", () => {
  const svg = figure([row({}, "other")]);
  const ring = svg.match(/<path [^>]*>/g) ?? [];
  expect(ring).toHaveLength(2);
  for (const path of ring) expect(path).toContain('fill="#FFFFFF"');
});

it("says how many rows have no place in the plane", () => {
  const tau = {
    quantity: "opticalDepth",
    species: null,
    scale: null,
    weighting: null,
    z: null,
    zRole: null,
    value: "0.055",
    plus: "0.007",
    minus: "0.007",
  } as const;
  const one = figure([row(), row(tau, "cmb")]);
  expect(groups(one)).toHaveLength(1);
  expect(texts(one)).toContain("Not drawn: 1 row without a place in this plane.");
  expect(texts(figure([row(tau, "cmb"), row(tau, "cmb")]))).toContain(
    "Not drawn: 2 rows without a place in this plane.",
  );
  expect(figure([row()])).not.toContain("Not drawn");
});

it("reaches as far in redshift as its rows do, at least from 5 to 11", () => {
  const labels = (rows: FigureRow[]) =>
    [...figure(rows).matchAll(/<text [^>]*y="177"[^>]*>(\d+)</g)].map(([, z]) => Number(z));
  expect(labels([row()])).toEqual([5, 6, 7, 8, 9, 10, 11]);
  expect(labels([row({ zLow: "3.95", zHigh: "7.5", zRole: "sampleRange" })])[0]).toBe(3);
  // Over a wide range only every fifth redshift is named.
  expect(labels([row({ z: "20" })])).toEqual([5, 10, 15, 20]);
});

it("names fractions from 0.0 to 1.0", () => {
  const numbers = texts(figure([])).filter((words) => /^\d\.\d$/.test(words ?? ""));
  expect(numbers).toEqual(["0.0", "0.2", "0.4", "0.6", "0.8", "1.0"]);
});

it("breaks long lines at the foot between words, none longer than 64 letters", () => {
  const sources = Array.from({ length: 9 }, (_, i) => `Tarrowin and Kelm 20${10 + i}`);
  const svg = figure(sources.map((source) => row({}, "cmb", source)));
  const foot = [...svg.matchAll(/<text [^>]*font-size="6.5"[^>]*>([^<]*)</g)].map(([, t]) => t!);
  expect(foot.length).toBeGreaterThan(2);
  for (const line of foot) expect(line.length).toBeLessThanOrEqual(64);
  expect(foot.join(" ")).toBe(`Sources: ${sources.join("; ")}.`);
});
