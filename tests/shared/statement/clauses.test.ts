import type { ConstraintFields } from "~shared/statement/fields";
import {
  fieldFindings,
  registryFindings,
  sentAlready,
  type Finding,
  type Neighbour,
} from "~shared/statement/rules";

import { buildFields } from "../buildFields";

type Changes = Partial<ConstraintFields>;

const CITED = { citation: true } as const;
const gradesOf = (findings: readonly Finding[]) =>
  Object.fromEntries(findings.map(({ code, grade }) => [code, grade]));
const own = (changes: Changes, options = CITED) =>
  gradesOf(fieldFindings(buildFields(changes), options));

const NO_VALUE = { value: null, plus: null, minus: null, estimator: null } as const;
const limit = (changes: Changes): Changes => ({
  ...NO_VALUE,
  kind: "upperLimit",
  level: "percent95",
  printedText: null,
  ...changes,
});
const quantity = (name: ConstraintFields["quantity"], changes: Changes): Changes => ({
  ...{ quantity: name, species: null, scale: null, weighting: null, z: null, zRole: null },
  ...{ plus: "0.1", minus: "0.1", printedText: null },
  ...changes,
});
const bin = (zLow: string, zHigh: string, changes: Changes = {}): Changes => ({
  ...{ z: null, zLow, zHigh, zRole: "binAverage" },
  ...changes,
});

/**
 * Every clause of the vetting rules, in their order: a record that the clause strikes, and one as near to
 * it as can be that it lets pass.
 */
const ERRORS: readonly [clause: string, code: string, struck: Changes, passes: Changes][] = [
  ["not a number", "notANumber.value", { value: "O.42" }, { value: "0.42" }],
  ["not a number", "notANumber.z", { z: "7,12" }, { z: "7.12" }],
  ["low above high: a bin", "lowAboveHigh.redshift", bin("6.6", "6.5"), bin("6.5", "6.6")],
  [
    "low above high: a band",
    "lowAboveHigh.band",
    limit({ kind: "band", bandLow: "0.6", bandHigh: "0.5" }),
    limit({ kind: "band", bandLow: "0.5", bandHigh: "0.6" }),
  ],
  [
    "low above high: a range",
    "lowAboveHigh.range",
    quantity("opticalDepthRange", { value: "0.2", rangeLow: "30", rangeHigh: "15" }),
    quantity("opticalDepthRange", { value: "0.2", rangeLow: "15", rangeHigh: "30" }),
  ],
  [
    "value outside low to high",
    "outsideEnds.z",
    bin("6.5", "6.9", { z: "7.0" }),
    bin("6.5", "6.9", { z: "6.9" }),
  ],
  [
    "a linear fraction is at most 1",
    "outsideRange.value",
    { value: "1.01" },
    { value: "1.00", plus: "0" },
  ],
  ["a linear fraction is at least 0", "outsideRange.value", { value: "-0.01" }, { value: "0.00" }],
  [
    "log10 of a fraction is at most 0",
    "outsideRange.value",
    { scale: "log10", value: "0.1" },
    { scale: "log10", value: "-0.1" },
  ],
  [
    "electrons per hydrogen are at most 1 + 2 f_He",
    "outsideRange.value",
    { species: "electron", helium: "included", value: "1.17" },
    { species: "electron", helium: "included", value: "1.16" },
  ],
  [
    "electrons without those of helium are at most 1",
    "outsideRange.value",
    { species: "electron", helium: "notIncluded", value: "1.16" },
    { species: "electron", helium: "notIncluded", value: "1" },
  ],
  [
    "an optical depth is not negative",
    "outsideRange.value",
    quantity("opticalDepth", { value: "-0.05" }),
    quantity("opticalDepth", { value: "0.05" }),
  ],
  [
    "a duration is not negative",
    "outsideRange.value",
    quantity("duration", { value: "-2" }),
    quantity("duration", { value: "2" }),
  ],
  [
    "a redshift at a fraction is not negative",
    "outsideRange.value",
    quantity("redshiftAtFraction", { value: "-7" }),
    quantity("redshiftAtFraction", { value: "7" }),
  ],
  ["a redshift is not negative", "outsideRange.z", { z: "-7.12" }, { z: "7.12" }],
  ["value missing", "missing.value", { value: null }, { value: "0.42" }],
  [
    "value missing, unless a limit's base stands in",
    "missing.value",
    limit({}),
    limit({ limitBase: "0.1", limitSigma: "0.2" }),
  ],
  [
    "value missing, unless a band stands in",
    "missing.value",
    { value: null },
    limit({ kind: "band", bandLow: "0.2", bandHigh: "0.6" }),
  ],
  [
    "value missing, unless a curve stands in",
    "missing.value",
    { value: null },
    { ...NO_VALUE, kind: "curve", level: null },
  ],
  [
    "level missing and not declared not stated",
    "missing.level",
    { level: null },
    { level: "notStated" },
  ],
];

