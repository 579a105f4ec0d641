import { emptyFields } from "~shared/statement/fields";
import type { ConstraintFields } from "~shared/statement/fields";
import { fieldFindings, notANumberMessage, type Finding } from "~shared/statement/rules";

import { buildFields } from "../buildFields";

/** What an editor reads: grade, code, the fields it is about and the whole sentence of every rule. */
type Changes = Partial<ConstraintFields>;

function of(changes: Changes, complete = true): Finding[] {
  return fieldFindings(buildFields(changes), { citation: true, complete });
}
function finding(changes: Changes, code: string): Finding {
  const all = of(changes);
  const found = all.find((one) => one.code === code);
  if (!found) throw new Error(`${code} is not among ${all.map((one) => one.code).join(", ")}`);
  return found;
}
const has = (changes: Changes, code: string): boolean =>
  of(changes).some((one) => one.code === code);

const limit = (changes: Changes): Changes => ({
  kind: "upperLimit",
  plus: null,
  minus: null,
  estimator: null,
  printedText: null,
  ...changes,
});
const band = (bandLow: string, bandHigh: string, more: Changes = {}): Changes => ({
  ...limit({}),
  kind: "band",
  value: null,
  bandLow,
  bandHigh,
  ...more,
});

describe("a missing answer is asked for in a sentence of its own:", () => {
  const MISSING: [Changes, string, string][] = [
    [{ quantity: null }, "quantity", "Say which quantity the paper states."],
    [
      { species: null },
      "species",
      "Say whether the paper prints the neutral, the ionized or the electron fraction.",
    ],
    [
      { species: "electron" },
      "helium",
      "Say whether the electron fraction counts the electrons of helium; unknown is an answer.",
    ],
    [{ scale: null }, "scale", "Say whether the paper prints the fraction itself or its log10."],
    [
      { zRole: null },
      "zRole",
      "Say what the redshift stands for: a point, a bin average, an uncertain redshift or the range of a sample.",
    ],
    [{ kind: null }, "kind", "Say what kind of statement the paper makes."],
    [{ value: null }, "value", "Give the value as printed."],
    [{ plus: null }, "plus", "Give the error above the value as printed."],
    [{ minus: null }, "minus", "Give the error below the value as printed."],
    [
      limit({ value: null, limitSigma: "0.1" }),
      "limitBase",
      "Give the base of the limit: the number before its own sigma.",
    ],
    [
      limit({ value: null, limitBase: "0.1" }),
      "limitSigma",
      "Give the sigma that the paper adds to the base of the limit.",
    ],
    [
      { level: null },
      "level",
      "Give the credible level, or choose not stated if the paper gives none.",
    ],
    [{ level: "other" }, "levelPercent", "Give the level in percent."],
    [
      { estimator: null },
      "estimator",
      "Say what the value is: median, mean, mode, best fit, or not stated.",
    ],
    [{ printedText: null }, "printedText", "Copy the exact text the paper prints."],
    [{ methodTags: [] }, "methodTags", "Choose at least one method."],
    [{ dataKnown: null }, "dataKnown", "Name the data used, or say that they are unknown."],
    [
      { dataUsed: [] },
      "dataUsed",
      "Name at least one sightline, field or sample, or say that the data are unknown.",
    ],
    [
      { versionRead: null },
      "versionRead",
      "Say which version you read: published, preprint or erratum.",
    ],
    [{ place: null }, "place", "Say where in the paper it stands: table and row, figure, section."],
    [
      { readOffFigure: true, digitizingError: null },
      "digitizingError",
      "Read off a figure: give the digitizing error, how far off the number can be for having been read.",
    ],
  ];
  it.each(MISSING)("%j: %s", (changes, name, message) => {
    expect(finding(changes, `missing.${name}`)).toEqual({
      grade: "error",
      code: `missing.${name}`,
      fields: [name],
      message,
    });
    expect(of(changes, false).some(({ code }) => code === `missing.${name}`)).toBe(false);
  });

  it("a digitizing error that says no size is none", () => {
    for (const digitizingError of ["none", "0", "small", "0.00 dex"]) {
      expect(
        finding({ readOffFigure: true, digitizingError }, "digitizingErrorWithoutNumber"),
      ).toEqual({
        grade: "error",
        code: "digitizingErrorWithoutNumber",
        fields: ["digitizingError"],
        message: "Give the digitizing error as a number above zero, with its unit if it has one.",
      });
    }
    for (const changes of [
      { readOffFigure: true, digitizingError: "0.1 dex" },
      { readOffFigure: false, digitizingError: "none" },
      { readOffFigure: true, digitizingError: null },
    ]) {
      expect(has(changes, "digitizingErrorWithoutNumber")).toBe(false);
    }
  });

  it("by the field's name where there is none", () => {
    expect(finding({ z: null }, "missing.z").message).toBe("Give: redshift.");
    expect(finding({ quantity: "duration" }, "missing.durationUnit").message).toMatch(
      /^Give: [a-z].*\.$/,
    );
  });

  it("and the citation first", () => {
    expect(fieldFindings(buildFields(), { citation: false })).toEqual([
      {
        grade: "error",
        code: "missing.citation",
        fields: [],
        message: "Choose the citation: a record needs a paper.",
      },
    ]);
    expect(fieldFindings(buildFields(), { citation: false, complete: false })).toEqual([]);
  });
});

