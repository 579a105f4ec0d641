import { background } from "~shared/cosmology/background";
import { tabulatedHistory } from "~shared/history/tabulated";
import { tanhHistory } from "~shared/history/tanh";
import { scoreRows, type RowToScore } from "~shared/likelihood";
import { averagedMinus2LnL } from "~shared/likelihood/averaged";
import {
  correlatedSet,
  marginalCorrelation,
  quadraticForm,
} from "~shared/likelihood/correlatedSet";
import { distributionOf } from "~shared/likelihood/distribution";
import {
  band,
  type Form,
  gaussian,
  halfGaussianBounded,
  hardStep,
  smoothedStep,
  tabulated,
  twoPiece,
} from "~shared/likelihood/forms";
import { informationLoss } from "~shared/likelihood/informationLoss";
import {
  equalMixtureSd,
  type MixtureMember,
  mixtureMinus2LnL,
  mixtureOf,
} from "~shared/likelihood/mixture";
import { type ModelRequest, modelValue, sameRequest } from "~shared/likelihood/modelRequest";
import { scoreSet } from "~shared/likelihood/scoreSet";
import { asUsed } from "~shared/statement/asUsed";
import { type ConstraintFields, emptyFields } from "~shared/statement/fields";

const cosmology = background();
const member = (shape: Form, more: Partial<MixtureMember> = {}): MixtureMember => ({
  shape,
  evaluatedIn: "linear",
  quantity: "neutralFraction",
  request: { kind: "point", z: 7 },
  ...more,
});
const depth: Partial<MixtureMember> = {
  quantity: "opticalDepth",
  request: { kind: "opticalDepth", z1: 0, z2: 50 },
};

describe("distribution of a form", () => {
  it("of a flat likelihood is the uniform one, over its range and nothing else", () => {
    const flat = distributionOf(hardStep("upper", 0.5), [0, 1])!;
    expect(flat.area).toBeCloseTo(0.5, 12);
    expect(flat.cdf(0.125)).toBeCloseTo(0.25, 12);
    expect([flat.cdf(-1), flat.cdf(0), flat.cdf(0.5), flat.cdf(2)]).toEqual([0, 0, 1, 1]);
    for (const p of [1e-6, 0.25, 0.5, 0.999999]) expect(flat.quantile(p)).toBeCloseTo(p / 2, 12);
    expect(() => flat.quantile(0)).toThrow("p must be");
    expect(() => flat.quantile(1)).toThrow("p must be");
  });

  it("of a Gaussian has its area and quantiles, however narrow", () => {
    for (const sigma of [0.1, 1e-4]) {
      const { area, quantile, cdf } = distributionOf(gaussian(0.5, sigma), [-10, 10])!;
      expect(area / (sigma * Math.sqrt(2 * Math.PI))).toBeCloseTo(1, 10);
      expect(quantile(0.8413447460685429)).toBeCloseTo(0.5 + sigma, 10);
      expect(cdf(0.5 - sigma)).toBeCloseTo(0.15865525393145707, 10);
    }
  });

  it("has a kink between its cells, not in one", () => {
    // A two-piece cut at its mode: areas √(π/2) σ on each side.
    const { area, cdf } = distributionOf(twoPiece(0.317, 0.02, 0.2), [-5, 5])!;
    expect(area).toBeCloseTo(Math.sqrt(Math.PI / 2) * 0.22, 10);
    expect(cdf(0.317)).toBeCloseTo(0.02 / 0.22, 10);
  });

  it("is none without an end, without width, or where nothing is allowed", () => {
    expect(distributionOf(hardStep("lower", 0.5), [0, Infinity])).toBeNull();
    expect(distributionOf(hardStep("upper", 0.5), [-Infinity, 1])).toBeNull();
    expect(distributionOf(gaussian(0.5, 0.1), [0.5, 0.5])).toBeNull();
    expect(distributionOf(gaussian(0.5, 0.01), [3, 4])).toBeNull();
    expect(distributionOf(hardStep("upper", -1), [0, 1])).toBeNull();
  });
});

