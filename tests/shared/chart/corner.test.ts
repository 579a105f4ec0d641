import { cornerLayout, cornerSpan, jointOf, scaledToArea } from "~shared/chart/corner";
import { bandPath, cutCurve } from "~shared/chart/paths";
import { posteriorRows, rowsSpan } from "~shared/chart/posteriorRows";
import { linearScale } from "~shared/chart/scales";
import { roundStep } from "~shared/chart/ticks";

const plain = linearScale([0, 1], [0, 1]);

describe("cornerLayout", () => {
  it.each([
    [288, 2],
    [358, 4],
    [700, 5],
  ])("fits %p wide with %p columns, cells apart and below one another", (width, count) => {
    const { cell, side, height } = cornerLayout(width, count);
    const last = cell(count - 1, count - 1);
    expect(last.right).toBeLessThanOrEqual(width);
    expect(last.bottom).toBeLessThan(height);
    expect(cell(1, 1).left - cell(0, 1).right).toBeGreaterThan(0);
    expect(cell(0, 1).top - cell(0, 0).bottom).toBeGreaterThan(0);
    expect(last.right - last.left).toBe(side);
  });
});

describe("cornerSpan", () => {
  it("stays inside the places where the density is known", () => {
    expect(cornerSpan([0.2, 0.8], [0, 0.5, 1])).toEqual([0, 1]);
    const [low, high] = cornerSpan([6, 8], [0, 20]);
    // 0.35 of the interval's width on either side.
    expect([low, high]).toEqual([6 - 0.7, 8 + 0.7]);
  });
});

describe("jointOf", () => {
  const joint = {
    x: "a",
    y: "b",
    xs: [1, 2, 3],
    ys: [10, 20],
    density: [11, 12, 13, 21, 22, 23],
    level68: 15,
    level95: 5,
  };

  it("turns a density that was computed the other way round", () => {
    const turned = jointOf([joint], "b", "a");
    expect(turned).toMatchObject({ xs: [10, 20], ys: [1, 2, 3], level68: 15 });
    // Row by row over a: at a = 1 the values over b.
    expect(turned?.density).toEqual([11, 21, 12, 22, 13, 23]);
    expect(jointOf([joint], "a", "b")).toBe(joint);
    expect(jointOf([joint], "a", "c")).toBeNull();
  });
});

describe("scaledToArea", () => {
  it("draws a flat prior four times as wide a quarter as high", () => {
    const posterior = { name: "a", x: [0, 1], density: [1, 1] };
    const prior = { name: "a", x: [0, 4], density: [1, 1] };
    expect(scaledToArea(prior, posterior).density).toEqual([0.25, 0.25]);
  });
});

describe("bandPath", () => {
  it("goes along the upper curve and back along the lower one", () => {
    expect(bandPath([0, 1], [0.2, 0.3], [0.6, 0.7], plain, plain)).toBe(
      "M0 0.6L1 0.7L1 0.3L0 0.2Z",
    );
    expect(bandPath([], [], [], plain, plain)).toBe("");
  });
});

describe("cutCurve", () => {
  it("ends on the curve between its places", () => {
    expect(cutCurve([0, 1, 2], [0, 10, 0], [0.5, 1.5])).toEqual({
      xs: [0.5, 1, 1.5],
      ys: [5, 10, 5],
    });
    expect(cutCurve([0, 1], [1, 3], [-1, 2])).toEqual({ xs: [0, 1], ys: [1, 3] });
    expect(cutCurve([0, 1], [1, 3], [2, 3])).toEqual({ xs: [], ys: [] });
  });
});

describe("posteriorRows", () => {
  it("puts rows below one another, words above their curve, all above the axis", () => {
    const { rows, bottom } = posteriorRows(3);
    rows.forEach(({ label, top, floor }, i) => {
      expect(label).toBeLessThan(top);
      expect(top).toBeLessThan(floor);
      expect(floor).toBeLessThan(rows[i + 1]?.label ?? bottom);
    });
  });

  it("spans every row's interval, no farther than the densities are known", () => {
    const density = (x: number[]) => ({ name: "tau", x, density: x.map(() => 1) });
    const span = rowsSpan([
      { interval68: [0.05, 0.06], density: density([0, 1]) },
      { interval68: [0.04, 0.09], density: density([0.03, 0.1]) },
    ]);
    expect(span[0]).toBeCloseTo(0.03, 12);
    expect(span[1]).toBeCloseTo(0.1, 12);
  });
});

describe("roundStep", () => {
  it.each([
    [6, 5, 2, 0],
    [0.013, 5, 0.005, 3],
    [1, 5, 0.2, 1],
    [0.4, 2, 0.2, 1],
  ])("steps over %p with about %p labels by %p, %p decimals", (span, wanted, step, digits) => {
    const found = roundStep(span, wanted);
    expect(found.step).toBeCloseTo(step, 12);
    expect(found.digits).toBe(digits);
  });
});