describe("what is no number is told what to look at:", () => {
  it.each([
    ["O.25", ". It looks like a letter O in place of a zero."],
    ["-o.25", ". It looks like a letter O in place of a zero."],
    ["0.I5", ". It looks like a letter in place of a one."],
    ["\u22120.l", ". It looks like a letter in place of a one."],
    ["0,25", ". Write a decimal point, not a comma."],
    ["+12,5", ". Write a decimal point, not a comma."],
    ["25 %", ". Write the number the paper prints, without the percent sign."],
    ["<0.3", ". Leave the sign out: the kind of statement says that it is a limit."],
    ["\u2264 0.3", ". Leave the sign out: the kind of statement says that it is a limit."],
    ["> 0.3", ". Leave the sign out: the kind of statement says that it is a limit."],
    ["0.3±0.1", ". It holds several numbers; plus and minus have their own fields."],
    ["0.3 + 0.1", ". It holds several numbers; plus and minus have their own fields."],
    ["0.3\u2212.1", ". It holds several numbers; plus and minus have their own fields."],
    ["a third", ". Write it as printed, such as 0.30."],
    ["1,000,000", ". Write it as printed, such as 0.30."],
    ["0.3 < x", ". Write it as printed, such as 0.30."],
    ["Oslo", ". Write it as printed, such as 0.30."],
  ])("%s%s", (text, hint) => {
    expect(notANumberMessage("Value", text)).toBe(
      `Value: "${text.replace("-", "\u2212")}" is not a number${hint}`,
    );
  });

  it("and long texts are cut, a minus is a true one, spaces around are left out", () => {
    expect(notANumberMessage("Plus", `  ${"x".repeat(24)} `)).toContain(`"${"x".repeat(24)}"`);
    expect(notANumberMessage("Plus", "x".repeat(25))).toContain(`"${"x".repeat(24)}…"`);
    expect(finding({ value: " -O.2 " }, "notANumber.value")).toEqual({
      grade: "error",
      code: "notANumber.value",
      fields: ["value"],
      message: 'Value: "\u2212O.2" is not a number. It looks like a letter O in place of a zero.',
    });
  });
});

