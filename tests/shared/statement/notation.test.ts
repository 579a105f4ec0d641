import fc from "fast-check";

import { asUsed } from "~shared/statement/asUsed";
import type { ConstraintFields } from "~shared/statement/fields";
import { emptyFields } from "~shared/statement/fields";
import {
  lineText,
  notationAsPrinted,
  notationAsUsed,
  recordTitle,
  shortText,
} from "~shared/statement/notation";
import { FIELD_NAMES, fieldText } from "~shared/statement/words";

import { buildFields } from "../buildFields";
import { arbitraryFields } from "./arbitraryFields";

const printed = (changes: Partial<ConstraintFields>) => notationAsPrinted(buildFields(changes));
const used = (changes: Partial<ConstraintFields>) => notationAsUsed(asUsed(buildFields(changes))!);

describe("as printed", () => {
  it.each([
    [{}, "x_HI = 0.42 +0.19 \u22120.17 at 68 %"],
    [{ plus: "0.10", minus: "0.10" }, "x_HI = 0.42 ± 0.10 at 68 %"],
    [
      { plus: "+0.19", minus: "-0.17", level: "oneSigma" },
      "x_HI = 0.42 +0.19 \u22120.17 at one sigma",
    ],
    [{ kind: "upperLimit", value: "0.30", level: "percent95" }, "x_HI < 0.30 at 95 %"],
    [
      { kind: "upperLimit", value: null, limitBase: "0.03", limitSigma: "0.06" },
      "x_HI < 0.03 + 0.06 at 68 %",
    ],
    [
      { kind: "lowerLimit", species: "ionized", value: "0.9", level: "notStated" },
      "x_HII > 0.9 level not stated",
    ],
    [{ kind: "band", bandLow: "0.3", bandHigh: "0.70" }, "x_HI from 0.3 to 0.70 at 68 %"],
    [
      { scale: "log10", value: "-3.5", plus: "0.2", minus: "0.2" },
      "log10 x_HI = \u22123.5 ± 0.2 at 68 %",
    ],
    [{ kind: "qualitative" }, "x_HI qualitative"],
    [
      {
        quantity: "opticalDepthRange",
        rangeLow: "15",
        rangeHigh: "30",
        kind: "upperLimit",
        value: "0.016",
      },
      "τ(15, 30) < 0.016 at 68 %",
    ],
    [
      {
        quantity: "duration",
        durationUnit: "myr",
        kind: "upperLimit",
        value: "250",
        level: "other",
        levelPercent: "99.7",
      },
      "Δt < 250 Myr at 99.7 %",
    ],
  ] as const)("%j reads %p", (changes, text) => {
    expect(lineText(printed(changes))).toBe(text);
  });

  it("never rounds or pads a digit", () => {
    expect(printed({ value: "0.420", plus: "0.1900000000001" })).toMatchObject({
      value: "0.420",
      plus: "0.1900000000001",
    });
  });
});

describe("as used", () => {
  it("is neutral, with a limit turned", () => {
    expect(lineText(used({ species: "ionized", kind: "lowerLimit", value: "0.45" }))).toBe(
      "x_HI < 0.55 at 68 %",
    );
    expect(lineText(used({ level: "twoSigma" }))).toBe("x_HI = 0.42 +0.19 \u22120.17 at 95.45 %");
  });

  it("says that a number is derived, and cuts computed digits for the eye only", () => {
    const fields = { species: "electron", helium: "included", value: "0.5" } as const;
    const notation = used(fields);
    // 1 − 0.5 / 1.0818848 = 0.5378436
    expect(notation).toMatchObject({ derived: true, value: "0.538" });
    expect(used({ value: "0.4" }).derived).toBe(false);
  });
});

describe("recordTitle", () => {
  it.each([
    [{ methodTags: ["quasarDampingWing"], z: "7.51" }, "Quasar damping wing at z = 7.51"],
    [
      { methodTags: ["darkPixels"], z: "5.65", zLow: "5.5", zHigh: "5.8", zRole: "binAverage" },
      "Dark pixels, z = 5.5 to 5.8",
    ],
    [
      { methodTags: ["cmbPolarization"], quantity: "opticalDepth" },
      "CMB polarization: total optical depth",
    ],
    [
      { methodTags: ["kineticSz"], quantity: "duration", fractionFrom: "0.75", fractionTo: "0.25" },
      "Kinetic SZ power: duration from 0.75 to 0.25",
    ],
    [{ methodTags: ["darkGaps", "kineticSz"], z: "6" }, "Several methods at z = 6"],
  ] as [Partial<ConstraintFields>, string][])("of %j is %p", (changes, title) => {
    expect(recordTitle(buildFields(changes))).toBe(title);
  });

  it("of an empty draft says so little as is known", () => {
    expect(recordTitle(emptyFields())).toBe("Constraint");
  });
});

it("every field has a name and a text, whatever it holds", () => {
  fc.assert(
    fc.property(arbitraryFields, (fields) => {
      for (const name of Object.keys(fields) as (keyof ConstraintFields)[]) {
        expect(FIELD_NAMES[name]).toMatch(/^\S/);
        expect(typeof fieldText(name, fields)).toBe("string");
      }
      const result = asUsed(fields);
      expect(shortText(notationAsPrinted(fields))).not.toMatch(/null|undefined|NaN/);
      if (result) expect(lineText(notationAsUsed(result))).not.toMatch(/null|undefined|NaN/);
    }),
    { seed: 20261201, numRuns: 300 },
  );
});

it("words use no sign that the fonts lack", () => {
  const words = JSON.stringify([
    FIELD_NAMES,
    asUsed(buildFields({ level: "percent95", species: "electron", helium: "included" })),
  ]);
  expect(words).not.toMatch(/[\u2192\u2264\u2265\u2248\u2260]/);
});
