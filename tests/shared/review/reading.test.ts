import fc from "fast-check";

import {
  compareReading,
  diffFields,
  fieldsAgree,
  fieldsToReread,
  mergeReading,
  READING_FIELDS,
  type ReadingContent,
  readingFieldsFor,
  readingMissing,
  tidyReading,
} from "~shared/review/reading";
import { emptyFields } from "~shared/statement/fields";

import { buildFields } from "../buildFields";
import { arbitraryFields } from "../statement/arbitraryFields";

describe("fieldsAgree", () => {
  it.each([
    ["value", "0.3", "0.30", true],
    ["value", "0.11", "0.17", false],
    ["value", "-0.5", "\u22120.50", true],
    ["value", "-0.5", "0.5", false],
    ["minus", "-0.17", "0.17", true],
    ["plus", "+0.19", "0.19", true],
    ["value", null, "", true],
    ["value", null, "0", false],
    ["value", "O.3", "0.3", false],
    ["z", "7.1", "7.10", true],
    ["kind", "upperLimit", "lowerLimit", false],
    ["weighting", null, "unknown", true],
    ["weighting", null, "volume", false],
  ] as const)("%s %p and %p: %p", (name, a, b, expected) => {
    expect(fieldsAgree(name, a, b)).toBe(expected);
  });

  it("takes methods as a set", () => {
    expect(fieldsAgree("methodTags", ["darkGaps", "nearZones"], ["nearZones", "darkGaps"])).toBe(
      true,
    );
    expect(fieldsAgree("methodTags", ["darkGaps"], ["darkGaps", "nearZones"])).toBe(false);
  });

  it("is symmetric, and every content agrees with itself", () => {
    fc.assert(
      fc.property(arbitraryFields, arbitraryFields, (a: ReadingContent, b: ReadingContent) => {
        for (const name of READING_FIELDS) {
          expect(fieldsAgree(name, a[name], a[name])).toBe(true);
          expect(fieldsAgree(name, a[name], b[name])).toBe(fieldsAgree(name, b[name], a[name]));
        }
      }),
      { seed: 20261201, numRuns: 200 },
    );
  });
});

describe("what an editor reads", () => {
  it("starts with the quantity, the kind and the method, and follows from the editor's choices", () => {
    expect(readingFieldsFor(emptyFields())).toEqual(["quantity", "kind", "methodTags"]);
    const choices = { ...emptyFields(), quantity: "opticalDepth", kind: "upperLimit" } as const;
    expect(readingFieldsFor(choices)).toEqual([
      "quantity",
      "kind",
      "value",
      "limitBase",
      "limitSigma",
      "level",
      "methodTags",
    ]);
  });

  it("is never a text of the submission: remarks, place and printed text are not read", () => {
    fc.assert(
      fc.property(arbitraryFields, (fields) => {
        for (const name of readingFieldsFor(fields)) expect(READING_FIELDS).toContain(name);
      }),
      { seed: 20261201 },
    );
  });

  it("is complete when every field the choices need is given", () => {
    expect(readingMissing(buildFields())).toEqual([]);
    expect(readingMissing(buildFields({ minus: null, weighting: null }))).toEqual([
      "weighting",
      "minus",
    ]);
    expect(readingMissing(buildFields({ minus: null, weighting: null }), ["minus"])).toEqual([
      "minus",
    ]);
  });

  it("drops what was typed before a choice changed", () => {
    const reading = tidyReading(buildFields({ kind: "upperLimit" }));
    expect([reading.value, reading.plus, reading.printedText]).toEqual(["0.42", null, null]);
  });
});

describe("compareReading", () => {
  it("finds the one field that differs", () => {
    const reading = tidyReading(buildFields({ minus: "0.11" }));
    const differing = compareReading(reading, buildFields()).filter((field) => !field.agrees);
    expect(differing).toEqual([
      { field: "minus", reading: "0.11", submitted: "0.17", agrees: false },
    ]);
  });

  it("shows words, and fields that only one side calls for", () => {
    const reading = tidyReading(buildFields({ kind: "upperLimit" }));
    const compared = compareReading(reading, buildFields());
    expect(compared.find((field) => field.field === "kind")).toEqual({
      field: "kind",
      reading: "Upper limit",
      submitted: "Two-sided value",
      agrees: false,
    });
    expect(compared.find((field) => field.field === "plus")).toMatchObject({
      reading: null,
      agrees: false,
    });
    expect(compared.map((field) => field.field)).not.toContain("zLow");
  });

  it("agrees throughout with a reading of the same content", () => {
    fc.assert(
      fc.property(arbitraryFields, (fields) => {
        const compared = compareReading(tidyReading(fields), fields);
        expect(compared.filter((field) => !field.agrees)).toEqual([]);
      }),
      { seed: 20261201, numRuns: 200 },
    );
  });
});

