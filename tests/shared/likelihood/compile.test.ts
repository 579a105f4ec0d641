import { CompiledTable, type ReadyRow, type TableSpec } from "~shared/likelihood/compile";
import {
  band,
  flatThenGaussian,
  type Form,
  gaussian,
  halfGaussianBounded,
  halfGaussianUnbounded,
  hardStep,
  quantileMatched,
  smoothedStep,
  tabulated,
  twoPiece,
  variableWidth,
} from "~shared/likelihood/forms";
import { mixtureOf } from "~shared/likelihood/mixture";
import type { ModelRequest } from "~shared/likelihood/modelRequest";
import { gaussLegendre } from "~shared/numerics/quadrature";

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
const at = (z: number): ModelRequest => ({ kind: "point", z });
const log = { evaluatedIn: "log10" } as const;
const duration = (unit: "redshift" | "myr"): ModelRequest => ({
  kind: "duration",
  f1: 0.75,
  f2: 0.25,
  unit,
});

/** Every kind of row and group that a table can hold. */
const everything = (): TableSpec => ({
  rows: [
    row("a", gaussian(0.5, 0.1), at(7.5)),
    row("two-piece", twoPiece(0.4, 0.1, 0.2), at(7)),
    row("matched", quantileMatched(0.4, 0.1, 0.2), at(7.1)),
    row("variable", variableWidth(0.4, 0.1, 0.2, 1), at(7.2)),
    row("c", twoPiece(0.5, 0.1, 0.2), at(7.6)),
    row("plateau", flatThenGaussian("upper", 0.1, 0.05), at(6)),
    row("band", band(0.3, 0.7, 0.6827), { kind: "binMean", zLow: 6.9, zHigh: 7.3 }),
    row("smoothed", smoothedStep("upper", 0.3, 0.02), at(6.3)),
    row("hard", hardStep("upper", 0.9), at(6.5)),
    row("curve", tabulated([0, 0.25, 0.5, 0.75, 1], [1, 4, 6, 4, 1]), at(7.4)),
    row("log", gaussian(-1, 0.5), at(5.8), log),
    row("averaged", gaussian(0.5, 0.1), { kind: "averaged", zLow: 6.5, zHigh: 7.5, z: 7 }),
    row("b", gaussian(0.6, 0.1), at(7.5)),
    row("tau", gaussian(0.4, 0.3), { kind: "opticalDepth", z1: 0, z2: 50 }),
    row("midpoint", gaussian(0.5, 0.3), { kind: "redshiftAtFraction", f: 0.5 }),
    row("early", gaussian(0.5, 0.3), { kind: "redshiftAtFraction", f: 0.1 }),
    row("duration", gaussian(1, 0.5), duration("redshift")),
    row("age", gaussian(1, 0.5), duration("myr")),
    row("d", twoPiece(-0.4, 0.1, 0.2), at(7.8), log),
  ],
  mixtures: [{ id: "one of two", members: ["a", "b"] }],
  correlated: [
    {
      id: "pair",
      members: ["c", "d"],
      rho: [
        [1, 0.5],
        [0.5, 1],
      ],
    },
  ],
});

