import {
  band,
  bandTailSigma,
  bandWideTails,
  boundedHalfGaussianWidth,
  flatThenGaussian,
  type Form,
  FORM_NAMES,
  FORM_WORDS,
  gaussian,
  halfGaussianBounded,
  halfGaussianUnbounded,
  hardStep,
  quantileMatched,
  quantileMatchedCdf,
  quantileMatchedDensity,
  smoothedStep,
  tabulated,
  twoPiece,
  variableWidth,
} from "~shared/likelihood/forms";
import { addMinus2LnL, tabulatedStep } from "~shared/likelihood/kernel";
import { integratePanels } from "~shared/numerics/quadrature";

/** Where an integral may end: −2 ln L = 80, √80 σ out. */
const OUT = Math.sqrt(80);

/** What a form says of itself: every number below follows from the definitions of PHYSICS.md section 4. */
describe("a form in words and in numbers", () => {
  it.each<[string, () => Form, string, Partial<Form>]>([
    [
      "two-piece",
      () => twoPiece(-0.4, 0.1, 0.2),
      "((x − −0.4)/0.1)² below −0.4, ((x − −0.4)/0.2)² above",
      { name: "twoPiece", kinks: [-0.4], peak: -0.4, reach: [-0.4 - 0.1 * OUT, -0.4 + 0.2 * OUT] },
    ],
    [
      "Gaussian",
      () => gaussian(0.05, 0.00712345),
      "((q − 0.05)/0.007123)²",
      { name: "gaussian", kinks: [], peak: 0.05 },
    ],
    [
      "quantile-matched",
      () => quantileMatched(0.4, 0.1, 0.2),
      "u² − 2 ln u′ over its least value, u(x) the normal score through 0.3, 0.4, 0.6",
      {
        name: "quantileMatched",
        reach: [0.4 - 0.1 * (OUT + 1), 0.4 + 0.2 * (OUT + 1)],
        warnings: [],
      },
    ],
    [
      "variable width",
      () => variableWidth(0.4, 0.1, 0.2, 2),
      "(x − 0.4)²/(0.005 + 0.025 (x − 0.4)), +∞ where the denominator is not positive",
      { name: "variableWidth", peak: 0.4, kinks: [], quantile: null },
    ],
    [
      "bounded upper limit",
      () => halfGaussianBounded("upper", 0.2, 0.95),
      "((x − 0)/0.102)² on 0 to 1",
      { name: "halfGaussianBounded", peak: 0, kinks: [], warnings: [] },
    ],
    [
      "bounded lower limit",
      () => halfGaussianBounded("lower", 0.8, 0.95),
      "((x − 1)/0.102)² on 0 to 1",
      { name: "halfGaussianBounded", peak: 1 },
    ],
    [
      "a limit that says nothing",
      () => halfGaussianBounded("upper", 0.96, 0.95),
      "0",
      {
        name: "halfGaussianBounded",
        peak: 0,
        reach: [0, 1],
        kinks: [],
        warnings: [
          {
            code: "saysNothing",
            text: "A flat prior on 0 to 1 already puts 96 % on the allowed side of 0.96: at 95 % this limit says nothing.",
          },
        ],
      },
    ],
    [
      "a lower limit that says nothing",
      () => halfGaussianBounded("lower", 0.05, 0.95),
      "0",
      {
        peak: 1,
        warnings: [
          {
            code: "saysNothing",
            text: "A flat prior on 0 to 1 already puts 95 % on the allowed side of 0.05: at 95 % this limit says nothing.",
          },
        ],
      },
    ],
    [
      "unbounded upper limit",
      () => halfGaussianUnbounded("upper", 0.04, 2),
      "((x − 0)/0.02)²",
      { name: "halfGaussianUnbounded", peak: 0, reach: [0, 0.02 * OUT], kinks: [] },
    ],
    [
      "unbounded lower limit",
      () => halfGaussianUnbounded("lower", 0.96, 2),
      "((x − 1)/0.02)²",
      { peak: 1, reach: [1 - (1 - 0.96) * 0.5 * OUT, 1] },
    ],
    [
      "flat, then Gaussian above",
      () => flatThenGaussian("upper", 0.1, 0.05),
      "0 up to 0.1, ((x − 0.1)/0.05)² above",
      {
        name: "flatThenGaussian",
        peak: 0.1,
        kinks: [0.1],
        reach: [-Infinity, 0.1 + 0.05 * OUT],
        quantile: null,
      },
    ],
    [
      "flat, then Gaussian below",
      () => flatThenGaussian("lower", 0.1, 0.05),
      "0 from 0.1, ((x − 0.1)/0.05)² below",
      { reach: [0.1 - 0.05 * OUT, Infinity] },
    ],
    [
      "smoothed step up",
      () => smoothedStep("upper", 0.3, 0.02),
      "−2 ln ½ erfc((x − 0.3)/(√2 × 0.02))",
      {
        name: "smoothedStep",
        peak: -Infinity,
        reach: [-Infinity, 0.3 + 0.02 * OUT],
        kinks: [0.3],
        quantile: null,
      },
    ],
    [
      "smoothed step down",
      () => smoothedStep("lower", 0.3, 0.02),
      "−2 ln ½ erfc((0.3 − x)/(√2 × 0.02))",
      { peak: Infinity, reach: [0.3 - 0.02 * OUT, Infinity] },
    ],
    [
      "hard step up",
      () => hardStep("upper", 0.3),
      "0 up to 0.3, +∞ above",
      { name: "hardStep", peak: 0.3, kinks: [0.3], reach: [-Infinity, 0.3], quantile: null },
    ],
    [
      "hard step down",
      () => hardStep("lower", 0.3),
      "0 from 0.3, +∞ below",
      { reach: [0.3, Infinity] },
    ],
    [
      "band",
      () => band(0.3, 0.7, 0.6827, [0, 1]),
      "0 from 0.3 to 0.7, (distance/0.07417)² outside",
      { name: "band", peak: 0.5, kinks: [0.3, 0.7], warnings: [] },
    ],
    [
      "band, wide tails",
      () => bandWideTails(0.3, 0.7, 2, [0, 1]),
      "0 from 0.3 to 0.7, (distance/0.1)² outside",
      { name: "bandWideTails", warnings: [] },
    ],
    [
      "curve",
      () => tabulated([0, 0.25, 0.5, 1], [0, 1, 3, 2]),
      "−2 ln(p/max p), ln p linear between 3 nodes from 0.25 to 1, +∞ outside",
      { name: "tabulated", peak: 0.5, kinks: [0.25, 0.5, 1], reach: [0.25, 1] },
    ],
  ])("%s", (_, make, formula, facts) => {
    const form = make();
    expect(form.formula).toBe(formula);
    const { reach, ...others } = facts;
    expect(form).toMatchObject(others);
    reach?.forEach((end, i) => {
      if (Number.isFinite(end)) expect(form.reach[i]).toBeCloseTo(end, 12);
      else expect(form.reach[i]).toBe(end);
    });
  });

  it.each<[string, () => Form]>([
    ["two-piece", () => twoPiece(0.4, 0.1, 0.2)],
    ["variable width, wider above", () => variableWidth(0.4, 0.1, 0.2, 2)],
    ["variable width, wider below", () => variableWidth(0.4, 0.3, 0.2, 0.5)],
    ["unbounded half-Gaussian", () => halfGaussianUnbounded("upper", 0.04, 2)],
    ["band", () => band(0.3, 0.7, 0.6827)],
    ["flat, then Gaussian", () => flatThenGaussian("upper", 0.1, 0.05)],
    ["flat, then Gaussian below", () => flatThenGaussian("lower", 0.1, 0.05)],
  ])("%s has −2 ln L = 80 where its reach ends", (_, make) => {
    const form = make();
    for (const end of form.reach) {
      if (Number.isFinite(end) && form.minus2LnL(end) > 0) {
        expect(form.minus2LnL(end)).toBeCloseTo(80, 8);
      }
    }
    expect(form.reach.some((end) => form.minus2LnL(end) > 79)).toBe(true);
  });

  it("reaches as far as an integral has to go, and no further", () => {
    const ends = ({ reach }: Form, low: number, high: number) => {
      expect(reach[0]).toBeCloseTo(low, 10);
      expect(reach[1]).toBeCloseTo(high, 10);
    };
    // d² = 80 (V + V′d) with V = 0.005, V′ = 0.025: d = 1 ± √1.4.
    ends(variableWidth(0.4, 0.1, 0.2, 2), 1.4 - Math.sqrt(1.4), 1.4 + Math.sqrt(1.4));
    const sigma = boundedHalfGaussianWidth(0.05, 0.95);
    ends(halfGaussianBounded("upper", 0.05, 0.95), 0, sigma * OUT);
    ends(halfGaussianBounded("lower", 0.95, 0.95), 1 - sigma * OUT, 1);
    ends(halfGaussianBounded("upper", 0.8, 0.95), 0, 1);
    ends(halfGaussianBounded("lower", 0.2, 0.95), 0, 1);
    expect(halfGaussianBounded("lower", 0.01, 0.9).name).toBe("halfGaussianBounded");
  });

  it("packs a curve on even places with its step, on others without", () => {
    // n, 1/step, places, ln p over its peak.
    const even = tabulated([0.1, 0.35, 0.6], [1, 2, 1]);
    expect([...even.packed]).toEqual(
      [3, 4, 0.1, 0.35, 0.6, -Math.LN2, 0, -Math.LN2].map((value) => expect.closeTo(value, 12)),
    );
    expect(tabulated([0.1, 0.3, 0.6], [1, 2, 1]).packed[1]).toBe(0);
    expect(tabulated([0.1, 0.6], [1, 2]).packed[1]).toBeCloseTo(2, 12);
  });

  it("has every name in words", () => {
    expect(FORM_NAMES.map((name) => FORM_WORDS[name])).toEqual([
      ...["two-piece", "quantile-matched", "variable width", "Gaussian"],
      ...["half-Gaussian, bounded", "half-Gaussian, unbounded", "flat, then Gaussian"],
      ...["smoothed step", "hard step", "band", "band, wide tails", "tabulated"],
    ]);
  });

  it("warns of a second peak and of a touched end in words", () => {
    expect(quantileMatched(0.4, 0.3, 0.1).warnings).toEqual([
      {
        code: "secondPeak",
        text: "The wider side is 3 times the narrower: above 2.4 the quantile-matched density has a second peak. Two-piece is proposed.",
      },
    ]);
    const touched = [
      {
        code: "touchesEdge",
        text: "The band touches the end of the range of its quantity: a limit is proposed.",
      },
    ];
    expect(band(0, 0.4, 0.9, [0, 1]).warnings).toEqual(touched);
    expect(bandWideTails(0.5, 1, 1, [0, 1]).warnings).toEqual(touched);
    expect(band(0, 1, 0.9).warnings).toEqual([]);
    expect(bandWideTails(0, 1, 1).warnings).toEqual([]);
  });
});

