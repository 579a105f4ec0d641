import { asUsed, type AsUsed, HELIUM_PER_HYDROGEN, widthText } from "~shared/statement/asUsed";
import type { ConstraintFields } from "~shared/statement/fields";

import { buildFields } from "../buildFields";

type Changes = Partial<ConstraintFields>;
const maybe = (changes: Changes): AsUsed | null => asUsed(buildFields(changes));
function used(changes: Changes): AsUsed {
  const result = maybe(changes);
  if (result === null) throw new Error("the fields are not complete");
  return result;
}
const steps = (changes: Changes): [string, string][] =>
  used(changes).steps.map(({ code, text }) => [code, text]);
/** One sigma printed, so that no step is about the level. */
const plain = (changes: Changes): Changes => ({ level: "oneSigma", ...changes });
const limit = (kind: "upperLimit" | "lowerLimit", changes: Changes): Changes =>
  plain({ kind, plus: null, minus: null, estimator: null, ...changes });
const band = (bandLow: string, bandHigh: string, changes: Changes = {}): Changes =>
  plain({ kind: "band", value: null, bandLow, bandHigh, ...changes });

/** f_He = 0.2454/(3.9715 × 0.7546) = 0.0818848: PHYSICS.md section 1, by hand. */
const HELIUM_TEXT =
  "Ionized from electrons, derived: x_HII = x_e / (1 + f_He) with f_He = 0.0819 = Y / (3.9715 (1 − Y)) at Y = 0.2454. This assumes that helium loses its first electron together with hydrogen.";
const FLIP = "Neutral from ionized: x_HI = 1 − x_HII; ";

describe("every conversion is told in words", () => {
  it.each<[string, Changes, [string, string][]]>([
    ["as printed", plain({}), []],
    [
      "ionized",
      plain({ species: "ionized" }),
      [["neutralFromIonized", `${FLIP}plus and minus swap.`]],
    ],
    [
      "an ionized lower limit",
      limit("lowerLimit", { species: "ionized", value: "0.9" }),
      [["neutralFromIonized", `${FLIP}the lower limit becomes an upper limit.`]],
    ],
    [
      "an ionized upper limit",
      limit("upperLimit", { species: "ionized", value: "0.9" }),
      [["neutralFromIonized", `${FLIP}the upper limit becomes a lower limit.`]],
    ],
    [
      "an ionized band",
      band("0.2", "0.6", { species: "ionized" }),
      [["neutralFromIonized", `${FLIP}the ends of the band swap.`]],
    ],
    [
      "an ionized curve",
      plain({ species: "ionized", kind: "curve", value: null, plus: null, minus: null }),
      [["neutralFromIonized", `${FLIP}every place of the curve moves to the other side.`]],
    ],
    [
      "an ionized curve with an interval",
      plain({ species: "ionized", kind: "curve" }),
      [
        [
          "neutralFromIonized",
          `${FLIP}every place of the curve moves to the other side, and plus and minus of the quoted interval swap.`,
        ],
      ],
    ],
    [
      "ionized words",
      plain({ species: "ionized", kind: "qualitative" }),
      [["neutralFromIonized", `${FLIP}no number to convert.`]],
    ],
    [
      "electrons of hydrogen",
      plain({ species: "electron", helium: "notIncluded" }),
      [
        [
          "electronsOfHydrogen",
          "Electrons of hydrogen only: the ionized fraction is the electron fraction, x_HII = x_e.",
        ],
        ["neutralFromIonized", `${FLIP}plus and minus swap.`],
      ],
    ],
    [
      "electrons with helium's",
      plain({ species: "electron", helium: "included" }),
      [
        ["heliumElectrons.derived", HELIUM_TEXT],
        ["neutralFromIonized", `${FLIP}plus and minus swap.`],
      ],
    ],
    [
      "log10 of the neutral fraction",
      plain({ scale: "log10", value: "-2" }),
      [["log10Kept", "Printed as log10 of the neutral fraction: evaluated in log10, as printed."]],
    ],
    [
      "a log10 limit",
      limit("upperLimit", { scale: "log10", value: "-2" }),
      [["log10Undone", "Limit from log10: x = 10^(printed number)."]],
    ],
    [
      "log10 of the ionized fraction",
      plain({ scale: "log10", species: "ionized", value: "-0.5" }),
      [
        [
          "log10Undone",
          "From log10: every end is 10^(printed number); the widths follow from the ends.",
        ],
        ["neutralFromIonized", `${FLIP}plus and minus swap.`],
      ],
    ],
    [
      "a mass-weighted fraction",
      plain({ weighting: "mass" }),
      [
        [
          "massWeighted",
          "Mass-weighted: used as it is; no conversion to a volume average is made.",
        ],
      ],
    ],
    [
      "no level",
      { level: "notStated" },
      [
        [
          "levelNotStated",
          "Level not stated: the widths stay as printed until a table decides on a level.",
        ],
      ],
    ],
    [
      "unequal widths at 95 %",
      { level: "percent95" },
      [["oneSigma", "Level, derived: one sigma is 0.17 / 1.960 below and 0.19 / 1.960 above."]],
    ],
    [
      "equal widths at 90 %",
      { level: "percent90", plus: "0.17" },
      [["oneSigma", "Level, derived: one sigma is 0.17 / 1.645 on both sides."]],
    ],
    [
      "a limit's own sigma at 95 %",
      limit("upperLimit", { value: null, limitBase: "0.1", limitSigma: "0.2", level: "percent95" }),
      [["oneSigma", "Level, derived: one sigma of the limit is 0.2 / 1.960."]],
    ],
    ["a limit at 95 %", limit("upperLimit", { level: "percent95" }), []],
    ["a band at 95 %", band("0.2", "0.6", { level: "percent95" }), []],
    [
      "fractions of a duration",
      plain({
        quantity: "duration",
        species: "electron",
        helium: "included",
        fractionFrom: "0.25",
        fractionTo: "0.75",
      }),
      [
        ["heliumElectrons.fractions", HELIUM_TEXT],
        ["fractionsNeutral", "Fractions of the quantity, neutral from ionized: x_HI = 1 − x_HII."],
      ],
    ],
    [
      "a neutral fraction of a redshift",
      plain({ quantity: "redshiftAtFraction", fraction: "0.5" }),
      [],
    ],
    ["an optical depth", plain({ quantity: "opticalDepth", weighting: "mass" }), []],
  ])("%s", (_, changes, expected) => {
    expect(steps(changes)).toEqual(expected);
  });
});

