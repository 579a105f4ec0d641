import fc from "fast-check";

import reference from "../../fixtures/checks/reference.json";
import { background } from "~shared/cosmology/background";
import { tanhHistory } from "~shared/history/tanh";
import { FitProblem, tanhFamily } from "~shared/inference";
import { CompiledTable, type ReadyRow } from "~shared/likelihood/compile";
import { correlatedSet, marginalCorrelation } from "~shared/likelihood/correlatedSet";
import { distributionOf } from "~shared/likelihood/distribution";
import {
  flatThenGaussian,
  type Form,
  gaussian,
  halfGaussianBounded,
  hardStep,
  quantileMatched,
  tabulated,
  twoPiece,
} from "~shared/likelihood/forms";
import { informationLoss } from "~shared/likelihood/informationLoss";
import { equalMixtureSd, mixtureOf } from "~shared/likelihood/mixture";
import type { ModelRequest } from "~shared/likelihood/modelRequest";
import { integratePanels } from "~shared/numerics/quadrature";

const row = (
  id: string,
  shape: Form,
  request: ModelRequest = { kind: "point", z: 7 },
  more: Partial<ReadyRow> = {},
): ReadyRow => ({
  id,
  shape,
  evaluatedIn: "linear",
  quantity: "neutralFraction",
  request,
  ...more,
});
const three = () => [0.45, 0.55, 0.65].map((m, i) => row(`a${i}`, gaussian(m, 0.1)));

describe("equal mixture of alternatives", () => {
  it("has the standard deviation of independent code", () => {
    const sd = reference.cases.find(({ function: name }) => name === "equal_mixture_sd")!;
    expect(equalMixtureSd([0.45, 0.55, 0.65], [0.1, 0.1, 0.1])).toBeCloseTo(sd.value as number, 12);
  });

  it("is (1/n) Σ p_i normalized over [0, 1], relative to its peak over a common x", () => {
    const mixture = mixtureOf(three());
    expect(mixture.commonPeak).toBe(true);
    const shapes = three().map(({ shape }) => shape);
    const areas = shapes.map((shape) => distributionOf(shape, [0, 1])!.area);
    const at = (x: number) => mixture.minus2LnL(shapes.map((shape) => shape.minus2LnL(x)));
    const density = (x: number) =>
      shapes.reduce(
        (sum, shape, i) => sum + Math.exp(-0.5 * shape.minus2LnL(x)) / areas[i]! / 3,
        0,
      );
    let peak = 0;
    for (let i = 0; i <= 4000; i++) peak = Math.max(peak, density(i / 4000));
    for (const x of [0.1, 0.3, 0.5, 0.55, 0.8]) {
      expect(at(x)).toBeCloseTo(-2 * Math.log(density(x) / peak), 6);
    }
    // Normalized: the mixture's area is 1, so that its peak density follows from the area of exp(−½m).
    const area = integratePanels((x) => Math.exp(-0.5 * at(x)), 0, 1, 40, 10);
    expect(1 / area).toBeCloseTo(peak, 6);
  });

  it("of one member is the member", () => {
    const alone = mixtureOf([three()[0]!]);
    expect(alone.minus2LnL([2.5])).toBeCloseTo(2.5, 12);
  });

  it("is relative to the mean of the members' peaks when they ask different questions", () => {
    const apart = mixtureOf([
      row("a", gaussian(0.4, 0.05), { kind: "point", z: 7 }),
      row("b", gaussian(0.6, 0.1), { kind: "point", z: 7.5 }),
    ]);
    expect(apart.commonPeak).toBe(false);
    // Both members at their peaks: the mixture is at the mean of the peaks.
    expect(apart.minus2LnL([0, 0])).toBeCloseTo(0, 12);
    expect(apart.minus2LnL([0, 50])).toBeGreaterThan(0);
  });

  it("is +∞ only where every member is", () => {
    const walls = mixtureOf([row("a", hardStep("upper", 0.3)), row("b", hardStep("upper", 0.6))]);
    expect(walls.minus2LnL([Infinity, 0])).toBeLessThan(Infinity);
    expect(walls.minus2LnL([Infinity, Infinity])).toBe(Infinity);
  });

  it("normalizes an optical depth on the real line, and refuses what can't be", () => {
    const depth: Partial<ReadyRow> = { quantity: "opticalDepth" };
    const request: ModelRequest = { kind: "opticalDepth", z1: 0, z2: 50 };
    const fine = mixtureOf([
      row("a", gaussian(0.054, 0.007), request, depth),
      row("b", gaussian(0.06, 0.007), request, depth),
    ]);
    expect(fine.minus2LnL([0, 0])).toBeLessThan(0.5);
    expect(() =>
      mixtureOf([row("a", flatThenGaussian("upper", 0.05, 0.01), request, depth)]),
    ).toThrow("members[0] must be normalizable");
    expect(() => mixtureOf([])).toThrow("members must be");
  });

  it("normalizes a log10 member in x", () => {
    // Flat in log10 x below 10^-1: ∫ dx = 0.1, against a member flat in x up to 0.1.
    const log = row("a", hardStep("upper", -1), undefined, { evaluatedIn: "log10" });
    const linear = row("b", hardStep("upper", 0.1));
    const [a, b] = mixtureOf([log, linear]).logWeights;
    expect(a).toBeCloseTo(b!, 6);
  });
});

