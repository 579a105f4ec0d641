import type { ConstraintFilter } from "~shared/filter/filter";
import { searchWords } from "~shared/filter/filter";
import { matchesFilter, type FilteredRecord } from "~shared/filter/matches";

const RECORD: FilteredRecord = {
  quantity: "neutralFraction",
  kind: "upperLimit",
  weighting: "volume",
  versionRead: "published",
  zUsed: 6.5,
  year: 2024,
  families: ",dampingWing,forestOpacity,",
  tags: ",darkGaps,quasarDampingWing,",
  searchText: "FL-0042\nArvensis2031\nDark gaps at high redshift\nTárrowin\nx_HI < 0.3 (100%)",
};

const NOTHING: FilteredRecord = {
  ...RECORD,
  quantity: null,
  kind: null,
  weighting: null,
  versionRead: null,
  zUsed: null,
  year: null,
  families: ",,",
  tags: ",,",
  searchText: "",
};

const matches = (filter: ConstraintFilter, record = RECORD) => matchesFilter(record, filter);

/** A part of a filter that the record meets, and one that it does not. */
const PARTS: readonly (readonly [name: string, met: ConstraintFilter, missed: ConstraintFilter])[] =
  [
    ["family", { families: ["cmb", "dampingWing"] }, { families: ["cmb", "other"] }],
    ["method", { tags: ["darkGaps"] }, { tags: ["darkPixels"] }],
    ["quantity", { quantities: ["neutralFraction"] }, { quantities: ["opticalDepth"] }],
    ["kind", { kinds: ["band", "upperLimit"] }, { kinds: ["lowerLimit"] }],
    ["weighting", { weightings: ["volume"] }, { weightings: ["mass"] }],
    ["version", { versions: ["published"] }, { versions: ["preprint"] }],
    ["redshift from", { zFrom: 6.5 }, { zFrom: 6.51 }],
    ["redshift to", { zTo: 6.5 }, { zTo: 6.49 }],
    ["year from", { yearFrom: 2024 }, { yearFrom: 2025 }],
    ["year to", { yearTo: 2024 }, { yearTo: 2023 }],
    ["text", { text: "arvensis gaps" }, { text: "arvensis voids" }],
  ];

it.each(PARTS)(
  "%s: a record that meets it is found, one that does not is not",
  (_, met, missed) => {
    expect([matches(met), matches(missed)]).toEqual([true, false]);
  },
);

it.each(PARTS)("%s: a record without such a thing is not found", (_, met) => {
  expect(matches(met, NOTHING)).toBe(false);
});

it("every part must be met, not one of them", () => {
  const all = Object.assign({}, ...PARTS.map(([, met]) => met)) as ConstraintFilter;
  expect(matches(all)).toBe(true);
  for (const [, , missed] of PARTS) expect(matches({ ...all, ...missed })).toBe(false);
});

it("what is open, null or empty asks for nothing", () => {
  for (const record of [RECORD, NOTHING]) {
    expect(matches({}, record)).toBe(true);
    expect(matches({ families: [], tags: null, kinds: [], text: "  ", zFrom: null }, record)).toBe(
      true,
    );
  }
});

it("a tag is looked for as a whole word", () => {
  expect(matches({ tags: ["dark"] })).toBe(false);
  expect(matches({ tags: ["dampingWing"] })).toBe(false);
});

it("a redshift of zero is a bound like another", () => {
  expect(matches({ zTo: 0 })).toBe(false);
  expect(matches({ zFrom: 0 })).toBe(true);
  expect(matches({ zFrom: 0 }, NOTHING)).toBe(false);
});

describe("the state", () => {
  const found = (states: ConstraintFilter["states"]) =>
    (["current", "superseded", "withdrawn"] as const).filter((state) =>
      matches({ states }, { ...RECORD, state }),
    );

  it("lets withdrawn records through only where they are asked for", () => {
    for (const open of [undefined, null, []])
      expect(found(open)).toEqual(["current", "superseded"]);
    expect(found(["withdrawn"])).toEqual(["withdrawn"]);
    expect(found(["current", "withdrawn"])).toEqual(["current", "withdrawn"]);
  });

  it("is current where the record says none", () => {
    expect(matches({ states: ["current"] })).toBe(true);
    expect(matches({ states: ["superseded"] })).toBe(false);
  });
});

describe("the text", () => {
  it("is found word by word, in any order, without case and accents, inside words", () => {
    expect(matches({ text: "REDSHIFT tarrow fl-0042" })).toBe(true);
    expect(matches({ text: "Tärrowin" })).toBe(true);
  });

  it("stands for itself where a database would read a pattern", () => {
    expect(matches({ text: "100%" })).toBe(true);
    expect(matches({ text: "3%" })).toBe(false);
    expect(matches({ text: "x_HI" })).toBe(true);
    expect(matches({ text: "d_rk" })).toBe(false);
  });

  it("is cut after twelve words of a hundred letters, as the database is asked", () => {
    const twelve = Array.from({ length: 12 }, () => "gaps").join(" ");
    expect(matches({ text: `${twelve} voids` })).toBe(true);
    expect(matches({ text: "gaps voids" })).toBe(false);
    expect(searchWords({ text: ` ${"a".repeat(150)}\n b ` })).toEqual(["a".repeat(100), "b"]);
    expect(searchWords({})).toEqual([]);
  });
});
