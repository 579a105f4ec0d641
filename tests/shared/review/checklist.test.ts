import { checklistFor } from "~shared/review/checklist";
import { QUANTITIES, STATEMENT_KINDS, type ConstraintFields } from "~shared/statement/fields";

import { buildFields } from "../buildFields";

const codes = (changes: Partial<ConstraintFields>): string[] =>
  checklistFor(buildFields(changes)).map(({ code }) => code);
const text = (changes: Partial<ConstraintFields>, code: string): string | undefined =>
  checklistFor(buildFields(changes)).find((point) => point.code === code)?.text;
const ALWAYS = ["printedText", "data", "dependence"];

describe("the checklist", () => {
  it.each<[Partial<ConstraintFields>, string[]]>([
    [{}, ["place", "fraction", "redshift", "sides", "level"]],
    [{ scale: "log10" }, ["place", "fraction", "scale", "redshift", "sides", "level"]],
    [
      { kind: "upperLimit", limitBase: null },
      ["place", "fraction", "redshift", "direction", "level"],
    ],
    [
      { kind: "lowerLimit", limitBase: "0.1" },
      ["place", "fraction", "redshift", "direction", "base", "level"],
    ],
    [{ kind: "band" }, ["place", "fraction", "redshift", "ends", "level"]],
    [
      { kind: "curve", value: "0.3" },
      ["place", "fraction", "redshift", "columns", "sides", "level"],
    ],
    [{ kind: "curve", value: null }, ["place", "fraction", "redshift", "columns"]],
    [{ kind: "qualitative" }, ["place", "fraction", "redshift", "noNumber"]],
    [{ quantity: "opticalDepth" }, ["place", "assumed", "sides", "level"]],
    [{ quantity: "opticalDepthRange" }, ["place", "assumed", "sides", "level"]],
    [{ quantity: "redshiftAtFraction" }, ["place", "fraction", "sides", "level"]],
    [{ quantity: "duration" }, ["place", "fraction", "sides", "level"]],
    [{ readOffFigure: true }, ["place", "fraction", "redshift", "sides", "level", "figure"]],
    [{ quantity: null, kind: null }, ["place"]],
  ])("of %j asks for %j", (changes, expected) => {
    expect(codes(changes)).toEqual([...expected, ...ALWAYS]);
  });

  it("says what to confirm where a fraction, a level or the data are of another sort", () => {
    expect(text({}, "fraction")).toContain("neutral or ionized");
    expect(text({ species: "electron" }, "fraction")).toContain("those of helium");
    expect(text({ level: "notStated" }, "level")).toContain("names no level");
    expect(text({ kind: "upperLimit" }, "level")).toContain("one-sided or two-sided");
    expect(text({ kind: "upperLimit", level: "notStated" }, "level")).toContain("names no level");
    expect(text({ dataKnown: false }, "data")).toContain("doesn't say which data");
    expect(text({ quantity: "opticalDepth" }, "assumed")).toContain("History family, helium");
  });

  it("asks each point once, in a sentence, for whatever quantity and kind", () => {
    for (const quantity of QUANTITIES) {
      for (const kind of STATEMENT_KINDS) {
        const points = checklistFor(buildFields({ quantity, kind, limitBase: "0.1" }));
        expect(new Set(points.map(({ code }) => code)).size).toBe(points.length);
        for (const point of points) expect(point.text).toMatch(/^[A-Z].*[a-z]\.$/);
      }
    }
  });
});