describe("ends and widths", () => {
  const bin = (zLow: string, zHigh: string, more: Changes = {}): Changes => ({
    z: null,
    zLow,
    zHigh,
    zRole: "binAverage",
    ...more,
  });
  it("out of order are named with both numbers", () => {
    expect(of(bin("7.4", "6.9"))).toEqual([
      {
        grade: "error",
        code: "lowAboveHigh.redshift",
        fields: ["zLow", "zHigh"],
        message:
          "Low end of the redshift 7.4 is above the high end 6.9. Look whether the two are swapped.",
      },
    ]);
    expect(finding(band("0.7", "0.3"), "lowAboveHigh.band").fields).toEqual([
      "bandLow",
      "bandHigh",
    ]);
    const range = { quantity: "opticalDepthRange", rangeLow: "30", rangeHigh: "15" } as const;
    expect(finding(range, "lowAboveHigh.range").fields).toEqual(["rangeLow", "rangeHigh"]);
  });

  it("of no width are asked for one, but not a sample's or a point's redshift", () => {
    expect(of(bin("7.0", "7.00"))).toEqual([
      {
        grade: "error",
        code: "noWidth.redshift",
        fields: ["zLow", "zHigh"],
        message: "Both ends are 7.0: a bin needs a width.",
      },
    ]);
    expect(has(bin("7", "7", { zRole: "uncertain" }), "noWidth.redshift")).toBe(true);
    expect(has(bin("7", "7", { z: "7", zRole: "sampleRange" }), "noWidth.redshift")).toBe(false);
    expect(has(bin("7", "7.1"), "noWidth.redshift")).toBe(false);
    expect(finding(band("0.3", "0.3"), "noWidth.band").message).toBe(
      "Both ends are 0.3: a band needs a width.",
    );
    const range = { quantity: "opticalDepthRange", rangeLow: "15", rangeHigh: "15" } as const;
    expect(finding(range, "noWidth.range").message).toBe(
      "Both ends are 15: a range needs a width.",
    );
  });

  it("that leave the redshift outside are named, open ones as open", () => {
    expect(of({ z: "7.2", zLow: "6.5", zHigh: "7.0", zRole: "sampleRange" })).toEqual([
      {
        grade: "error",
        code: "outsideEnds.z",
        fields: ["z", "zLow", "zHigh"],
        message: "The redshift 7.2 lies outside its ends, 6.5 to 7.0.",
      },
    ]);
    const outside = (changes: Changes): string =>
      finding({ zRole: "sampleRange", ...changes }, "outsideEnds.z").message;
    expect(outside({ z: "6.4", zLow: "6.5", zHigh: null })).toBe(
      "The redshift 6.4 lies outside its ends, 6.5 to open.",
    );
    expect(outside({ z: "7.4", zLow: null, zHigh: "7.0" })).toBe(
      "The redshift 7.4 lies outside its ends, open to 7.0.",
    );
    for (const z of ["6.5", "6.8", "7.0"]) {
      expect(has({ z, zLow: "6.5", zHigh: "7.0", zRole: "sampleRange" }, "outsideEnds.z")).toBe(
        false,
      );
    }
    // Swapped ends are one mistake, not two.
    expect(
      has({ z: "6.8", zLow: "7.0", zHigh: "6.5", zRole: "sampleRange" }, "outsideEnds.z"),
    ).toBe(false);
  });

  it("of a duration are two fractions", () => {
    const duration = (fractionTo: string): Changes => ({
      quantity: "duration",
      fractionFrom: "0.75",
      fractionTo,
      durationUnit: "redshift",
    });
    expect(finding(duration("0.750"), "noWidth.fractions")).toEqual({
      grade: "error",
      code: "noWidth.fractions",
      fields: ["fractionFrom", "fractionTo"],
      message: "Both fractions are 0.75: a duration runs between two different ones.",
    });
    expect(has(duration("0.25"), "noWidth.fractions")).toBe(false);
  });
});

