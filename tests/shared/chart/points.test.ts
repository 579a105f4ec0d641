import { markOf, nearestMark, WIDE_SIZES } from "~shared/chart/marks";
import { planePoint, statementSpan } from "~shared/chart/points";
import { linearScale, logScale } from "~shared/chart/scales";
import { type AsUsed, asUsed } from "~shared/statement/asUsed";
import { type ConstraintFields, emptyFields } from "~shared/statement/fields";

function point(fields: Partial<ConstraintFields>) {
  const used = asUsed({
    ...emptyFields(),
    quantity: "neutralFraction",
    species: "neutral",
    scale: "linear",
    z: "7",
    level: "oneSigma",
    ...fields,
  });
  if (used === null) throw new Error("the fields of the test are not usable");
  return planePoint(used);
}

const box = { left: 0, right: 600, top: 0, bottom: 1060 };
const zScale = linearScale([5, 11], [0, 600]);
const xScale = linearScale([-0.03, 1.03], [1060, 0]);

describe("planePoint", () => {
  it("draws an ionized value at its neutral one, with the sides of its bar swapped", () => {
    const drawn = point({
      species: "ionized",
      kind: "twoSided",
      value: "0.37",
      plus: "0.23",
      minus: "0.17",
    });
    expect(drawn?.x).toBe(0.63);
    expect(drawn?.xEnds?.[0]).toBeCloseTo(0.4, 12);
    expect(drawn?.xEnds?.[1]).toBeCloseTo(0.8, 12);
  });

  it("points an upper limit of the ionized fraction upwards", () => {
    const drawn = point({ species: "ionized", kind: "upperLimit", value: "0.4" });
    expect(drawn?.arrow).toEqual({ along: "x", direction: 1 });
    expect(drawn?.hollow).toBe(true);
  });

  it("opens a value printed as log10 to its fraction, with unequal sides", () => {
    const drawn = point({
      scale: "log10",
      kind: "twoSided",
      value: "-1",
      plus: "0.3",
      minus: "0.3",
    });
    expect(drawn?.x).toBeCloseTo(0.1, 12);
    expect(drawn?.xEnds?.[1]).toBeCloseTo(10 ** -0.7, 12);
  });

  it("draws a redshift at a fraction at its fraction, with the error along the redshift", () => {
    const drawn = point({
      quantity: "redshiftAtFraction",
      fraction: "0.5",
      kind: "twoSided",
      value: "7.5",
      plus: "0.6",
      minus: "0.6",
    });
    expect(drawn).toMatchObject({ z: 7.5, x: 0.5, xEnds: null, bin: false });
    expect(drawn?.zEnds?.[0]).toBeCloseTo(6.9, 12);
    expect(drawn?.zEnds?.[1]).toBeCloseTo(8.1, 12);
  });

  it("gives a band no best value", () => {
    const drawn = point({ kind: "band", bandLow: "0.2", bandHigh: "0.6" });
    expect(drawn?.hollow).toBe(true);
    expect(drawn?.band).toEqual({ along: "x", ends: [0.2, 0.6] });
  });

  it("has no place for an optical depth", () => {
    expect(
      point({
        quantity: "opticalDepth",
        kind: "twoSided",
        value: "0.05",
        plus: "0.01",
        minus: "0.01",
      }),
    ).toBeNull();
  });
});

