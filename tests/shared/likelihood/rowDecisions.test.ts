import { background } from "~shared/cosmology/background";
import { tanhHistory } from "~shared/history/tanh";
import { rowLikelihood, type RowLikelihood, type RowOptions } from "~shared/likelihood";
import { asUsed, type AsUsed } from "~shared/statement/asUsed";
import { emptyFields } from "~shared/statement/fields";

/** A statement as used, value 0.40 ± 0.10 at 95 % and z = 7 unless said otherwise. */
function used(changes: Partial<AsUsed> = {}): AsUsed {
  const plain = asUsed({
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
    level: "percent95",
    estimator: "notStated",
  });
  return { ...plain!, ...changes };
}
const row = (changes: Partial<AsUsed> = {}, options?: RowOptions): RowLikelihood => {
  const result = rowLikelihood(used(changes), options);
  if ("leftOut" in result) throw new Error(result.leftOut);
  return result;
};
const noNumbers = { value: null, plus: null, minus: null } as const;
const limit = (kind: "upperLimit" | "lowerLimit", value: string): Partial<AsUsed> => ({
  ...noNumbers,
  kind,
  value,
});
const tau: Partial<AsUsed> = { quantity: "opticalDepth", z: null };
const redshift: Partial<AsUsed> = { quantity: "redshiftAtFraction", z: null, fraction: 0.5 };
const duration: Partial<AsUsed> = {
  quantity: "duration",
  z: null,
  fractionFrom: 0.75,
  fractionTo: 0.25,
  durationUnit: "redshift",
};
const band = (low: string | null, high: string | null): Partial<AsUsed> => ({
  ...noNumbers,
  kind: "band",
  low,
  high,
});
/** k = Φ⁻¹(0.975), scipy norm.ppf. */
const K95 = 1.959963984540054;