describe("a number outside its quantity's range is refused with the reason:", () => {
  const look = "Look at the number, and at the quantity and scale chosen.";
  it.each<[Changes, string, string]>([
    [{ value: "1.2" }, "value", "Value 1.2 can't be: a fraction lies between 0 and 1."],
    [{ value: "-0.2" }, "value", "Value −0.2 can't be: a fraction lies between 0 and 1."],
    [
      { value: "1.2", species: "electron", helium: "included" },
      "value",
      // 1 + 2 f_He with f_He = 0.2454/(3.9715 × 0.7546).
      "Value 1.2 can't be: the number of electrons per hydrogen lies between 0 and 1.1638.",
    ],
    [
      { value: "1.2", species: "electron", helium: "unknown" },
      "value",
      "Value 1.2 can't be: the number of electrons per hydrogen lies between 0 and 1.1638.",
    ],
    [
      { value: "1.2", species: "electron", helium: "notIncluded" },
      "value",
      "Value 1.2 can't be: a fraction lies between 0 and 1.",
    ],
    [
      { value: "0.1", scale: "log10" },
      "value",
      "Value 0.1 can't be: log10 of a fraction is at most 0.",
    ],
    [
      { value: "0.1", scale: "log10", species: "electron", helium: "included" },
      "value",
      "Value 0.1 can't be: log10 of the number of electrons per hydrogen is at most 0.0659.",
    ],
    [
      { value: "-0.05", quantity: "opticalDepth" },
      "value",
      "Value −0.05 can't be: an optical depth is not negative.",
    ],
    [
      { value: "-0.05", quantity: "opticalDepthRange", rangeLow: "15", rangeHigh: "30" },
      "value",
      "Value −0.05 can't be: an optical depth is not negative.",
    ],
    [
      { value: "-7", quantity: "redshiftAtFraction", fraction: "0.5" },
      "value",
      "Value −7 can't be: a redshift is not negative.",
    ],
    [
      { value: "-1", quantity: "duration" },
      "value",
      "Value −1 can't be: a duration is not negative.",
    ],
    [{ z: "-1" }, "z", "Redshift −1 can't be: a redshift is not negative."],
    [
      { quantity: "redshiftAtFraction", fraction: "1.5", value: "7" },
      "fraction",
      "At fraction 1.5 can't be: a fraction lies between 0 and 1.",
    ],
    [
      band("1.2", "1.4"),
      "bandLow",
      "Low end of the band 1.2 can't be: a fraction lies between 0 and 1.",
    ],
    [
      band("-0.4", "-0.2"),
      "bandHigh",
      "High end of the band −0.2 can't be: a fraction lies between 0 and 1.",
    ],
  ])("%j in %s", (changes, name, message) => {
    expect(finding(changes, `outsideRange.${name}`)).toEqual({
      grade: "error",
      code: `outsideRange.${name}`,
      fields: [name],
      message: `${message} ${look}`,
    });
  });

  it("and its ends, the fractions' and the limit's base too", () => {
    const codes = (changes: Changes): string[] =>
      of(changes)
        .map(({ code }) => code)
        .filter((code) => code.startsWith("outsideRange."));
    expect(codes({ z: "7", zLow: "-1", zHigh: "8", zRole: "sampleRange" })).toEqual([
      "outsideRange.zLow",
    ]);
    expect(
      codes({ quantity: "opticalDepthRange", rangeLow: "-2", rangeHigh: "-1", value: "0.01" }),
    ).toEqual(["outsideRange.rangeLow", "outsideRange.rangeHigh"]);
    expect(
      codes({ quantity: "duration", fractionFrom: "1.75", fractionTo: "-0.25", value: "1" }),
    ).toEqual(["outsideRange.fractionFrom", "outsideRange.fractionTo"]);
    expect(codes(limit({ value: null, limitBase: "1.1", limitSigma: "0.1" }))).toEqual([
      "outsideRange.limitBase",
    ]);
    // At the ends of the range nothing is wrong.
    for (const value of ["0", "1"]) expect(codes({ value })).toEqual([]);
    expect(codes({ z: "0" })).toEqual([]);
    expect(codes(band("0", "1"))).toEqual([]);
    // A band in the wrong order is that mistake and no other.
    expect(codes(band("1.4", "1.2"))).toEqual([]);
  });
});

describe("an interval that ends beyond the range must be answered:", () => {
  const ask = (side: string, fields: string[], numbers: string, words: string): Finding => ({
    grade: "mustAnswer",
    code: `endBeyondRange.${side}`,
    fields: fields as Finding["fields"],
    message: `The interval ends at ${numbers}, but ${words}. Does the paper print it so? Say how it is meant.`,
  });
  const fraction = "a fraction lies between 0 and 1";
  it.each<[Changes, Finding]>([
    [
      { value: "0.9", printedText: "0.9 +0.19 -0.17 68%" },
      ask("plus", ["value", "plus"], "0.9 + 0.19", fraction),
    ],
    [
      { value: "0.1", printedText: "0.1 +0.19 -0.17 68%" },
      ask("minus", ["value", "minus"], "0.1 \u2212 0.17", fraction),
    ],
    [
      { value: "0.1", minus: "-0.17", printedText: "0.1 +0.19 -0.17 68%" },
      ask("minus", ["value", "minus"], "0.1 \u2212 0.17", fraction),
    ],
    [
      band("-0.1", "0.4", { printedText: "-0.1 to 0.4" }),
      ask("bandLow", ["bandLow"], "\u22120.1", fraction),
    ],
    [
      band("0.6", "1.2", { printedText: "0.6 to 1.2" }),
      ask("bandHigh", ["bandHigh"], "1.2", fraction),
    ],
  ])("%j", (changes, expected) => {
    expect(of(changes)).toEqual([expected]);
  });

  it("unless the value itself is already refused", () => {
    expect(has({ value: "1.2" }, "endBeyondRange.plus")).toBe(false);
    // In log10 there is no lowest number.
    expect(has({ value: "-2", scale: "log10", minus: "3" }, "endBeyondRange.minus")).toBe(false);
  });
});