describe("a curve", () => {
  /** x from 0.00 to 0.40 in 21 rows; the first `zeros` of them are zero. */
  const table = (zeros: number): string =>
    Array.from(
      { length: 21 },
      (_, i) => `${(i / 50).toFixed(2)},${i < zeros ? 0 : 1 + (i % 10)}`,
    ).join("\n");
  const curve = (changes: Changes): Changes =>
    plain({
      kind: "curve",
      value: null,
      plus: null,
      minus: null,
      curveTable: table(0),
      curveColumn: "density",
      ...changes,
    });
  const text = (changes: Changes) => steps(curve(changes)).find(([code]) => code === "curve")?.[1];

  it("is told with its column, its rows and what is left out", () => {
    expect(text({})).toBe(
      "Curve: the density, read as L, is used over its highest value, ln L linear between 21 rows; nothing is allowed beyond its ends.",
    );
    expect(text({ curveColumn: "lnLikelihood" })).toBe(
      "Curve: ln L is used over its highest value, ln L linear between 21 rows; nothing is allowed beyond its ends.",
    );
    expect(text({ curveTable: table(1) })).toMatch(
      /between 20 rows; nothing is allowed beyond its ends\. One row of zero at an end is left out\.$/,
    );
    expect(text({ curveTable: table(3) })).toMatch(/ 3 rows of zero at the ends are left out\.$/);
    const log = table(0)
      .split("\n")
      .map((line) => `-${line}`)
      .join("\n");
    expect(text({ scale: "log10", curveTable: log })).toContain(
      "between 21 rows in log10; nothing",
    );
    expect(text({ curveTable: null })).toBeUndefined();
  });

  it("has one-sigma equivalents of the interval quoted beside it only", () => {
    expect(used(curve({ level: "percent90" }))).toMatchObject({
      sigmaMinus: null,
      sigmaPlus: null,
    });
    expect(steps(curve({ level: "percent90" })).map(([code]) => code)).toEqual(["curve"]);
    expect(steps(curve({ level: "notStated" })).map(([code]) => code)).toEqual(["curve"]);
    const quoted = curve({ value: "0.2", plus: "0.1", minus: "0.05", level: "percent90" });
    expect(used(quoted).sigmaPlus).toBeCloseTo(0.1 / 1.6448536269514722, 12);
    expect(steps(quoted).map(([code]) => code)).toEqual(["curve", "oneSigma"]);
  });
});