describe("quantiles in closed form", () => {
  // Φ⁻¹(0.75) = 0.6744897501960817, Φ⁻¹(0.9) = 1.2815515655446004 (scipy norm.ppf).
  const Q75 = 0.6744897501960817;
  const Q90 = 1.2815515655446004;

  it("of a two-piece: each side holds its width's share", () => {
    // 0.1 and 0.3 share 1:3; 1/8 is half of the lower quarter, 5/8 half of the upper three.
    const form = twoPiece(0.4, 0.1, 0.3);
    expect(form.quantile!(0.125)).toBeCloseTo(0.4 - 0.1 * Q75, 12);
    expect(form.quantile!(0.25)).toBeCloseTo(0.4, 12);
    expect(form.quantile!(0.625)).toBeCloseTo(0.4 + 0.3 * Q75, 12);
    expect(() => form.quantile!(0)).toThrow("p must be");
    expect(() => form.quantile!(1)).toThrow("p must be");
  });

  it("of half-Gaussians: half of the area lies within Φ⁻¹(0.75) σ", () => {
    expect(halfGaussianUnbounded("upper", 0.04, 2).quantile!(0.5)).toBeCloseTo(0.02 * Q75, 12);
    expect(halfGaussianUnbounded("lower", 0.96, 2).quantile!(0.5)).toBeCloseTo(1 - 0.02 * Q75, 12);
    expect(halfGaussianUnbounded("lower", 0.96, 2).quantile!(0.2)).toBeCloseTo(1 - 0.02 * Q90, 12);
    // A narrow bounded one is not cut at the other end.
    const sigma = boundedHalfGaussianWidth(0.05, 0.95);
    expect(halfGaussianBounded("upper", 0.05, 0.95).quantile!(0.8)).toBeCloseTo(sigma * Q90, 10);
    expect(halfGaussianBounded("lower", 0.95, 0.95).quantile!(0.2)).toBeCloseTo(
      1 - sigma * Q90,
      10,
    );
    for (const form of [
      halfGaussianUnbounded("upper", 0.04, 2),
      halfGaussianBounded("upper", 0.2, 0.95),
      halfGaussianBounded("upper", 0.96, 0.95),
      band(0.3, 0.7, 0.9),
      tabulated([0, 1], [1, 2]),
    ]) {
      expect(() => form.quantile!(1.5)).toThrow("p must be");
    }
  });

  it("of a limit that says nothing: the flat prior's", () => {
    expect(halfGaussianBounded("upper", 0.99, 0.95).quantile!(0.37)).toBe(0.37);
  });

  it("of a band: linear inside, half of each tail within Φ⁻¹(0.75) s of it", () => {
    const form = band(0.3, 0.7, 0.8);
    const s = bandTailSigma(0.3, 0.7, 0.8);
    // 10 % below, 80 % inside, 10 % above.
    expect(form.quantile!(0.3)).toBeCloseTo(0.4, 12);
    expect(form.quantile!(0.5)).toBeCloseTo(0.5, 12);
    expect(form.quantile!(0.05)).toBeCloseTo(0.3 - s * Q75, 12);
    expect(form.quantile!(0.95)).toBeCloseTo(0.7 + s * Q75, 12);
  });

  it("of a quantile-matched form: straight scores outside its nodes, for a level below one sigma too", () => {
    const form = quantileMatched(0.4, 0.1, 0.2);
    expect(form.quantile!(0.5)).toBe(0.4);
    // Score −2.326… at 1 % (scipy norm.ppf): that many σ− below the median, and mirrored above.
    expect(form.quantile!(0.01)).toBeCloseTo(0.4 - 0.1 * 2.3263478740408408, 12);
    expect(form.quantile!(0.99)).toBeCloseTo(0.4 + 0.2 * 2.3263478740408408, 12);
    // k = Φ⁻¹(0.75) for a printed 50 %: the nodes lie k σ out and keep their quantiles.
    const half = quantileMatched(0.4, 0.1, 0.2, Q75);
    expect(half.kinks[0]).toBeCloseTo(0.4 - 0.1 * Q75, 14);
    expect(half.kinks[2]).toBeCloseTo(0.4 + 0.2 * Q75, 14);
    expect(quantileMatchedCdf(half, 0.4 - 0.1 * Q75)).toBeCloseTo(0.25, 12);
    expect(quantileMatchedCdf(half, 0.4 + 0.2 * Q75)).toBeCloseTo(0.75, 12);
    expect(half.quantile!(0.25)).toBeCloseTo(0.4 - 0.1 * Q75, 12);
    // Above one sigma the nodes stay at one sigma.
    expect(quantileMatched(0.4, 0.1, 0.2, 2).kinks).toEqual(form.kinks);
  });

  it("of a curve: ln p linear in each cell", () => {
    // p = 2^x on [0, 1]: F = (2^x − 1), so that the median is log2 1.5; flat: the place itself.
    expect(tabulated([0, 1], [1, 2]).quantile!(0.5)).toBeCloseTo(Math.log2(1.5), 12);
    expect(tabulated([2, 4], [3, 3]).quantile!(0.25)).toBeCloseTo(2.5, 12);
    // Two cells of areas 1 and 1: the middle is the node.
    const tent = tabulated([0, 1, 2], [1, 2, 1]);
    expect(tent.quantile!(0.5)).toBeCloseTo(1, 12);
    expect(tent.quantile!(0.75)).toBeCloseTo(2 - Math.log2(1.5), 12);
  });
});

