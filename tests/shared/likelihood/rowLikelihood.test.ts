import { background } from "~shared/cosmology/background";
import { powerLawHistory } from "~shared/history/powerLaw";
import { tabulatedHistory } from "~shared/history/tabulated";
import { tanhHistory } from "~shared/history/tanh";
import { rowLikelihood, type RowLikelihood, type RowOptions } from "~shared/likelihood";
import { asUsed, type AsUsed } from "~shared/statement/asUsed";
import { type ConstraintFields, emptyFields } from "~shared/statement/fields";

/** A volume-averaged neutral fraction at z = 7, 0.40 ± 0.10 at one sigma, unless said otherwise. */
function used(fields: Partial<ConstraintFields> = {}): AsUsed {
  const result = asUsed({
    ...emptyFields(),
    quantity: "neutralFraction",
    species: "neutral",
    scale: "linear",
    weighting: "volume",
    z: "7.0",
    zRole: "point",
    kind: "twoSided",
    value: "0.40",
    plus: "0.10",
    minus: "0.10",
    level: "oneSigma",
    estimator: "notStated",
    ...fields,
  });
  if (result === null) throw new Error("the fields of this test are not complete");
  return result;
}
/** One sigma is C = 0.6827 by PHYSICS.md section 4: k = 1.0000217133229992 (scipy norm.ppf). */
const K = 1.0000217133229992;
function row(fields: Partial<ConstraintFields> = {}, options?: RowOptions): RowLikelihood {
  const result = rowLikelihood(used(fields), options);
  if ("leftOut" in result) throw new Error(result.leftOut);
  return result;
}
function leftOut(fields: Partial<ConstraintFields>, options?: RowOptions): string {
  const result = rowLikelihood(used(fields), options);
  return "leftOut" in result ? result.code : `scored as ${result.form}`;
}
const limit = (kind: "upperLimit" | "lowerLimit", value: string): Partial<ConstraintFields> => ({
  kind,
  value,
  plus: null,
  minus: null,
  level: "percent95",
});
const tau: Partial<ConstraintFields> = { quantity: "opticalDepth", z: null, zRole: null };

