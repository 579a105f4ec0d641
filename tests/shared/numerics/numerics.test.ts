import fc from "fast-check";

import published from "../../fixtures/checks/published.json";
import { pchipSlopes } from "~shared/numerics/pchip";
import { PiecewiseSeries } from "~shared/numerics/piecewiseSeries";
import { gaussLegendre, integrateAdaptive, integratePanels } from "~shared/numerics/quadrature";
import {
  requireFinite,
  requirePositive,
  requireProbability,
  requireWithin,
} from "~shared/numerics/require";
import { brentRoot, goldenMinimum } from "~shared/numerics/roots";
import {
  erf,
  erfc,
  logErfc,
  logistic,
  normalCdf,
  normalPdf,
  normalQuantile,
  sigmasOfLevel,
} from "~shared/numerics/special";

describe("normal distribution", () => {
  it.each(Object.entries(published.c_handbook.normal_quantiles))("k of %s", (_, row) => {
    // scipy norm.ppf against statistics.NormalDist, published.json.
    expect(Math.abs(sigmasOfLevel(row.CL) / row.k_two_sided - 1)).toBeLessThan(1e-12);
    expect(Math.abs(normalQuantile(row.CL) / row.k_one_sided - 1)).toBeLessThan(1e-12);
  });
  it("gives back a probability from its quantile, also far out", () => {
    fc.assert(
      fc.property(fc.double({ min: 1e-300, max: 1, maxExcluded: true, noNaN: true }), (p) => {
        expect(Math.abs(normalCdf(normalQuantile(p)) / p - 1)).toBeLessThan(1e-10);
      }),
      { seed: 1 },
    );
  });
  it("is symmetric and has its density as slope", () => {
    expect(normalQuantile(0.25)).toBeCloseTo(-normalQuantile(0.75), 14);
    expect((normalCdf(0.7001) - normalCdf(0.6999)) / 0.0002).toBeCloseTo(normalPdf(0.7), 8);
    expect(erf(0.3) + erfc(0.3)).toBeCloseTo(1, 15);
  });
  it("rejects probabilities outside (0, 1), naming them", () => {
    expect(() => normalQuantile(0)).toThrow("p must be");
    expect(() => normalQuantile(1)).toThrow("p must be");
    expect(() => sigmasOfLevel(1)).toThrow("level must be");
  });
});

describe("logErfc", () => {
  it("is the log of erfc where that does not underflow", () => {
    for (const x of [-3, -0.5, 0, 0.5, 2, 10, 25])
      expect(logErfc(x)).toBeCloseTo(Math.log(erfc(x)), 11);
  });
  it("keeps its digits where erfc is zero: ln erfc(x) → −x² − ln(x√π)", () => {
    // Abramowitz & Stegun 7.1.23: 1 − 1/(2x²) + 3/(4x⁴) − 15/(8x⁶) is good to 1e-10 at x = 50.
    const x = 50;
    const series = 1 - 1 / (2 * x ** 2) + 3 / (4 * x ** 4) - 15 / (8 * x ** 6);
    expect(logErfc(x)).toBeCloseTo(-x * x - Math.log(x * Math.sqrt(Math.PI)) + Math.log(series), 9);
    expect(logErfc(Infinity)).toBe(-Infinity);
    expect(logErfc(-Infinity)).toBeCloseTo(Math.LN2, 15);
  });
});

describe("logistic", () => {
  it("equals ½(1 + tanh(t/2)) and keeps digits in the tail", () => {
    expect(logistic(1.3)).toBeCloseTo(0.5 * (1 + Math.tanh(0.65)), 15);
    expect(logistic(-600) / Math.exp(-600)).toBeCloseTo(1, 14);
    expect([logistic(1e4), logistic(-1e4), logistic(0)]).toEqual([1, 0, 0.5]);
  });
});

describe("quadrature", () => {
  it.each([1, 2, 5, 16, 40])("of %i nodes is exact up to degree 2n − 1", (n) => {
    const { nodes, weights } = gaussLegendre(n);
    for (let degree = 0; degree <= 2 * n - 1; degree++) {
      let sum = 0;
      nodes.forEach((t, i) => (sum += weights[i]! * t ** degree));
      expect(sum).toBeCloseTo(degree % 2 === 1 ? 0 : 2 / (degree + 1), 12);
    }
  });
  it("agrees between panels and adaptive bisection", () => {
    expect(integratePanels(Math.exp, 0, 2, 4, 10)).toBeCloseTo(Math.expm1(2), 13);
    expect(integrateAdaptive(Math.exp, 0, 2)).toBeCloseTo(Math.expm1(2), 13);
  });
  it("finds a kink and a narrow peak by bisection", () => {
    expect(integrateAdaptive((t) => Math.abs(t - 0.3141), 0, 1)).toBeCloseTo(
      (0.3141 ** 2 + 0.6859 ** 2) / 2,
      11,
    );
    expect(integrateAdaptive((t) => Math.exp(-0.5 * ((t - 0.37) / 0.01) ** 2), 0, 1)).toBeCloseTo(
      0.01 * Math.sqrt(2 * Math.PI),
      11,
    );
    expect(integrateAdaptive(() => 0, 0, 1)).toBe(0);
    expect(integrateAdaptive(Math.exp, 1, 1)).toBe(0);
  });
  it("rejects orders it has no rule for", () => {
    expect(() => gaussLegendre(0)).toThrow("n must be");
    expect(() => gaussLegendre(2.5)).toThrow("n must be");
  });
});