describe("densities of a quantile-matched form", () => {
  const form = quantileMatched(0.4, 0.1, 0.2);
  it("are the slope of its cumulative distribution and add up to one", () => {
    const h = 1e-6;
    for (const x of [0.1, 0.3, 0.35, 0.4, 0.5, 0.6, 0.9]) {
      const slope = (quantileMatchedCdf(form, x + h) - quantileMatchedCdf(form, x - h)) / (2 * h);
      expect(quantileMatchedDensity(form, x)).toBeCloseTo(slope, 5);
    }
    const whole = integratePanels((x) => quantileMatchedDensity(form, x), -1, 3, 200, 10);
    expect(whole).toBeCloseTo(1, 10);
  });
  it("are −2 ln of the density over its peak's", () => {
    const top = quantileMatchedDensity(form, form.peak);
    for (const x of [0.2, 0.33, 0.4, 0.55, 0.8]) {
      expect(form.minus2LnL(x)).toBeCloseTo(
        -2 * Math.log(quantileMatchedDensity(form, x) / top),
        9,
      );
    }
  });
  it("are zero where a very lopsided score turns around", () => {
    const extreme = quantileMatched(0.5, 0.005, 0.5);
    const xs = Array.from({ length: 4001 }, (_, i) => i / 4000);
    const turned = xs.filter((x) => extreme.minus2LnL(x) === Infinity);
    for (const x of turned) expect(quantileMatchedDensity(extreme, x)).toBe(0);
    expect(Math.min(...xs.map(extreme.minus2LnL))).toBeGreaterThanOrEqual(-1e-9);
    expect(Math.min(...xs.map(extreme.minus2LnL))).toBeLessThan(0.01);
  });
  it("peak where the definition says, PHYSICS.md section 6", () => {
    // Quoted at 68.27 %: k = 1.0000217133229992 (scipy norm.ppf).
    const k = 1.0000217133229992;
    const quoted = quantileMatched(0.4, 0.1 / k, 0.2 / k);
    expect(quoted.peak).toBeCloseTo(0.353382772, 9);
    expect(quoted.minus2LnL(0.75)).toBeCloseTo(4.4801136662, 9);
    expect(quoted.minus2LnL(quoted.peak)).toBeCloseTo(0, 12);
  });
});