describe("signs and sizes of widths", () => {
  it.each<[Changes, string, string, string[]]>([
    [
      { plus: "-0.19" },
      "wrongSign.plus",
      "Plus is −0.19: the upper error can't be negative. Look whether plus and minus are swapped.",
      ["plus"],
    ],
    [
      { minus: "+0.17" },
      "wrongSign.minus",
      "Minus is +0.17: the lower error can't carry a plus. Look whether plus and minus are swapped.",
      ["minus"],
    ],
    [
      limit({ value: null, limitBase: "0.1", limitSigma: "0" }),
      "wrongSign.limitSigma",
      "The sigma of the limit is 0; it must be above zero.",
      ["limitSigma"],
    ],
    [
      limit({ value: null, limitBase: "0.1", limitSigma: "-0.1" }),
      "wrongSign.limitSigma",
      "The sigma of the limit is −0.1; it must be above zero.",
      ["limitSigma"],
    ],
  ])("%j: %s", (changes, code, message, fields) => {
    expect(finding(changes, code)).toEqual({ grade: "error", code, fields, message });
  });

  it("of zero or far apart must be answered, with the factor", () => {
    const both = ["plus", "minus"];
    expect(finding({ plus: "0", minus: "0.17" }, "zeroWidth")).toEqual({
      grade: "mustAnswer",
      code: "zeroWidth",
      fields: both,
      message:
        "One side has no width (plus 0, minus 0.17). Does the paper state a limit, or are digits missing?",
    });
    expect(has({ plus: "0.1", minus: "0" }, "zeroWidth")).toBe(true);
    expect(finding({ plus: "0.10", minus: "0.333" }, "widthRatio")).toEqual({
      grade: "mustAnswer",
      code: "widthRatio",
      fields: both,
      message:
        "Plus 0.10 and minus 0.333 differ by a factor of 3.3. Look at both in the paper: a digit may be missing, or a bound may have been typed in place of a width.",
    });
    expect(finding({ plus: "0.25", minus: "-0.10" }, "secondPeak")).toEqual({
      grade: "note",
      code: "secondPeak",
      fields: both,
      message:
        "Plus and minus differ by a factor of 2.5: the likelihood through the quantiles has a second peak. A fitting table proposes the two-piece form instead.",
    });
    expect(has({ plus: "0.24", minus: "0.10" }, "secondPeak")).toBe(false);
    expect(has({ plus: "0.25", minus: "0.10", estimator: "mode" }, "secondPeak")).toBe(false);
    expect(has({ plus: "0.30", minus: "0.10" }, "widthRatio")).toBe(false);
    expect(has({ plus: "0.31", minus: "0.10" }, "widthRatio")).toBe(true);
  });
});