/** Every way a row is left out, in the words that a reader is given. */
describe("a row left out says why", () => {
  const sigma = { limitSigma: "0.05" } as const;
  it.each<[string, string, Partial<AsUsed>, RowOptions?]>([
    ["qualitative", "Qualitative: shown, never fitted.", { kind: "qualitative" }],
    ["massWeighted", "Mass-weighted: not converted to a volume average.", { weighting: "mass" }],
    ["incomplete", "The record has no redshift.", { z: null }],
    ["incomplete", "The record has no redshift.", { z: null, zLow: 6 }],
    ["incomplete", "The record has no redshift.", { z: null, zHigh: 8 }],
    [
      "incomplete",
      "The optical depth has no redshift range.",
      { quantity: "opticalDepthRange", rangeLow: null, rangeHigh: 30 },
    ],
    [
      "incomplete",
      "The optical depth has no redshift range.",
      { quantity: "opticalDepthRange", rangeLow: 15, rangeHigh: null },
    ],
    ["incomplete", "The redshift has no fraction.", { ...redshift, fraction: null }],
    ["incomplete", "The duration has no fractions.", { ...duration, fractionFrom: null }],
    ["incomplete", "The duration has no fractions.", { ...duration, fractionTo: null }],
    ["incomplete", "The value or one of its errors is missing.", { value: null }],
    ["incomplete", "The value or one of its errors is missing.", { plus: null }],
    ["incomplete", "The value or one of its errors is missing.", { minus: null }],
    ["incomplete", "The value or one of its errors is missing.", { value: "about 0.4" }],
    ["incomplete", "The limit is missing.", { ...limit("upperLimit", "0.3"), value: null }],
    ["incomplete", "An end of the band is missing.", band(null, "0.7")],
    ["incomplete", "An end of the band is missing.", band("0.3", null)],
    ["formDoesNotFit", "A band needs its ends in order.", band("0.7", "0.3")],
    ["formDoesNotFit", "A band needs its ends in order.", band("0.3", "0.3")],
    ["formDoesNotFit", "A two-sided value needs errors above zero.", { plus: "0" }],
    ["formDoesNotFit", "A two-sided value needs errors above zero.", { minus: "0" }],
    ["curveMissing", "The nodes of the curve are not at hand.", { ...noNumbers, kind: "curve" }],
    [
      "levelNotStated",
      "The paper states no level: a decision is needed.",
      { level: null, k: null },
    ],
    [
      "levelNotStated",
      "The paper states no level: a decision is needed.",
      { ...limit("upperLimit", "0.3"), ...sigma, level: null },
    ],
    [
      "levelNotStated",
      "The paper states no level: a decision is needed.",
      { ...limit("upperLimit", "0.3"), level: null },
      { form: "halfGaussianUnbounded" },
    ],
    [
      "levelNotStated",
      "The paper states no level: a decision is needed.",
      { ...band("0.3", "0.7"), level: null },
    ],
    [
      "limitNeedsForm",
      "A lower limit on this quantity without a width of its own needs a decision; a hard step is proposed.",
      { ...tau, ...limit("lowerLimit", "0.04") },
    ],
    [
      "limitNeedsForm",
      "A limit on this quantity without a width of its own needs a decision; a hard step is proposed.",
      { ...redshift, ...limit("lowerLimit", "7") },
    ],
    [
      "limitNeedsForm",
      "A limit on this quantity without a width of its own needs a decision; a hard step is proposed.",
      { ...redshift, ...limit("upperLimit", "8") },
    ],
    [
      "formDoesNotFit",
      "A Gaussian needs equal errors on both sides.",
      { plus: "0.2" },
      { form: "gaussian" },
    ],
    [
      "formDoesNotFit",
      "Flat, then Gaussian needs a base and a width of its own.",
      limit("upperLimit", "0.3"),
      { form: "flatThenGaussian" },
    ],
    [
      "formDoesNotFit",
      "Flat, then Gaussian needs a base and a width of its own.",
      { ...limit("upperLimit", "0.3"), limitSigma: "0" },
      { form: "flatThenGaussian" },
    ],
    [
      "formDoesNotFit",
      "A smoothed step needs a width.",
      limit("upperLimit", "0.3"),
      { form: "smoothedStep" },
    ],
    [
      "formDoesNotFit",
      "A smoothed step needs a width.",
      { ...limit("upperLimit", "0.3"), ...sigma, level: null },
      { form: "smoothedStep" },
    ],
    [
      "formDoesNotFit",
      "A smoothed step needs a width.",
      limit("upperLimit", "0.3"),
      { form: "smoothedStep", smoothing: 0 },
    ],
    [
      "formDoesNotFit",
      "The bounded half-Gaussian needs a limit between 0 and 1.",
      { ...tau, ...limit("upperLimit", "0.02") },
      { form: "halfGaussianBounded" },
    ],
    [
      "formDoesNotFit",
      "The bounded half-Gaussian needs a limit between 0 and 1.",
      limit("upperLimit", "0"),
    ],
    [
      "formDoesNotFit",
      "The bounded half-Gaussian needs a limit between 0 and 1.",
      limit("lowerLimit", "1"),
    ],
    [
      "formDoesNotFit",
      "The bounded half-Gaussian needs a limit between 0 and 1.",
      { ...limit("upperLimit", "-1.5"), evaluatedIn: "log10" },
      { form: "halfGaussianBounded" },
    ],
    ...(
      [
        limit("upperLimit", "0"),
        limit("lowerLimit", "1"),
        { ...tau, ...limit("lowerLimit", "0.04") },
      ] as const
    ).map(
      (changes) =>
        [
          "formDoesNotFit",
          "The half-Gaussian needs a limit away from where it is centred.",
          changes,
          { form: "halfGaussianUnbounded" },
        ] as [string, string, Partial<AsUsed>, RowOptions],
    ),
    ["formDoesNotFit", "The form “band” does not fit a two-sided value.", {}, { form: "band" }],
    [
      "formDoesNotFit",
      "The form “two-piece” does not fit a limit.",
      limit("lowerLimit", "0.3"),
      { form: "twoPiece" },
    ],
    [
      "formDoesNotFit",
      "The form “hard step” does not fit a band.",
      band("0.3", "0.7"),
      { form: "hardStep" },
    ],
  ])("%s: %s", (...[code, leftOut, changes, options]) => {
    expect(rowLikelihood(used(changes), options)).toEqual({ leftOut, code });
  });

  it("and so does a record that can't be used at all", () => {
    expect(rowLikelihood(null)).toEqual({
      leftOut: "The record does not say enough to be used.",
      code: "incomplete",
    });
  });

  it("asks for weighting, fractions and ranges only where the quantity has them", () => {
    // An optical depth has no weighting, a fraction no range, a redshift no end of a duration.
    expect(row({ ...tau, weighting: "mass" }).quantity).toBe("opticalDepth");
    expect(row({ rangeLow: null, fraction: null, fractionFrom: null }).form).toBe("twoPiece");
    expect(row({ ...redshift, rangeHigh: null, fractionTo: null }).form).toBe("gaussian");
  });
});