describe("mixture", () => {
  it("weighs members by one over their number and area", () => {
    const { logWeights } = mixtureOf([
      member(hardStep("upper", 0.5)),
      member(hardStep("upper", 0.25)),
    ]);
    expect(logWeights[0]).toBeCloseTo(Math.log(1 / 2 / 0.5), 10);
    expect(logWeights[1]).toBeCloseTo(Math.log(1 / 2 / 0.25), 10);
    // A fraction's area is that within [0, 1]; an optical depth's that on the real line.
    const half = mixtureOf([member(gaussian(0, 0.1))]).logWeights[0]!;
    expect(half).toBeCloseTo(-Math.log(0.05 * Math.sqrt(2 * Math.PI)), 8);
    const whole = mixtureOf([member(gaussian(0, 0.1), depth)]).logWeights[0]!;
    expect(whole).toBeCloseTo(-Math.log(0.1 * Math.sqrt(2 * Math.PI)), 8);
  });

  it("in log10 x has its areas in x, and its peak over log10 x", () => {
    const log = { evaluatedIn: "log10" } as const;
    // ∫ dx of a flat likelihood from 10⁻² to 10⁻¹ is 0.09.
    const flat = mixtureOf([member(tabulated([-2, -1], [1, 1]), log)]);
    expect(flat.logWeights[0]).toBeCloseTo(-Math.log(0.09), 8);
    expect(flat.commonPeak).toBe(true);
    expect(flat.minus2LnL([0])).toBeCloseTo(0, 10);
    // Two of them: at the first one's places only the first counts.
    const two = mixtureOf([
      member(tabulated([-2, -1], [1, 1]), log),
      member(tabulated([-0.5, 0], [1, 1]), log),
    ]);
    const heights = [1 / 0.09, 1 / (1 - 10 ** -0.5)].map((height) => height / 2);
    expect(two.minus2LnL([0, Infinity])).toBeCloseTo(0, 8);
    expect(two.minus2LnL([Infinity, 0])).toBeCloseTo(-2 * Math.log(heights[1]! / heights[0]!), 8);
    expect(() => mixtureOf([member(hardStep("upper", -20), log)])).toThrow(
      "members[0] must be normalizable, got hardStep",
    );
  });

  it("is relative to its highest place, also where that lies between two members", () => {
    // Two Gaussians one sigma apart from their middle merge into one peak there.
    const near = [0.45, 0.55].map((m) => member(gaussian(m, 0.1)));
    const { minus2LnL, commonPeak } = mixtureOf(near);
    expect(commonPeak).toBe(true);
    const at = (x: number) => minus2LnL(near.map(({ shape }) => shape.minus2LnL(x)));
    expect(at(0.5)).toBeCloseTo(0, 8);
    expect(at(0.45)).toBeGreaterThan(0);
    // Far apart, the narrower one's peak is the highest: twice the height of the other.
    const far = [member(gaussian(0.3, 0.02)), member(gaussian(0.7, 0.04))];
    const apart = mixtureOf(far);
    expect(apart.minus2LnL([0, Infinity])).toBeCloseTo(0, 8);
    expect(apart.minus2LnL([Infinity, 0])).toBeCloseTo(2 * Math.LN2, 8);
  });

  it("of optical depths has its peak anywhere on the real line", () => {
    const two = [0.05, 0.5].map((m) => member(gaussian(m, 0.01), depth));
    const { minus2LnL } = mixtureOf(two);
    const at = (x: number) => minus2LnL(two.map(({ shape }) => shape.minus2LnL(x)));
    expect(at(0.05)).toBeCloseTo(0, 8);
    expect(at(0.5)).toBeCloseTo(0, 8);
    expect(at(0.06)).toBeCloseTo(1, 8);
  });

  it("is relative to the mean of the peaks where members ask differently", () => {
    const mixture = mixtureOf([
      member(gaussian(0.4, 0.05)),
      member(gaussian(0.6, 0.05), { request: { kind: "point", z: 7.5 } }),
    ]);
    expect(mixture.commonPeak).toBe(false);
    expect(mixture.minus2LnL([0, 0])).toBeCloseTo(0, 12);
    // One of two equal members excluded: half the height.
    expect(mixture.minus2LnL([0, Infinity])).toBeCloseTo(2 * Math.LN2, 6);
    const scales = mixtureOf([
      member(tabulated([-2, -1], [1, 1]), { evaluatedIn: "log10" }),
      member(tabulated([0.01, 0.1], [1, 1])),
    ]);
    expect(scales.commonPeak).toBe(false);
  });

  it("adds packed numbers from where they start", () => {
    const weights = Float64Array.of(9, 9, Math.log(0.25), Math.log(0.75));
    const values = Float64Array.of(9, 2, 0);
    const expected = -2 * Math.log(0.25 * Math.exp(-1) + 0.75);
    expect(mixtureMinus2LnL(weights, 2, 2, 0, values, 1)).toBeCloseTo(expected, 12);
    expect(mixtureMinus2LnL(weights, 2, 2, 1, values, 1)).toBeCloseTo(expected + 2, 12);
    expect(mixtureMinus2LnL(weights, 2, 1, 0, Float64Array.of(Infinity), 0)).toBe(Infinity);
  });

  it("has the standard deviation of its members' spread and widths", () => {
    // Means ±1 of width 0.5 and 1.5: 1 + (0.25 + 2.25)/2.
    expect(equalMixtureSd([1, 3], [0.5, 1.5])).toBeCloseTo(Math.sqrt(2.25), 12);
    expect(() => mixtureOf([])).toThrow("members must be one alternative or more, got 0");
  });
});