describe("default form of a statement", () => {
  it.each<[string, Partial<ConstraintFields>, string]>([
    ["two-sided mode", { estimator: "mode" }, "twoPiece"],
    ["two-sided best fit", { estimator: "bestFit" }, "twoPiece"],
    ["two-sided mean", { estimator: "mean" }, "twoPiece"],
    ["two-sided, not stated", { estimator: "notStated" }, "twoPiece"],
    ["two-sided median", { estimator: "median", plus: "0.20" }, "quantileMatched"],
    ["upper limit", limit("upperLimit", "0.30"), "halfGaussianBounded"],
    ["lower limit", limit("lowerLimit", "0.60"), "halfGaussianBounded"],
    [
      "limit with base and own sigma",
      { ...limit("upperLimit", "0.10"), value: null, limitBase: "0.10", limitSigma: "0.05" },
      "flatThenGaussian",
    ],
    ["band", { kind: "band", bandLow: "0.3", bandHigh: "0.7" }, "band"],
    [
      "symmetric optical depth",
      { ...tau, value: "0.054", plus: "0.007", minus: "0.007" },
      "gaussian",
    ],
    [
      "lopsided optical depth",
      { ...tau, value: "0.054", plus: "0.008", minus: "0.007" },
      "twoPiece",
    ],
    [
      "upper limit on an optical depth",
      { ...tau, ...limit("upperLimit", "0.019") },
      "halfGaussianUnbounded",
    ],
    [
      "redshift at a fraction",
      {
        quantity: "redshiftAtFraction",
        fraction: "0.5",
        z: null,
        value: "7.1",
        plus: "0.3",
        minus: "0.3",
      },
      "gaussian",
    ],
  ])("%s", (_, fields, form) => {
    expect(row(fields).form).toBe(form);
  });

  it("says its name and its numbers in the formula", () => {
    expect(row().formula).toBe("two-piece: ((x − 0.4)/0.1)² below 0.4, ((x − 0.4)/0.1)² above");
    expect(row({ ...tau, value: "0.054", plus: "0.007", minus: "0.007" }).formula).toBe(
      "Gaussian: ((τ − 0.054)/0.007)²",
    );
  });

  it("uses each side's own one-sigma width, whatever the level", () => {
    // At 95 % the widths span k = 1.95996 sigma: −2 ln L is k² = 3.8415 at both quoted ends.
    const wide = row({ value: "0.40", plus: "0.30", minus: "0.20", level: "percent95" });
    expect(wide.minus2LnL(0.7)).toBeCloseTo(3.841458820694, 10);
    expect(wide.minus2LnL(0.2)).toBeCloseTo(3.841458820694, 10);
  });

  it("keeps a printed 68 % apart from one sigma", () => {
    // k = 0.99446 at 68 % (scipy norm.ppf).
    expect(row({ level: "percent68" }).minus2LnL(0.5)).toBeCloseTo(0.9944578832097535 ** 2, 10);
    expect(row({ level: "oneSigma" }).minus2LnL(0.5)).toBeCloseTo(K ** 2, 10);
  });

  it("warns of a limit that says nothing beyond a flat prior, and gives it no weight", () => {
    const weak = row(limit("upperLimit", "0.96"));
    expect(weak.warnings.map(({ code }) => code)).toEqual(["saysNothing"]);
    expect([0, 0.5, 1].map(weak.minus2LnL)).toEqual([0, 0, 0]);
    const lower = row({ ...limit("lowerLimit", "0.04") });
    expect(lower.warnings.map(({ code }) => code)).toEqual(["saysNothing"]);
  });

  it("warns of a second peak above a ratio of 2.4", () => {
    const median = { estimator: "median", minus: "0.10" } as const;
    expect(row({ ...median, plus: "0.24" }).warnings).toEqual([]);
    expect(row({ ...median, plus: "0.25" }).warnings[0]?.code).toBe("secondPeak");
  });

  it("warns of a band that touches the end of its range", () => {
    const ends = (bandLow: string, bandHigh: string) =>
      row({ kind: "band", bandLow, bandHigh }).warnings.map(({ code }) => code);
    expect(ends("0.0", "0.4")).toEqual(["touchesEdge"]);
    expect(ends("0.4", "1")).toEqual(["touchesEdge"]);
    expect(ends("0.1", "0.4")).toEqual([]);
  });
});