describe("correlated set", () => {
  it.each(reference.cases.filter(({ function: name }) => name === "correlated_pair"))(
    "$id: both at one sigma",
    ({ inputs, value }) => {
      const { rho, residuals_in_sigma } = inputs as unknown as {
        rho: number;
        residuals_in_sigma: number[];
      };
      const set = correlatedSet([
        [1, rho],
        [rho, 1],
      ]);
      expect(set.chiSquared(residuals_in_sigma)).toBeCloseTo(value as number, 12);
    },
  );

  /** Correlation matrices from random factors. */
  const matrix = fc
    .array(fc.array(fc.double({ min: -1, max: 1, noNaN: true }), { minLength: 3, maxLength: 3 }), {
      minLength: 3,
      maxLength: 3,
    })
    .map((factor) => {
      const covariance = factor.map((a, i) =>
        factor.map((b, j) => a.reduce((sum, v, k) => sum + v * b[k]!, 0) + (i === j ? 0.3 : 0)),
      );
      return covariance.map((line, i) =>
        line.map((v, j) => (i === j ? 1 : v / Math.sqrt(covariance[i]![i]! * covariance[j]![j]!))),
      );
    });

  it("has as marginal its χ² minimized over the residual of the row left out", () => {
    const residual = fc.double({ min: -3, max: 3, noNaN: true });
    fc.assert(
      fc.property(matrix, residual, residual, (rho, a, b) => {
        const joint = correlatedSet(rho);
        const part = correlatedSet(marginalCorrelation(rho, [0, 2]));
        // A quadratic in the dropped residual: its least value from three points.
        const at = (t: number) => joint.chiSquared([a, t, b]);
        const curvature = (at(1) - 2 * at(0) + at(-1)) / 2;
        const slope = (at(1) - at(-1)) / 2;
        const least = at(0) - slope ** 2 / (4 * curvature);
        expect(Math.abs(least - part.chiSquared([a, b]))).toBeLessThan(1e-8 * (1 + least));
      }),
      { seed: 31 },
    );
  });

  it("adds up when nothing is correlated", () => {
    const set = correlatedSet([
      [1, 0],
      [0, 1],
    ]);
    expect(set.chiSquared([1.5, -2])).toBeCloseTo(1.5 ** 2 + 4, 12);
    expect(set.chiSquared([Infinity, 0])).toBe(Infinity);
  });

  it.each<[string, number[][]]>([
    ["rho must be", []],
    ["rho[0]", [[1, 0.5]]],
    [
      "rho[0][1]",
      [
        [1, 0.5],
        [0.4, 1],
      ],
    ],
    [
      "rho[0][0]",
      [
        [2, 0],
        [0, 1],
      ],
    ],
    [
      "rho[1][1]",
      [
        [1, 0],
        [0, 0.9],
      ],
    ],
    [
      "positive definite",
      [
        [1, 1],
        [1, 1],
      ],
    ],
  ])("refuses a matrix, naming %s", (name, rho) => {
    expect(() => correlatedSet(rho)).toThrow(name);
  });

  it("refuses to keep a member it does not have", () => {
    expect(() => marginalCorrelation([[1]], [1])).toThrow("keep");
  });
});