const ASKED: readonly [clause: string, code: string, struck: Changes, passes: Changes][] = [
  [
    "plus and minus differ by more than a factor of 3",
    "widthRatio",
    { plus: "0.31", minus: "0.10" },
    { plus: "0.30", minus: "0.10" },
  ],
  [
    "an interval's upper end beyond the range",
    "endBeyondRange.plus",
    { value: "0.9", plus: "0.11" },
    { value: "0.9", plus: "0.10" },
  ],
  [
    "an interval's lower end beyond the range",
    "endBeyondRange.minus",
    { value: "0.1", minus: "0.11" },
    { value: "0.1", minus: "0.10" },
  ],
  [
    "a band's end beyond the range",
    "endBeyondRange.bandHigh",
    limit({ kind: "band", bandLow: "0.7", bandHigh: "1.1" }),
    limit({ kind: "band", bandLow: "0.7", bandHigh: "1" }),
  ],
  [
    "a printed level unlike the entered one",
    "levelUnlikePrinted",
    { level: "percent95", printedText: "0.42 +0.19 -0.17 (68%)" },
    { level: "percent68", printedText: "0.42 +0.19 -0.17 (68%)" },
  ],
  [
    "one sigma is not 68 %",
    "levelUnlikePrinted",
    { level: "percent68", printedText: "0.42 +0.19 -0.17 (1σ)" },
    { level: "oneSigma", printedText: "0.42 +0.19 -0.17 (1σ)" },
  ],
  [
    "a bin wider than 0.4 with no role",
    "wideBinNoRole",
    bin("6.5", "6.91", { zRole: null }),
    bin("6.5", "6.90", { zRole: null }),
  ],
  [
    "a bin wider than 0.4 with a role",
    "wideBinNoRole",
    bin("6.5", "7.5", { zRole: null }),
    bin("6.5", "7.5"),
  ],
  [
    "a limit that says nothing beyond a flat prior",
    "flatLimit",
    limit({ value: "0.96" }),
    limit({ value: "0.94" }),
  ],
  [
    "a limit of the ionized fraction that says nothing",
    "flatLimit",
    limit({ kind: "lowerLimit", species: "ionized", value: "0.04" }),
    limit({ kind: "lowerLimit", species: "ionized", value: "0.06" }),
  ],
  [
    "one sightline given as a global mean",
    "oneSightline",
    { methodTags: ["quasarDampingWing"], dataUsed: ["Object 7"] },
    { methodTags: ["quasarDampingWing"], dataUsed: ["Object 7", "Object 8"] },
  ],
  [
    "one sightline whose scatter is in the error",
    "oneSightline",
    { methodTags: ["burstDampingWing"], dataUsed: ["Burst 3"] },
    { methodTags: ["burstDampingWing"], dataUsed: ["Burst 3"], cosmicVariance: "included" },
  ],
  [
    "printed text that doesn't contain the numbers",
    "printedWithoutNumbers",
    { value: "0.24", printedText: "0.42 +0.19 -0.17 (68%)" },
    { value: "0.420", printedText: "0.42 +0.19 -0.17 (68%)" },
  ],
];

describe("errors, which can't be submitted", () => {
  it.each(ERRORS)("%s: %s", (_, code, struck, passes) => {
    expect(own(struck)).toMatchObject({ [code]: "error" });
    expect(own(passes)).not.toHaveProperty([code]);
  });

  it("a citation that is missing or could not be read", () => {
    expect(own({}, { citation: false } as never)).toEqual({ "missing.citation": "error" });
    expect(own({})).toEqual({});
  });
});