describe("a resubmission", () => {
  const submitted = buildFields();
  const reading = tidyReading(buildFields({ minus: "0.11" }));

  it("is read again in the fields that changed or differed, and in no other", () => {
    expect(fieldsToReread(reading, submitted, buildFields({ plus: "0.20" }))).toEqual([
      "plus",
      "minus",
    ]);
    expect(
      fieldsToReread(tidyReading(submitted), submitted, buildFields({ value: "0.420" })),
    ).toEqual([]);
    expect(
      fieldsToReread(tidyReading(submitted), submitted, buildFields({ remark: "new" })),
    ).toEqual([]);
  });

  it.each([
    { kind: "upperLimit" },
    { quantity: "opticalDepth" },
    { species: "ionized" },
    { scale: "log10" },
  ] as const)("is read again as a whole when %j changes", (changes) => {
    expect(fieldsToReread(reading, submitted, buildFields(changes))).toEqual(READING_FIELDS);
  });

  it("is read as a whole when the reading had another kind, or there is none", () => {
    const other = tidyReading(buildFields({ kind: "upperLimit" }));
    expect(fieldsToReread(other, submitted, submitted)).toEqual(READING_FIELDS);
    expect(fieldsToReread(null, submitted, submitted)).toEqual(READING_FIELDS);
  });

  it("keeps what was read before in the fields not asked for", () => {
    const partial = { ...emptyFields(), minus: "0.17" };
    const merged = mergeReading(reading, partial, ["minus"]);
    expect(merged).toEqual(tidyReading(submitted));
  });
});

describe("diffFields", () => {
  it("shows a changed digit, a changed list and a cleared field, and no other", () => {
    const after = buildFields({ value: "0.420", methodTags: ["darkGaps"], place: null });
    expect(diffFields(buildFields(), after).sort()).toEqual(["methodTags", "place", "value"]);
    expect(diffFields(buildFields(), buildFields())).toEqual([]);
  });
});

describe("a tabulated curve", () => {
  const table = (change: (rows: string[]) => string[] = (rows) => rows) =>
    change(
      Array.from(
        { length: 21 },
        (_, i) => `${(i / 20).toFixed(2)},${(1 + i * (20 - i)).toFixed(1)}`,
      ),
    ).join("\n");
  const submitted = buildFields({
    kind: "curve",
    value: null,
    plus: null,
    minus: null,
    level: null,
    estimator: null,
    curveTable: `x,p\n${table()}`,
    curveColumn: "density",
  });
  const facts = { curveRows: "21", curveFirst: "0", curveLast: "1.0", curvePeak: ".5" };
  const reading: ReadingContent = { ...submitted, curveTable: null, ...facts };
  const differing = (content: ReadingContent, against = submitted) =>
    compareReading(tidyReading(content), against)
      .filter(({ agrees }) => !agrees)
      .map(({ field }) => field);

  it("is read by its facts, never by its rows", () => {
    const asked = readingFieldsFor({ ...emptyFields(), quantity: "opticalDepth", kind: "curve" });
    expect(asked).toEqual([
      "quantity",
      "kind",
      "value",
      "plus",
      "minus",
      "curveColumn",
      "curveRows",
      "curveFirst",
      "curveLast",
      "curvePeak",
      "methodTags",
    ]);
    expect(READING_FIELDS).not.toContain("curveTable");
    expect(tidyReading({ ...reading, curveTable: "0,1" })).toEqual(tidyReading(reading));
    // Whoever hands in the whole table has read its facts.
    expect(tidyReading(submitted)).toMatchObject({
      ...facts,
      curveTable: null,
      curveFirst: "0.00",
      curveLast: "1.00",
      curvePeak: "0.50",
    });
    expect(readingMissing({ ...reading, curvePeak: null })).toEqual(["curvePeak"]);
    expect(readingMissing(reading)).toEqual([]);
  });

  it("agrees by the printed digits", () => {
    expect(differing(reading)).toEqual([]);
    expect(compareReading(tidyReading(reading), submitted)).toContainEqual({
      field: "curvePeak",
      reading: ".5",
      submitted: "0.50",
      agrees: true,
    });
  });

  it.each([
    ["curveRows", "20"],
    ["curveFirst", "0.05"],
    ["curveLast", "0.95"],
    ["curvePeak", "0.45"],
  ] as const)("differs at %s", (name, text) => {
    expect(differing({ ...reading, [name]: text })).toEqual([name]);
  });

  it("differs where an interval is quoted on one side only", () => {
    const quoted = { value: "0.50", plus: "0.2", minus: "0.2", level: "oneSigma" } as const;
    expect(differing({ ...reading, ...quoted, estimator: "median" })).toEqual([
      "value",
      "plus",
      "minus",
      "level",
      "estimator",
    ]);
  });

  it("differs in all its facts from what is no curve", () => {
    const limit = buildFields({ kind: "upperLimit", plus: null, minus: null, estimator: null });
    expect(differing(reading, limit)).toEqual(
      expect.arrayContaining(["kind", "curveRows", "curveFirst", "curveLast", "curvePeak"]),
    );
  });

  it("is read again when its table changed, and not otherwise", () => {
    const other = { ...submitted, curveTable: table((rows) => rows.with(3, "0.15,51.5")) };
    expect(fieldsToReread(reading, submitted, other)).toEqual([
      "curveRows",
      "curveFirst",
      "curveLast",
      "curvePeak",
    ]);
    expect(fieldsToReread(reading, submitted, { ...submitted, remark: "as in the file" })).toEqual(
      [],
    );
  });
});