describe("limits, bands and levels", () => {
  it("given in two forms are refused", () => {
    expect(
      finding(limit({ value: "0.3", limitBase: "0.1", limitSigma: "0.05" }), "twoLimits"),
    ).toEqual({
      grade: "error",
      code: "twoLimits",
      fields: ["value", "limitBase"],
      message:
        "The limit has a value (0.3) and a base with its own sigma (0.1). Keep the form the paper prints and clear the other.",
    });
  });

  it("that say no more than a flat prior must be answered", () => {
    const look = "Look at the number and the level again, or say why the record is worth keeping.";
    expect(finding(limit({ value: "0.96", level: "percent95" }), "flatLimit")).toEqual({
      grade: "mustAnswer",
      code: "flatLimit",
      fields: ["value", "level"],
      message: `As a neutral fraction the limit is below 0.96 at 95 %; a flat prior alone says as much, so it carries nothing. ${look}`,
    });
    const ionized = { kind: "lowerLimit", value: "0.05", species: "ionized" } as const;
    expect(finding(limit({ ...ionized, level: "percent95" }), "flatLimit").message).toBe(
      `As a neutral fraction the limit is below 0.95 at 95 %; a flat prior alone says as much, so it carries nothing. ${look}`,
    );
    const above = limit({
      kind: "lowerLimit",
      value: "0.04",
      level: "other",
      levelPercent: "95.45",
    });
    expect(finding(above, "flatLimit").message).toBe(
      `As a neutral fraction the limit is above 0.04 at 95.45 %; a flat prior alone says as much, so it carries nothing. ${look}`,
    );
    const base = (kind: "upperLimit" | "lowerLimit", limitBase: string): Changes =>
      limit({ kind, value: null, limitBase, limitSigma: "0.1", level: "oneSigma" });
    expect(finding(base("upperLimit", "1"), "flatLimit")).toMatchObject({
      fields: ["limitBase", "level"],
      message: `The base allows every neutral fraction: the limit says nothing. ${look}`,
    });
    expect(has(base("lowerLimit", "0"), "flatLimit")).toBe(true);
    expect(has(base("upperLimit", "0.99"), "flatLimit")).toBe(false);
    expect(has(base("lowerLimit", "0.01"), "flatLimit")).toBe(false);
    expect(has(limit({ quantity: "opticalDepth", value: "0.99" }), "flatLimit")).toBe(false);
    // A log10 limit becomes one in x, 10^−0.01 = 0.977; with a sigma of its own it stays in log10.
    expect(has(limit({ scale: "log10", value: "-0.01" }), "flatLimit")).toBe(true);
    const log = { scale: "log10", value: null, limitBase: "0", limitSigma: "0.1" } as const;
    expect(has(limit({ ...log, level: "oneSigma" }), "flatLimit")).toBe(false);
  });

  it("of a band at an end of the range are noted", () => {
    const touch = (end: string): Finding => ({
      grade: "note",
      code: "bandTouchesEdge",
      fields: ["bandLow", "bandHigh"],
      message: `The band touches ${end}. If the paper means a bound on one side only, enter a limit.`,
    });
    expect(finding(band("0", "0.4"), "bandTouchesEdge")).toEqual(touch("0"));
    expect(finding(band("0.6", "1.0"), "bandTouchesEdge")).toEqual(touch("1"));
    expect(has(band("0.1", "0.9"), "bandTouchesEdge")).toBe(false);
    expect(has(band("-2", "0", { scale: "log10" }), "bandTouchesEdge")).toBe(false);
    expect(has(band("0", "0.06", { quantity: "opticalDepth" }), "bandTouchesEdge")).toBe(false);
  });

  it("are percentages, and asked about below one", () => {
    const other = (levelPercent: string): Changes => ({ level: "other", levelPercent });
    for (const text of ["0", "100", "-5", "250"]) {
      expect(finding(other(text), "outsideRange.levelPercent")).toEqual({
        grade: "error",
        code: "outsideRange.levelPercent",
        fields: ["levelPercent"],
        message: `A level of ${text.replace("-", "\u2212")} % can't be: it lies between 0 and 100.`,
      });
    }
    expect(finding(other("0.95"), "smallLevel")).toEqual({
      grade: "mustAnswer",
      code: "smallLevel",
      fields: ["levelPercent"],
      message: "The level reads 0.95 %. Was 95 % meant?",
    });
    expect(has(other("1"), "smallLevel")).toBe(true);
    expect(has(other("1.1"), "smallLevel")).toBe(false);
    expect(has(other("99.9"), "outsideRange.levelPercent")).toBe(false);
    // Without a level of its own a percentage left over is not looked at.
    expect(has({ level: "percent95", levelPercent: "0.95" }, "smallLevel")).toBe(false);
  });

  it("unlike the printed ones must be answered, with both in words", () => {
    const unlike = (changes: Changes): string => finding(changes, "levelUnlikePrinted").message;
    const text = "0.42 +0.19 -0.17 (95%)";
    expect(finding({ printedText: text }, "levelUnlikePrinted")).toEqual({
      grade: "mustAnswer",
      code: "levelUnlikePrinted",
      fields: ["level", "printedText"],
      message:
        "The printed text says 95%; the level entered is 68 %. Choose the level as printed, or say why it differs.",
    });
    expect(unlike({ printedText: text, level: "other", levelPercent: "90.5" })).toContain(
      "the level entered is 90.5 %.",
    );
    expect(unlike({ printedText: text, level: "notStated" })).toContain(
      "the level entered is not stated.",
    );
    expect(unlike({ printedText: "0.42 +0.19 -0.17 (95% and 95%, 2 sigma)" })).toContain(
      "The printed text says 95%, 2 sigma;",
    );
    // 68.3 and 68.27 % are one level; 0.06 % apart they are two.
    const near = (levelPercent: string): boolean =>
      has(
        { printedText: "0.42 +0.19 -0.17 (68.3%)", level: "other", levelPercent },
        "levelUnlikePrinted",
      );
    expect([near("68.25"), near("68.23"), near("68.35")]).toEqual([false, true, false]);
    // A level that is not readable yet is asked for elsewhere.
    expect(has({ printedText: text, level: "other" }, "levelUnlikePrinted")).toBe(false);
    expect(has({ printedText: text, level: null }, "levelUnlikePrinted")).toBe(false);
  });
});