describe("what a summary loses", () => {
  it("is infinite, none or nothing as it must be", () => {
    const curve = tabulated([0, 0.5, 1], [1, 1, 1]);
    // Uniform against uniform on half of it: excluded. The other way round: ln 2.
    expect(informationLoss(curve, hardStep("upper", 0.5), [0, 1])).toBe(Infinity);
    const half = tabulated([0, 0.25, 0.5], [1, 1, 1]);
    expect(informationLoss(half, hardStep("upper", 1), [0, 1])).toBeCloseTo(Math.LN2, 10);
    expect(informationLoss(curve, hardStep("upper", 1), [0, 1])).toBe(0);
    expect(informationLoss(curve, gaussian(9, 0.01), [0, 1])).toBeNull();
    expect(informationLoss(tabulated([2, 3], [1, 1]), gaussian(0.5, 0.1), [0, 1])).toBeNull();
  });

  it("looks inside the range only, and at every kink", () => {
    // p uniform on [0, 1], q flat on [0.2, 0.4] with narrow tails: −ln q is (d/s)²/2 there.
    const s = 0.1;
    const quoted = band(0.2, 0.4, 0.6827);
    const tail = (x: number) => 0.5 * quoted.minus2LnL(x);
    const n = 200000;
    let mean = 0;
    for (let i = 0; i < n; i++) mean += tail((i + 0.5) / n) / n;
    const { area } = distributionOf(quoted, [0, 1])!;
    const curve = tabulated([-1, 0.3, 2], [1, 1, 1]);
    expect(s).toBeGreaterThan(0);
    expect(informationLoss(curve, quoted, [0, 1])).toBeCloseTo(mean + Math.log(area), 8);
  });
});

