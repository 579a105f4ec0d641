import { alternativesFindings } from "~shared/statement/alternatives";
import type { ConstraintFields } from "~shared/statement/fields";
import { type Finding, type Neighbour, registryFindings } from "~shared/statement/rules";

import { buildFields } from "../buildFields";

type Changes = Partial<ConstraintFields>;
const neighbour = (
  changes: Changes,
  { number = "FL-0007", sameCitation = false }: Partial<Neighbour> = {},
): Neighbour => ({ number, sameCitation, fields: buildFields(changes) });
const found = (changes: Changes, ...neighbours: Neighbour[]): Finding[] =>
  registryFindings(buildFields(changes), neighbours);
const codes = (changes: Changes, ...neighbours: Neighbour[]): string[] =>
  found(changes, ...neighbours).map(({ code }) => code);
const same = { sameCitation: true } as const;

describe("a record beside its neighbours", () => {
  it("is told of a near-duplicate, whose it is and what to do", () => {
    const duplicate = (words: string): Finding => ({
      grade: "mustAnswer",
      code: "nearDuplicate.FL-0007",
      fields: ["value", "z"],
      message: `FL-0007 says nearly the same ${words}. Look whether it is the same result, and say what sets this one apart.`,
    });
    expect(found({}, neighbour({}, same))).toEqual([duplicate("from the same paper")]);
    expect(found({}, neighbour({}))).toEqual([duplicate("with the same method")]);
    // Of another method only the same paper relates the two.
    const other = { methodTags: ["darkPixels"] };
    expect(found({}, neighbour(other, same))).toEqual([duplicate("from the same paper")]);
    expect(found({}, neighbour(other))).toEqual([]);
  });

  it("is told of another answer to its question", () => {
    expect(found({}, neighbour({ value: "0.8" }, same))).toEqual([
      {
        grade: "note",
        code: "sameQuestion.FL-0007",
        fields: ["alternativesGroup"],
        message:
          "FL-0007 of the same paper states the same quantity there. If both answer one question, put them in one alternatives group.",
      },
    ]);
    expect(codes({}, neighbour({ value: "0.8" }))).toEqual([]);
    expect(codes({}, neighbour({ value: "0.8", methodTags: ["darkPixels"] }, same))).toEqual([]);
  });

  it("hears nothing of its alternatives, nor of what can't be used", () => {
    const group = { alternativesGroup: "A" };
    expect(codes(group, neighbour(group, same))).toEqual([]);
    expect(codes(group, neighbour({ alternativesGroup: "B" }, same))).toHaveLength(1);
    expect(codes({}, neighbour({ value: null }, same))).toEqual([]);
    expect(codes({ value: null }, neighbour({}, same))).toEqual([]);
  });

  it("is compared with what stands at the same place", () => {
    const near = (own: Changes, other: Changes): boolean =>
      codes(own, neighbour(other, same)).length > 0;
    expect(near({ z: "7.12" }, { z: "7.17" })).toBe(true);
    expect(near({ z: "7.12" }, { z: "7.18" })).toBe(false);
    // A range stands at its middle, and a record without redshift only beside another.
    const range = (zLow: string, zHigh: string): Changes => ({
      z: null,
      zLow,
      zHigh,
      zRole: "binAverage",
    });
    expect(near({ z: "7.00" }, range("6.6", "7.4"))).toBe(true);
    expect(near({ z: "7.00" }, range("6.6", "7.6"))).toBe(false);
    expect(near({ z: null, zLow: "7" }, { z: null, zHigh: "7" })).toBe(true);
    expect(near({ z: "7.00" }, { z: null })).toBe(false);
    // A fraction is not an optical depth, and optical depths need no redshift.
    expect(near({}, { quantity: "opticalDepth" })).toBe(false);
    expect(near({ quantity: "opticalDepth" }, { quantity: "opticalDepth", z: "9" })).toBe(true);
    const depth = (rangeLow: string, rangeHigh: string): Changes => ({
      quantity: "opticalDepthRange",
      rangeLow,
      rangeHigh,
    });
    expect(near(depth("15", "30"), depth("15.05", "29.95"))).toBe(true);
    expect(near(depth("15", "30"), depth("15.1", "30"))).toBe(false);
    expect(near(depth("15", "30"), depth("15", "30.1"))).toBe(false);
    const at = (fraction: string): Changes => ({ quantity: "redshiftAtFraction", fraction });
    expect(near(at("0.5"), at("0.505"))).toBe(true);
    expect(near(at("0.5"), at("0.51"))).toBe(false);
    const duration = (fractionFrom: string, fractionTo: string, more: Changes = {}): Changes => ({
      quantity: "duration",
      fractionFrom,
      fractionTo,
      durationUnit: "redshift",
      ...more,
    });
    expect(near(duration("0.75", "0.25"), duration("0.75", "0.25"))).toBe(true);
    expect(near(duration("0.75", "0.25"), duration("0.8", "0.25"))).toBe(false);
    expect(near(duration("0.75", "0.25"), duration("0.75", "0.2"))).toBe(false);
    expect(near(duration("0.75", "0.25"), duration("0.75", "0.25", { durationUnit: "myr" }))).toBe(
      false,
    );
  });
});

