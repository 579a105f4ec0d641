import {
  FAMILY_NAMES,
  familiesOf,
  familyOf,
  findTag,
  looseWord,
  METHOD_FAMILIES,
  methodTags,
} from "~shared/methods/vocabulary";

it("a tag is unique, and so is every spelling of it", () => {
  const spellings = methodTags().flatMap((entry) => [
    ...new Set([entry.tag, entry.name, ...entry.aliases].map(looseWord)),
  ]);
  expect(spellings.filter((word, index) => spellings.indexOf(word) !== index)).toEqual([]);
});

it("every family has a name and at least one tag", () => {
  for (const family of METHOD_FAMILIES) {
    expect(FAMILY_NAMES[family]).not.toBe("");
    expect(methodTags().some((entry) => entry.family === family)).toBe(true);
  }
});

it.each([
  ["damping wing (quasar)", "quasarDampingWing"],
  ["Damping-Wing (Gamma-ray burst)", "burstDampingWing"],
  ["Ly α emitter luminosity function", "emitterLuminosityFunction"],
  ["Lyman-alpha equivalent widths", "equivalentWidths"],
  ["", null],
  ["?", null],
])("%p means %p", (word, tag) => {
  expect(findTag(word)?.tag ?? null).toBe(tag);
});

it("tags of one family give that family, tags of several give other", () => {
  expect(familyOf(["darkGaps", "nearZones"])).toBe("forestOpacity");
  expect(familyOf(["darkGaps", "kineticSz"])).toBe("other");
  expect(familiesOf(["kineticSz", "darkGaps"])).toEqual(["forestOpacity", "cmb"]);
  expect(familyOf(["tea leaves"])).toBeNull();
});
