import fc from "fast-check";

import { buildFields } from "../buildFields";
import { asUsed, HELIUM_PER_HYDROGEN } from "~shared/statement/asUsed";
import type { AsUsed } from "~shared/statement/asUsed";
import type { ConstraintFields } from "~shared/statement/fields";

import { arbitraryFields } from "./arbitraryFields";

function used(changes: Partial<ConstraintFields>): AsUsed {
  const result = asUsed(buildFields(changes));
  if (result === null) throw new Error("the fields are not complete");
  return result;
}

describe("a neutral fraction as printed", () => {
  it("keeps its digits", () => {
    expect(used({ value: "0.40", plus: "+0.10", minus: "-0.20" })).toMatchObject({
      value: "0.40",
      plus: "0.10",
      minus: "0.20",
      kind: "twoSided",
      evaluatedIn: "linear",
      valueDerived: false,
    });
  });

  it("has one-sigma equivalents width / k, flagged derived, with the formula in words", () => {
    const result = used({ level: "percent95", value: "0.42", plus: "0.23", minus: "0.17" });
    // Φ⁻¹(0.975) = 1.959963984540054, Abramowitz & Stegun 1964, table 26.5.
    expect(result.k).toBeCloseTo(1.959963984540054, 12);
    expect(result.sigmaPlus).toBeCloseTo(0.23 / 1.959963984540054, 12);
    expect(result.sigmaMinus).toBeCloseTo(0.17 / 1.959963984540054, 12);
    expect(result.derived).toBe(true);
    expect(result.steps.map((step) => step.text)).toEqual([
      "Level, derived: one sigma is 0.17 / 1.960 below and 0.23 / 1.960 above.",
    ]);
  });

  it("tells a printed 68 % from one sigma", () => {
    // k = 0.99446 at C = 0.68: PHYSICS.md, section 4.
    expect(used({ level: "percent68" }).k).toBeCloseTo(0.99446, 5);
    const oneSigma = used({ level: "oneSigma" });
    expect(oneSigma.level).toBe(0.6827);
    expect(oneSigma.derived).toBe(false);
    expect(oneSigma.steps).toEqual([]);
  });

  it("has no sigma when the level is not stated", () => {
    expect(used({ level: "notStated" })).toMatchObject({
      level: null,
      k: null,
      sigmaMinus: null,
      sigmaPlus: null,
      value: "0.42",
    });
  });
});

describe("an ionized fraction", () => {
  it("flips its value and swaps plus and minus", () => {
    const result = used({ species: "ionized", value: "0.30", plus: "0.08", minus: "0.05" });
    expect(result).toMatchObject({ value: "0.70", plus: "0.05", minus: "0.08" });
    expect(result.steps[0]?.text).toBe(
      "Neutral from ionized: x_HI = 1 \u2212 x_HII; plus and minus swap.",
    );
  });

  it("turns a lower limit into an upper one, and back", () => {
    expect(used({ species: "ionized", kind: "lowerLimit", value: "0.9" })).toMatchObject({
      kind: "upperLimit",
      value: "0.1",
      plus: null,
    });
    expect(used({ species: "ionized", kind: "upperLimit", value: "0.45" }).kind).toBe("lowerLimit");
  });

  it("flips the base of a limit and keeps its sigma", () => {
    expect(
      used({
        species: "ionized",
        kind: "lowerLimit",
        value: null,
        limitBase: "0.97",
        limitSigma: "0.06",
      }),
    ).toMatchObject({ kind: "upperLimit", limitBase: "0.03", limitSigma: "0.06", value: null });
  });

  it("flips a band", () => {
    expect(
      used({ species: "ionized", kind: "band", bandLow: "0.2", bandHigh: "0.65" }),
    ).toMatchObject({ low: "0.35", high: "0.8", kind: "band" });
  });

  it("keeps the interval it states, end for end", () => {
    const hundredth = fc.integer({ min: 1, max: 40 });
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 100 }), hundredth, hundredth, (value, plus, minus) => {
        const text = (hundredths: number) => (hundredths / 100).toFixed(2);
        const flipped = used({
          species: "ionized",
          value: text(value),
          plus: text(plus),
          minus: text(minus),
        });
        const top = Number(flipped.value) + Number(flipped.plus);
        const bottom = Number(flipped.value) - Number(flipped.minus);
        expect(top).toBeCloseTo(1 - (value - minus) / 100, 12);
        expect(bottom).toBeCloseTo(1 - (value + plus) / 100, 12);
      }),
      { seed: 20261201 },
    );
  });
});

