import fc from "fast-check";

import { emptyFields } from "~shared/statement/fields";
import type { ConstraintFields } from "~shared/statement/fields";
import { fieldFindings, hasErrors, registryFindings } from "~shared/statement/rules";
import type { Finding, Neighbour } from "~shared/statement/rules";

import { buildFields } from "../buildFields";
import { arbitraryFields } from "./arbitraryFields";

function findings(changes: Partial<ConstraintFields>, complete = true): Finding[] {
  return fieldFindings(buildFields(changes), { citation: true, complete });
}

function codes(changes: Partial<ConstraintFields>, grade?: Finding["grade"]): string[] {
  return findings(changes)
    .filter((finding) => grade === undefined || finding.grade === grade)
    .map((finding) => finding.code);
}

function message(changes: Partial<ConstraintFields>, code: string): string {
  const found = findings(changes).find((finding) => finding.code === code);
  if (!found) throw new Error(`${code} is not among ${codes(changes).join(", ")}`);
  return found.message;
}

const limit = (changes: Partial<ConstraintFields>): Partial<ConstraintFields> => ({
  kind: "upperLimit",
  plus: null,
  minus: null,
  estimator: null,
  printedText: null,
  ...changes,
});

it("has nothing to say about a sound record", () => {
  expect(findings({})).toEqual([]);
});

describe("errors", () => {
  it.each([
    ["value", "O.25", /looks like a letter O/],
    ["value", "0,25", /decimal point, not a comma/],
    ["plus", "l0", /letter in place of a one/],
    ["value", "0.35±0.12", /several numbers/],
    ["value", "<0.3", /Leave the sign out/],
    ["minus", "17%", /percent sign/],
  ] as const)("refuse %s %p and say why", (name, text, why) => {
    expect(message({ [name]: text }, `notANumber.${name}`)).toMatch(why);
  });

  it("do not look at numbers that the quantity and kind don't use", () => {
    expect(codes({ bandLow: "O.25" }, "error")).toEqual([]);
    expect(codes({ bandLow: "O.25" }, "note")).toEqual(["notUsed"]);
  });

  it("refuse a low end above the high one, and say nothing twice", () => {
    const changes = { z: "6.5", zLow: "6.7", zHigh: "6.4", zRole: "binAverage" } as const;
    expect(codes(changes, "error")).toEqual(["lowAboveHigh.redshift"]);
    expect(
      codes(
        limit({
          kind: "band",
          value: null,
          bandLow: "0.7",
          bandHigh: "0.3",
          printedText: "0.7-0.3 (68%)",
        }),
      ),
    ).toEqual(["lowAboveHigh.band"]);
  });

  it("refuse a redshift outside its ends, and a bin without width", () => {
    expect(codes({ z: "7.2", zLow: "6.5", zHigh: "7.0", zRole: "sampleRange" })).toContain(
      "outsideEnds.z",
    );
    expect(codes({ z: null, zLow: "6.5", zHigh: "6.50", zRole: "binAverage" })).toContain(
      "noWidth.redshift",
    );
  });

  it.each([
    [{ value: "1.20" }, true],
    [{ value: "1.00" }, false],
    [{ value: "-0.1" }, true],
    [{ value: "1.1", species: "electron", helium: "included" }, false],
    [{ value: "1.2", species: "electron", helium: "included" }, true], // 1 + 2 f_He = 1.1638
    [{ value: "1.1", species: "electron", helium: "notIncluded" }, true],
    [{ value: "-3", scale: "log10" }, false],
    [{ value: "0.5", scale: "log10" }, true],
    [{ value: "1.2", quantity: "opticalDepth" }, false],
    [{ value: "-0.05", quantity: "opticalDepth" }, true],
    [{ value: "-0.05", quantity: "duration" }, true],
    [{ value: "-7", quantity: "redshiftAtFraction" }, true],
  ] as const)("hold %j against its quantity's range: refused is %p", (changes, refused) => {
    expect(codes(changes, "error").includes("outsideRange.value")).toBe(refused);
  });

  it("refuse a negative plus, a minus with a plus sign, a limit's sigma of zero", () => {
    expect(codes({ plus: "-0.19" })).toContain("wrongSign.plus");
    expect(codes({ minus: "+0.17" })).toContain("wrongSign.minus");
    expect(codes({ minus: "-0.17" })).toEqual([]);
    expect(codes(limit({ value: null, limitBase: "0.1", limitSigma: "0" }))).toContain(
      "wrongSign.limitSigma",
    );
  });

  it("refuse a limit given in two forms", () => {
    expect(codes(limit({ limitBase: "0.1", limitSigma: "0.05" }))).toContain("twoLimits");
  });

  it("refuse a tag outside the vocabulary, data both named and unknown, a printed text too long", () => {
    expect(codes({ methodTags: ["tea leaves"] })).toContain("unknownMethod.tea leaves");
    expect(codes({ dataKnown: false })).toContain("dataUnknownAndNamed");
    expect(codes({ printedText: `0.42 0.19 0.17 ${"x".repeat(300)}` })).toContain(
      "tooLong.printedText",
    );
  });

  it("name everything an empty record lacks at submission, and nothing in a draft", () => {
    const missing = fieldFindings(emptyFields(), { citation: false });
    expect(missing.map((finding) => finding.code)).toEqual([
      "missing.citation",
      "missing.quantity",
      "missing.kind",
      "missing.level",
      "missing.printedText",
      "missing.methodTags",
      "missing.dataKnown",
      "missing.versionRead",
      "missing.place",
    ]);
    expect(hasErrors(fieldFindings(emptyFields(), { citation: false, complete: false }))).toBe(
      false,
    );
  });

  it.each([
    [{ species: null }, "missing.species"],
    [{ species: "electron" }, "missing.helium"],
    [{ scale: null }, "missing.scale"],
    [{ zRole: null }, "missing.zRole"],
    [{ z: null }, "missing.z"],
    [{ zRole: "uncertain" }, "missing.zLow"],
    [{ estimator: null }, "missing.estimator"],
    [{ minus: " " }, "missing.minus"],
    [{ level: null }, "missing.level"],
    [{ level: "other" }, "missing.levelPercent"],
    [{ dataUsed: [] }, "missing.dataUsed"],
    [{ quantity: "opticalDepthRange" }, "missing.rangeLow"],
    [{ quantity: "duration" }, "missing.durationUnit"],
    [{ kind: "upperLimit", value: null }, "missing.value"],
    [{ kind: "upperLimit", value: null, limitBase: "0.1" }, "missing.limitSigma"],
    [{ kind: "band" }, "missing.bandLow"],
  ] as const)("ask for what %j leaves open", (changes, code) => {
    expect(codes(changes as Partial<ConstraintFields>, "error")).toContain(code);
  });

  it("take data said to be unknown for an answer", () => {
    expect(codes({ dataKnown: false, dataUsed: [] })).toEqual([]);
  });

  it("ask no level, redshift or numbers where there are none", () => {
    expect(
      codes(
        {
          kind: "qualitative",
          level: null,
          value: null,
          plus: null,
          minus: null,
          estimator: null,
          printedText: "mostly neutral",
        },
        "error",
      ),
    ).toEqual([]);
    expect(
      codes({ quantity: "opticalDepth", z: null, zRole: null, scale: null, species: null }),
    ).toEqual([]);
  });
});