describe("markOf", () => {
  it("cuts the arrow of an upper limit at a fraction of zero", () => {
    const drawn = point({ kind: "upperLimit", value: "0.02" });
    const mark = drawn && markOf(drawn, zScale, xScale, box, WIDE_SIZES);
    // x = 0 stands 1000 / 1.06 units per fraction above the lower edge: 0.03 × 1000 = 30 above it.
    const tip = mark?.arrow?.head[2]?.[1] ?? NaN;
    expect(tip).toBeCloseTo(1030, 9);
  });

  it("lets a free arrow reach its full length", () => {
    const drawn = point({ kind: "lowerLimit", value: "0.40" });
    const mark = drawn && markOf(drawn, zScale, xScale, box, WIDE_SIZES);
    const tip = mark?.arrow?.head[2]?.[1] ?? NaN;
    expect((mark?.y ?? NaN) - tip).toBeCloseTo(WIDE_SIZES.arrowLength, 9);
  });

  it("gives a bin end ticks and an uncertain redshift none", () => {
    const fields = {
      kind: "twoSided",
      value: "0.5",
      plus: "0.1",
      minus: "0.1",
      zLow: "6.8",
      zHigh: "7.2",
    } as const;
    const bin = point({ ...fields, zRole: "binAverage" });
    const uncertain = point({ ...fields, zRole: "uncertain" });
    expect(bin && markOf(bin, zScale, xScale, box, WIDE_SIZES)?.ends).toHaveLength(2);
    expect(uncertain && markOf(uncertain, zScale, xScale, box, WIDE_SIZES)?.ends).toHaveLength(0);
  });

  it("dashes what states no level", () => {
    const drawn = point({
      kind: "twoSided",
      value: "0.5",
      plus: "0.1",
      minus: "0.1",
      level: "notStated",
    });
    expect(drawn && markOf(drawn, zScale, xScale, box, WIDE_SIZES)?.dashed).toBe(true);
  });

  it("leaves out what stands outside the frame", () => {
    const drawn = point({ z: "12", kind: "twoSided", value: "0.5", plus: "0.1", minus: "0.1" });
    expect(drawn && markOf(drawn, zScale, xScale, box, WIDE_SIZES)).toBeNull();
  });

  it("ends a bar that reaches zero at the frame of a logarithmic axis", () => {
    const drawn = point({ kind: "twoSided", value: "0.1", plus: "0.1", minus: "0.1" });
    const mark = drawn && markOf(drawn, zScale, logScale([1e-3, 1], [1060, 0]), box, WIDE_SIZES);
    expect(mark?.bars[0]?.y1).toBe(1060);
  });
});

describe("nearestMark", () => {
  const marks = [{ x: 10, y: 10 }, null, { x: 20, y: 10 }, { x: 20, y: 10 }];
  it("finds the nearest one, the first of equals", () => {
    expect(nearestMark(marks, 17, 10, 44)).toBe(2);
  });
  it("finds none beyond its reach", () => {
    expect(nearestMark(marks, 100, 100, 44)).toBeNull();
  });
});

describe("a tabulated curve", () => {
  // A triangle in ln p: highest at 0.4, e⁻² of it at 0.2 and 0.6.
  const curve = { x: [0, 0.2, 0.4, 0.6, 0.8], p: [-4, -2, 0, -2, -4].map(Math.exp) };
  const used: AsUsed = {
    ...asUsed({
      ...emptyFields(),
      quantity: "neutralFraction",
      species: "neutral",
      scale: "linear",
      z: "7.5",
      kind: "curve",
    })!,
    curve: { ...curve, x: [0, 0.1, 0.4, 0.7, 0.8] },
  };

  it("is a half violin that ends at e⁻² of its peak", () => {
    const { violin, x, xEnds, hollow, levelStated } = planePoint({ ...used, curve })!;
    expect([x, xEnds, hollow, levelStated]).toEqual([0.4, null, false, true]);
    expect(violin!.at.map((at) => Number(at.toFixed(9)))).toEqual([0.2, 0.4, 0.6]);
    expect(violin!.height[1]).toBe(1);
    expect(violin!.height[0]).toBeCloseTo(Math.exp(-2), 12);
  });

  it("crosses e⁻² between nodes where ln L is linear", () => {
    const coarse = { x: [0, 0.4, 0.8], p: [Math.exp(-4), 1, Math.exp(-4)] };
    expect(planePoint({ ...used, curve: coarse })!.violin!.at[0]).toBeCloseTo(0.2, 12);
    expect(statementSpan({ ...used, curve: coarse })).toEqual({
      centre: 0.4,
      ends: [expect.closeTo(0.2, 12), expect.closeTo(0.6, 12)],
    });
  });

  it("goes back to its base between two peaks", () => {
    const two = { x: [0.1, 0.2, 0.3, 0.4, 0.5], p: [1, 1, 0.01, 0.5, 0.5] };
    const { at, height } = planePoint({ ...used, curve: two })!.violin!;
    expect(at[3]).toBe(0.3);
    expect(height[3]).toBe(0);
    expect(at[at.length - 1]).toBe(0.5);
  });

  it("stands in its fraction where it is evaluated in log10", () => {
    const log = { x: [-3, -2, -1], p: [0.5, 1, 0.5] };
    const point = planePoint({ ...used, evaluatedIn: "log10", curve: log })!;
    expect(point.x).toBe(0.01);
    expect(point.violin!.at.map((at) => Number(at.toFixed(9)))).toEqual([0.001, 0.01, 0.1]);
  });

  it("has no place without its nodes", () => {
    const { curve: _, ...without } = used;
    expect(planePoint(without)).toBeNull();
    expect(statementSpan(without)).toBeNull();
  });

  it("is drawn to the right of its redshift, as wide as its peak is high", () => {
    const point = planePoint({ ...used, curve })!;
    const frame = { left: 0, right: 200, top: 0, bottom: 100 };
    const mark = markOf(
      point,
      linearScale([7, 8], [0, 200]),
      linearScale([0, 1], [100, 0]),
      frame,
      WIDE_SIZES,
    )!;
    const xs = mark.violin!.map(([x]) => x);
    expect(Math.min(...xs)).toBe(mark.x);
    expect(Math.max(...xs)).toBeCloseTo(mark.x + WIDE_SIZES.violinWidth, 9);
    expect(mark.violin![0]).toEqual([mark.x, expect.closeTo(80, 9)]);
    expect(mark.violin![mark.violin!.length - 1]).toEqual([mark.x, expect.closeTo(40, 9)]);
  });
});

