import { computedText, decimalPlaces, decimalText, parseDecimal } from "~shared/statement/decimal";
import { emptyFields, type ConstraintFields, type FieldName } from "~shared/statement/fields";
import { error, hasErrors, mustAnswer, note, sortFindings } from "~shared/statement/finding";
import { levelProbability } from "~shared/statement/level";
import { printedLevels, printedNumbers, printsNumber } from "~shared/statement/printedText";
import {
  isFractionBearing,
  isLimit,
  isNumberField,
  isOpen,
  quantityFields,
  relevantFields,
  statementFields,
} from "~shared/statement/relevant";
import { openFields, openStatementFields } from "~shared/statement/required";

const draft = (changes: Partial<ConstraintFields> = {}): ConstraintFields => ({
  ...emptyFields(),
  ...changes,
});

describe("fields that count", () => {
  it.each<[Partial<ConstraintFields>, FieldName[]]>([
    [{}, ["quantity"]],
    [
      { quantity: "neutralFraction" },
      ["quantity", "species", "scale", "weighting", "zRole", "z", "zLow", "zHigh"],
    ],
    [
      { quantity: "neutralFraction", species: "electron" },
      ["quantity", "species", "helium", "scale", "weighting", "zRole", "z", "zLow", "zHigh"],
    ],
    [{ quantity: "opticalDepth", species: "electron" }, ["quantity"]],
    [{ quantity: "opticalDepthRange" }, ["quantity", "rangeLow", "rangeHigh"]],
    [{ quantity: "redshiftAtFraction" }, ["quantity", "species", "fraction"]],
    [
      { quantity: "duration" },
      ["quantity", "species", "fractionFrom", "fractionTo", "durationUnit"],
    ],
  ])("for the quantity of %j", (changes, names) => {
    expect(quantityFields(draft(changes))).toEqual(names);
  });

  it.each<[Partial<ConstraintFields>, FieldName[]]>([
    [{}, ["kind"]],
    [{ kind: "twoSided" }, ["kind", "value", "plus", "minus", "estimator", "level"]],
    [{ kind: "upperLimit" }, ["kind", "value", "limitBase", "limitSigma", "level"]],
    [
      { kind: "lowerLimit", level: "other" },
      ["kind", "value", "limitBase", "limitSigma", "level", "levelPercent"],
    ],
    [{ kind: "band" }, ["kind", "bandLow", "bandHigh", "level"]],
    [{ kind: "qualitative", level: "other" }, ["kind"]],
  ])("for the statement of %j", (changes, names) => {
    expect(statementFields(draft(changes))).toEqual(names);
    expect(relevantFields(draft(changes))).toEqual(["quantity", ...names]);
  });

  it("say what they are", () => {
    expect(isNumberField("z")).toBe(true);
    expect(isNumberField("place")).toBe(false);
    expect([isLimit("upperLimit"), isLimit("lowerLimit"), isLimit("band"), isLimit(null)]).toEqual([
      true,
      true,
      false,
      false,
    ]);
    expect(
      (["neutralFraction", "redshiftAtFraction", "duration"] as const).every(isFractionBearing),
    ).toBe(true);
    expect(isFractionBearing("opticalDepth")).toBe(false);
    expect(isFractionBearing(null)).toBe(false);
  });

  it("are open when nothing is chosen, typed or listed", () => {
    const fields = draft({ value: " ", plus: "0", methodTags: ["a"], readOffFigure: false });
    expect(isOpen(fields, "value")).toBe(true);
    expect(isOpen(fields, "minus")).toBe(true);
    expect(isOpen(fields, "dataUsed")).toBe(true);
    expect(isOpen(fields, "plus")).toBe(false);
    expect(isOpen(fields, "methodTags")).toBe(false);
    expect(isOpen(fields, "readOffFigure")).toBe(false);
    expect(isOpen({} as ConstraintFields, "place")).toBe(true);
  });
});