describe("widths", () => {
  it("of a bounded limit leave exactly C on the allowed side, PHYSICS.md section 6", () => {
    expect(boundedHalfGaussianWidth(0.8, 0.95)).toBeCloseTo(0.4485398863, 10);
    expect(boundedHalfGaussianWidth(0.2, 0.95)).toBeCloseTo(0.1020426914, 10);
  });
  it("of a bounded limit grow without end towards the flat prior's, and stay there", () => {
    // Close to L = C: 1 − (L/s)²/6 over 1 − (1/s)²/6 times L is C, s² = L(1 − L²)/(6(C − L)) to first order.
    const s = boundedHalfGaussianWidth(0.9499999, 0.95);
    expect(s / Math.sqrt((0.95 * (1 - 0.95 ** 2)) / (6 * 1e-7))).toBeCloseTo(1, 3);
    expect(boundedHalfGaussianWidth(0.95, 0.95)).toBe(Infinity);
    expect(boundedHalfGaussianWidth(0.97, 0.95)).toBe(Infinity);
  });
  it("of a band's tails are W(1 − C)/(C √(2π)), PHYSICS.md section 6", () => {
    expect(bandTailSigma(0.3, 0.7, 0.6827)).toBeCloseTo(
      (0.4 * 0.3173) / (0.6827 * Math.sqrt(2 * Math.PI)),
      14,
    );
    expect(bandTailSigma(0.3, 0.7, 0.6827)).toBeCloseTo(0.0742, 4);
    expect(band(0.3, 0.7, 0.6827).minus2LnL(0.25)).toBeCloseTo(0.4545, 4);
  });
});

