import { contourPath, type DensityGrid } from "~shared/chart/contours";
import { linearScale } from "~shared/chart/scales";

const plain = linearScale([0, 1], [0, 1]);
const large = linearScale([0, 1], [0, 1000]);

function grid(
  xs: readonly number[],
  ys: readonly number[],
  f: (x: number, y: number) => number,
): DensityGrid {
  return { xs, ys, density: ys.flatMap((y) => xs.map((x) => f(x, y))) };
}

const steps = (low: number, high: number, n: number) =>
  Array.from({ length: n }, (_unused, i) => low + ((high - low) * i) / (n - 1));

/** Corners of each ring of a path. */
function rings(path: string): [number, number][][] {
  return path
    .split("Z")
    .filter(Boolean)
    .map((ring) =>
      ring
        .slice(1)
        .split("L")
        .map((pair) => pair.split(" ").map(Number) as [number, number]),
    );
}

/** Area inside a ring by the shoelace formula. */
function area(ring: readonly [number, number][]): number {
  return Math.abs(
    ring.reduce((sum, [x, y], i) => {
      const [nextX, nextY] = ring[(i + 1) % ring.length]!;
      return sum + 0.5 * (x * nextY - nextX * y);
    }, 0),
  );
}

describe("contourPath", () => {
  it("draws the circle on which a round Gaussian falls to its level", () => {
    // Closed form: exp(−r²/2) = level at r = √(−2 ln level).
    const gaussian = grid(steps(-4, 4, 81), steps(-4, 4, 81), (x, y) =>
      Math.exp(-0.5 * (x * x + y * y)),
    );
    const level = Math.exp(-0.5);
    const [ring, ...others] = rings(contourPath(gaussian, level, large, large));
    expect(others).toEqual([]);
    // In units of a thousandth; linear interpolation on steps of 0.1 is good to 0.2 %.
    ring!.forEach(([x, y]) => expect(Math.abs(Math.hypot(x, y) / 1000 - 1)).toBeLessThan(2e-3));
    expect(area(ring!) / 1e6).toBeCloseTo(Math.PI, 1);
  });

  it("follows places that are not evenly spaced", () => {
    const xs = [0, 1, 4, 9, 16, 25];
    const ramp = grid(xs, [0, 1, 2], (x) => 25 - x);
    // The density is a straight line in x, which exceeds 15 below x = 10.
    const [ring] = rings(contourPath(ramp, 15, plain, plain));
    const right = Math.max(...ring!.map(([x]) => x));
    expect(right).toBeCloseTo(10, 10);
  });

  it("closes a region along the edge of the grid", () => {
    const edge = grid(steps(0, 1, 11), steps(0, 1, 11), (x) => 1 - x);
    const [ring] = rings(contourPath(edge, 0.5, large, large));
    expect(Math.min(...ring!.map(([x]) => x))).toBe(0);
    expect(Math.min(...ring!.map(([, y]) => y))).toBe(0);
    expect(Math.max(...ring!.map(([, y]) => y))).toBe(1000);
    // The corner of a closed grid is cut by at most half a step.
    expect(area(ring!) / 1e6).toBeCloseTo(0.5, 2);
  });

  it("gives each peak its own ring, and a hole its own inside", () => {
    const twin = grid(
      steps(-3, 3, 61),
      steps(-1, 1, 21),
      (x, y) => Math.exp(-4 * ((x - 2) ** 2 + y * y)) + Math.exp(-4 * ((x + 2) ** 2 + y * y)),
    );
    expect(rings(contourPath(twin, 0.5, large, large))).toHaveLength(2);
    const annulus = grid(steps(-2, 2, 81), steps(-2, 2, 81), (x, y) =>
      Math.exp(-20 * (Math.hypot(x, y) - 1) ** 2),
    );
    const both = rings(contourPath(annulus, 0.5, large, large));
    expect(both).toHaveLength(2);
    // Closed form: the level lies at r = 1 ± √(ln 2/20).
    const reach = Math.sqrt(Math.LN2 / 20);
    const areas = both.map((ring) => area(ring) / 1e6).sort((a, b) => a - b);
    expect(areas[0]).toBeCloseTo(Math.PI * (1 - reach) ** 2, 1);
    expect(areas[1]).toBeCloseTo(Math.PI * (1 + reach) ** 2, 1);
  });

  it("is empty where the density nowhere exceeds the level", () => {
    expect(
      contourPath(
        grid([0, 1], [0, 1], () => 0.2),
        0.5,
        plain,
        plain,
      ),
    ).toBe("");
  });
});