describe("roots and minima", () => {
  it("finds the root of a bracketed function", () => {
    expect(brentRoot((t) => Math.cos(t) - t, 0, 1)).toBeCloseTo(0.7390851332151607, 14);
    expect(brentRoot((t) => t ** 9, -1, 1.5)).toBeCloseTo(0, 1);
    expect(brentRoot((t) => t - 2, 2, 5)).toBe(2);
    expect(brentRoot((t) => (t < 0.3 ? -1 : 1), 0, 1)).toBeCloseTo(0.3, 12);
  });
  it("refuses a bracket without a change of sign", () => {
    expect(() => brentRoot((t) => t * t + 1, -1, 1)).toThrow("bracket");
    expect(() => brentRoot(() => Number.NaN, -1, 1)).toThrow("bracket");
  });
  it("finds a minimum from either order of the ends", () => {
    expect(goldenMinimum((t) => (t - 0.7) ** 2, 0, 2)).toBeCloseTo(0.7, 7);
    expect(goldenMinimum((t) => (t - 0.7) ** 2, 2, 0)).toBeCloseTo(0.7, 7);
    expect(goldenMinimum((t) => t, 0, 1)).toBeCloseTo(0, 8);
  });
});

describe("PiecewiseSeries", () => {
  const series = new PiecewiseSeries((u) => Math.exp(-2 * u), 1, 0.25, 40, 10);
  it("holds the function and its integral", () => {
    for (const u of [1, 1.13, 2.5, 7.77, 11]) {
      expect(series.value(u) / Math.exp(-2 * u)).toBeCloseTo(1, 11);
    }
    expect(series.integral(1.1, 3.3)).toBeCloseTo((Math.exp(-2.2) - Math.exp(-6.6)) / 2, 14);
    expect(series.integral(1.1, 1.2)).toBeCloseTo((Math.exp(-2.2) - Math.exp(-2.4)) / 2, 14);
    expect(series.integral(2, 2)).toBe(0);
  });
  it("keeps the relative digits of a decaying tail", () => {
    const exact = (Math.exp(-18) - Math.exp(-21)) / 2;
    expect(series.integral(9, 10.5) / exact).toBeCloseTo(1, 9);
  });
  it("rejects ranges outside, or out of order", () => {
    expect(() => series.integral(0.5, 2)).toThrow("range");
    expect(() => series.integral(2, 12)).toThrow("range");
    expect(() => series.integral(3, 2)).toThrow("range");
  });
});

describe("pchip slopes", () => {
  it("are exact for a line and zero at an extremum", () => {
    expect([...pchipSlopes([0, 1, 3, 4], [1, 3, 7, 9])]).toEqual([2, 2, 2, 2]);
    expect(pchipSlopes([0, 1, 2], [0, 1, 0])[1]).toBe(0);
  });
  it("limit the slope at an end where the curve turns", () => {
    // Three-point end: 3 × the first secant where it would overshoot, 0 where its sign is wrong.
    expect(pchipSlopes([0, 1, 2], [0, 1, -8])[0]).toBe(3);
    expect(pchipSlopes([0, 1, 2], [0, 0.1, 9])[0]).toBe(0);
  });
  it("are the secant between two points, and refused for columns that are none", () => {
    expect([...pchipSlopes([1, 3], [2, 8])]).toEqual([3, 3]);
    expect(() => pchipSlopes([1], [2])).toThrow("table must be two equally long columns");
    expect(() => pchipSlopes([1, 2], [2])).toThrow("got 2 and 1 values");
    expect(() => pchipSlopes([1, 1], [2, 3])).toThrow("x[1] must be above 1, got 1");
  });
});

describe("requirements", () => {
  it("name the argument, its value and what was required", () => {
    expect(() => requireFinite("a", Number.NaN)).toThrow("a must be a finite number, got NaN");
    expect(() => requirePositive("b", 0)).toThrow("b must be positive, got 0");
    expect(() => requirePositive("b", Infinity)).toThrow("b must be positive");
    expect(() => requireWithin("c", 2, 0, 1)).toThrow("c must be from 0 to 1, got 2");
    expect(() => requireProbability("d", 1)).toThrow("d must be between 0 and 1, got 1");
  });
  it("give back what is fine", () => {
    expect([
      requireFinite("a", 1),
      requirePositive("b", 2),
      requireWithin("c", 0, 0, 1),
      requireProbability("d", 0.5),
    ]).toEqual([1, 2, 0, 0.5]);
  });
});