describe("numbers of a row", () => {
  it("divides both sides by k of a level decided on as by one stated", () => {
    // −2 ln L is k² at both quoted ends.
    for (const changes of [{}, { level: null, k: null, sigmaMinus: null, sigmaPlus: null }]) {
      const wide = row({ ...changes, plus: "0.20" }, { level: 0.95 });
      expect(wide.minus2LnL(0.6)).toBeCloseTo(K95 ** 2, 10);
      expect(wide.minus2LnL(0.3)).toBeCloseTo(K95 ** 2, 10);
    }
    // What the record states goes before what a table decided.
    expect(row({}, { level: 0.6827 }).minus2LnL(0.5)).toBeCloseTo(K95 ** 2, 10);
  });

  it("divides the own width of a limit by k, in both forms that take it", () => {
    const own = { ...limit("upperLimit", "0.30"), limitBase: "0.20", limitSigma: "0.10" };
    // (0.1/(0.1/k))² = k² one quoted width beyond the base.
    expect(row(own).form).toBe("flatThenGaussian");
    expect(row(own).minus2LnL(0.3)).toBeCloseTo(K95 ** 2, 10);
    expect(row(own).minus2LnL(0.2)).toBe(0);
    // ½ erfc(k/√2) = Φ(−k) = 0.025 at the same place.
    const smooth = row(own, { form: "smoothedStep" });
    expect(smooth.minus2LnL(0.3)).toBeCloseTo(-2 * Math.log(0.025), 10);
    // A width entered is the step's own: Φ(−1) = 0.15865525393145707 (scipy norm.cdf).
    const entered = row(own, { form: "smoothedStep", smoothing: 0.1 });
    expect(entered.minus2LnL(0.3)).toBeCloseTo(-2 * Math.log(0.15865525393145707), 10);
  });

  it("takes a width of nothing as none", () => {
    expect(row({ ...limit("upperLimit", "0.30"), limitSigma: "0" }).form).toBe(
      "halfGaussianBounded",
    );
  });

  it("puts the unbounded half-Gaussian's k-th sigma at a limit, from 0 or from 1", () => {
    const form = { form: "halfGaussianUnbounded" } as const;
    expect(row(limit("upperLimit", "0.30"), form).minus2LnL(0.3)).toBeCloseTo(K95 ** 2, 10);
    expect(row(limit("lowerLimit", "0.30"), form).minus2LnL(0.3)).toBeCloseTo(K95 ** 2, 10);
    expect(row(limit("lowerLimit", "0"), form).minus2LnL(0)).toBeCloseTo(K95 ** 2, 10);
  });

  it("reads a printed minus sign of either kind", () => {
    for (const value of ["-1.5", "\u22121.5"]) {
      const log = row({ value, evaluatedIn: "log10" });
      expect(log.minus2LnL(10 ** -1.5)).toBeCloseTo(0, 12);
    }
  });

  it("gives a symmetric value the Gaussian name only where it is no fraction", () => {
    expect(row({}, { form: "gaussian" }).form).toBe("gaussian");
    expect(row({}, { form: "gaussian" }).minus2LnL(0.5)).toBeCloseTo(K95 ** 2, 10);
    expect(row({ ...tau, plus: "0.2" }).form).toBe("twoPiece");
  });
});

