import fc from "fast-check";

import { distributionOf } from "~shared/likelihood/distribution";
import {
  band,
  bandWideTails,
  boundedHalfGaussianWidth,
  flatThenGaussian,
  type Form,
  gaussian,
  halfGaussianBounded,
  halfGaussianUnbounded,
  hardStep,
  quantileMatched,
  quantileMatchedCdf,
  smoothedStep,
  tabulated,
  twoPiece,
  variableWidth,
} from "~shared/likelihood/forms";
import { erf } from "~shared/numerics/special";

const width = fc.double({ min: 0.005, max: 0.5, noNaN: true });
const value = fc.double({ min: 0, max: 1, noNaN: true });
const level = fc.double({ min: 0.3, max: 0.997, noNaN: true });
const inside = fc.double({ min: 0.01, max: 0.99, noNaN: true });
const side = fc.constantFrom("upper" as const, "lower" as const);

const anyForm: fc.Arbitrary<Form> = fc.oneof(
  fc.tuple(value, width, width).map(([m, a, b]) => twoPiece(m, a, b)),
  fc.tuple(value, width).map(([m, a]) => gaussian(m, a)),
  fc.tuple(value, width, width, inside).map(([m, a, b, k]) => quantileMatched(m, a, b, 2 * k)),
  fc.tuple(value, width, width).map(([m, a, b]) => variableWidth(m, a, b, 1)),
  fc.tuple(side, inside, level).map(([s, l, c]) => halfGaussianBounded(s, l, c)),
  fc.tuple(side, inside).map(([s, l]) => halfGaussianUnbounded(s, l, 1.96)),
  fc.tuple(side, value, width).map(([s, l, w]) => flatThenGaussian(s, l, w)),
  fc.tuple(side, value, width).map(([s, l, w]) => smoothedStep(s, l, w)),
  fc.tuple(side, value).map(([s, l]) => hardStep(s, l)),
  fc.tuple(value, width, level).map(([l, w, c]) => band(l, l + w, c)),
  fc.tuple(value, width).map(([l, w]) => bandWideTails(l, l + w, 1)),
  fc.array(inside, { minLength: 2, maxLength: 12 }).map((p) =>
    tabulated(
      p.map((_, i) => i / (p.length - 1)),
      p,
    ),
  ),
);
const anywhere = fc.oneof(
  fc.double({ min: -1e6, max: 1e6, noNaN: true }),
  fc.constantFrom(0, 1, Infinity, -Infinity, Number.MIN_VALUE, 1e308),
  value,
);

describe("every form", () => {
  it("is never NaN and never below its peak", () => {
    fc.assert(
      fc.property(anyForm, anywhere, (form, x) => {
        const m = form.minus2LnL(x);
        return !Number.isNaN(m) && m >= -1e-9;
      }),
      { numRuns: 2000, seed: 11 },
    );
  });

  it("is zero at its peak", () => {
    fc.assert(
      fc.property(anyForm, (form) => Math.abs(form.minus2LnL(form.peak)) < 1e-9),
      { numRuns: 500, seed: 12 },
    );
  });

  it("has quantiles that rise with the probability", () => {
    fc.assert(
      fc.property(anyForm, inside, inside, (form, p, q) => {
        if (form.quantile === null) return true;
        const [low, high] = [Math.min(p, q), Math.max(p, q)];
        return form.quantile(low) <= form.quantile(high) + 1e-12;
      }),
      { numRuns: 500, seed: 13 },
    );
  });

  it("has closed-form quantiles that agree with the quadrature of exp(−½ × −2 ln L)", () => {
    fc.assert(
      fc.property(anyForm, inside, (form, p) => {
        // With a second peak the score may turn around, and the cut piece has no mass.
        if (form.quantile === null || form.warnings.some((w) => w.code === "secondPeak")) return;
        // Over the whole reach, on which the closed forms are defined too.
        const distribution = distributionOf(form, form.reach)!;
        expect(distribution.cdf(form.quantile(p))).toBeCloseTo(p, 6);
        expect(distribution.quantile(p)).toBeCloseTo(form.quantile(p), 6);
      }),
      { numRuns: 300, seed: 14 },
    );
  });
});