describe("fields a submission still needs", () => {
  const given = { species: "neutral", scale: "linear", quantity: "neutralFraction" } as const;
  const needs = (changes: Partial<ConstraintFields>): FieldName[] =>
    openStatementFields(draft({ ...given, kind: "qualitative", ...changes }));
  it.each<[Partial<ConstraintFields>, FieldName[]]>([
    [{}, ["zRole", "z"]],
    [{ zLow: "6" }, ["zRole", "z"]],
    [{ zHigh: "7" }, ["zRole", "z"]],
    [{ zLow: "6", zHigh: "7" }, ["zRole"]],
    [{ zRole: "point" }, ["z"]],
    [{ zRole: "binAverage" }, ["zLow", "zHigh"]],
    [{ zRole: "uncertain", zLow: "6" }, ["zHigh"]],
    [{ zRole: "sampleRange" }, ["z", "zLow", "zHigh"]],
    [{ zRole: "point", z: "7", species: "electron" }, ["helium"]],
    [{ quantity: "opticalDepth", species: null }, []],
    [{ quantity: "opticalDepthRange", species: "electron" }, ["rangeLow", "rangeHigh"]],
    [{ quantity: "redshiftAtFraction", species: null }, ["species", "fraction"]],
    [{ quantity: "duration" }, ["fractionFrom", "fractionTo", "durationUnit"]],
  ])("of its quantity, %j", (changes, names) => {
    expect(needs(changes)).toEqual(names);
  });

  it.each<[Partial<ConstraintFields>, FieldName[]]>([
    [{ kind: null }, ["kind", "level"]],
    [{ kind: "twoSided" }, ["value", "plus", "minus", "level", "estimator"]],
    [{ kind: "twoSided", level: "other" }, ["value", "plus", "minus", "levelPercent", "estimator"]],
    [{ kind: "upperLimit" }, ["value", "level"]],
    [{ kind: "lowerLimit", limitBase: "0.1" }, ["limitSigma", "level"]],
    [{ kind: "lowerLimit", limitSigma: "0.1" }, ["limitBase", "level"]],
    [{ kind: "band", bandLow: "0.1" }, ["bandHigh", "level"]],
    [{ kind: "qualitative" }, []],
  ])("of its statement, %j", (changes, names) => {
    expect(needs({ quantity: "opticalDepth", ...changes })).toEqual(names);
  });

  it("of its origin, in the order of the form", () => {
    const origin = (changes: Partial<ConstraintFields>): FieldName[] =>
      openFields(draft({ quantity: "opticalDepth", kind: "qualitative", ...changes }));
    expect(origin({})).toEqual(["printedText", "methodTags", "dataKnown", "versionRead", "place"]);
    expect(origin({ dataKnown: true })).toContain("dataUsed");
    expect(origin({ dataKnown: false })).not.toContain("dataUsed");
    expect(origin({ dataKnown: true, dataUsed: ["A"] })).not.toContain("dataUsed");
    expect(origin({ readOffFigure: true })).toContain("digitizingError");
    expect(origin({ readOffFigure: false })).not.toContain("digitizingError");
    expect(origin({ readOffFigure: true, digitizingError: "0.01" })).not.toContain(
      "digitizingError",
    );
  });
});

describe("findings", () => {
  it("stand in the order of their grades, each code once", () => {
    const list = [
      note("n", [], "N."),
      error("e", ["value"], "E."),
      mustAnswer("m", ["z"], "M."),
      error("e", [], "Again."),
      error("e", [], "And again."),
    ];
    expect(sortFindings(list)).toEqual([
      { code: "e", grade: "error", fields: ["value"], message: "E." },
      { code: "e.2", grade: "error", fields: [], message: "Again." },
      { code: "e.3", grade: "error", fields: [], message: "And again." },
      { code: "m", grade: "mustAnswer", fields: ["z"], message: "M." },
      { code: "n", grade: "note", fields: [], message: "N." },
    ]);
    expect(hasErrors(list)).toBe(true);
    expect(hasErrors([list[0]!, list[2]!])).toBe(false);
    expect(hasErrors([])).toBe(false);
  });
});

describe("levels", () => {
  it("are probabilities, a percentage only where it is one", () => {
    const other = (text: string | null) => levelProbability("other", text);
    expect(other("99.7")).toBe(0.997);
    expect(["0", "-1", "100", "101", "", "x", null].map(other)).toEqual(Array(7).fill(null));
    // So small that it is no number above zero any more.
    expect(other("1e-99")).toBeNull();
    expect(levelProbability(null, "68")).toBeNull();
    expect(levelProbability("notStated", "68")).toBeNull();
    expect(
      (["oneSigma", "percent68", "percent90", "percent95", "twoSigma"] as const).map((level) =>
        levelProbability(level, null),
      ),
    ).toEqual([0.6827, 0.68, 0.9, 0.95, 0.9545]);
  });
});