describe("texts, data and method", () => {
  it("too long are refused with their length", () => {
    const printedText = `0.42 0.19 0.17 ${"x".repeat(286)}`;
    expect(finding({ printedText }, "tooLong.printedText")).toEqual({
      grade: "error",
      code: "tooLong.printedText",
      fields: ["printedText"],
      message:
        "The printed text has 301 characters; keep the sentence with the numbers, 300 at most.",
    });
    expect(has({ printedText: printedText.slice(1) }, "tooLong.printedText")).toBe(false);
    expect(finding({ remark: "x".repeat(2001) }, "tooLong.remark")).toEqual({
      grade: "error",
      code: "tooLong.remark",
      fields: ["remark"],
      message: "Remark has 2001 characters; 2000 at most.",
    });
    expect(has({ remark: "x".repeat(2000) }, "tooLong.remark")).toBe(false);
    expect(finding({ dataUsed: ["a", "x".repeat(2001)] }, "tooLong.dataUsed").fields).toEqual([
      "dataUsed",
    ]);
    expect(has({ dataUsed: ["x".repeat(1500), "y".repeat(1500)] }, "tooLong.dataUsed")).toBe(false);
  });

  it("without the numbers must be answered, naming each", () => {
    expect(of({ plus: "0.20", minus: "0.11" })).toEqual([
      {
        grade: "mustAnswer",
        code: "printedWithoutNumbers",
        fields: ["plus", "minus", "printedText"],
        message:
          "The printed text doesn't contain plus 0.20, minus 0.11. Compare both with the paper.",
      },
    ]);
    expect(
      finding(band("0.3", "0.7", { printedText: "between 0.3 and 0.8" }), "printedWithoutNumbers")
        .fields,
    ).toEqual(["bandHigh", "printedText"]);
    expect(
      finding(
        limit({ value: null, limitBase: "0.03", limitSigma: "0.06", printedText: "< 0.04 + 0.05" }),
        "printedWithoutNumbers",
      ).fields,
    ).toEqual(["limitBase", "limitSigma", "printedText"]);
    expect(has({ minus: "0.11", printedText: "  " }, "printedWithoutNumbers")).toBe(false);
  });

  it("outside the vocabulary are refused, with the nearest method where there is one", () => {
    expect(finding({ methodTags: ["tea leaves"] }, "unknownMethod.tea leaves")).toEqual({
      grade: "error",
      code: "unknownMethod.tea leaves",
      fields: ["methodTags"],
      message: '"tea leaves" is not in the method vocabulary.',
    });
    const near = of({ methodTags: ["dark pixels"] }).find(({ code }) =>
      code.startsWith("unknownMethod."),
    );
    expect(near?.message).toMatch(
      /^"dark pixels" is not in the method vocabulary\. Did you mean .+\?$/,
    );
  });

  it("of one sightline must be answered, unless its scatter is included", () => {
    const one: Changes = { methodTags: ["quasarDampingWing"], dataUsed: ["QSO-H 0712+05"] };
    expect(of(one)).toEqual([
      {
        grade: "mustAnswer",
        code: "oneSightline",
        fields: ["dataUsed", "cosmicVariance"],
        message:
          "One sightline (QSO-H 0712+05) stands for the cosmic mean. Look whether the quoted error contains the scatter between sightlines, and set cosmic variance or say what the paper means.",
      },
    ]);
    const asks = (changes: Changes): boolean => has({ ...one, ...changes }, "oneSightline");
    for (const tag of ["burstDampingWing", "nearZones", "twentyOneCmForest"]) {
      expect(asks({ methodTags: [tag] })).toBe(true);
      expect(asks({ methodTags: [tag, "quasarDampingWing"] })).toBe(true);
    }
    expect(asks({ methodTags: ["quasarDampingWing", "darkPixels"] })).toBe(false);
    expect(asks({ methodTags: [] })).toBe(false);
    expect(asks({ quantity: "redshiftAtFraction" })).toBe(false);
    expect(asks({ kind: "qualitative" })).toBe(false);
    expect(asks({ cosmicVariance: "excluded" })).toBe(true);
    for (const name of ["Kestrel survey", "stacked spectra", "Four Quasars", "12 sightlines"]) {
      expect(asks({ dataUsed: [name] })).toBe(false);
    }
    expect(asks({ dataUsed: ["Fieldfare 12"] })).toBe(true);
  });

  it("both named and unknown are refused", () => {
    expect(of({ dataKnown: false })).toEqual([
      {
        grade: "error",
        code: "dataUnknownAndNamed",
        fields: ["dataKnown", "dataUsed"],
        message: "The data are said to be unknown, yet some are named. Keep one of the two.",
      },
    ]);
  });

  it("over a wide bin without a role must be answered", () => {
    const wide = (zHigh: string, more: Changes = {}): Changes => ({
      z: null,
      zLow: "6.5",
      zHigh,
      zRole: null,
      ...more,
    });
    expect(finding(wide("7.0"), "wideBinNoRole")).toEqual({
      grade: "mustAnswer",
      code: "wideBinNoRole",
      fields: ["zRole", "zLow", "zHigh"],
      message:
        "The redshift runs over 0.5, more than 0.4, and its role is open. Look whether the paper averages over the bin, or whether it is an uncertainty or the range of a sample.",
    });
    expect(has(wide("6.9"), "wideBinNoRole")).toBe(false);
    expect(has(wide("7.0", { zRole: "sampleRange" }), "wideBinNoRole")).toBe(false);
    expect(has(wide("7.0", { quantity: "opticalDepth" }), "wideBinNoRole")).toBe(false);
  });
});