describe("a redshift at a fraction", () => {
  const frame = { left: 0, right: 200, top: 0, bottom: 100 };
  const z = linearScale([6, 8], [0, 200]);
  const x = linearScale([0, 1], [100, 0]);
  const sizes = { ...WIDE_SIZES, radius: 5, arrowLength: 30, head: 8 };
  const mark = (changes: Partial<Parameters<typeof point>[0]>) => {
    const drawn = point({ quantity: "redshiftAtFraction", fraction: "0.5", ...changes });
    return drawn && markOf(drawn, z, x, frame, sizes);
  };

  it("has its limit's arrow along the redshift: lower to the right, upper to the left", () => {
    expect(mark({ kind: "lowerLimit", value: "7" })?.arrow).toEqual({
      shaft: { x1: 105, y1: 50, x2: 122, y2: 50 },
      head: [
        [122, 46],
        [122, 54],
        [130, 50],
      ],
    });
    expect(mark({ kind: "upperLimit", value: "7" })?.arrow?.head[2]).toEqual([70, 50]);
  });

  it("ends an arrow at the frame, and leaves it out where there is no room for a head", () => {
    expect(mark({ kind: "lowerLimit", value: "7.8" })?.arrow?.head[2]).toEqual([200, 50]);
    expect(mark({ kind: "lowerLimit", value: "7.95" })?.arrow).toBeNull();
  });

  it("has its band along the redshift, cut at the frame", () => {
    const height = sizes.bandWidth;
    expect(mark({ kind: "band", bandLow: "6.5", bandHigh: "7.5" })?.band).toEqual({
      x: 50,
      y: 50 - height / 2,
      width: 100,
      height,
    });
    expect(mark({ kind: "band", bandLow: "5.5", bandHigh: "7" })?.band).toMatchObject({
      x: 0,
      width: 100,
    });
  });

  it("has its curve above its fraction, as high as its peak", () => {
    const drawn = point({
      quantity: "redshiftAtFraction",
      fraction: "0.5",
      kind: "twoSided",
      value: "7",
      plus: "0.1",
      minus: "0.1",
    });
    const violin = { along: "z", at: [6.5, 7, 7.5], height: [0.5, 1, 0.5] } as const;
    const { violin: outline } = markOf({ ...drawn!, violin }, z, x, frame, {
      ...sizes,
      violinWidth: 20,
    })!;
    expect(outline).toEqual([
      [50, 50],
      [50, 40],
      [100, 30],
      [150, 40],
      [150, 50],
    ]);
  });
});
