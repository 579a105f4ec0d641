import { FAMILY_MARKS, type MarkerShape } from "~shared/chart/familyMarks";
import { markerPath } from "~shared/chart/markerPath";
import { METHOD_FAMILIES } from "~shared/methods/vocabulary";

const POLYGONS = [
  "square",
  "hourglass",
  "diamond",
  "triangle",
  "plus",
  "star",
  "saltire",
] as const satisfies readonly MarkerShape[];

/** Corners of a closed path of straight pieces. */
function corners(path: string): [number, number][] {
  expect(path).toMatch(/^M-?[\d.]+ -?[\d.]+(?:L-?[\d.]+ -?[\d.]+)+Z$/);
  return [...path.matchAll(/[ML](-?[\d.]+) (-?[\d.]+)/g)].map(([, x, y]) => [Number(x), Number(y)]);
}

/** Area inside a simple polygon: Gauss's shoelace formula. */
function area(path: string): number {
  const points = corners(path);
  const twice = points.reduce((sum, [x, y], i) => {
    const [nextX, nextY] = points[(i + 1) % points.length]!;
    return sum + x * nextY - nextX * y;
  }, 0);
  return Math.abs(twice) / 2;
}

it("each family has a shape and hues of its own", () => {
  const marks = METHOD_FAMILIES.map((family) => FAMILY_MARKS[family]);
  for (const name of ["shape", "light", "dark"] as const) {
    expect(new Set(marks.map((mark) => mark[name])).size).toBe(METHOD_FAMILIES.length);
  }
});

/** Relative luminance and contrast of two colours, by the formulas of WCAG 2.1. */
function contrast(a: string, b: string): number {
  const luminance = (hex: string): number => {
    const [r, g, blue] = [1, 3, 5].map((at) => {
      const part = parseInt(hex.slice(at, at + 2), 16) / 255;
      return part <= 0.04045 ? part / 12.92 : ((part + 0.055) / 1.055) ** 2.4;
    }) as [number, number, number];
    return 0.2126 * r + 0.7152 * g + 0.0722 * blue;
  };
  const [low, high] = [luminance(a), luminance(b)].sort((x, y) => x - y) as [number, number];
  return (high + 0.05) / (low + 0.05);
}

it.each(METHOD_FAMILIES)(
  "%s can be told from white paper: at least 3 to 1 (WCAG 1.4.11)",
  (family) => {
    expect(contrast(FAMILY_MARKS[family].light, "#FFFFFF")).toBeGreaterThan(3);
  },
);

it("circle and ring are two half arcs of their radius", () => {
  const path = "M-6 0A6 6 0 1 1 6 0A6 6 0 1 1 -6 0Z";
  expect(markerPath("circle", 6)).toBe(path);
  expect(markerPath("ring", 6)).toBe(path);
});

// Closed forms from the shapes' own proportions, in units of r².
it.each([
  ["square", (2 * 0.88) ** 2],
  ["diamond", 2 * 1.28 * 0.98],
  ["triangle", 1.14 * (1.2 + 0.88)],
  ["hourglass", 2 * 1.02 * (0.95 + 0.3)],
  ["star", 10 * 0.5 * 1.38 * 0.58 * Math.sin(Math.PI / 5)],
  ["plus", 2 * (2 * 0.42) * (2 * 1.16) - (2 * 0.42) ** 2],
  ["saltire", 2 * (2 * 0.42) * (2 * 1.16) - (2 * 0.42) ** 2],
] as const)("the area of a %s follows from its proportions", (shape, expected) => {
  expect(area(markerPath(shape, 10)) / 100).toBeCloseTo(expected, 3);
});

it.each(POLYGONS)(
  "a %s has about the area of the circle, so that none outweighs another",
  (shape) => {
    const part = area(markerPath(shape, 6)) / (Math.PI * 36);
    expect(part).toBeGreaterThan(0.7);
    expect(part).toBeLessThan(1.1);
  },
);

it.each(POLYGONS)("a %s is the same on its left and its right", (shape) => {
  const points = corners(markerPath(shape, 10));
  for (const [x, y] of points) {
    const mirrored = points.some(([a, b]) => Math.abs(a + x) < 2e-3 && Math.abs(b - y) < 2e-3);
    expect([x, y, mirrored]).toEqual([x, y, true]);
  }
});

it("a saltire is a plus turned by an eighth", () => {
  const eighth = Math.PI / 4;
  const turned = corners(markerPath("plus", 10)).map(([x, y]) => [
    x * Math.cos(eighth) - y * Math.sin(eighth),
    x * Math.sin(eighth) + y * Math.cos(eighth),
  ]);
  corners(markerPath("saltire", 10)).forEach(([x, y], i) => {
    expect(x).toBeCloseTo(turned[i]![0]!, 2);
    expect(y).toBeCloseTo(turned[i]![1]!, 2);
  });
});