describe("what a summary loses of a curve", () => {
  const grid = Array.from({ length: 101 }, (_, i) => i / 100);
  it("is nothing for a curve that is its summary", () => {
    const summary = gaussian(0.5, 0.1);
    const curve = tabulated(
      grid,
      grid.map((x) => Math.exp(-0.5 * summary.minus2LnL(x))),
    );
    expect(informationLoss(curve, summary, [0, 1])).toBeLessThan(1e-4);
  });
  it("equals the closed form between two Gaussians", () => {
    // ln(σq/σp) + (σp² + (μp − μq)²)/(2σq²) − ½, both well inside [0, 1].
    const p = gaussian(0.5, 0.05);
    const curve = tabulated(
      Array.from({ length: 2001 }, (_, i) => i / 2000),
      Array.from({ length: 2001 }, (_, i) => Math.exp(-0.5 * p.minus2LnL(i / 2000)) + 1e-300),
    );
    const expected = Math.log(0.08 / 0.05) + (0.05 ** 2 + 0.03 ** 2) / (2 * 0.08 ** 2) - 0.5;
    expect(informationLoss(curve, gaussian(0.53, 0.08), [0, 1])).toBeCloseTo(expected, 4);
  });
  it("is infinite where the summary excludes what the curve allows", () => {
    const curve = tabulated([0, 0.5, 1], [1, 1, 1]);
    expect(informationLoss(curve, hardStep("upper", 0.5), [0, 1])).toBe(Infinity);
    expect(informationLoss(curve, hardStep("upper", -1), [0, 1])).toBeNull();
  });
});