describe("what a compiled table asks", () => {
  it("stands in the order points, bins, depths, fractions, durations, each once", () => {
    const { requests, rowIds, terms } = new CompiledTable({
      rows: [
        row("d1", gaussian(1, 1), duration("redshift")),
        row("f1", gaussian(7, 1), { kind: "redshiftAtFraction", f: 0.5 }),
        row("t1", gaussian(0.05, 0.01), { kind: "opticalDepth", z1: 0, z2: 50 }),
        row("b1", gaussian(0.5, 0.1), { kind: "binMean", zLow: 6, zHigh: 7 }),
        row("p1", gaussian(0.5, 0.1), at(7)),
        row("p2", gaussian(0.4, 0.1), at(7)),
        row("p3", gaussian(0.4, 0.1), at(6)),
        row("b2", gaussian(0.5, 0.1), { kind: "binMean", zLow: 6, zHigh: 7 }),
        row("b3", gaussian(0.5, 0.1), { kind: "binMean", zLow: 6, zHigh: 7.5 }),
        row("b4", gaussian(0.5, 0.1), { kind: "binMean", zLow: 5, zHigh: 7 }),
        row("t2", gaussian(0.05, 0.01), { kind: "opticalDepth", z1: 15, z2: 50 }),
        row("t3", gaussian(0.05, 0.01), { kind: "opticalDepth", z1: 15, z2: 30 }),
        row("f2", gaussian(7, 1), { kind: "redshiftAtFraction", f: 0.1 }),
        row("f3", gaussian(7, 1), { kind: "redshiftAtFraction", f: 0.5 }),
        row("d2", gaussian(1, 1), duration("myr")),
      ],
    });
    expect([...requests.points]).toEqual([7, 6]);
    expect([...requests.binLows]).toEqual([6, 6, 5]);
    expect([...requests.binHighs]).toEqual([7, 7.5, 7]);
    expect([...requests.depthLows]).toEqual([0, 15, 15]);
    expect([...requests.depthHighs]).toEqual([50, 50, 30]);
    expect([...requests.fractions]).toEqual([0.5, 0.1]);
    expect(requests.durations).toEqual([
      { f1: 0.75, f2: 0.25, myr: false },
      { f1: 0.75, f2: 0.25, myr: true },
    ]);
    expect(requests.size).toBe(2 + 3 + 3 + 2 + 2);
    expect(rowIds).toHaveLength(15);
    expect(terms[0]).toEqual({ id: "d1", kind: "row", members: ["d1"] });
  });

  it("of an averaged row are 8 Gauss–Legendre panels of 8 nodes over its redshift, its own", () => {
    const { requests } = new CompiledTable({
      rows: [
        row("p", gaussian(0.5, 0.1), at(6)),
        row("a", gaussian(0.5, 0.1), { kind: "averaged", zLow: 6, zHigh: 8, z: 7 }),
        row("q", gaussian(0.5, 0.1), at(9)),
      ],
    });
    const { nodes } = gaussLegendre(8);
    const expected = Array.from({ length: 64 }, (_, i) => {
      const panel = Math.floor(i / 8);
      return 6 + 0.25 * panel + 0.125 * (1 + nodes[i % 8]!);
    });
    expect(requests.points).toHaveLength(66);
    requests.points.slice(1, 65).forEach((z, i) => expect(z).toBeCloseTo(expected[i]!, 13));
    expect([requests.points[0], requests.points[65]]).toEqual([6, 9]);
  });

  it("puts rows that stand for themselves first, then the members of each group", () => {
    const table = new CompiledTable(everything());
    expect(table.rowIds.slice(-4)).toEqual(["a", "b", "c", "d"]);
    expect(table.terms.slice(-3)).toEqual([
      { id: "age", kind: "row", members: ["age"] },
      { id: "one of two", kind: "mixture", members: ["a", "b"] },
      { id: "pair", kind: "correlated", members: ["c", "d"] },
    ]);
  });
});