describe("what is derived", () => {
  const flags = (changes: Changes): boolean[] => {
    const { derived, valueDerived, sigmaDerived } = used(changes);
    return [derived, valueDerived, sigmaDerived];
  };
  it.each<[string, Changes, boolean[]]>([
    ["nothing, as printed at one sigma", plain({}), [false, false, false]],
    ["nothing, flipped", plain({ species: "ionized" }), [false, false, false]],
    ["the sigmas, at another level", { level: "percent68" }, [true, false, true]],
    ["nothing, without a level", { level: "notStated" }, [false, false, false]],
    ["nothing, for a limit", limit("upperLimit", { level: "percent95" }), [false, false, false]],
    [
      "the numbers, with helium's electrons",
      plain({ species: "electron", helium: "included" }),
      [true, true, false],
    ],
    [
      "the numbers, out of a logarithm",
      limit("upperLimit", { scale: "log10", value: "-2" }),
      [true, true, false],
    ],
    ["nothing, in a logarithm", plain({ scale: "log10", value: "-2" }), [false, false, false]],
    [
      "the fraction a redshift is at",
      plain({
        quantity: "redshiftAtFraction",
        species: "electron",
        helium: "included",
        fraction: "0.5",
      }),
      [true, true, false],
    ],
    [
      "nothing, where hydrogen's electrons are counted alone",
      plain({
        quantity: "redshiftAtFraction",
        species: "electron",
        helium: "notIncluded",
        fraction: "0.5",
      }),
      [false, false, false],
    ],
  ])("is %s", (_, changes, expected) => {
    expect(flags(changes)).toEqual(expected);
  });
});