describe("a correlated set", () => {
  it("needs a matrix of a correlation, and says which number is wrong", () => {
    const refused = (rho: number[][], message: string) =>
      expect(() => correlatedSet(rho)).toThrow(message);
    refused([], "rho must be of one row or more, got an empty matrix");
    refused([[1], [0, 1]], "rho[0] must be of 2, got 1 values");
    refused(
      [
        [1, 1.5],
        [1.5, 1],
      ],
      "rho[0][1] must be from -1 to 1, got 1.5",
    );
    refused(
      [
        [1, 0.5],
        [0.4, 1],
      ],
      "rho[0][1] must be the same on both sides of the diagonal, got 0.5",
    );
    refused(
      [
        [0.9, 0],
        [0, 1],
      ],
      "rho[0][0] must be 1, got 0.9",
    );
    refused(
      [
        [1, 1],
        [1, 1],
      ],
      "rho must be positive definite, got this matrix",
    );
    expect(() => marginalCorrelation([[1]], [1])).toThrow(
      "keep must be inside the matrix, got 1, 1",
    );
    // Typed to eight digits, one is one.
    expect(() =>
      correlatedSet([
        [1 - 1e-10, 0.5],
        [0.5 + 1e-10, 1],
      ]),
    ).not.toThrow();
  });

  it("has χ² of its inverse, whatever the size", () => {
    const rho = [
      [1, 0.5, 0],
      [0.5, 1, 0.5],
      [0, 0.5, 1],
    ];
    const { inverse, chiSquared } = correlatedSet(rho);
    // Closed form of this matrix: determinant ½, inverse [1.5 −1 0.5; −1 2 −1; 0.5 −1 1.5].
    const closed = [1.5, -1, 0.5, -1, 2, -1, 0.5, -1, 1.5];
    [...inverse].forEach((value, i) => expect(value).toBeCloseTo(closed[i]!, 12));
    const t = [1, -2, 3];
    // 1.5 + 8 + 13.5 + 2 (2 + 1.5 + 6)
    expect(chiSquared(t)).toBeCloseTo(42, 12);
    expect(quadraticForm([7, 7, ...closed], 2, t, 3)).toBeCloseTo(42, 12);
    expect(chiSquared([1, -Infinity, 0])).toBe(Infinity);
    expect(marginalCorrelation(rho, [2, 0])).toEqual([
      [1, 0],
      [0, 1],
    ]);
  });
});

describe("an averaged likelihood", () => {
  const straight = { x: (z: number) => (z - 6) / 2, breaks: [] as number[] };
  it("is −2 ln of the mean of L over the redshifts", () => {
    // x from 0.25 to 0.75 against 0.6 ± 0.05: PHYSICS.md section 6, ln L = −1.3849973698.
    const value = averagedMinus2LnL((x) => ((x - 0.6) / 0.05) ** 2, straight, 6.5, 7.5);
    expect(-0.5 * value).toBeCloseTo(-1.3849973698, 9);
  });
  it("keeps its digits far out, and is +∞ where nothing is allowed", () => {
    // A constant likelihood is its own mean, however small.
    expect(averagedMinus2LnL(() => 1e5, straight, 6.5, 7.5)).toBeCloseTo(1e5, 8);
    expect(averagedMinus2LnL(() => Infinity, straight, 6.5, 7.5)).toBe(Infinity);
  });
  it("is split where the history breaks", () => {
    // Allowed on a quarter of the range only, behind a break.
    const step = { x: (z: number) => (z < 7.25 ? 0 : 1), breaks: [5, 7.25, 9] };
    expect(averagedMinus2LnL((x) => (x < 0.5 ? Infinity : 0), step, 6.5, 7.5)).toBeCloseTo(
      -2 * Math.log(0.25),
      10,
    );
  });
});

describe("what a history answers", () => {
  const table = tabulatedHistory([6, 7.5, 9], [0.2, 0.5, 0.9]);
  const ask = (request: ModelRequest) => modelValue(request, table, cosmology);
  it("is a value, or the reason for none", () => {
    expect(ask({ kind: "point", z: 7.5 })).toEqual({ model: 0.5 });
    expect(ask({ kind: "averaged", zLow: 6, zHigh: 9, z: 7.5 })).toEqual({ model: 0.5 });
    const outside = {
      model: null,
      code: "outsideTable",
      reason: "The table of this history covers z = 6 to 9 only.",
    };
    expect(ask({ kind: "point", z: 5.9 })).toEqual(outside);
    expect(ask({ kind: "binMean", zLow: 8, zHigh: 9.1 })).toEqual(outside);
    expect(ask({ kind: "averaged", zLow: 5.5, zHigh: 7, z: 6.5 })).toEqual(outside);
    const none = (what: string) => ({
      model: null,
      code: "noSuchRedshift",
      reason: `The history does not pass ${what} at any redshift.`,
    });
    expect(ask({ kind: "redshiftAtFraction", f: 0.1 })).toEqual(none("x = 0.1"));
    for (const unit of ["redshift", "myr"] as const) {
      expect(ask({ kind: "duration", f1: 0.95, f2: 0.25, unit })).toEqual(
        none("both x = 0.95 and x = 0.25"),
      );
    }
    // Optical depths take the end values outside.
    expect(ask({ kind: "opticalDepth", z1: 0, z2: 50 }).model).toBeGreaterThan(0);
  });
  it("is shared by requests that ask the same", () => {
    expect(sameRequest({ kind: "point", z: 7 }, { kind: "point", z: 7 })).toBe(true);
    expect(sameRequest({ kind: "point", z: 7 }, { kind: "point", z: 7.1 })).toBe(false);
  });
});