describe("what a compiled table answers", () => {
  const one = (shape: Form, x: number, more: Partial<ReadyRow> = {}) =>
    new CompiledTable({ rows: [row("r", shape, at(7), more)] }).evaluate(Float64Array.of(x));

  it.each<[string, () => Form]>([
    ["two-piece", () => twoPiece(0.4, 0.1, 0.2)],
    ["quantile-matched", () => quantileMatched(0.4, 0.1, 0.2)],
    ["variable width", () => variableWidth(0.4, 0.1, 0.2, 1)],
    ["bounded half-Gaussian", () => halfGaussianBounded("upper", 0.3, 0.95)],
    ["a limit that says nothing", () => halfGaussianBounded("upper", 0.97, 0.95)],
    ["unbounded half-Gaussian", () => halfGaussianUnbounded("lower", 0.3, 2)],
    ["flat, then Gaussian", () => flatThenGaussian("lower", 0.4, 0.1)],
    ["smoothed step", () => smoothedStep("lower", 0.4, 0.1)],
    ["hard step", () => hardStep("upper", 0.5)],
    ["band", () => band(0.3, 0.5, 0.9)],
    ["curve", () => tabulated([0.1, 0.4, 0.8], [1, 3, 1])],
  ])("of a row in %s is what its form says", (_, make) => {
    const shape = make();
    for (const x of [0, 0.05, 0.3, 0.4, 0.45, 0.6, 0.95, 1]) {
      const expected = shape.minus2LnL(x);
      const value = one(shape, x);
      if (expected === Infinity) expect(value).toBe(Infinity);
      // The smoothed step comes from a table, good to 1e-10.
      else expect(Math.abs(value - expected)).toBeLessThanOrEqual(1e-10 * Math.max(1, expected));
      const inLog = shape.minus2LnL(-x);
      if (inLog === Infinity) expect(one(shape, 10 ** -x, log)).toBe(Infinity);
      else expect(one(shape, 10 ** -x, log) / (1 + inLog)).toBeCloseTo(inLog / (1 + inLog), 10);
    }
  });

  it("is +∞ where the history has no value, whatever the form", () => {
    for (const shape of [gaussian(0.5, 0.1), band(0.3, 0.7, 0.9), hardStep("upper", 0.5)]) {
      expect(one(shape, Number.NaN)).toBe(Infinity);
      expect(one(shape, Number.NaN, log)).toBe(Infinity);
    }
    const pair = new CompiledTable({
      rows: [row("a", gaussian(0.5, 0.1), at(6)), row("b", gaussian(0.5, 0.1), at(7))],
      correlated: [
        {
          id: "p",
          members: ["a", "b"],
          rho: [
            [1, 0],
            [0, 1],
          ],
        },
      ],
    });
    expect(pair.evaluate(Float64Array.of(0.4, Number.NaN))).toBe(Infinity);
    expect(pair.evaluate(Float64Array.of(0.4, 0.7))).toBeCloseTo(1 + 4, 10);
  });

  it("is the sum of its terms, and a line is that of each of its histories", () => {
    const table = new CompiledTable(everything());
    const n = 7;
    const { size } = table.requests;
    const values = new Float64Array(size * n);
    // Values that reach both sides of every row; one column has none for the early fraction.
    for (let i = 0; i < size; i++) {
      for (let j = 0; j < n; j++) values[i * n + j] = 0.15 + ((i * 0.17 + j * 0.11) % 0.7);
    }
    values[(size - 3) * n + 4] = Number.NaN;
    const line = new Float64Array(n);
    table.evaluateLine(values, n, line);
    const column = new Float64Array(size);
    const terms = new Float64Array(table.terms.length);
    for (let j = 0; j < n; j++) {
      for (let i = 0; i < size; i++) column[i] = values[i * n + j]!;
      const point = table.evaluate(column);
      table.termValues(column, terms);
      if (j === 4) {
        expect([point, line[j]]).toEqual([Infinity, Infinity]);
        continue;
      }
      expect(point).toBeGreaterThan(0);
      expect(line[j]).toBeCloseTo(point, 8);
      expect(terms.reduce((sum, value) => sum + value, 0)).toBeCloseTo(point, 8);
    }
    // A second line starts anew.
    const before = [...line];
    table.evaluateLine(values, n, line);
    expect([...line]).toEqual(before);
  });

  it("of groups is their arithmetic over the members' own values", () => {
    const { rows, mixtures, correlated } = everything();
    const kept = rows.filter(({ id }) => ["a", "b", "c", "d"].includes(id));
    const table = new CompiledTable({ rows: kept, mixtures, correlated });
    // Points in the order they were asked: 7.5 for a and b, 7.6, 7.8.
    expect([...table.requests.points]).toEqual([7.5, 7.6, 7.8]);
    const terms = new Float64Array(2);
    table.termValues(Float64Array.of(0.45, 0.3, 0.5), terms);
    const alternatives = kept.filter(({ id }) => id === "a" || id === "b");
    expect(terms[0]).toBeCloseTo(
      mixtureOf(alternatives).minus2LnL(alternatives.map(({ shape }) => shape.minus2LnL(0.45))),
      12,
    );
    // t = −0.2/0.1 and (log10 0.5 + 0.4)/0.2; ρ⁻¹ of 0.5 is [1, −0.5; −0.5, 1]/0.75.
    const t0 = -2;
    const t1 = (Math.log10(0.5) + 0.4) / 0.2;
    expect(terms[1]).toBeCloseTo((t0 * t0 - t0 * t1 + t1 * t1) / 0.75, 10);
  });

  it("of an averaged row is −2 ln of the mean likelihood, its model value the mean of x", () => {
    const table = new CompiledTable({
      rows: [row("a", gaussian(0.5, 0.1), { kind: "averaged", zLow: 6, zHigh: 8, z: 7 })],
    });
    const half = new Float64Array(64).fill(0.5);
    expect(table.evaluate(half)).toBeCloseTo(0, 12);
    // Half of the redshifts at the peak, half two sigma away.
    const split = Float64Array.from({ length: 64 }, (_, i) => (i < 32 ? 0.5 : 0.7));
    expect(table.evaluate(split)).toBeCloseTo(-2 * Math.log(0.5 + 0.5 * Math.exp(-2)), 10);
    expect(table.modelValues(split)[0]).toBeCloseTo(0.6, 12);
    // Far out it does not underflow; nowhere allowed is +∞.
    expect(table.evaluate(new Float64Array(64).fill(9))).toBeCloseTo(85 ** 2, 6);
    const wall = new CompiledTable({
      rows: [row("a", hardStep("upper", 0.1), { kind: "averaged", zLow: 6, zHigh: 8, z: 7 })],
    });
    expect(wall.evaluate(half)).toBe(Infinity);
  });

  it("gives the model value of each row, also of a member", () => {
    const table = new CompiledTable({
      rows: [row("a", gaussian(0.5, 0.1), at(6)), row("b", gaussian(0.5, 0.1), at(7))],
      mixtures: [{ id: "m", members: ["a"] }],
    });
    expect(table.rowIds).toEqual(["b", "a"]);
    // Points as they were asked: b stands for itself and comes first.
    expect([...table.modelValues(Float64Array.of(0.7, 0.3))]).toEqual([0.7, 0.3]);
  });
});