describe("alternatives", () => {
  const said = (changes: Changes, ...neighbours: Neighbour[]): Finding[] =>
    alternativesFindings(buildFields(changes), neighbours);
  const group = { alternativesGroup: "A" } as const;

  it("are told what is missing, doubled or alone", () => {
    expect(said({ alternativesPreferred: true })).toEqual([
      {
        grade: "error",
        code: "preferredWithoutGroup",
        fields: ["alternativesGroup", "alternativesPreferred"],
        message:
          "Preferred among which alternatives? Give the group its label, the same in each of them.",
      },
    ]);
    const preferred = { ...group, alternativesPreferred: true };
    expect(said(preferred, neighbour(preferred, same))).toEqual([
      {
        grade: "error",
        code: "preferredTwice",
        fields: ["alternativesPreferred"],
        message:
          "FL-0007 is the preferred answer of this group already. The authors prefer one at most: look which of them it is.",
      },
    ]);
    const alone: Finding[] = [
      {
        grade: "note",
        code: "groupOfOne",
        fields: ["alternativesGroup"],
        message:
          "No other approved record of this paper is in this group yet. Use the same label in each of them.",
      },
    ];
    expect(said(group)).toEqual(alone);
    expect(said(group, neighbour({ alternativesGroup: "B" }, same))).toEqual(alone);
    expect(said(group, neighbour(group))).toEqual(alone);
    expect(said(group, neighbour(group, same))).toEqual([]);
  });
});

describe("numbers are nearly the same", () => {
  const alike = (own: Changes, other: Changes): boolean =>
    codes(own, neighbour(other)).includes("nearDuplicate.FL-0007");

  it("within two per cent, for small fractions within 0.005", () => {
    expect(alike({ value: "0.500" }, { value: "0.510" })).toBe(true);
    expect(alike({ value: "0.500" }, { value: "0.511" })).toBe(false);
    expect(alike({ value: "0.010", minus: "0.01" }, { value: "0.015", minus: "0.01" })).toBe(true);
    expect(alike({ value: "0.010", minus: "0.01" }, { value: "0.016", minus: "0.01" })).toBe(false);
    const depth = (value: string): Changes => ({ quantity: "opticalDepth", value });
    expect(alike(depth("0.0500"), depth("0.0510"))).toBe(true);
    // 0.005 would be a tenth of an optical depth.
    expect(alike(depth("0.0500"), depth("0.0530"))).toBe(false);
  });

  it("in every number, of one kind, one scale", () => {
    expect(alike({}, { plus: "0.30" })).toBe(false);
    expect(alike({}, { minus: "0.30" })).toBe(false);
    const limit = { kind: "upperLimit", plus: null, minus: null } as const;
    expect(alike(limit, limit)).toBe(true);
    expect(alike({}, limit)).toBe(false);
    expect(alike(limit, { ...limit, limitBase: "0.42", limitSigma: "0.1" })).toBe(false);
    const base = (limitSigma: string): Changes => ({ ...limit, limitBase: "0.3", limitSigma });
    expect(alike(base("0.1"), base("0.1"))).toBe(true);
    expect(alike(base("0.1"), base("0.2"))).toBe(false);
    const band = (bandLow: string, bandHigh: string): Changes => ({
      kind: "band",
      bandLow,
      bandHigh,
    });
    expect(alike(band("0.3", "0.7"), band("0.3", "0.7"))).toBe(true);
    expect(alike(band("0.3", "0.7"), band("0.2", "0.7"))).toBe(false);
    expect(alike(band("0.3", "0.7"), band("0.3", "0.8"))).toBe(false);
    const log = { scale: "log10", value: "-0.42" } as const;
    expect(alike(log, log)).toBe(true);
    expect(alike({ ...log, value: "0" }, { value: "0" })).toBe(false);
  });

  it("never for curves and words, which hold none", () => {
    for (const kind of ["curve", "qualitative"] as const)
      expect(alike({ kind }, { kind })).toBe(false);
  });
});