describe("values outside the ordinary", () => {
  it("of a curve are +∞ outside its nodes, and finite on them", () => {
    for (const form of [
      tabulated([0.2, 0.4, 0.6], [1, 2, 1]),
      tabulated([0.2, 0.3, 0.6], [1, 2, 1]),
    ]) {
      expect(form.minus2LnL(0.2)).toBeCloseTo(2 * Math.LN2, 12);
      expect(form.minus2LnL(0.6)).toBeCloseTo(2 * Math.LN2, 12);
      for (const x of [0.1999999, 0.6000001, -Infinity, Infinity]) {
        expect(form.minus2LnL(x)).toBe(Infinity);
      }
    }
    // ln p is linear: √2 halfway between 1 and 2.
    expect(tabulated([0.2, 0.4, 0.6], [1, 2, 1]).minus2LnL(0.3)).toBeCloseTo(Math.LN2, 12);
    expect(tabulated([0.2, 0.4, 0.7], [1, 2, 1]).minus2LnL(0.3)).toBeCloseTo(Math.LN2, 12);
  });
  it("of a variable width are +∞ at infinity and where the variance ends", () => {
    const form = variableWidth(0.5, 0.1, 0.2, 1);
    expect(form.minus2LnL(Infinity)).toBe(Infinity);
    expect(form.minus2LnL(-Infinity)).toBe(Infinity);
    // V + V′ d = 0.02 + 0.1 d ends at d = −0.2; one step inside it is still finite.
    expect(form.minus2LnL(0.3)).toBe(Infinity);
    expect(form.minus2LnL(0.301)).toBeCloseTo(0.199 ** 2 / 0.0001, 6);
  });
  it("of a band fall on both sides alike", () => {
    const form = bandWideTails(0.3, 0.7, 2);
    for (const [x, value] of [
      [0.2, 1],
      [0.3, 0],
      [0.5, 0],
      [0.7, 0],
      [0.9, 4],
    ] as const) {
      expect(form.minus2LnL(x)).toBeCloseTo(value, 10);
    }
  });
});