describe("a table that can't be compiled says why:", () => {
  const two = () => [row("a", gaussian(0.5, 0.1), at(6)), row("b", gaussian(0.5, 0.1), at(7))];
  const set = (shape: Form, request: ModelRequest = at(7)): TableSpec => ({
    rows: [row("a", shape, request)],
    correlated: [{ id: "s", members: ["a"], rho: [[1]] }],
  });
  it.each<[string, () => TableSpec]>([
    ["rows must be named once, got a", () => ({ rows: [...two(), two()[0]!] })],
    [
      "group m must be made of rows of the table, got x",
      () => ({ rows: two(), mixtures: [{ id: "m", members: ["x"] }] }),
    ],
    [
      "group s must be of rows in no other group, got a",
      () => ({
        rows: two(),
        mixtures: [{ id: "m", members: ["a"] }],
        correlated: [{ id: "s", members: ["a"], rho: [[1]] }],
      }),
    ],
    [
      "group s must be as large as its matrix, got 1 rows",
      () => ({ rows: two(), correlated: [{ id: "s", members: ["a", "b"], rho: [[1]] }] }),
    ],
    [
      "group s must be made of two-sided values in two-piece form, got a",
      () => set(halfGaussianUnbounded("upper", 0.5, 1)),
    ],
    [
      "group s must be made of two-sided values in two-piece form, got a",
      () => set(quantileMatched(0.4, 0.1, 0.2)),
    ],
    [
      "group s must be made of two-sided values in two-piece form, got a",
      () => set(gaussian(0.5, 0.1), { kind: "averaged", zLow: 6, zHigh: 8, z: 7 }),
    ],
  ])("%s", (message, spec) => {
    expect(() => new CompiledTable(spec())).toThrow(message);
  });

  it("and takes a set of one two-sided value", () => {
    expect(new CompiledTable(set(gaussian(0.5, 0.1))).evaluate(Float64Array.of(0.7))).toBeCloseTo(
      4,
      10,
    );
  });
});