describe("compiled table", () => {
  const all = (): ReadyRow[] => [
    row("point", twoPiece(0.4, 0.1, 0.2)),
    row("bin", quantileMatched(0.5, 0.1, 0.15), { kind: "binMean", zLow: 6.8, zHigh: 7.4 }),
    row("uncertain", gaussian(0.3, 0.08), { kind: "averaged", zLow: 6.5, zHigh: 7.2, z: 6.9 }),
    row("log", gaussian(-1, 0.3), { kind: "point", z: 6.2 }, { evaluatedIn: "log10" }),
    row("limit", halfGaussianBounded("upper", 0.2, 0.95), { kind: "point", z: 6 }),
    row(
      "tau",
      gaussian(0.054, 0.007),
      { kind: "opticalDepth", z1: 0, z2: 50 },
      { quantity: "opticalDepth" },
    ),
    row(
      "zf",
      gaussian(7.1, 0.2),
      { kind: "redshiftAtFraction", f: 0.5 },
      { quantity: "redshiftAtFraction" },
    ),
    row(
      "dz",
      gaussian(1, 0.3),
      { kind: "duration", f1: 0.75, f2: 0.25, unit: "redshift" },
      { quantity: "duration" },
    ),
    row(
      "myr",
      gaussian(100, 40),
      { kind: "duration", f1: 0.75, f2: 0.25, unit: "myr" },
      { quantity: "duration" },
    ),
  ];
  const problemOf = (spec: ConstructorParameters<typeof CompiledTable>[0]) =>
    new FitProblem(new CompiledTable(spec), tanhFamily(), background());

  it("gives each row what the row gives itself", () => {
    const problem = problemOf({ rows: all() });
    const theta = [7.2, 0.7];
    const history = tanhHistory({ zRe: 7.2, deltaZ: 0.7 });
    const cosmology = background();
    const values = problem.termValues(theta);
    const of = (id: string) => values[problem.table.terms.findIndex((term) => term.id === id)]!;
    expect(of("point")).toBeCloseTo(all()[0]!.shape.minus2LnL(history.x(7)), 9);
    expect(of("bin")).toBeCloseTo(all()[1]!.shape.minus2LnL(history.binMean(6.8, 7.4)), 9);
    expect(of("log")).toBeCloseTo(all()[3]!.shape.minus2LnL(Math.log10(history.x(6.2))), 9);
    expect(of("limit")).toBeCloseTo(all()[4]!.shape.minus2LnL(history.x(6)), 9);
    expect(of("tau")).toBeCloseTo(all()[5]!.shape.minus2LnL(history.opticalDepth(cosmology)), 5);
    expect(of("zf")).toBeCloseTo(all()[6]!.shape.minus2LnL(7.2), 9);
    expect(of("dz")).toBeCloseTo(all()[7]!.shape.minus2LnL(history.duration()!), 9);
    expect(of("myr")).toBeCloseTo(all()[8]!.shape.minus2LnL(history.durationMyr(cosmology)!), 8);
    const fine = integratePanels(
      (z) => Math.exp(-0.5 * all()[2]!.shape.minus2LnL(history.x(z))) / 0.7,
      6.5,
      7.2,
      40,
      10,
    );
    expect(of("uncertain")).toBeCloseTo(-2 * Math.log(fine), 6);
    expect(problem.minus2LnL(theta)).toBeCloseTo(
      values.reduce((sum, value) => sum + value, 0),
      10,
    );
    // PHYSICS.md section 2: fractions to 1e-10.
    expect(Math.abs(problem.modelValues(theta)[0]! - history.x(7))).toBeLessThan(1e-10);
  });

  it("shares what rows ask in common", () => {
    const table = new CompiledTable({
      rows: [
        row("a", gaussian(0.4, 0.1)),
        row("b", gaussian(0.5, 0.1)),
        all()[5]!,
        { ...all()[5]!, id: "tau2" },
      ],
    });
    expect(table.requests.size).toBe(2);
  });

  it("takes alternatives as a mixture and correlated rows as a set", () => {
    const rho = [
      [1, 0.6],
      [0.6, 1],
    ];
    const pair = [row("c0", twoPiece(0.4, 0.1, 0.1)), row("c1", twoPiece(0.6, 0.1, 0.1))];
    const problem = problemOf({
      rows: [all()[0]!, ...three(), ...pair],
      mixtures: [{ id: "alternatives", members: ["a0", "a1", "a2"] }],
      correlated: [{ id: "pair", members: ["c0", "c1"], rho }],
    });
    expect(problem.table.terms.map(({ kind }) => kind)).toEqual(["row", "mixture", "correlated"]);
    const x = 0.5;
    const values = problem.termValues([7, 0.5]);
    const members = three().map(({ shape }) => shape.minus2LnL(x));
    expect(values[1]).toBeCloseTo(mixtureOf(three()).minus2LnL(members), 10);
    // x = 0.5 is one sigma above the one and one below the other: χ² = 5 at ρ 0.6 (pub-x12).
    expect(values[2]).toBeCloseTo(5, 9);
    expect(problem.minus2LnL([7, 0.5])).toBeCloseTo(values[0]! + values[1]! + values[2]!, 10);
  });

  it("excludes a history that has no value for a row", () => {
    const wide = new FitProblem(
      new CompiledTable({
        rows: [row("zf", gaussian(6, 1), { kind: "redshiftAtFraction", f: 0.05 })],
      }),
      tanhFamily({ zRe: [4, 12], deltaZ: [0.1, 4] }),
      background(),
    );
    // pub-edge-1 of reference.json: x(0) is above 0.05 there.
    expect(wide.minus2LnL([5, 3])).toBe(Infinity);
    expect(wide.termValues([5, 3])[0]).toBe(Infinity);
  });

  it.each<[string, () => ConstructorParameters<typeof CompiledTable>[0]]>([
    ["rows must be named once", () => ({ rows: [all()[0]!, all()[0]!] })],
    ["made of rows of the table", () => ({ rows: [], mixtures: [{ id: "m", members: ["x"] }] })],
    [
      "of rows in no other group",
      () => ({
        rows: three(),
        mixtures: [
          { id: "m", members: ["a0"] },
          { id: "n", members: ["a0"] },
        ],
      }),
    ],
    [
      "made of two-sided values",
      () => ({ rows: [all()[4]!], correlated: [{ id: "s", members: ["limit"], rho: [[1]] }] }),
    ],
    [
      "made of two-sided values",
      () => ({
        rows: [row("curve", tabulated([0, 1], [1, 2]))],
        correlated: [{ id: "s", members: ["curve"], rho: [[1]] }],
      }),
    ],
    [
      "as large as its matrix",
      () => ({ rows: three(), correlated: [{ id: "s", members: ["a0", "a1"], rho: [[1]] }] }),
    ],
  ])("refuses a table: %s", (message, spec) => {
    expect(() => new CompiledTable(spec())).toThrow(message);
  });
});