describe("what must be answered", () => {
  it.each(ASKED)("%s: %s", (_, code, struck, passes) => {
    expect(own(struck)).toMatchObject({ [code]: "mustAnswer" });
    expect(own(passes)).not.toHaveProperty([code]);
  });

  const neighbour = (changes: Changes, more: Partial<Neighbour> = {}): Neighbour => ({
    number: "FL-0007",
    sameCitation: false,
    fields: buildFields(changes),
    ...more,
  });
  const beside = (changes: Changes, ...neighbours: Neighbour[]) =>
    gradesOf(registryFindings(buildFields(changes), neighbours));
  const wide = { level: "percent95", plus: "0.2", minus: "0.2" } as const;
  const usual = (half: string, changes: Changes = {}): Neighbour =>
    neighbour({ value: "0.6", plus: half, minus: half, ...changes });

  it.each<[clause: string, asked: boolean, Neighbour[]]>([
    ["two records of the same tag with 68 % widths as large", true, [usual("0.19"), usual("0.21")]],
    ["the median decides", true, [usual("0.05"), usual("0.2"), usual("0.4")]],
    ["30 % off at most", true, [usual("0.154"), usual("0.154")]],
    ["more than 30 % off", false, [usual("0.15"), usual("0.15")]],
    ["one record only", false, [usual("0.2")]],
    ["one beyond Δz = 1", false, [usual("0.2"), usual("0.2", { z: "8.13" })]],
    ["one just within Δz = 1", true, [usual("0.2"), usual("0.2", { z: "8.12" })]],
    [
      "one of another tag",
      false,
      [usual("0.2"), usual("0.2", { methodTags: ["equivalentWidths"] })],
    ],
    ["one at 95 % itself", false, [usual("0.2"), usual("0.2", { level: "percent95" })]],
  ])("a 95 %% half-width like the usual 68 %% one: %s, asked %p", (_, asked, neighbours) => {
    const found = beside({ ...wide, methodTags: ["galaxyDampingWing"] }, ...neighbours);
    expect(found.widthLikeOneSigma).toBe(asked ? "mustAnswer" : undefined);
    expect(beside({ ...wide, level: "percent68" }, ...neighbours)).not.toHaveProperty([
      "widthLikeOneSigma",
    ]);
  });

  it("a near-duplicate of a record, but not of a member of its own alternatives group", () => {
    const near = neighbour({ value: "0.424" });
    expect(beside({}, near)).toEqual({ "nearDuplicate.FL-0007": "mustAnswer" });
    expect(beside({}, neighbour({ value: "0.45" }))).toEqual({});
    const group = { alternativesGroup: "model" };
    const member = neighbour({ ...group, value: "0.424" }, { sameCitation: true });
    expect(beside(group, member)).toEqual({});
    expect(beside({}, member)).toEqual({ "nearDuplicate.FL-0007": "mustAnswer" });
  });

  it("only a note to its contributor where the copy is still unread", () => {
    const sent = (changes: Changes, other: Neighbour) => sentAlready(buildFields(changes), [other]);
    expect(sent({}, neighbour({}, { sameCitation: true }))).toEqual([
      {
        code: "sentAlready.FL-0007",
        grade: "note",
        fields: ["value", "z"],
        message:
          "You have sent FL-0007, which says nearly the same from the same paper. Look whether this is a second copy of it.",
      },
    ]);
    expect(sent({}, neighbour({}))[0]?.message).toContain("nearly the same with the same method");
    expect(sent({ value: "0.5" }, neighbour({}))).toEqual([]);
    expect(sent({ z: "7.3" }, neighbour({}))).toEqual([]);
    const group = { alternativesGroup: "model" };
    expect(sent(group, neighbour(group, { sameCitation: true }))).toEqual([]);
    expect(sent({ value: null }, neighbour({}))).toEqual([]);
  });
});

it("every question says what to look at in the paper", () => {
  const asked = ASKED.flatMap(([, code, struck]) =>
    fieldFindings(buildFields(struck), CITED).filter((finding) => finding.code === code),
  );
  expect(asked).toHaveLength(ASKED.length);
  for (const { message } of asked) {
    expect(message).toMatch(/Look |Compare |Choose the level as printed|Does the paper /);
  }
});