describe("an electron fraction", () => {
  it("is divided by 1 + f_He when helium is counted, derived, with the assumption in words", () => {
    // f_He = 0.2454 / (3.9715 × 0.7546) = 0.0818848, by hand from PHYSICS.md, section 1.
    expect(HELIUM_PER_HYDROGEN).toBeCloseTo(0.0818848, 6);
    const result = used({
      species: "electron",
      helium: "included",
      value: String(0.5 * (1 + HELIUM_PER_HYDROGEN)),
      plus: "0.1",
      minus: "0.2",
    });
    expect(Number(result.value)).toBeCloseTo(0.5, 11);
    expect(Number(result.plus)).toBeCloseTo(0.2 / (1 + HELIUM_PER_HYDROGEN), 11);
    expect(result.valueDerived).toBe(true);
    expect(result.steps[0]?.text).toMatch(/assumes that helium/);
  });

  it("is the ionized fraction when helium is not counted", () => {
    expect(used({ species: "electron", helium: "notIncluded", value: "0.4" })).toMatchObject({
      value: "0.6",
      valueDerived: false,
    });
  });

  it("is not used while helium is unknown", () => {
    expect(asUsed(buildFields({ species: "electron", helium: "unknown" }))).toBeNull();
  });
});

describe("log10", () => {
  it("keeps a two-sided statement in log10 of the neutral fraction", () => {
    expect(used({ scale: "log10", value: "-3.5", plus: "0.2", minus: "0.3" })).toMatchObject({
      evaluatedIn: "log10",
      value: "-3.5",
      plus: "0.2",
    });
  });

  it("turns a limit without own sigma into a limit in x", () => {
    expect(used({ scale: "log10", kind: "upperLimit", value: "-2" })).toMatchObject({
      evaluatedIn: "linear",
      value: "0.01",
      valueDerived: true,
    });
  });

  it("brings an ionized log10 to the neutral fraction end by end", () => {
    // 10^−0.5 = 0.316228; 10^−0.4 = 0.398107; 10^−0.7 = 0.199526.
    const result = used({
      species: "ionized",
      scale: "log10",
      value: "-0.5",
      plus: "0.1",
      minus: "0.2",
    });
    expect(result.evaluatedIn).toBe("linear");
    expect(Number(result.value)).toBeCloseTo(1 - 0.316228, 6);
    expect(Number(result.minus)).toBeCloseTo(0.398107 - 0.316228, 6);
    expect(Number(result.plus)).toBeCloseTo(0.316228 - 0.199526, 6);
  });
});

describe("other quantities", () => {
  it("keep their numbers, and have no redshift role", () => {
    const result = used({
      quantity: "opticalDepth",
      species: null,
      scale: null,
      value: "0.0551",
      plus: "0.0069",
      minus: "0.0069",
    });
    expect(result).toMatchObject({ value: "0.0551", zRole: null, evaluatedIn: "linear" });
  });

  it("have their fractions neutral, a duration's from high to low", () => {
    const ionized = { species: "ionized", fractionFrom: "0.25", fractionTo: "0.9" } as const;
    expect(used({ ...ionized, quantity: "duration" })).toMatchObject({
      fractionFrom: 0.75,
      fractionTo: 0.1,
      durationUnit: "redshift",
    });
    expect(
      used({ quantity: "redshiftAtFraction", species: "ionized", fraction: "0.9" }).fraction,
    ).toBe(0.1);
  });

  it("are not used before their ends are given", () => {
    expect(asUsed(buildFields({ quantity: "opticalDepthRange", rangeLow: "15" }))).toBeNull();
    expect(asUsed(buildFields({ quantity: "duration" }))).toBeNull();
  });
});

it("is null for a draft, never a throw, whatever is typed", () => {
  fc.assert(
    fc.property(arbitraryFields, (fields) => {
      const result = asUsed(fields);
      if (result !== null && result.value !== null) {
        expect(Number.isFinite(Number(result.value))).toBe(true);
      }
    }),
    { seed: 20261201, numRuns: 500 },
  );
});