describe("malformed numbers are rejected, by name:", () => {
  it.each<[string, () => unknown]>([
    ["sigmaMinus must be", () => quantileMatched(0.4, 0, 0.1)],
    ["sigmaPlus must be", () => quantileMatched(0.4, 0.1, 0)],
    ["k must be", () => quantileMatched(0.4, 0.1, 0.1, 0)],
    ["m must be", () => variableWidth(Number.NaN, 0.1, 0.1, 1)],
    ["minus must be", () => variableWidth(0.4, 0, 0.1, 1)],
    ["plus must be", () => variableWidth(0.4, 0.1, 0, 1)],
    ["level must be", () => boundedHalfGaussianWidth(0.5, 0)],
    ["limit must be", () => boundedHalfGaussianWidth(0, 0.5)],
    ["k must be", () => halfGaussianUnbounded("upper", 0.3, 0)],
    ["limit's distance must be", () => halfGaussianUnbounded("lower", 1, 1)],
    ["base must be", () => flatThenGaussian("upper", Number.NaN, 0.1)],
    ["s must be", () => smoothedStep("upper", 0.3, 0)],
    ["low must be", () => band(-Infinity, 0.7, 0.9)],
    ["high must be", () => band(0.3, Infinity, 0.9)],
    ["level must be", () => band(0.3, 0.7, 1)],
    ["low must be", () => bandWideTails(Number.NaN, 0.7, 1)],
    ["high must be", () => bandWideTails(0.3, Number.NaN, 1)],
    ["k must be", () => bandWideTails(0.3, 0.7, 0)],
    ["curve must be two equally long columns, got 2 and 1 values", () => tabulated([0, 1], [1])],
    ["x[1] must be", () => tabulated([0, Infinity], [1, 1])],
    ["x[2] must be above 0.5, got 0.5", () => tabulated([0, 0.5, 0.5], [1, 1, 1])],
    ["p[1] must be zero or positive", () => tabulated([0, 0.5, 1], [1, -1e-9, 1])],
    ["p[0] must be zero or positive", () => tabulated([0, 0.5, 1], [Infinity, 1, 1])],
    [
      "curve must be positive at two places or more, got too little",
      () => tabulated([0, 1], [0, 0]),
    ],
    ["curve must be positive at two places or more", () => tabulated([0, 0.5, 1], [0, 1, 0])],
    [
      "p[2] must be positive between positive values",
      () => tabulated([0, 0.2, 0.4, 0.6, 1], [0, 1, 0, 1, 0]),
    ],
  ])("%s", (message, make) => {
    expect(make).toThrow(message);
  });
});

