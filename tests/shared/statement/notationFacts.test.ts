import { asUsed } from "~shared/statement/asUsed";
import type { ConstraintFields } from "~shared/statement/fields";
import {
  lineText,
  type Notation,
  notationAsPrinted,
  notationAsUsed,
  percentText,
  recordTitle,
  shortText,
} from "~shared/statement/notation";
import {
  conditionWord,
  fieldText,
  levelPhrase,
  tagName,
  withTrueMinus,
} from "~shared/statement/words";

import { buildFields } from "../buildFields";

type Changes = Partial<ConstraintFields>;
const printed = (changes: Changes): Notation => notationAsPrinted(buildFields(changes));
const used = (changes: Changes): Notation => notationAsUsed(asUsed(buildFields(changes))!);
const limit = (kind: "upperLimit" | "lowerLimit", changes: Changes): Changes => ({
  kind,
  plus: null,
  minus: null,
  ...changes,
});

describe("a line as printed", () => {
  it.each<[Changes, string]>([
    [{ species: "ionized" }, "x_HII = 0.42 +0.19 −0.17 at 68 %"],
    [{ species: "electron" }, "x_e = 0.42 +0.19 −0.17 at 68 %"],
    [{ species: null }, "x_HI = 0.42 +0.19 −0.17 at 68 %"],
    [
      { species: "ionized", scale: "log10", value: "-0.5" },
      "log10 x_HII = −0.5 +0.19 −0.17 at 68 %",
    ],
    [
      { species: "electron", scale: "log10", value: "-0.5" },
      "log10 x_e = −0.5 +0.19 −0.17 at 68 %",
    ],
    [{ quantity: null }, "x_HI = 0.42 +0.19 −0.17 at 68 %"],
    [{ kind: null }, "x_HI = 0.42 +0.19 −0.17 at 68 %"],
    [{ quantity: "opticalDepth" }, "τ = 0.42 +0.19 −0.17 at 68 %"],
    [{ quantity: "opticalDepth", scale: "log10" }, "τ = 0.42 +0.19 −0.17 at 68 %"],
    [{ quantity: "opticalDepthRange", rangeLow: "15" }, "τ(15, ?) = 0.42 +0.19 −0.17 at 68 %"],
    [{ quantity: "opticalDepthRange", rangeHigh: "30" }, "τ(?, 30) = 0.42 +0.19 −0.17 at 68 %"],
    [{ quantity: "opticalDepthRange" }, "τ = 0.42 +0.19 −0.17 at 68 %"],
    [{ quantity: "redshiftAtFraction" }, "z = 0.42 +0.19 −0.17 at 68 %"],
    [{ quantity: "duration" }, "Δz = 0.42 +0.19 −0.17 at 68 %"],
    [{ quantity: "duration", durationUnit: "redshift" }, "Δz = 0.42 +0.19 −0.17 at 68 %"],
    [{ quantity: "duration", durationUnit: "myr" }, "Δt = 0.42 +0.19 −0.17 Myr at 68 %"],
    [{ durationUnit: "myr" }, "x_HI = 0.42 +0.19 −0.17 at 68 %"],
    [{ plus: null }, "x_HI = 0.42 −0.17 at 68 %"],
    [{ minus: " " }, "x_HI = 0.42 +0.19 at 68 %"],
    [{ plus: null, minus: null }, "x_HI = 0.42 at 68 %"],
    [{ plus: "–0.19", minus: "\u22120.17" }, "x_HI = 0.42 +0.19 −0.17 at 68 %"],
    [{ plus: " 0.2? ", minus: "0.17" }, "x_HI = 0.42 +0.2? −0.17 at 68 %"],
    [{ value: null }, "x_HI at 68 %"],
    [{ value: " -0.42 " }, "x_HI = −0.42 +0.19 −0.17 at 68 %"],
    [limit("upperLimit", {}), "x_HI < 0.42 at 68 %"],
    [limit("upperLimit", { value: null }), "x_HI at 68 %"],
    [limit("upperLimit", { plus: "0.1", minus: "0.1" }), "x_HI < 0.42 at 68 %"],
    [limit("lowerLimit", { limitBase: "0.9", limitSigma: "-0.1" }), "x_HI > 0.9 − 0.1 at 68 %"],
    [limit("upperLimit", { limitBase: "0.9" }), "x_HI < 0.9 at 68 %"],
    [{ limitBase: "0.9", limitSigma: "0.1" }, "x_HI = 0.42 +0.19 −0.17 at 68 %"],
    [{ kind: "band", bandLow: "0.3" }, "x_HI from 0.3 to ? at 68 %"],
    [{ kind: "band", bandHigh: "0.7" }, "x_HI from ? to 0.7 at 68 %"],
    [{ kind: "band", bandLow: "0.3", bandHigh: "0.7", value: "1" }, "x_HI from 0.3 to 0.7 at 68 %"],
    [{ kind: "curve" }, "x_HI = 0.42 +0.19 −0.17 at 68 %, tabulated curve"],
    [{ kind: "curve", value: null, plus: null, minus: null }, "x_HI tabulated curve"],
    [{ level: null }, "x_HI = 0.42 +0.19 −0.17"],
    [{ level: "twoSigma" }, "x_HI = 0.42 +0.19 −0.17 at two sigma"],
    [{ level: "other" }, "x_HI = 0.42 +0.19 −0.17 at another level"],
  ])("of %j", (changes, text) => {
    expect(lineText(printed(changes))).toBe(text);
  });

  it("gives its parts apart", () => {
    expect(printed({})).toEqual({
      symbol: "xHI",
      argument: "",
      relation: "=",
      value: "0.42",
      plus: "0.19",
      minus: "0.17",
      low: null,
      high: null,
      limitSigma: null,
      unit: "",
      tail: "at 68 %",
      derived: false,
    });
    expect(printed({ kind: "qualitative" })).toMatchObject({
      relation: "",
      value: null,
      plus: null,
      minus: null,
      tail: "qualitative",
    });
    expect(printed({ kind: "band", bandLow: "-0.1", bandHigh: "0.7" })).toMatchObject({
      relation: "in",
      value: null,
      plus: null,
      low: "−0.1",
      high: "0.7",
    });
    expect(printed({ value: null }).relation).toBe("");
  });
});