describe("notes", () => {
  it.each<[Changes, string, string[], string]>([
    [
      { kind: "qualitative", value: null, plus: null, minus: null },
      "qualitative",
      ["kind"],
      "A qualitative statement is shown and never fitted.",
    ],
    [
      { level: "notStated", printedText: "0.42 +0.19 -0.17" },
      "levelNotStated",
      ["level"],
      "Without a level the widths can't be turned into sigma: each fitting table has to decide.",
    ],
    [
      { weighting: "mass" },
      "massWeighted",
      ["weighting"],
      "Mass-weighted: shown as such and never converted to a volume average.",
    ],
    [
      { weighting: null },
      "weightingOpen",
      ["weighting"],
      "The weighting is open and counts as unknown.",
    ],
    [{ z: "30.5" }, "highRedshift", ["z"], "The redshift is 30.5, above 30. Look at it again."],
    [
      { species: "electron", helium: "unknown" },
      "heliumUnknown",
      ["helium"],
      "While it is unknown whether helium electrons are counted, the record is shown and not used.",
    ],
    [
      { versionRead: "preprint" },
      "preprintOnly",
      ["versionRead"],
      "Read in a preprint: say which version. Each fitting table decides whether it takes preprints.",
    ],
    [
      { versionRead: "preprint", preprintVersion: "2" },
      "preprintOnly",
      ["versionRead"],
      "Read in a preprint: each fitting table decides whether it takes preprints.",
    ],
    [
      { conditionedOn: ["cmb", "FL-0012", "the moon"] },
      "unknownCondition.the moon",
      ["conditionedOn"],
      "\"the moon\" is neither a record's number nor a kind of data; a table can't follow it.",
    ],
    [
      { bandLow: "0.25", limitSigma: "0.1" },
      "notUsed",
      ["limitSigma", "bandLow"],
      "Not used for this quantity and kind of statement: sigma of the limit base, low end of the band.",
    ],
  ])("on %j: %s", (changes, code, fields, message) => {
    expect(finding(changes, code)).toEqual({ grade: "note", code, fields, message });
  });

  it("are silent where there is nothing to note", () => {
    expect(has({ z: "30" }, "highRedshift")).toBe(false);
    expect(has({ z: "31", quantity: "opticalDepth" }, "highRedshift")).toBe(false);
    expect(has({ weighting: "unknown" }, "weightingOpen")).toBe(false);
    expect(has({ weighting: "mass", quantity: "opticalDepth" }, "massWeighted")).toBe(false);
    expect(has({ species: "electron", helium: "included" }, "heliumUnknown")).toBe(false);
    expect(
      has({ species: "electron", helium: "unknown", quantity: "opticalDepth" }, "heliumUnknown"),
    ).toBe(false);
    expect(has({ kind: "qualitative", level: "notStated", value: null }, "levelNotStated")).toBe(
      false,
    );
    for (const condition of ["lymanAlpha", "luminosityFunction", "twentyOneCm", "FL-12345"]) {
      expect(has({ conditionedOn: [condition] }, `unknownCondition.${condition}`)).toBe(false);
    }
    for (const condition of ["FL-012", "XFL-0012", "FL-0012a"]) {
      expect(has({ conditionedOn: [condition] }, `unknownCondition.${condition}`)).toBe(true);
    }
    expect(has({ bandLow: "0.25", kind: null }, "notUsed")).toBe(false);
    expect(fieldFindings(emptyFields(), { citation: true, complete: false })).toEqual([]);
  });
});