describe("numbers as used", () => {
  const numbers = (changes: Changes) => {
    const { kind, value, plus, minus, limitBase, limitSigma, low, high } = used(changes);
    return { kind, value, plus, minus, limitBase, limitSigma, low, high };
  };
  const none = {
    value: null,
    plus: null,
    minus: null,
    limitBase: null,
    limitSigma: null,
    low: null,
    high: null,
  };

  it("are those of the kind of statement, whatever else was typed", () => {
    const everything: Changes = {
      value: "0.42",
      plus: "0.19",
      minus: "0.17",
      bandLow: "0.2",
      bandHigh: "0.6",
      limitSigma: "0.1",
    };
    expect(numbers({ ...everything })).toEqual({
      ...none,
      kind: "twoSided",
      value: "0.42",
      plus: "0.19",
      minus: "0.17",
    });
    expect(numbers({ ...everything, kind: "upperLimit" })).toEqual({
      ...none,
      kind: "upperLimit",
      value: "0.42",
    });
    expect(numbers({ ...everything, kind: "lowerLimit", limitBase: "0.3" })).toEqual({
      ...none,
      kind: "lowerLimit",
      limitBase: "0.3",
      limitSigma: "0.1",
    });
    expect(numbers({ ...everything, kind: "band" })).toEqual({
      ...none,
      kind: "band",
      low: "0.2",
      high: "0.6",
    });
    expect(numbers({ ...everything, kind: "curve" })).toEqual({
      ...none,
      kind: "curve",
      value: "0.42",
      plus: "0.19",
      minus: "0.17",
    });
    // Half an interval is none.
    expect(numbers({ ...everything, plus: null, kind: "curve" })).toEqual({
      ...none,
      kind: "curve",
    });
    expect(numbers({ ...everything, kind: "qualitative" })).toEqual({
      ...none,
      kind: "qualitative",
    });
    expect(numbers({ ...everything, limitBase: "0.3" }).limitBase).toBeNull();
  });

  it("lose the sign a width is typed with, and keep its digits", () => {
    expect(numbers({ plus: "+0.190", minus: "\u22120.170" })).toMatchObject({
      plus: "0.190",
      minus: "0.170",
    });
    expect(widthText("-.50")).toBe("0.50");
    expect(widthText("a")).toBeNull();
    expect(widthText(null)).toBeNull();
  });

  it("are divided by 1 + f_He, each of them, before they are flipped", () => {
    const electron: Changes = { species: "electron", helium: "included" };
    const per = 1 + HELIUM_PER_HYDROGEN;
    const two = used(plain({ ...electron, value: "0.5", plus: "0.2", minus: "0.1" }));
    expect(Number(two.value)).toBeCloseTo(1 - 0.5 / per, 11);
    expect(Number(two.plus)).toBeCloseTo(0.1 / per, 11);
    expect(Number(two.minus)).toBeCloseTo(0.2 / per, 11);
    const own = used(
      limit("lowerLimit", { ...electron, value: null, limitBase: "0.9", limitSigma: "0.1" }),
    );
    expect(own.kind).toBe("upperLimit");
    expect(Number(own.limitBase)).toBeCloseTo(1 - 0.9 / per, 11);
    expect(Number(own.limitSigma)).toBeCloseTo(0.1 / per, 11);
    const ends = used(band("0.2", "0.6", electron));
    expect(Number(ends.low)).toBeCloseTo(1 - 0.6 / per, 11);
    expect(Number(ends.high)).toBeCloseTo(1 - 0.2 / per, 11);
  });

  it("come out of a logarithm end by end", () => {
    const log: Changes = { scale: "log10", species: "ionized" };
    // 10^−0.5, 10^−0.3 and 10^−0.6, then 1 − each.
    const two = used(plain({ ...log, value: "-0.5", plus: "0.2", minus: "0.1" }));
    expect(Number(two.value)).toBeCloseTo(1 - 10 ** -0.5, 11);
    expect(Number(two.minus)).toBeCloseTo(10 ** -0.3 - 10 ** -0.5, 11);
    expect(Number(two.plus)).toBeCloseTo(10 ** -0.5 - 10 ** -0.6, 11);
    const ends = used(band("-1", "-0.5", log));
    expect(Number(ends.low)).toBeCloseTo(1 - 10 ** -0.5, 11);
    expect(Number(ends.high)).toBeCloseTo(0.9, 11);
    // A limit's own sigma reaches from the base to the far side of it.
    const above = used(
      limit("upperLimit", { ...log, value: null, limitBase: "-1", limitSigma: "0.5" }),
    );
    expect(above.kind).toBe("lowerLimit");
    expect(Number(above.limitBase)).toBeCloseTo(0.9, 11);
    expect(Number(above.limitSigma)).toBeCloseTo(10 ** -0.5 - 0.1, 11);
    const below = used(
      limit("lowerLimit", { ...log, value: null, limitBase: "-1", limitSigma: "0.5" }),
    );
    expect(Number(below.limitSigma)).toBeCloseTo(0.1 - 10 ** -1.5, 11);
    expect(used(limit("lowerLimit", { scale: "log10", value: "-2" }))).toMatchObject({
      kind: "lowerLimit",
      value: "0.01",
      evaluatedIn: "linear",
    });
  });

  it("stay in a logarithm where the neutral fraction is printed so, but for a plain limit", () => {
    const log: Changes = { scale: "log10" };
    expect(used(plain({ ...log, value: "-2" })).evaluatedIn).toBe("log10");
    expect(used(band("-3", "-2", log)).evaluatedIn).toBe("log10");
    const own = { ...log, value: null, limitBase: "-2", limitSigma: "0.1" };
    expect(used(limit("upperLimit", own)).evaluatedIn).toBe("log10");
    expect(used(limit("upperLimit", { ...log, value: "-2" })).evaluatedIn).toBe("linear");
    expect(used(plain({ ...log, value: "-2", quantity: "opticalDepth" })).evaluatedIn).toBe(
      "linear",
    );
  });

  it("divide both widths by k of the level", () => {
    // Φ⁻¹(0.95) = 1.6448536269514722 at 90 % (scipy norm.ppf).
    const { k, level, sigmaMinus, sigmaPlus } = used({ level: "percent90" });
    expect([level, k]).toEqual([0.9, expect.closeTo(1.6448536269514722, 12)]);
    expect(sigmaMinus).toBeCloseTo(0.17 / 1.6448536269514722, 12);
    expect(sigmaPlus).toBeCloseTo(0.19 / 1.6448536269514722, 12);
    expect(used(limit("upperLimit", {}))).toMatchObject({ sigmaMinus: null, sigmaPlus: null });
  });
});