describe("a line as used", () => {
  it.each<[Changes, string]>([
    [{ species: "ionized" }, "x_HI = 0.58 +0.17 −0.19 at 68 %"],
    [{ level: "notStated" }, "x_HI = 0.42 +0.19 −0.17 level not stated"],
    [{ scale: "log10", value: "-2" }, "log10 x_HI = −2 +0.19 −0.17 at 68 %"],
    [limit("lowerLimit", { level: "other", levelPercent: "99.7" }), "x_HI > 0.42 at 99.7 %"],
    [limit("upperLimit", { limitBase: "0.1", limitSigma: "0.2" }), "x_HI < 0.1 + 0.2 at 68 %"],
    [{ kind: "band", bandLow: "0.3", bandHigh: "0.7" }, "x_HI from 0.3 to 0.7 at 68 %"],
    [{ kind: "curve" }, "x_HI = 0.42 +0.19 −0.17 at 68 %, tabulated curve"],
    [{ kind: "curve", value: null, plus: null, minus: null }, "x_HI tabulated curve"],
    [{ kind: "qualitative" }, "x_HI qualitative"],
    [
      { quantity: "opticalDepthRange", rangeLow: "15", rangeHigh: "30.5" },
      "τ(15, 30.5) = 0.42 +0.19 −0.17 at 68 %",
    ],
    [
      { quantity: "duration", fractionFrom: "0.75", fractionTo: "0.25", durationUnit: "myr" },
      "Δt = 0.42 +0.19 −0.17 Myr at 68 %",
    ],
    [
      { quantity: "duration", fractionFrom: "0.75", fractionTo: "0.25" },
      "Δz = 0.42 +0.19 −0.17 at 68 %",
    ],
  ])("of %j", (changes, text) => {
    expect(lineText(used(changes))).toBe(text);
  });

  it("cuts computed digits only, to three", () => {
    // Seven decimals may be printed; eight are computed.
    expect(used({ value: "0.1234567" }).value).toBe("0.1234567");
    expect(used({ value: "0.12345678" }).value).toBe("0.123");
    expect(used({ scale: "log10", value: "-2.12345678" }).value).toBe("−2.12");
    expect(used({ scale: "log10", value: "-2.1" }).value).toBe("−2.1");
  });
});

describe("short texts", () => {
  it.each<[Changes, string]>([
    [{}, "0.42 +0.19 −0.17"],
    [{ plus: "0.17" }, "0.42 ± 0.17"],
    [limit("upperLimit", { value: "0.3" }), "< 0.3"],
    [limit("lowerLimit", { value: "0.3" }), "> 0.3"],
    [{ kind: "band", bandLow: "0.3", bandHigh: "0.7" }, "0.3 to 0.7"],
    [
      { kind: "band", bandLow: "3", bandHigh: "7", quantity: "duration", durationUnit: "myr" },
      "3 to 7 Myr",
    ],
    [{ kind: "curve" }, "0.42 +0.19 −0.17"],
    [{ kind: "curve", value: null, plus: null, minus: null }, ""],
  ])("of %j", (changes, text) => {
    expect(shortText(printed(changes))).toBe(text);
  });

  it("of a probability in percent drop the noise of binary fractions", () => {
    expect([0.68, 0.6827, 0.9545, 0.997].map(percentText)).toEqual([
      "68 %",
      "68.27 %",
      "95.45 %",
      "99.7 %",
    ]);
  });
});