describe("scores", () => {
  const fields = (changes: Partial<ConstraintFields>): ConstraintFields => ({
    ...emptyFields(),
    quantity: "neutralFraction",
    species: "neutral",
    scale: "linear",
    weighting: "volume",
    zRole: "point",
    z: "7.0",
    kind: "twoSided",
    value: "0.40",
    plus: "0.10",
    minus: "0.10",
    level: "oneSigma",
    estimator: "mode",
    ...changes,
  });
  const row = (id: string, changes: Partial<ConstraintFields> = {}, more = {}): RowToScore => ({
    id,
    asUsed: asUsed(fields(changes)),
    ...more,
  });
  const history = tanhHistory({ zRe: 7, deltaZ: 0.5 });
  const K = 1.0000217133229992;

  it("of alternatives say which one is used, and count the preferred one once", () => {
    const group = { alternativesGroup: "g" };
    const score = scoreRows(
      [
        row("a", {}, group),
        row("b", { value: "0.60" }, { ...group, alternativesPreferred: true }),
        row("c", { value: "0.30" }, { ...group, alternativesPreferred: true }),
        row("d", { value: "0.50" }),
      ],
      history,
      cosmology,
    );
    expect(score.rows[0]).toEqual({
      id: "a",
      model: null,
      minus2LnL: null,
      mixture: null,
      reason: "Another alternative of the paper, the preferred one, is used.",
      code: "anotherAlternative",
    });
    expect(score.rows.map(({ code }) => code)).toEqual([
      "anotherAlternative",
      null,
      "anotherAlternative",
      null,
    ]);
    expect(score.mixtures).toEqual([]);
    // x(7) = 0.5: one sigma below 0.60, at the peak of 0.50.
    expect(score.minus2LnL).toBeCloseTo(K * K, 10);
    expect([score.scored, score.leftOut]).toEqual([2, 2]);
  });

  it("of two groups keep them apart, one mixture each", () => {
    const of = (group: string, value: string) =>
      row(value, { value }, { alternativesGroup: group });
    const score = scoreRows(
      [of("g", "0.45"), of("h", "0.30"), of("g", "0.55"), of("h", "0.70"), row("alone")],
      history,
      cosmology,
    );
    expect(score.mixtures.map(({ group }) => group)).toEqual(["g", "h"]);
    expect(score.rows.map(({ mixture }) => mixture)).toEqual(["g", "h", "g", "h", null]);
    const [g, h] = score.mixtures;
    expect(score.minus2LnL).toBeCloseTo(g!.minus2LnL + h!.minus2LnL + K * K, 10);
    expect(h!.minus2LnL).toBeGreaterThan(g!.minus2LnL);
    // Another history of the same rows is asked anew.
    const later = scoreRows(
      [of("g", "0.45"), of("g", "0.55")],
      tanhHistory({ zRe: 7.3, deltaZ: 0.5 }),
      cosmology,
    );
    expect(later.mixtures[0]!.minus2LnL).toBeGreaterThan(g!.minus2LnL);
  });

  it("of a row without a value say what the model is and why", () => {
    const late = tabulatedHistory([6.5, 8], [0.1, 1]);
    expect(scoreRows([row("a", { z: "6" })], late, cosmology).rows[0]).toEqual({
      id: "a",
      model: null,
      minus2LnL: null,
      mixture: null,
      reason: "The table of this history covers z = 6.5 to 8 only.",
      code: "outsideTable",
    });
  });

  describe("of a correlated set", () => {
    const rho = [
      [1, 0.6],
      [0.6, 1],
    ];
    const set = { id: "s", members: ["a", "b"], rho };
    it("are χ² of residuals in sigma on their own side", () => {
      // 0.5 lies one sigma above 0.40 and one below 0.60: χ² = 2(1 + 0.6)/(1 − 0.36) = 5.
      const score = scoreSet(
        set,
        [row("b", { value: "0.60" }), row("a"), row("x")],
        history,
        cosmology,
      );
      expect(score).toMatchObject({ id: "s", members: ["a", "b"], whole: true });
      expect(score.minus2LnL).toBeCloseTo(5 * K * K, 9);
      expect(score.rows.map(({ id, minus2LnL, reason }) => [id, minus2LnL, reason])).toEqual([
        ["a", expect.closeTo(K * K, 9), null],
        ["b", expect.closeTo(K * K, 9), null],
      ]);
      // Both above: χ² = 1.25 at ρ 0.6 (PHYSICS.md section 6).
      const both = scoreSet(set, [row("a"), row("b")], history, cosmology);
      expect(both.minus2LnL).toBeCloseTo(1.25 * K * K, 9);
    });

    it("of a part are its marginal, and of none nothing", () => {
      const part = scoreSet(set, [row("b")], history, cosmology);
      expect(part).toMatchObject({ members: ["b"], whole: false });
      expect(part.minus2LnL).toBeCloseTo(K * K, 9);
      expect(scoreSet(set, [], history, cosmology)).toEqual({
        id: "s",
        members: [],
        minus2LnL: 0,
        whole: false,
        rows: [],
      });
      const out = scoreSet(set, [row("a", { level: "notStated" }), row("b")], history, cosmology);
      expect(out.members).toEqual(["b"]);
      expect(out.rows[0]).toEqual({
        id: "a",
        model: null,
        minus2LnL: null,
        mixture: null,
        reason: "The paper states no level: a decision is needed.",
        code: "levelNotStated",
      });
    });

    it("hold a median against its two-piece form, and a logarithm in log10", () => {
      const median = row("a", { estimator: "median", plus: "0.20" });
      // 0.5 is half a sigma above 0.40 +0.20; quantile-matched would say otherwise.
      const score = scoreSet({ id: "s", members: ["a"], rho: [[1]] }, [median], history, cosmology);
      expect(score.minus2LnL).toBeCloseTo((0.5 * K) ** 2, 9);
      const log = row("a", { scale: "log10", value: "-0.4" });
      const inLog = scoreSet(
        { id: "s", members: ["a", "b"], rho },
        [log, row("b")],
        history,
        cosmology,
      );
      const t = ((Math.log10(0.5) + 0.4) / 0.1) * K;
      expect(inLog.minus2LnL).toBeCloseTo((t * t - 1.2 * t * K + K * K) / 0.64, 8);
    });

    it("leave out what a history does not cover, with its reason", () => {
      const table = tabulatedHistory([6.5, 8], [0.1, 1]);
      const score = scoreSet(set, [row("a", { z: "6" }), row("b")], table, cosmology);
      expect(score.members).toEqual(["b"]);
      expect(score.rows[0]).toMatchObject({
        id: "a",
        model: null,
        code: "outsideTable",
        reason: "The table of this history covers z = 6.5 to 8 only.",
      });
    });
  });
});

describe("limits against each other", () => {
  it("a smoothed step tends to the bounded form's own allowed side", () => {
    // Both halve at their own places: −2 ln ½ for the step, k² = 3.84 at 95 % for the narrow Gaussian.
    expect(smoothedStep("upper", 0.1, 0.01).minus2LnL(0.1)).toBeCloseTo(2 * Math.LN2, 12);
    expect(halfGaussianBounded("upper", 0.1, 0.95).minus2LnL(0.1)).toBeCloseTo(
      1.959963984540054 ** 2,
      6,
    );
  });
});