describe("a record with a curve", () => {
  // A Gaussian curve on a fine grid: 0.40 ± 0.10 at one sigma.
  const x = Array.from({ length: 2001 }, (_, i) => i / 2000);
  const normal = (m: number, sigma: number) => ({
    x,
    p: x.map((at) => Math.exp(-0.5 * ((at - m) / sigma) ** 2)),
  });
  const curve = normal(0.4, 0.1);

  it("is evaluated as it stands, whatever else it quotes, unless a form is chosen", () => {
    for (const changes of [
      {},
      { ...noNumbers, kind: "curve" } as const,
      limit("upperLimit", "0.6"),
    ]) {
      expect(row(changes, { curve }).form).toBe("tabulated");
      expect(row(changes, { curve }).minus2LnL(0.5)).toBeCloseTo(1, 10);
    }
    expect(row({}, { curve, form: "tabulated" }).form).toBe("tabulated");
    expect(row({}, { curve, form: "twoPiece" }).form).toBe("twoPiece");
    const curveOnly = used({ ...noNumbers, kind: "curve" });
    expect(rowLikelihood(curveOnly, { curve, form: "twoPiece" })).toEqual({
      code: "formDoesNotFit",
      leftOut: "The form “two-piece” does not fit a curve that quotes no interval.",
    });
    expect(rowLikelihood(used(), { form: "tabulated" })).toMatchObject({ code: "formDoesNotFit" });
  });

  it("is the record's own where it has one, with the interval quoted beside it", () => {
    const curveOnly: Partial<AsUsed> = { ...noNumbers, kind: "curve", curve };
    expect(row(curveOnly).form).toBe("tabulated");
    expect(row(curveOnly).informationLost()).toBeNull();
    // What a table decides on goes before the record's own.
    expect(row(curveOnly, { curve: normal(0.6, 0.1) }).minus2LnL(0.6)).toBeCloseTo(0, 10);
    const quoted: Partial<AsUsed> = { kind: "curve", curve: normal(0.4, 0.1 / K95) };
    expect(row(quoted).informationLost()).toBeCloseTo(0, 6);
    expect(row(quoted, { form: "twoPiece" }).form).toBe("twoPiece");
    expect(rowLikelihood(used(curveOnly), { form: "twoPiece" })).toMatchObject({
      leftOut: "The form “two-piece” does not fit a curve that quotes no interval.",
    });
    // Without its nodes somebody has to decide, also where an interval is quoted.
    expect(rowLikelihood(used({ kind: "curve" }))).toMatchObject({ code: "curveMissing" });
    expect(row({ kind: "curve" }, { form: "twoPiece" }).form).toBe("twoPiece");
  });

  it("needs no level, and stays out where it is qualitative", () => {
    expect(row({ level: null, k: null }, { curve }).form).toBe("tabulated");
    expect(rowLikelihood(used({ kind: "qualitative" }), { curve })).toMatchObject({
      code: "qualitative",
    });
  });

  it("has the curve's quantiles", () => {
    // Φ(−1), ½, Φ(1) of a Gaussian; [0, 1] cuts 3e-5 off at 0, which moves them by 1e-5 of σ.
    const [low, middle, high] = row({}, { curve }).quantiles([0.15865525, 0.5, 0.84134475])!;
    expect(low).toBeCloseTo(0.3, 4);
    expect(middle).toBeCloseTo(0.4, 4);
    expect(high).toBeCloseTo(0.5, 4);
  });

  it("says what its quoted numbers lose of it, in nats", () => {
    const k = K95;
    // Two Gaussians of one mean: ln(s/σ) + σ²/(2s²) − ½, here σ = 0.05 and s = 0.1/k.
    const s = 0.1 / k;
    const lost = row({}, { curve: normal(0.4, 0.05) }).informationLost();
    expect(lost).toBeCloseTo(Math.log(s / 0.05) + 0.05 ** 2 / (2 * s * s) - 0.5, 6);
    // The same numbers quoted exactly lose nothing.
    expect(row({}, { curve: normal(0.4, s) }).informationLost()).toBeCloseTo(0, 6);
    // A chosen form is the curve's; what is quoted keeps its default.
    expect(row({}, { curve: normal(0.4, s), form: "tabulated" }).informationLost()).toBeCloseTo(
      0,
      6,
    );
    // A wall inside the curve excludes what it allows.
    const hard = { ...redshift, ...limit("upperLimit", "0.5") };
    expect(row(hard, { curve }).informationLost()).toBeNull();
  });

  it("says nothing of it without a curve, or without numbers beside it", () => {
    expect(row().informationLost()).toBeNull();
    expect(row({ ...noNumbers, kind: "curve" }, { curve }).informationLost()).toBeNull();
    expect(row({ level: null, k: null }, { curve }).informationLost()).toBeNull();
  });

  it("is left out, in words, where the curve can't be used", () => {
    expect(rowLikelihood(used(), { curve: { x: [0, 0.5, 1], p: [1, -1, 1] } })).toMatchObject({
      code: "formDoesNotFit",
      leftOut: expect.stringMatching(/^The curve can't be used: p\[1\] must be .*\.$/),
    });
  });
});

describe("formula of a row", () => {
  it.each<[string, Partial<AsUsed>]>([
    [
      "two-piece: ((log x − −1)/0.05102)² below −1, ((log x − −1)/0.05102)² above",
      { value: "-1", evaluatedIn: "log10" },
    ],
    ["Gaussian: ((τ − 0.4)/0.05102)²", tau],
    [
      "Gaussian: ((τ − 0.4)/0.05102)²",
      { ...tau, quantity: "opticalDepthRange", rangeLow: 15, rangeHigh: 30 },
    ],
    ["Gaussian: ((z − 0.4)/0.05102)²", redshift],
    ["Gaussian: ((Δ − 0.4)/0.05102)²", duration],
  ])("%s", (formula, changes) => {
    expect(row(changes).formula).toBe(formula);
  });
});

describe("what a row asks of a history", () => {
  const range = { zLow: 6.4, zHigh: 7.4 };
  it.each<[string, Partial<AsUsed>, RowOptions, unknown, string]>([
    ["x at its redshift", {}, {}, { kind: "point", z: 7 }, "point"],
    [
      "x at its redshift for a sample's range",
      { ...range, zRole: "sampleRange" },
      {},
      { kind: "point", z: 7 },
      "point",
    ],
    [
      "the mean over a bin",
      { ...range, zRole: "binAverage" },
      {},
      { kind: "binMean", ...range, zLow: 6.4 },
      "binMean",
    ],
    [
      "the mean over a range without a middle",
      { ...range, z: null, zRole: "sampleRange" },
      {},
      { kind: "binMean", ...range },
      "binMean",
    ],
    [
      "all of an uncertain redshift",
      { ...range, zRole: "uncertain" },
      {},
      { kind: "averaged", ...range, z: 7 },
      "averagedLikelihood",
    ],
    [
      "all of an uncertain redshift, shown at its middle",
      { ...range, z: null, zRole: "uncertain" },
      {},
      { kind: "averaged", ...range, z: 6.9 },
      "averagedLikelihood",
    ],
    [
      "all of an uncertain redshift, also at z = 0",
      { zLow: 0, zHigh: 1, z: 0, zRole: "uncertain" },
      {},
      { kind: "averaged", zLow: 0, zHigh: 1, z: 0 },
      "averagedLikelihood",
    ],
    [
      "x where the range has no width",
      { zLow: 7, zHigh: 7, zRole: "binAverage" },
      {},
      { kind: "point", z: 7 },
      "point",
    ],
    [
      "x where the range has one end",
      { zLow: 7, zHigh: null, zRole: "binAverage" },
      {},
      { kind: "point", z: 7 },
      "point",
    ],
    [
      "x where the range has the other end",
      { zLow: null, zHigh: 7.5, zRole: "uncertain" },
      {},
      { kind: "point", z: 7 },
      "point",
    ],
    [
      "x where all there is of a redshift is a range without width",
      { z: null, zLow: 7, zHigh: 7 },
      {},
      { kind: "point", z: 7 },
      "point",
    ],
    [
      "x where a table decided so",
      { ...range, zRole: "binAverage" },
      { redshift: "point" },
      { kind: "point", z: 7 },
      "point",
    ],
    ["the total optical depth", tau, {}, { kind: "opticalDepth", z1: 0, z2: 50 }, "point"],
    [
      "an optical depth, whatever redshifts stand beside it",
      { ...tau, ...range, zRole: "binAverage" },
      {},
      { kind: "opticalDepth", z1: 0, z2: 50 },
      "point",
    ],
    [
      "the optical depth of a range",
      { quantity: "opticalDepthRange", rangeLow: 15, rangeHigh: 30 },
      {},
      { kind: "opticalDepth", z1: 15, z2: 30 },
      "point",
    ],
    ["a redshift", redshift, {}, { kind: "redshiftAtFraction", f: 0.5 }, "point"],
    [
      "a duration",
      { ...duration, durationUnit: "myr" },
      {},
      { kind: "duration", f1: 0.75, f2: 0.25, unit: "myr" },
      "point",
    ],
    [
      "a duration in redshift unless said otherwise",
      { ...duration, durationUnit: null },
      {},
      { kind: "duration", f1: 0.75, f2: 0.25, unit: "redshift" },
      "point",
    ],
  ])("%s", (_, changes, options, request, treatment) => {
    const asked = row(changes, options);
    expect(asked.request).toEqual(request);
    expect(asked.redshift).toBe(treatment);
  });
});

describe("quantiles of a row", () => {
  it("of a flat allowed side are over the range of the quantity", () => {
    // Half of [0.3, 1], of [0, 0.04] and, in log10, none below an upper limit: the range has no end.
    const hard = { form: "hardStep" } as const;
    const median = (changes: Partial<AsUsed>) => row(changes, hard).quantiles([0.5])?.[0];
    expect(median(limit("lowerLimit", "0.30"))).toBeCloseTo(0.65, 10);
    expect(median({ ...tau, ...limit("upperLimit", "0.04") })).toBeCloseTo(0.02, 10);
    expect(median({ ...limit("upperLimit", "-1"), evaluatedIn: "log10" })).toBeUndefined();
    // A lower limit in log10 x ends at log10 1 = 0.
    expect(median({ ...limit("lowerLimit", "-2"), evaluatedIn: "log10" })).toBeCloseTo(-1, 10);
  });
});

describe("drawing of a row", () => {
  const area = ({ x, density }: { x: number[]; density: number[] }) =>
    x
      .slice(1)
      .reduce((sum, at, i) => sum + 0.5 * (at - x[i]!) * (density[i]! + density[i + 1]!), 0);
  const ends = (drawn: RowLikelihood) => {
    const { x } = drawn.curve(5);
    return [x[0], x[4]];
  };
  const hard = { form: "hardStep" } as const;
  const smooth = { form: "smoothedStep", smoothing: 0.01 } as const;

  it("goes three times as far as an open lower limit lies above nothing", () => {
    // Allowed from 0.04 to ∞ and drawn from there; the step lies at its start, so that 3 units are shown.
    expect(ends(row({ ...tau, ...limit("lowerLimit", "0.04") }, hard))).toEqual([0.04, 3.04]);
    // The smoothed step still has −2 ln L = 12 below the limit and is drawn from there.
    const [from, to] = ends(row({ ...tau, ...limit("lowerLimit", "0.04") }, smooth));
    expect(from).toBeLessThan(0.04);
    expect(from).toBeGreaterThan(0);
    expect(to).toBeGreaterThan(0.1);
    expect(to).toBeLessThan(1);
  });

  it("shows as much again where an upper limit in log10 x has no low end", () => {
    const log = { ...limit("upperLimit", "-1"), evaluatedIn: "log10" } as const;
    // From −1 twice the distance to the step, none here: only its own place.
    const [from, to] = ends(row(log, { form: "smoothedStep", smoothing: 0.1 }));
    expect(Number.isFinite(from!)).toBe(true);
    expect(from).toBeLessThan(-1);
    expect(to).toBeGreaterThan(-1);
    expect(to).toBeLessThanOrEqual(0);
    const flat = row({ ...log, limitBase: "-1", limitSigma: "0.2" });
    // Gaussian side to −2 ln L = 12, √12 σ beyond the base; flat side as far as the other could matter, √80 σ.
    expect(ends(flat)[1]).toBeCloseTo(-1 + (Math.sqrt(12) * 0.2) / K95, 6);
    expect(ends(flat)[0]).toBeCloseTo(-1 - (Math.sqrt(80) * 0.2) / K95, 6);
  });

  it("ends where −2 ln L is 12, on a side that falls, and has unit area and a peak inside", () => {
    const drawn = row({ ...redshift, value: "7.5", plus: "0.4", minus: "0.2" }).curve(401);
    const sigma = (width: number) => (Math.sqrt(12) * width) / K95;
    expect(drawn.x[0]).toBeCloseTo(7.5 - sigma(0.2), 8);
    expect(drawn.x[400]).toBeCloseTo(7.5 + sigma(0.4), 8);
    expect(area(drawn)).toBeCloseTo(1, 12);
    const top = drawn.density.indexOf(Math.max(...drawn.density));
    expect(drawn.x[top]).toBeCloseTo(7.5, 1);
    // exp(−12/2) of the peak at both ends.
    for (const i of [0, 400]) {
      expect(drawn.density[i]! / Math.max(...drawn.density)).toBeCloseTo(Math.exp(-6), 4);
    }
  });

  it("stays at or above zero for a width, and has at least two points", () => {
    const near = row({ ...tau, value: "0.01", plus: "0.02", minus: "0.02" });
    expect(ends(near)[0]).toBe(0);
    expect(near.curve(1).x).toHaveLength(2);
    expect(near.curve(7.4).x).toHaveLength(7);
  });

  it("is zero throughout, not NaN, where the likelihood is zero at every place drawn", () => {
    // A peak of width 1e-6 between the places.
    const spike = row({ value: "0.123456", plus: "0.000001", minus: "0.000001" }).curve(3);
    expect(spike).toEqual({ x: [0, 0.5, 1], density: [0, 0, 0] });
  });
});

describe("a row held against a history", () => {
  const history = tanhHistory({ zRe: 7.2, deltaZ: 0.6 });
  const cosmology = background();

  it("gives the model value beside the likelihood", () => {
    const answer = row().evaluate(history, cosmology);
    expect(answer.model).toBe(history.x(7));
    expect(answer.minus2LnL).toBe(row().minus2LnL(history.x(7)));
    expect(answer.reason).toBeUndefined();
  });

  it("shows the model at the middle of an uncertain redshift", () => {
    const uncertain = row({ z: null, zLow: 6.4, zHigh: 7.4, zRole: "uncertain" });
    expect(uncertain.evaluate(history, cosmology).model).toBe(history.x(6.9));
  });
});