describe("rows left out until someone decides", () => {
  it.each<[string, Partial<ConstraintFields>, string]>([
    ["qualitative statement", { kind: "qualitative", value: null }, "qualitative"],
    ["mass-weighted fraction", { weighting: "mass" }, "massWeighted"],
    ["level not stated", { level: "notStated" }, "levelNotStated"],
    [
      "limit with level not stated",
      { ...limit("upperLimit", "0.3"), level: "notStated" },
      "levelNotStated",
    ],
    [
      "band with level not stated",
      { kind: "band", bandLow: "0.3", bandHigh: "0.7", level: "notStated" },
      "levelNotStated",
    ],
    [
      "lower limit on an optical depth",
      { ...tau, ...limit("lowerLimit", "0.04") },
      "limitNeedsForm",
    ],
    [
      "lower limit on a duration",
      {
        quantity: "duration",
        z: null,
        zRole: null,
        fractionFrom: "0.75",
        fractionTo: "0.25",
        durationUnit: "redshift",
        ...limit("lowerLimit", "0.5"),
      },
      "limitNeedsForm",
    ],
    [
      "upper limit on a redshift",
      {
        quantity: "redshiftAtFraction",
        z: null,
        zRole: null,
        fraction: "0.5",
        ...limit("upperLimit", "8.1"),
      },
      "limitNeedsForm",
    ],
    [
      "curve without its nodes",
      { kind: "curve", value: null, plus: null, minus: null },
      "curveMissing",
    ],
    ["errors of zero", { plus: "0", minus: "0" }, "formDoesNotFit"],
  ])("%s", (_, fields, code) => {
    expect(leftOut(fields)).toBe(code);
  });

  it("leaves out a record that can't be used, in words", () => {
    expect(rowLikelihood(null)).toMatchObject({ code: "incomplete" });
  });

  it("takes the decisions of a table", () => {
    const hard = { quantity: "redshiftAtFraction", z: null, zRole: null, fraction: "0.5" } as const;
    expect(leftOut({ level: "notStated" }, { level: 0.6827 })).toBe("scored as twoPiece");
    expect(leftOut({ weighting: "mass" }, { acceptMassWeighted: true })).toBe("scored as twoPiece");
    expect(leftOut({ ...hard, ...limit("upperLimit", "8.1") }, { form: "hardStep" })).toBe(
      "scored as hardStep",
    );
    expect(leftOut({ kind: "curve" }, { curve: { x: [0, 0.5, 1], p: [1, 2, 1] } })).toBe(
      "scored as tabulated",
    );
    expect(leftOut({}, { form: "variableWidth" })).toBe("scored as variableWidth");
    expect(leftOut(limit("upperLimit", "0.3"), { form: "smoothedStep", smoothing: 0.05 })).toBe(
      "scored as smoothedStep",
    );
    expect(leftOut(limit("upperLimit", "0.3"), { form: "halfGaussianUnbounded" })).toBe(
      "scored as halfGaussianUnbounded",
    );
    expect(
      leftOut({ kind: "band", bandLow: "0.3", bandHigh: "0.7" }, { form: "bandWideTails" }),
    ).toBe("scored as bandWideTails");
  });

  it("decides a level as if it were stated", () => {
    const open = row({ level: "notStated" }, { level: 0.95 });
    const stated = row({ level: "percent95" });
    expect(open.minus2LnL(0.55)).toBeCloseTo(stated.minus2LnL(0.55), 12);
  });

  it.each<[string, Partial<ConstraintFields>, RowOptions]>([
    ["a band form on a value", {}, { form: "band" }],
    ["a Gaussian on unequal errors", { plus: "0.2" }, { form: "gaussian" }],
    ["a two-piece on a limit", limit("upperLimit", "0.3"), { form: "twoPiece" }],
    ["a smoothed step without a width", limit("upperLimit", "0.3"), { form: "smoothedStep" }],
    [
      "flat, then Gaussian without a width",
      limit("upperLimit", "0.3"),
      { form: "flatThenGaussian" },
    ],
    [
      "the bounded form on an optical depth",
      { ...tau, ...limit("upperLimit", "0.02") },
      { form: "halfGaussianBounded" },
    ],
    [
      "the unbounded form on a lower limit on τ",
      { ...tau, ...limit("lowerLimit", "0.02") },
      { form: "halfGaussianUnbounded" },
    ],
    [
      "a hard step on a band",
      { kind: "band", bandLow: "0.3", bandHigh: "0.7" },
      { form: "hardStep" },
    ],
  ])("refuses %s", (_, fields, options) => {
    expect(leftOut(fields, options)).toBe("formDoesNotFit");
  });
});

describe("redshift roles", () => {
  const tanh = tanhHistory({ zRe: 7.2, deltaZ: 0.6 });
  const bin = { z: "7.0", zLow: "6.5", zHigh: "7.5" };
  it.each<[ConstraintFields["zRole"], string]>([
    ["point", "point"],
    ["binAverage", "binMean"],
    ["uncertain", "averagedLikelihood"],
    ["sampleRange", "point"],
  ])("%s is met by %s", (zRole, treatment) => {
    expect(row({ ...bin, zRole }).redshift).toBe(treatment);
  });

  it("compares a bin average with the mean over the bin", () => {
    // 0.3679266394198739: scipy quad, pub-040 of reference.json.
    const { model } = row({ ...bin, zRole: "binAverage" }).evaluate(tanh, background());
    expect(model).toBeCloseTo(0.3679266394198739, 10);
  });

  it("averages the likelihood, not the model, over an uncertain redshift", () => {
    const uncertain = row({ ...bin, zRole: "uncertain" }).evaluate(tanh, background());
    const atPoint = row({ ...bin }).evaluate(tanh, background());
    // Closed over a fine midpoint sum of L.
    let sum = 0;
    const n = 20000;
    const { minus2LnL } = row(bin);
    for (let i = 0; i < n; i++) {
      sum += Math.exp(-0.5 * minus2LnL(tanh.x(6.5 + (i + 0.5) / n))) / n;
    }
    expect(uncertain.minus2LnL).toBeCloseTo(-2 * Math.log(sum), 6);
    expect(uncertain.minus2LnL).not.toBeCloseTo(atPoint.minus2LnL!, 3);
  });

  it("lets a table choose another treatment", () => {
    expect(row({ ...bin, zRole: "sampleRange" }, { redshift: "averagedLikelihood" }).redshift).toBe(
      "averagedLikelihood",
    );
    expect(row({ ...bin, zRole: "binAverage" }, { redshift: "point" }).redshift).toBe("point");
    // Without a range there is nothing to average over.
    expect(row({}, { redshift: "binMean" }).redshift).toBe("point");
  });

  it("is finite for an averaged likelihood far out, and +∞ where it is zero throughout", () => {
    const far = row({ ...bin, zRole: "uncertain", plus: "0.001", minus: "0.001" });
    const late = tanhHistory({ zRe: 5, deltaZ: 0.1 });
    expect(far.evaluate(late, background()).minus2LnL).toBeGreaterThan(1e4);
    expect(far.evaluate(late, background()).minus2LnL).toBeLessThan(Infinity);
    const wall = row(
      { ...bin, zRole: "uncertain", ...limit("upperLimit", "0.3") },
      { form: "hardStep" },
    );
    expect(wall.evaluate(late, background()).minus2LnL).toBe(Infinity);
  });
});

