import fc from "fast-check";

import fit from "../../fixtures/checks/fit.json";
import { backgroundIn, type JsonObject, rowsOfSet } from "../../../scripts/checkFiles";
import { background } from "~shared/cosmology/background";
import { tanhHistory } from "~shared/history/tanh";
import { FitProblem, powerLawFamily, tanhFamily } from "~shared/inference";
import { historyPredictor } from "~shared/inference/predictor";
import { CompiledTable, type ReadyRow, type TableSpec } from "~shared/likelihood/compile";
import {
  band,
  flatThenGaussian,
  type Form,
  gaussian,
  hardStep,
  quantileMatched,
  smoothedStep,
  tabulated,
  twoPiece,
  variableWidth,
} from "~shared/likelihood/forms";
import type { ModelRequest } from "~shared/likelihood/modelRequest";
import { logistic } from "~shared/numerics/special";
import { Surface } from "~shared/numerics/surface";

/** Lines of a grid are a faster way to the same numbers: PHYSICS.md section 2 sets how much the same. */
const cosmology = background();
const even = (n: number, low: number, high: number) =>
  Float64Array.from({ length: n }, (_, i) => low + ((high - low) * i) / (n - 1));
const row = (
  id: string,
  shape: Form,
  request: ModelRequest,
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
const bin = (zLow: number, zHigh: number): ModelRequest => ({ kind: "binMean", zLow, zHigh });

/** Every kind of row and group that a table can hold. */
const EVERYTHING: TableSpec = {
  rows: [
    row("two-piece", twoPiece(0.4, 0.1, 0.2), at(7)),
    row("matched", quantileMatched(0.4, 0.1, 0.2, 1), at(7.1)),
    row("variable", variableWidth(0.4, 0.1, 0.2, 1), at(7.2)),
    row("plateau", flatThenGaussian("upper", 0.1, 0.05), at(6)),
    row("band", band(0.3, 0.7, 0.6827), bin(6.9, 7.3)),
    row("smoothed", smoothedStep("upper", 0.3, 0.02), at(6.3)),
    row("hard", hardStep("upper", 0.999), at(6.5)),
    row("even curve", tabulated([0, 0.25, 0.5, 0.75, 1], [1, 4, 6, 4, 1]), at(7.4)),
    row("uneven curve", tabulated([0, 0.2, 0.5, 0.9, 1], [1, 4, 6, 4, 1]), bin(5, 9)),
    row("bounded curve", tabulated([0.01, 0.5, 0.99], [1, 3, 1]), at(8)),
    row("log", gaussian(-1, 0.5), at(5.8), { evaluatedIn: "log10" }),
    row("averaged", gaussian(0.5, 0.1), { kind: "averaged", zLow: 6.5, zHigh: 7.5, z: 7 }),
    row("tau", gaussian(0.054, 0.0074), { kind: "opticalDepth", z1: 0, z2: 50 }),
    row("midpoint", gaussian(7.5, 0.3), { kind: "redshiftAtFraction", f: 0.5 }),
    row("end", hardStep("lower", 3), { kind: "redshiftAtFraction", f: 0.01 }),
    row("duration", gaussian(1, 0.5), { kind: "duration", f1: 0.75, f2: 0.25, unit: "redshift" }),
    row("age", gaussian(100, 50), { kind: "duration", f1: 0.75, f2: 0.25, unit: "myr" }),
    row("a", gaussian(0.5, 0.1), at(7.5)),
    row("b", gaussian(0.6, 0.1), at(7.5)),
    row("c", twoPiece(0.5, 0.1, 0.2), at(7.6)),
    row("d", twoPiece(-0.4, 0.1, 0.2), at(7.8), { evaluatedIn: "log10" }),
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
};

describe("lines of a grid", () => {
  const fitProblem = new FitProblem(
    new CompiledTable({ rows: rowsOfSet(fit as unknown as JsonObject, "all_rows_plus_tau") }),
    tanhFamily(),
    backgroundIn(fit.cosmology),
  );

  it("give the 200 × 200 grid of the benchmark, and its minimum, as point by point", () => {
    const widths = even(200, 0.1, 3);
    const along = fitProblem.alongSecond(widths);
    const line = new Float64Array(200);
    let least = Infinity;
    let leastByPoints = Infinity;
    for (const zRe of even(200, 5, 12)) {
      along(zRe, line);
      widths.forEach((deltaZ, j) => {
        const point = fitProblem.minus2LnL([zRe, deltaZ]);
        if (point === Infinity) expect(line[j]).toBe(Infinity);
        // Relative 1e-8 or absolute 1e-10: the tolerance of −2 ln L.
        else if (Math.abs(line[j]! - point) > Math.max(1e-10, 1e-8 * point)) {
          expect([zRe, deltaZ, line[j]]).toEqual([zRe, deltaZ, point]);
        }
        least = Math.min(least, line[j]!);
        leastByPoints = Math.min(leastByPoints, point);
      });
    }
    expect(Math.abs(least - leastByPoints)).toBeLessThan(1e-8);
  });

  it("agree with histories that know nothing of tables or surfaces", () => {
    const table = fitProblem.table;
    const exact = historyPredictor(table.requests, fitProblem.background, (theta) =>
      tanhHistory({ zRe: theta[0]!, deltaZ: theta[1]! }),
    );
    const widths = even(41, 0.1, 3);
    const along = fitProblem.alongSecond(widths);
    const line = new Float64Array(41);
    const values = new Float64Array(table.requests.size);
    for (const zRe of even(36, 5, 12)) {
      along(zRe, line);
      widths.forEach((deltaZ, j) => {
        exact([zRe, deltaZ], values);
        const point = table.evaluate(values);
        if (point === Infinity) expect(line[j]).toBe(Infinity);
        else {
          // An error of 1e-10 in a fraction and of 1e-8 in an optical depth, times the slope of −2 ln L.
          expect(Math.abs(line[j]! - point)).toBeLessThan(1e-8 * (1 + point));
        }
      });
    }
  });

  it("hold every kind of row and group, and every value that is missing", () => {
    const problem = new FitProblem(new CompiledTable(EVERYTHING), tanhFamily(), cosmology);
    const line = new Float64Array(30);
    // From 0.1, where every rule of a bin has its turn, to 3, where the early end lies below z = 0.
    const widths = even(30, 0.1, 3);
    const along = problem.alongSecond(widths);
    let finite = 0;
    let excluded = 0;
    for (const zRe of even(20, 5, 12)) {
      along(zRe, line);
      widths.forEach((deltaZ, j) => {
        const point = problem.minus2LnL([zRe, deltaZ]);
        if (point === Infinity) {
          excluded++;
          expect(line[j]).toBe(Infinity);
        } else {
          finite++;
          expect(Math.abs(line[j]! - point)).toBeLessThanOrEqual(1e-8 * Math.max(0.01, point));
        }
      });
    }
    expect(finite).toBeGreaterThan(30);
    expect(excluded).toBeGreaterThan(30);
  });

  it("fall back to point by point for a family without a faster way", () => {
    const table = new CompiledTable({ rows: [row("x", gaussian(0.5, 0.1), at(7))] });
    const problem = new FitProblem(table, powerLawFamily(), cosmology);
    const line = new Float64Array(3);
    problem.alongSecond(Float64Array.of(1, 4, 9))(6, line);
    expect([...line]).toEqual([1, 4, 9].map((alpha) => problem.minus2LnL([6, alpha])));
  });
});

describe("tanh predictor", () => {
  const requests = new CompiledTable({
    rows: [
      row("x", gaussian(0.5, 0.1), at(7)),
      row("deep", gaussian(0.5, 0.1), at(5.5)),
      ...[0.05, 0.3, 0.6, 1, 2, 4].map((width) =>
        row(`bin ${width}`, gaussian(0.5, 0.1), bin(7 - width / 2, 7 + width / 2)),
      ),
      row("tau", gaussian(0.05, 0.01), { kind: "opticalDepth", z1: 0, z2: 50 }),
    ],
  }).requests;
  const family = tanhFamily();
  const fast = family.predictor(requests, cosmology);
  const exact = historyPredictor(requests, cosmology, family.history);

  it("has fractions and bin means to 1e-10 and optical depths to 1e-8, point and line alike", () => {
    const a = new Float64Array(requests.size);
    const b = new Float64Array(requests.size);
    fc.assert(
      fc.property(
        fc.double({ min: 5, max: 12, noNaN: true }),
        fc.double({ min: 0.1, max: 3, noNaN: true }),
        (zRe, deltaZ) => {
          exact([zRe, deltaZ], b);
          const line = new Float64Array(requests.size);
          fast.along!(Float64Array.of(deltaZ))(zRe, line);
          fast([zRe, deltaZ], a);
          for (const values of [a, line]) {
            values.forEach((value, i) => {
              const depth = i === requests.size - 1;
              expect(Math.abs(value - b[i]!)).toBeLessThan(depth ? 1e-8 * b[i]! : 1e-10);
            });
          }
        },
      ),
      { numRuns: 400, seed: 5 },
    );
  });

  it("keeps the relative digits of x far below the transition, for rows in log10 x", () => {
    const a = new Float64Array(requests.size);
    // z = 5.5 under z_re = 12: t from −4 at Δz = 3 to −110 at 0.1.
    for (const deltaZ of [3, 1, 0.5, 0.3, 0.2, 0.1]) {
      fast([12, deltaZ], a);
      const t = (2 * (6.5 ** 1.5 - 13 ** 1.5)) / (1.5 * Math.sqrt(13) * deltaZ);
      expect(Math.abs(a[1]! / logistic(t) - 1)).toBeLessThan(2e-10);
    }
  });
});

describe("optical depth surface", () => {
  it("is within 1e-8 of the integral, relative, over the whole prior", () => {
    const tau = (zRe: number, deltaZ: number) =>
      tanhHistory({ zRe, deltaZ }).opticalDepth(cosmology);
    const surface = Surface.of(tau, { low: [5, 0.1], high: [12, 3] }, 1e-8)!;
    const widths = even(37, 0.1, 3);
    const along = surface.along(widths);
    const line = new Float64Array(39);
    for (const zRe of even(43, 5, 12)) {
      along(zRe, line, 2);
      widths.forEach((deltaZ, j) => {
        const exact = tau(zRe, deltaZ);
        expect(Math.abs(surface.value(zRe, deltaZ) / exact - 1)).toBeLessThan(1e-8);
        expect(Math.abs(line[2 + j]! / exact - 1)).toBeLessThan(1e-8);
      });
    }
  });
});