describe("quantile-matched form", () => {
  it("has exactly the quoted quantiles, whatever the widths", () => {
    fc.assert(
      fc.property(value, width, width, (m, a, b) => {
        const matched = quantileMatched(m, a, b);
        expect(quantileMatchedCdf(matched, m - a)).toBeCloseTo(0.15865525393145707, 12);
        expect(quantileMatchedCdf(matched, m)).toBeCloseTo(0.5, 12);
        expect(quantileMatchedCdf(matched, m + b)).toBeCloseTo(0.8413447460685429, 12);
      }),
      { seed: 15 },
    );
  });

  it("is the Gaussian when both widths agree", () => {
    const matched = quantileMatched(0.4, 0.1, 0.1);
    for (const x of [-0.3, 0.25, 0.33, 0.4, 0.47, 0.9]) {
      expect(matched.minus2LnL(x)).toBeCloseTo(((x - 0.4) / 0.1) ** 2, 9);
    }
  });

  it("mirrors when the widths swap", () => {
    const one = quantileMatched(0.5, 0.1, 0.2);
    const other = quantileMatched(0.5, 0.2, 0.1);
    for (const d of [-0.4, -0.15, -0.05, 0.02, 0.11, 0.3]) {
      expect(one.minus2LnL(0.5 + d)).toBeCloseTo(other.minus2LnL(0.5 - d), 9);
    }
  });

  it("has no kink at its nodes", () => {
    const matched = quantileMatched(0.4, 0.1, 0.2);
    for (const node of matched.kinks) {
      const h = 1e-5;
      const left = (matched.minus2LnL(node) - matched.minus2LnL(node - h)) / h;
      const right = (matched.minus2LnL(node + h) - matched.minus2LnL(node)) / h;
      // A kink would leave a difference of order 1/σ = 10; curvature leaves order h/σ².
      expect(Math.abs(left - right)).toBeLessThan(0.05);
    }
  });

  it("has its peak at the higher of two, where there are two", () => {
    const two = quantileMatched(0.5, 0.05, 0.3);
    for (let i = 0; i <= 1000; i++) expect(two.minus2LnL(i / 1000)).toBeGreaterThanOrEqual(-1e-9);
  });

  it("gives a density of zero, not NaN, where very lopsided widths turn the score around", () => {
    const extreme = quantileMatched(0.5, 0.005, 0.5);
    const values = Array.from({ length: 2001 }, (_, i) => extreme.minus2LnL(i / 2000));
    expect(values.some(Number.isNaN)).toBe(false);
  });
});

describe("variable width", () => {
  it("is k² at both quoted ends, at any level", () => {
    fc.assert(
      fc.property(
        value,
        width,
        width,
        fc.double({ min: 0.3, max: 3, noNaN: true }),
        (m, a, b, k) => {
          const form = variableWidth(m, a, b, k);
          expect(form.minus2LnL(m - a) / (k * k)).toBeCloseTo(1, 6);
          expect(form.minus2LnL(m + b) / (k * k)).toBeCloseTo(1, 6);
        },
      ),
      { seed: 16 },
    );
  });
  it("ends where its variance does: 0.10 −0.05 +0.50 has no likelihood below 0.0444", () => {
    // published.json, e_definition_checks: hard edge at 0.04444 for these numbers.
    const form = variableWidth(0.1, 0.05, 0.5, 1);
    expect(form.minus2LnL(0.0444)).toBe(Infinity);
    expect(form.minus2LnL(0.0445)).toBeLessThan(Infinity);
  });
});

describe("bounded half-Gaussian", () => {
  it("leaves exactly C of its area on the allowed side", () => {
    fc.assert(
      fc.property(inside, level, (limit, c) => {
        const sigma = boundedHalfGaussianWidth(limit, c);
        if (limit >= c) return expect(sigma).toBe(Infinity);
        if (sigma === Infinity) return;
        const scale = 1 / (sigma * Math.SQRT2);
        expect(erf(limit * scale) / erf(scale)).toBeCloseTo(c, 10);
      }),
      { seed: 17 },
    );
  });
  it("gives ln L = −4.32 at 0.30 for 0.20 at 95 %", () => {
    // PHYSICS.md section 6.
    expect(-0.5 * halfGaussianBounded("upper", 0.2, 0.95).minus2LnL(0.3)).toBeCloseTo(-4.32, 2);
  });
  it("mirrors between an upper limit and a lower one", () => {
    const upper = halfGaussianBounded("upper", 0.3, 0.9);
    const lower = halfGaussianBounded("lower", 0.7, 0.9);
    expect(upper.minus2LnL(0.42)).toBeCloseTo(lower.minus2LnL(0.58), 12);
  });
  it("tends to the unbounded width when the limit is far below 1", () => {
    expect(boundedHalfGaussianWidth(0.01, 0.95)).toBeCloseTo(0.01 / 1.959963984540054, 12);
  });
});