describe("what belongs to the quantity", () => {
  it("is taken as a number where it is one", () => {
    expect(
      used({ z: "7.120", zLow: "6.9", zHigh: "7.4", zRole: "binAverage", rangeLow: "x" }),
    ).toMatchObject({ z: 7.12, zLow: 6.9, zHigh: 7.4, zRole: "binAverage", rangeLow: null });
    expect(used({ quantity: "opticalDepthRange", rangeLow: "15", rangeHigh: "30" })).toMatchObject({
      rangeLow: 15,
      rangeHigh: 30,
      zRole: null,
      durationUnit: null,
    });
  });

  it("has what is open at its most careful", () => {
    expect(used({ weighting: null, estimator: null })).toMatchObject({
      weighting: "unknown",
      estimator: "notStated",
    });
    expect(used({ weighting: "mass", estimator: "mean" })).toMatchObject({
      weighting: "mass",
      estimator: "mean",
    });
  });

  it("runs from the higher neutral fraction to the lower, in its unit", () => {
    const duration = (more: Changes) =>
      used(plain({ quantity: "duration", fractionFrom: "0.2", fractionTo: "0.9", ...more }));
    expect(duration({})).toMatchObject({
      fractionFrom: 0.9,
      fractionTo: 0.2,
      durationUnit: "redshift",
      fraction: null,
    });
    expect(duration({ durationUnit: "myr" }).durationUnit).toBe("myr");
    expect(duration({ species: "ionized" })).toMatchObject({ fractionFrom: 0.8, fractionTo: 0.1 });
    // An open species is the registry's own.
    expect(duration({ species: null })).toMatchObject({ fractionFrom: 0.9, fractionTo: 0.2 });
    const per = 1 + HELIUM_PER_HYDROGEN;
    const electrons = duration({ species: "electron", helium: "included" });
    expect(electrons.fractionFrom).toBeCloseTo(1 - 0.2 / per, 12);
    expect(electrons.fractionTo).toBeCloseTo(1 - 0.9 / per, 12);
    expect(duration({ species: "electron", helium: "notIncluded" }).fractionFrom).toBe(0.8);
  });

  it("is a redshift's own fraction, neutral", () => {
    const at = (more: Changes) =>
      used(plain({ quantity: "redshiftAtFraction", fraction: "0.3", ...more })).fraction;
    expect(at({})).toBe(0.3);
    expect(at({ species: "ionized" })).toBe(0.7);
    expect(at({ species: "electron", helium: "included" })).toBeCloseTo(
      1 - 0.3 / (1 + HELIUM_PER_HYDROGEN),
      12,
    );
  });
});

describe("a record is not used", () => {
  it.each<[string, Changes]>([
    ["without a quantity", { quantity: null }],
    ["without a kind", { kind: null }],
    ["without a value", { value: null }],
    ["without a plus", { plus: "" }],
    ["without a minus", { minus: "about 0.1" }],
    ["as a limit without a number", limit("upperLimit", { value: null })],
    ["as a limit with a base alone", limit("lowerLimit", { value: null, limitBase: "0.1" })],
    ["as a band with one end", band("0.2", "")],
    ["as a band with the other end", band("", "0.6")],
    ["without a species", { species: null }],
    ["without a scale", { scale: null }],
    ["as electrons without a word on helium", { species: "electron", helium: null }],
    ["as electrons with helium unknown", { species: "electron", helium: "unknown" }],
    [
      "at a fraction of electrons with helium unknown",
      { quantity: "redshiftAtFraction", fraction: "0.5", species: "electron", helium: "unknown" },
    ],
    ["as a depth from nowhere", { quantity: "opticalDepthRange", rangeHigh: "30" }],
    ["as a depth to nowhere", { quantity: "opticalDepthRange", rangeLow: "15" }],
    ["as a redshift at no fraction", { quantity: "redshiftAtFraction" }],
    ["as a duration from nothing", { quantity: "duration", fractionTo: "0.25" }],
    ["as a duration to nothing", { quantity: "duration", fractionFrom: "0.75" }],
    [
      "with a logarithm that no fraction has",
      limit("upperLimit", { scale: "log10", value: "400" }),
    ],
    [
      "with an upper end that no fraction has",
      { scale: "log10", species: "ionized", value: "300", plus: "20", minus: "1" },
    ],
    [
      "with a base that no fraction has",
      limit("upperLimit", {
        scale: "log10",
        species: "ionized",
        value: null,
        limitBase: "400",
        limitSigma: "1",
      }),
    ],
    [
      "with a far side that no fraction has",
      limit("upperLimit", {
        scale: "log10",
        species: "ionized",
        value: null,
        limitBase: "300",
        limitSigma: "20",
      }),
    ],
    [
      "with a band's end that no fraction has",
      band("-1", "400", { scale: "log10", species: "ionized" }),
    ],
  ])("%s", (_, changes) => {
    expect(maybe(changes)).toBeNull();
  });

  it("but is without species or scale where the quantity has none", () => {
    expect(maybe({ quantity: "opticalDepth", species: null, scale: null })).not.toBeNull();
    expect(
      maybe({ quantity: "redshiftAtFraction", fraction: "0.5", species: null, scale: null }),
    ).not.toBeNull();
  });
});