describe("printed text", () => {
  it.each<[string, string[]]>([
    ["0.42 +0.19 -0.17", ["0.42", "0.19", "0.17"]],
    ["$0.42^{+0.19}_{-0.17}$", ["0.42", "0.19", "0.17"]],
    ["0.63(-0.28, +.15)", ["0.63", "0.28", "0.15"]],
    ["0.35±0.12", ["0.35", "0.12"]],
    ["0·42", ["0.42"]],
    ["7.", ["7"]],
    ["1e-3 and 2.5E+1", ["0.001", "25"]],
    ["3 × 10^-4", ["0.0003", "3", "10", "4"]],
    ["3 \\times 10^{-4}", ["0.0003", "3", "10", "4"]],
    ["3\\cdot10^4", ["30000", "3", "10", "4"]],
    ["2.5 x 10 ^ + 2", ["250", "2.5", "10", "2"]],
    [".5 * 10^-1", ["0.05", "0.5", "10", "1"]],
    ["3 × 10^123", ["3", "10", "123"]],
    ["12.5 × 10^12", ["12500000000000", "12.5", "10", "12"]],
    ["12x10-12", ["1.2e-11", "12", "10", "12"]],
    [".25 × 10 -1", ["0.025", "0.25", "10", "1"]],
    ["12e3, 1.5e12, 2e-10", ["12000", "1500000000000", "2e-10"]],
    [".25e2 and .5E-12", ["25", "5e-13"]],
    ["0.42\\,\\pm\\,0.1", ["0.42", "0.1"]],
    ["0.42\\left(\\rm 0.19\\right)", ["0.42", "0.19"]],
    ["none", []],
  ])("%j holds the numbers %j", (text, numbers) => {
    expect(printedNumbers(text).map(String)).toEqual(numbers);
  });

  it("holds a number by its size", () => {
    expect(printsNumber("0.300 or so", "-0.3")).toBe(true);
    expect(printsNumber("0.42", "0.4")).toBe(false);
    expect(printsNumber("0.42", "no number")).toBe(true);
  });

  it.each<[string, [string, number][]]>([
    ["(68%)", [["68%", 0.68]]],
    ["95.4 per cent", [["95.4 per cent", 0.954]]],
    ["95 Percent", [["95 Percent", 0.95]]],
    ["20% of them", []],
    ["49% and 50%", [["50%", 0.5]]],
    ["68\\%", [["68%", 0.68]]],
    ["95.45%", [["95.45%", 0.9545]]],
    ["100% of 99.99%", [["99.99%", 0.9999]]],
    ["2 - sigma", [["2 - sigma", 0.9545]]],
    ["1σ", [["1 sigma", 0.6827]]],
    ["$2\\,\\sigma$", [["2 sigma", 0.9545]]],
    ["three-sigma", [["three-sigma", 0.9973]]],
    ["Two  sigma", [["Two sigma", 0.9545]]],
    ["one sigma", [["one sigma", 0.6827]]],
    ["3 sigma", [["3 sigma", 0.9973]]],
    ["4 sigma", []],
    ["1.3 sigma", []],
    ["23 sigma", []],
    ["2 sigmas", []],
  ])("%j names the levels %j", (text, levels) => {
    expect(
      printedLevels(text).map(({ words, probability }) => [words.trim(), probability]),
    ).toEqual(levels.map(([words, probability]) => [words, expect.closeTo(probability, 14)]));
  });
});

describe("decimal texts", () => {
  it("keep at least the places asked, and never round", () => {
    const big = (text: string) => parseDecimal(text)!;
    expect(decimalText(big("0.3"), 3)).toBe("0.300");
    expect(decimalText(big("0.3"))).toBe("0.3");
    expect(decimalText(big("0.123"), 2)).toBe("0.123");
    expect(decimalText(big("12"), 0)).toBe("12");
    expect(decimalText(big("3e-7"), 2)).toBe("0.0000003");
  });

  it("of doubles hold twelve digits, without an exponent", () => {
    expect(computedText(0.1 + 0.2)).toBe("0.3");
    expect(computedText(1 / 3)).toBe("0.333333333333");
    expect(computedText(1e-9)).toBe("0.000000001");
  });

  it("count the places they resolve, also with an exponent", () => {
    expect(
      ["0.30", "3e-4", "1.25e-3", "1.25e1", "1.25e+5", ".5", "7.", "-0.1", "x"].map(decimalPlaces),
    ).toEqual([2, 4, 5, 1, 0, 1, 0, 1, 0]);
  });

  it("longer than forty characters are no number", () => {
    expect(parseDecimal(`0.${"1".repeat(38)}`)).not.toBeNull();
    expect(parseDecimal(`0.${"1".repeat(39)}`)).toBeNull();
    expect(parseDecimal(null)).toBeNull();
  });
});