describe("arithmetic of a line of places", () => {
  it("is that of each place, added to what is there", () => {
    const xs = Float64Array.from({ length: 41 }, (_, i) => -0.5 + i / 20);
    for (const form of [
      twoPiece(0.4, 0.1, 0.2),
      quantileMatched(0.4, 0.1, 0.2),
      variableWidth(0.4, 0.1, 0.2, 1),
      flatThenGaussian("lower", 0.4, 0.1),
      band(0.3, 0.7, 0.9),
      smoothedStep("upper", 0.3, 0.05),
      hardStep("upper", 0.9),
      tabulated([0, 0.25, 0.5, 0.75, 1], [1, 4, 6, 4, 1]),
      tabulated([0, 0.2, 0.5, 0.9, 1], [1, 4, 6, 4, 1]),
      halfGaussianBounded("upper", 0.99, 0.9),
    ]) {
      const packed = Float64Array.of(9, 9, ...form.packed);
      const out = new Float64Array(40).fill(3);
      addMinus2LnL(form.kernel, packed, 2, xs, 1, 39, out);
      expect(out[39]).toBe(3);
      for (let j = 0; j < 39; j++) {
        const expected = 3 + form.minus2LnL(xs[1 + j]!);
        if (expected === Infinity) expect(out[j]).toBe(Infinity);
        else expect(Math.abs(out[j]! - expected)).toBeLessThan(1e-9);
      }
    }
  });

  it("has the smoothed step from a table to 1e-10, and itself beyond it", () => {
    const step = smoothedStep("upper", 0, Math.SQRT1_2);
    for (const t of [-30, -6.5, -6, -3.21, -0.4, 0, 0.37, 2.9, 7.99, 8, 8.5, 40]) {
      const exact = step.minus2LnL(t);
      expect(Math.abs(tabulatedStep(t) - exact)).toBeLessThan(1e-10 * Math.max(1, exact));
    }
  });
});