describe("band", () => {
  it("puts exactly C inside under a flat prior on the real line", () => {
    const form = band(0.3, 0.7, 0.9);
    expect(form.quantile!(0.05)).toBeCloseTo(0.3, 12);
    expect(form.quantile!(0.95)).toBeCloseTo(0.7, 12);
  });
  it("puts only 0.44379 inside with wide tails at one sigma", () => {
    // published.json, e_definition_checks.interval_mass_inside_on_real_line.
    const form = bandWideTails(0.3, 0.7, 1);
    const distribution = distributionOf(form, form.reach)!;
    expect(distribution.cdf(0.7) - distribution.cdf(0.3)).toBeCloseTo(0.4437907628766121, 8);
  });
});

describe("limits", () => {
  it("smoothed step is −2 ln ½ at its place and keeps digits far beyond", () => {
    const form = smoothedStep("upper", 0.1, 0.01);
    expect(form.minus2LnL(0.1)).toBeCloseTo(2 * Math.LN2, 12);
    // scipy log_ndtr(−90) = −4055.418723…: −2 × that.
    expect(form.minus2LnL(1) / 8110.837568).toBeCloseTo(1, 7);
    expect(form.minus2LnL(0)).toBeCloseTo(0, 15);
  });
  it("hard step includes its limit", () => {
    expect(hardStep("upper", 0.3).minus2LnL(0.3)).toBe(0);
    expect(hardStep("upper", 0.3).minus2LnL(0.3000001)).toBe(Infinity);
    expect(hardStep("lower", 0.3).minus2LnL(0.2999999)).toBe(Infinity);
  });
  it("smoothed and hard steps agree as the width vanishes", () => {
    const narrow = smoothedStep("lower", 0.5, 1e-6);
    expect(narrow.minus2LnL(0.51)).toBeCloseTo(0, 12);
    expect(narrow.minus2LnL(0.49)).toBeGreaterThan(1e7);
  });
});

describe("tabulated curve", () => {
  it("trims outer zeros and refuses an inner one, naming it", () => {
    expect(tabulated([0, 0.2, 0.4, 0.6, 1], [0, 0.5, 1, 0.5, 0]).reach).toEqual([0.2, 0.6]);
    expect(() => tabulated([0, 0.2, 0.4, 0.6], [1, 0, 1, 0.5])).toThrow("p[1] must be positive");
  });
  it.each<[string, number[], number[]]>([
    ["unequal columns", [0, 1], [1]],
    ["places out of order", [0, 0.5, 0.4], [1, 1, 1]],
    ["a negative value", [0, 0.5, 1], [1, -1, 1]],
    ["one positive value", [0, 0.5, 1], [0, 1, 0]],
    ["nothing but zeros", [0, 0.5], [0, 0]],
  ])("refuses %s", (_, x, p) => {
    expect(() => tabulated(x, p)).toThrow("must be");
  });
  it("does not depend on the normalization of the curve", () => {
    const a = tabulated([0, 0.3, 1], [1, 4, 2]);
    const b = tabulated([0, 0.3, 1], [10, 40, 20]);
    expect(a.minus2LnL(0.55)).toBeCloseTo(b.minus2LnL(0.55), 12);
  });
  it("is found the same on even and uneven nodes", () => {
    const even = tabulated([0, 0.25, 0.5, 0.75, 1], [1, 3, 2, 1, 0.5]);
    const uneven = tabulated([0, 0.25, 0.5, 0.6, 0.75, 1], [1, 3, 2, 2 * 0.5 ** 0.4, 1, 0.5]);
    for (const x of [0, 0.1, 0.25, 0.55, 0.7, 0.99, 1]) {
      expect(uneven.minus2LnL(x)).toBeCloseTo(even.minus2LnL(x), 10);
    }
  });
});

describe("malformed numbers", () => {
  it.each<[string, () => unknown]>([
    ["sigmaMinus", () => twoPiece(0.4, 0, 0.1)],
    ["sigmaPlus", () => twoPiece(0.4, 0.1, -1)],
    ["m must", () => twoPiece(Number.NaN, 0.1, 0.1)],
    ["sigma must", () => gaussian(0.4, 0)],
    ["median", () => quantileMatched(Infinity, 0.1, 0.1)],
    ["k must", () => variableWidth(0.4, 0.1, 0.1, 0)],
    ["level", () => boundedHalfGaussianWidth(0.5, 1)],
    ["limit must", () => boundedHalfGaussianWidth(1, 0.95)],
    ["limit's distance", () => halfGaussianUnbounded("upper", 0, 1)],
    ["s must", () => flatThenGaussian("upper", 0.1, 0)],
    ["place", () => smoothedStep("upper", Number.NaN, 0.1)],
    ["limit must", () => hardStep("upper", Number.NaN)],
    ["width must", () => band(0.7, 0.3, 0.9)],
    ["width must", () => bandWideTails(0.3, 0.3, 1)],
  ])("are rejected, naming %s", (name, make) => {
    expect(make).toThrow(name);
  });
});