describe("model values", () => {
  const cosmology = background();
  const tanh = tanhHistory({ zRe: 7.67 });
  const value = (fields: Partial<ConstraintFields>) =>
    row({ z: null, zRole: null, value: "0.5", ...fields }).evaluate(tanh, cosmology).model;

  it("gives the total optical depth", () => {
    // 0.0541970146: scipy and astropy, PHYSICS.md section 6.
    expect(value({ quantity: "opticalDepth" })).toBeCloseTo(0.0541970146, 9);
  });
  it("gives the optical depth of a range", () => {
    expect(value({ quantity: "opticalDepthRange", rangeLow: "0", rangeHigh: "5" })).toBeCloseTo(
      0.030201876770327492, // pub-019 of reference.json
      10,
    );
  });
  it("gives the redshift at a fraction", () => {
    expect(
      value({ quantity: "redshiftAtFraction", species: "neutral", fraction: "0.5" }),
    ).toBeCloseTo(7.67, 10);
  });
  it("gives durations in redshift and in million years", () => {
    const ends = { species: "neutral", fractionFrom: "0.75", fractionTo: "0.25" } as const;
    // 0.5493980993851899: pub-036 of reference.json.
    expect(value({ quantity: "duration", durationUnit: "redshift", ...ends })).toBeCloseTo(
      0.5493980993851899,
      10,
    );
    expect(value({ quantity: "duration", durationUnit: "myr", ...ends })).toBeCloseTo(
      1000 *
        (cosmology.age(tanh.redshiftAtFraction(0.25)!) -
          cosmology.age(tanh.redshiftAtFraction(0.75)!)),
      9,
    );
  });

  it("gives no value, and says so, where the history never passes the fraction", () => {
    // pub-edge-1 of reference.json: x(0) = 0.077 is above 0.05.
    const wide = tanhHistory({ zRe: 5, deltaZ: 3 });
    const result = row({
      quantity: "redshiftAtFraction",
      z: null,
      zRole: null,
      fraction: "0.05",
      value: "6",
    }).evaluate(wide, cosmology);
    expect(result).toMatchObject({ model: null, minus2LnL: null, code: "noSuchRedshift" });
    expect(result.reason).toContain("x = 0.05");
  });

  it("names a row outside an own history's table instead of extrapolating", () => {
    const table = tabulatedHistory([6, 7.5, 9], [0, 0.5, 1]);
    const inside = row({ z: "7.0" }).evaluate(table, cosmology);
    const outside = row({ z: "5.5" }).evaluate(table, cosmology);
    const half = row({ z: null, zLow: "8.5", zHigh: "9.5", zRole: "binAverage" });
    expect(inside.minus2LnL).not.toBeNull();
    expect(outside).toMatchObject({ model: null, code: "outsideTable" });
    expect(outside.reason).toContain("6 to 9");
    expect(half.evaluate(table, cosmology)).toMatchObject({ code: "outsideTable" });
  });

  it("evaluates a log10 statement in log10 x, zero fraction included", () => {
    const log = row({ scale: "log10", value: "-2.0", plus: "0.5", minus: "0.5" });
    expect(log.evaluatedIn).toBe("log10");
    expect(log.minus2LnL(0.01)).toBeCloseTo(0, 12);
    expect(log.minus2LnL(10 ** -1.5)).toBeCloseTo(K ** 2, 10);
    const early = powerLawHistory({ zEnd: 7.5, alpha: 2 });
    expect(log.evaluate(early, cosmology).minus2LnL).toBe(Infinity);
  });
});