describe("a 95 % width like the 68 % ones around it", () => {
  const wide = (width: string, more: Changes = {}): Changes => ({
    level: "percent95",
    plus: width,
    minus: width,
    ...more,
  });
  const others = (changes: Changes[] = [{}, {}, {}]): Neighbour[] =>
    changes.map((change, i) =>
      neighbour(
        { value: "0.9", z: "7.5", plus: "0.20", minus: "0.20", ...change },
        { number: `FL-000${i + 1}` },
      ),
    );
  const asked = (own: Changes, list: Neighbour[]): boolean =>
    codes(own, ...list).includes("widthLikeOneSigma");

  it("must be answered, with both numbers and where they come from", () => {
    const list = others([{ plus: "0.16", minus: "0.16" }, {}, { plus: "0.30" }, { plus: "0.1" }]);
    expect(found(wide("0.2"), ...list)).toEqual([
      {
        grade: "mustAnswer",
        code: "widthLikeOneSigma",
        fields: ["level", "plus", "minus"],
        // Half-widths 0.15, 0.16, 0.20, 0.25: the median of four is the mean of the middle two.
        message:
          "The half-width 0.200 is entered at 95 %, yet the 68 % half-widths of Galaxy damping wing nearby have a median of 0.180 (FL-0001, FL-0002, FL-0003). Look whether the paper's level is 68 %.",
      },
    ]);
  });

  it("beside an odd number of them takes the middle one", () => {
    // 0.10, 0.20, 0.40: within 30 % of 0.20, not of a mean.
    const list = others([{ plus: "0.10", minus: "0.10" }, {}, { plus: "0.40", minus: "0.40" }]);
    expect(asked(wide("0.25"), list)).toBe(true);
    expect(asked(wide("0.28"), list)).toBe(false);
    expect(asked(wide("0.15"), list)).toBe(true);
  });

  it("within 30 % of their median, of two or more", () => {
    expect(asked(wide("0.26"), others())).toBe(true);
    expect(asked(wide("0.27"), others())).toBe(false);
    expect(asked(wide("0.14"), others())).toBe(true);
    expect(asked(wide("0.13"), others())).toBe(false);
    expect(asked(wide("0.2"), others([{}]))).toBe(false);
    expect(asked(wide("0.2"), others([{}, {}]))).toBe(true);
    // The half-width is the mean of both sides.
    expect(asked({ ...wide("0.1"), plus: "0.3" }, others())).toBe(true);
  });

  it("at that level only, on either side", () => {
    for (const level of ["percent95", "twoSigma"] as const) {
      expect(asked(wide("0.2", { level }), others())).toBe(true);
    }
    for (const level of ["percent68", "percent90", "notStated"] as const) {
      expect(asked(wide("0.2", { level }), others())).toBe(false);
    }
    expect(asked(wide("0.2", { level: "other", levelPercent: "94.5" }), others())).toBe(true);
    expect(asked(wide("0.2", { level: "other", levelPercent: "94.3" }), others())).toBe(false);
    for (const level of ["oneSigma", "percent68"] as const) {
      expect(asked(wide("0.2"), others([{ level }, { level }]))).toBe(true);
    }
    for (const level of ["percent90", "notStated"] as const) {
      expect(asked(wide("0.2"), others([{ level }, { level }]))).toBe(false);
    }
  });

  it("of the same method, quantity, scale and kind, within one in redshift", () => {
    const twice = (change: Changes): Neighbour[] => others([change, change]);
    expect(asked(wide("0.2"), twice({ methodTags: ["darkPixels"] }))).toBe(false);
    expect(asked(wide("0.2"), twice({ quantity: "opticalDepth" }))).toBe(false);
    expect(asked(wide("0.2"), twice({ scale: "log10", value: "-1" }))).toBe(false);
    expect(asked(wide("0.2"), twice({ kind: "upperLimit" }))).toBe(false);
    expect(asked(wide("0.2", { kind: "upperLimit" }), others())).toBe(false);
    expect(asked(wide("0.2"), twice({ z: "8.12" }))).toBe(true);
    expect(asked(wide("0.2"), twice({ z: "8.13" }))).toBe(false);
    expect(asked(wide("0.2"), twice({ value: null }))).toBe(false);
    const depth = { quantity: "opticalDepth" } as const;
    expect(asked(wide("0.2", depth), twice({ ...depth, z: "20" }))).toBe(true);
    // The second of two methods counts as well.
    expect(asked(wide("0.2", { methodTags: ["darkPixels", "galaxyDampingWing"] }), others())).toBe(
      true,
    );
    expect(asked(wide("0", { level: "percent95" }), twice({ plus: "0", minus: "0" }))).toBe(false);
  });
});