describe("titles", () => {
  const wing = { methodTags: ["quasarDampingWing"] };
  it.each<[Changes, string]>([
    [{ ...wing, z: "7.5", zLow: "7", zHigh: "8" }, "Quasar damping wing at z = 7.5"],
    [{ ...wing, z: null, zLow: "7", zHigh: "8" }, "Quasar damping wing, z = 7 to 8"],
    [{ ...wing, z: null, zLow: "7" }, "Quasar damping wing: neutral fraction"],
    [{ ...wing, z: null, zHigh: "8" }, "Quasar damping wing: neutral fraction"],
    [{ ...wing, z: "7.5", zLow: "7", zRole: "binAverage" }, "Quasar damping wing at z = 7.5"],
    [{ ...wing, z: "7.5", zHigh: "8", zRole: "binAverage" }, "Quasar damping wing at z = 7.5"],
    [{ ...wing, quantity: null, z: null }, "Quasar damping wing"],
    [{ ...wing, quantity: "opticalDepth" }, "Quasar damping wing: total optical depth"],
    [
      { ...wing, quantity: "opticalDepthRange", rangeLow: "15", rangeHigh: "30" },
      "Quasar damping wing: optical depth from z = 15 to 30",
    ],
    [
      { ...wing, quantity: "opticalDepthRange", rangeLow: "15" },
      "Quasar damping wing: optical depth over a redshift range",
    ],
    [{ ...wing, quantity: "redshiftAtFraction" }, "Quasar damping wing: redshift at a fraction"],
    [
      { ...wing, quantity: "redshiftAtFraction", fraction: "0.5" },
      "Quasar damping wing: redshift at neutral fraction 0.5",
    ],
    [
      { ...wing, quantity: "redshiftAtFraction", fraction: "0.5", species: null },
      "Quasar damping wing: redshift at neutral fraction 0.5",
    ],
    [
      { ...wing, quantity: "redshiftAtFraction", fraction: "0.5", species: "electron" },
      "Quasar damping wing: redshift at ionized fraction 0.5",
    ],
    [{ ...wing, quantity: "duration", fractionFrom: "0.75" }, "Quasar damping wing: duration"],
    [{ ...wing, quantity: "duration", fractionTo: "0.25" }, "Quasar damping wing: duration"],
    [{ methodTags: ["tea leaves"], z: "7" }, "Constraint at z = 7"],
    [{ methodTags: [], z: "7" }, "Constraint at z = 7"],
    [{ methodTags: ["tea leaves", "darkPixels"], z: "7" }, "Dark pixels at z = 7"],
    [
      { methodTags: ["quasarDampingWing", "burstDampingWing"], z: "7" },
      "Quasar damping wing at z = 7",
    ],
  ])("of %j", (changes, title) => {
    expect(recordTitle(buildFields(changes))).toBe(title);
  });
});

describe("words", () => {
  it("of a level, in a sentence", () => {
    expect(levelPhrase(null, null)).toBe("");
    expect(levelPhrase("notStated", null)).toBe("level not stated");
    expect(levelPhrase("oneSigma", null)).toBe("at one sigma");
    expect(levelPhrase("twoSigma", null)).toBe("at two sigma");
    expect(levelPhrase("other", null)).toBe("at another level");
    expect(levelPhrase("other", "99.7")).toBe("at 99.7 %");
    expect(levelPhrase("percent90", null)).toBe("at 90 %");
  });

  it("of tags and conditions, and what is none as it is", () => {
    expect(tagName("darkPixels")).toBe("Dark pixels");
    expect(tagName("tea leaves")).toBe("tea leaves");
    expect(conditionWord("cmb")).toBe("CMB");
    expect(conditionWord("lymanAlpha")).toBe("Lyα data");
    expect(conditionWord("FL-0012")).toBe("FL-0012");
  });

  it("set a hyphen in front of a number as a minus", () => {
    expect(withTrueMinus("-0.5-1")).toBe("\u22120.5-1");
    expect(withTrueMinus("0.5-1")).toBe("0.5-1");
  });

  it.each<[keyof ConstraintFields, Changes, string]>([
    ["value", { value: "0.30" }, "0.30"],
    ["value", { value: null }, ""],
    ["dataKnown", { dataKnown: true }, "Yes"],
    ["dataKnown", { dataKnown: false }, "No"],
    ["dataUsed", { dataUsed: ["A", "B"] }, "A; B"],
    ["methodTags", { methodTags: ["darkPixels", "kineticSz"] }, "Dark pixels; Kinetic SZ power"],
    ["conditionedOn", { conditionedOn: ["cmb", "FL-0012"] }, "CMB; FL-0012"],
    ["modelTags", { modelTags: ["cmb"] }, "cmb"],
    ["species", { species: "electron" }, "Electrons per hydrogen"],
    ["level", { level: "twoSigma" }, "Two sigma (95.45 %)"],
    ["remark", { remark: "as printed" }, "as printed"],
  ])("of the field %s: %j", (name, changes, text) => {
    expect(fieldText(name, buildFields(changes))).toBe(text);
  });
});