describe("quantiles and curves", () => {
  it("gives back a quoted median and its ends exactly", () => {
    // PHYSICS.md section 6: 0.40 +0.20 −0.10 at 68.27 % has P = 0.15865, 0.5, 0.84135.
    const median = row({
      estimator: "median",
      plus: "0.20",
      minus: "0.10",
      level: "other",
      levelPercent: "68.27",
    });
    const [low, middle, high] = median.quantiles([0.15865, 0.5, 0.84135])!;
    expect(low).toBeCloseTo(0.3, 10);
    expect(middle).toBeCloseTo(0.4, 12);
    expect(high).toBeCloseTo(0.6, 10);
  });

  it("puts a third of a two-piece 0.40 +0.20 −0.10 below its mode", () => {
    const mode = row({ estimator: "mode", plus: "0.20", minus: "0.10" });
    expect(mode.quantiles([1 / 3])![0]).toBeCloseTo(0.4, 10);
  });

  it("puts the stated fraction of a bounded limit on its allowed side", () => {
    expect(row(limit("upperLimit", "0.80")).quantiles([0.95])![0]).toBeCloseTo(0.8, 9);
    expect(row(limit("lowerLimit", "0.20")).quantiles([0.05])![0]).toBeCloseTo(0.2, 9);
  });

  it("has no quantiles where the likelihood can't be normalized", () => {
    const open = row({ ...tau, ...limit("lowerLimit", "0.04") }, { form: "hardStep" });
    expect(open.quantiles([0.5])).toBeNull();
  });

  it("normalizes a flat step over the range of a fraction", () => {
    const step = row(limit("upperLimit", "0.30"), { form: "hardStep" });
    expect(step.quantiles([0.5])![0]).toBeCloseTo(0.15, 10);
  });

  it.each<[string, () => RowLikelihood]>([
    ["a value", () => row()],
    ["an upper limit", () => row(limit("upperLimit", "0.3"))],
    [
      "a hard lower limit on τ",
      () => row({ ...tau, ...limit("lowerLimit", "0.04") }, { form: "hardStep" }),
    ],
    [
      "a smoothed upper limit on τ",
      () =>
        row({ ...tau, ...limit("upperLimit", "0.04") }, { form: "smoothedStep", smoothing: 0.01 }),
    ],
    ["an optical depth", () => row({ ...tau, value: "0.054", plus: "0.007", minus: "0.007" })],
    ["a log10 value", () => row({ scale: "log10", value: "-2.0" })],
  ])("draws %s with unit area and ascending places", (_, make) => {
    const { x, density } = make().curve(201);
    expect(x).toHaveLength(201);
    let area = 0;
    for (let i = 0; i < 200; i++) {
      expect(x[i + 1]!).toBeGreaterThan(x[i]!);
      area += 0.5 * (x[i + 1]! - x[i]!) * (density[i]! + density[i + 1]!);
    }
    expect(area).toBeCloseTo(1, 10);
    expect(density.every((value) => Number.isFinite(value) && value >= 0)).toBe(true);
  });

  it("draws a fraction from 0 to 1 and an optical depth as far as it reaches", () => {
    const { x } = row().curve(11);
    expect([x[0], x[10]]).toEqual([0, 1]);
    const depth = row({ ...tau, value: "0.054", plus: "0.007", minus: "0.007" }).curve(11).x;
    // −2 ln L = 12 is 3.46 sigma out.
    expect(depth[0]).toBeCloseTo(0.054 - (Math.sqrt(12) * 0.007) / K, 8);
    expect(depth[10]).toBeCloseTo(0.054 + (Math.sqrt(12) * 0.007) / K, 8);
  });
});