describe("what must be answered", () => {
  it("asks about plus and minus that differ by more than a factor of three, with the factor", () => {
    const changes = { plus: "0.31", minus: "0.10", printedText: "0.42 +0.31 -0.10 (68%)" };
    expect(message(changes, "widthRatio")).toMatch(/factor of 3\.1/);
    expect(codes({ ...changes, plus: "0.30", printedText: "0.42 +0.30 -0.10 (68%)" })).toEqual([
      "secondPeak",
    ]);
  });

  it("asks about an interval's end beyond the range", () => {
    expect(codes({ value: "0.9", printedText: "0.9 +0.19 -0.17 68%" })).toEqual([
      "endBeyondRange.plus",
    ]);
    expect(codes({ value: "0.1", printedText: "0.1 +0.19 -0.17 68%" })).toEqual([
      "endBeyondRange.minus",
    ]);
    expect(codes({ value: "0.83", plus: "0.17", printedText: "0.83 +0.17 -0.17 68%" })).toEqual([]);
  });

  it.each([
    ["0.42 +0.19 -0.17 (1σ)", "oneSigma", []],
    ["0.42 +0.19 -0.17 (1 sigma)", "percent68", ["levelUnlikePrinted"]],
    ["0.42 +0.19 -0.17 (68.3 per cent)", "oneSigma", []],
    ["0.42 +0.19 -0.17 (95% C.L.)", "percent68", ["levelUnlikePrinted"]],
    ["$0.42^{+0.19}_{-0.17}$ ($2\\,\\sigma$)", "twoSigma", []],
    ["0.42 +0.19 -0.17 (two-sigma)", "oneSigma", ["levelUnlikePrinted"]],
    ["0.42 +0.19 -0.17 (68\\%)", "percent68", []],
    ["0.42 +0.19 -0.17 (95%)", "notStated", ["levelUnlikePrinted"]],
    ["0.42 +0.19 -0.17, from 20% of the pixels", "percent68", []],
    ["0.42 +0.19 -0.17", "percent95", []],
  ] as const)("compares the level in %p with %s", (printedText, level, expected) => {
    expect(codes({ printedText, level }, "mustAnswer")).toEqual(expected);
  });

  it.each([
    "x_HI = 0.42 +0.19 \u22120.17",
    "0.42(+0.19)(-0.17)",
    "0.42(-0.17, +0.19)",
    "$\\bar{x}_{\\rm HI}=0.42^{+0.19}_{-0.17}$",
    "0\u00b742 +0\u00b719 -0\u00b717",
    "0.420 + 0.19 - .17",
  ])("finds the numbers in %p", (printedText) => {
    expect(codes({ printedText })).toEqual([]);
  });

  it("finds one number for both sides, powers of ten, and a limit's two parts", () => {
    const both = { value: "0.35", plus: "0.12", minus: "0.12" };
    expect(codes({ ...both, printedText: "0.35±0.12" })).toEqual([]);
    expect(codes(limit({ value: "0.0003", printedText: "< 3 \\times 10^{-4} (68%)" }))).toEqual([]);
    expect(
      codes(
        limit({
          value: null,
          limitBase: "0.03",
          limitSigma: "0.06",
          level: "oneSigma",
          printedText: "x_HI <= 0.03 + 0.06 (1 sigma)",
        }),
      ),
    ).toEqual([]);
  });

  it("names the numbers the printed text doesn't contain", () => {
    const changes = { minus: "0.11" };
    expect(codes(changes)).toEqual(["printedWithoutNumbers"]);
    expect(message(changes, "printedWithoutNumbers")).toMatch(/doesn't contain minus 0\.11\./);
    expect(codes({ value: "0.4" })).toEqual(["printedWithoutNumbers"]); // 0.42 does not contain 0.4
  });

  it("asks about a bin wider than 0.4 with no role, beside asking for the role", () => {
    const changes = { z: null, zLow: "6.5", zHigh: "7.0", zRole: null };
    expect(codes(changes, "mustAnswer")).toEqual(["wideBinNoRole"]);
    expect(codes({ ...changes, zHigh: "6.9" }, "mustAnswer")).toEqual([]);
  });

  // A flat prior on [0, 1] has the fraction L below L: an upper limit L ≥ C, a lower one L ≤ 1 − C carries nothing.
  it.each([
    [{ kind: "upperLimit", value: "0.95", level: "percent95" }, true],
    [{ kind: "upperLimit", value: "0.94", level: "percent95" }, false],
    [{ kind: "lowerLimit", value: "0.05", level: "percent95" }, true],
    [{ kind: "lowerLimit", value: "0.06", level: "percent95" }, false],
    [{ kind: "lowerLimit", value: "0.05", level: "percent95", species: "ionized" }, true],
    [{ kind: "upperLimit", value: "0.10", level: "percent90", species: "ionized" }, false],
    [{ kind: "upperLimit", value: "0.95", level: "notStated" }, false],
    [
      { kind: "upperLimit", value: null, limitBase: "1", limitSigma: "0.1", level: "oneSigma" },
      true,
    ],
  ] as const)("asks whether %j says more than a flat prior: %p", (changes, empty) => {
    expect(codes(limit(changes)).includes("flatLimit")).toBe(empty);
  });

  it("asks about one sightline given as the cosmic mean", () => {
    const one = { methodTags: ["quasarDampingWing"], dataUsed: ["QSO-H 0712+05"] };
    expect(codes(one)).toEqual(["oneSightline"]);
    expect(codes({ ...one, cosmicVariance: "included" })).toEqual([]);
    expect(codes({ ...one, dataUsed: ["QSO-H 0712+05", "QSO-H 1418-11"] })).toEqual([]);
    expect(codes({ ...one, dataUsed: ["Lantern quasar sample"] })).toEqual([]);
  });

  it("asks about a level below one per cent", () => {
    expect(message({ level: "other", levelPercent: "0.997" }, "smallLevel")).toMatch(/99\.7 %/);
  });
});

describe("against the registry", () => {
  const neighbour = (
    changes: Partial<ConstraintFields>,
    sameCitation = false,
    number = "FL-0007",
  ): Neighbour => ({
    number,
    sameCitation,
    fields: buildFields(changes),
  });
  const found = (changes: Partial<ConstraintFields>, ...neighbours: Neighbour[]) =>
    registryFindings(buildFields(changes), neighbours).map((finding) => finding.code);

  it("a near-duplicate must be answered, by paper or by method, whatever convention it is printed in", () => {
    expect(found({}, neighbour({ z: "7.13", value: "0.425" }, true))).toEqual([
      "nearDuplicate.FL-0007",
    ]);
    expect(found({}, neighbour({}))).toEqual(["nearDuplicate.FL-0007"]);
    const ionized = { species: "ionized", value: "0.58", plus: "0.17", minus: "0.19" } as const;
    expect(found({}, neighbour(ionized))).toEqual(["nearDuplicate.FL-0007"]);
  });

  it("other numbers, another redshift or another method and paper are none", () => {
    expect(found({}, neighbour({ value: "0.5" }))).toEqual([]);
    expect(found({}, neighbour({ z: "7.5" }, true))).toEqual([]);
    expect(found({}, neighbour({ methodTags: ["darkPixels"] }))).toEqual([]);
  });

  it("members of one alternatives group are no near-duplicates, equal labels of two papers are no group", () => {
    const group = { alternativesGroup: "A1" };
    expect(found(group, neighbour(group, true))).toEqual([]);
    expect(found(group, neighbour(group, false))).toEqual(["nearDuplicate.FL-0007"]);
  });

  it("another number for the same question in the same paper is noted", () => {
    expect(found({}, neighbour({ value: "0.6" }, true))).toEqual(["sameQuestion.FL-0007"]);
  });

  // Median of 0.16 and 0.20 is 0.18; within 30 % of it lie 0.126 to 0.234.
  it.each([
    ["0.18", true],
    ["0.23", true],
    ["0.24", false],
    ["0.13", true],
    ["0.12", false],
  ])(
    "a 95 %% half-width of %s beside 68 %% ones of median 0.18 must be answered: %p",
    (width, asked) => {
      const neighbours = [
        neighbour({ z: "6.2", value: "0.1", plus: "0.16", minus: "0.16" }, false, "FL-0001"),
        neighbour({ z: "8.1", value: "0.8", plus: "0.20", minus: "0.20" }, false, "FL-0002"),
      ];
      const own = { level: "percent95", plus: width, minus: width } as const;
      expect(found(own, ...neighbours).includes("widthLikeOneSigma")).toBe(asked);
    },
  );

  it("needs two such records, of the same tag, within one in redshift, at 68 %", () => {
    const own = { level: "twoSigma" } as const;
    const near = neighbour({ value: "0.7" }, false, "FL-0001");
    expect(found(own, near)).toEqual([]);
    expect(found(own, near, neighbour({ value: "0.7", z: "8.2" }))).toEqual([]);
    expect(found(own, near, neighbour({ value: "0.7", methodTags: ["darkPixels"] }))).toEqual([]);
    expect(found(own, near, neighbour({ value: "0.7", level: "percent90" }))).toEqual([]);
    expect(found(own, near, neighbour({ value: "0.7" }))).toEqual(["widthLikeOneSigma"]);
  });
});

it("never throws, has unique codes and puts errors first, whatever comes in", () => {
  fc.assert(
    fc.property(arbitraryFields, arbitraryFields, fc.boolean(), (fields, other, flag) => {
      const list = [
        ...fieldFindings(fields, { citation: flag, complete: flag }),
        ...registryFindings(fields, [{ number: "FL-0001", sameCitation: flag, fields: other }]),
      ];
      expect(new Set(list.map((finding) => finding.code)).size).toBe(list.length);
      for (const finding of list) expect(finding.message).toMatch(/[.?]$/);
    }),
    { seed: 20261201, numRuns: 500 },
  );
});

it("a draft's errors are a submission's errors too", () => {
  fc.assert(
    fc.property(arbitraryFields, (fields) => {
      const errors = (complete: boolean) =>
        fieldFindings(fields, { citation: true, complete })
          .filter((finding) => finding.grade === "error")
          .map((finding) => finding.code);
      expect(errors(true)).toEqual(expect.arrayContaining(errors(false)));
    }),
    { seed: 20261201, numRuns: 200 },
  );
});
