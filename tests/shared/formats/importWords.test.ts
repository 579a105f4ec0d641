import {
  choiceWords,
  isWordChoice,
  isWordField,
  proposeWords,
  wordChoices,
  type WordField,
} from "~shared/formats/importFields";
import { methodTags } from "~shared/methods/vocabulary";

const FIELDS = [
  "quantity",
  "level",
  "estimator",
  "conditionedOn",
  "cosmicVariance",
  "versionRead",
  "methodTags",
] as const satisfies readonly WordField[];

it("fields of words are known by name, numbers and texts are none", () => {
  for (const field of FIELDS) expect(isWordField(field)).toBe(true);
  for (const field of ["value", "printedText", "toString"]) expect(isWordField(field)).toBe(false);
});

it.each(FIELDS)("every choice of %s is one, has words, and is found by its own name", (field) => {
  for (const choice of wordChoices(field)) {
    expect(isWordChoice(field, choice)).toBe(true);
    expect(choiceWords(field, choice)).toMatch(/^\S.*\S$/);
    if (field !== "level" && field !== "quantity") expect(proposeWords(field, choice)).toBe(choice);
  }
  expect(isWordChoice(field, "moonshine")).toBe(false);
  expect(proposeWords(field, "  ")).toBeNull();
});

it("methods are chosen among the tags in use", () => {
  expect(wordChoices("methodTags")).toEqual(methodTags().map(({ tag }) => tag));
});

it.each<[WordField, string, boolean]>([
  ["level", "other:99.7", true],
  ["level", "other:9.9.7", false],
  ["level", "other:", false],
  ["conditionedOn", "FL-0012", true],
  ["conditionedOn", "FL-12", false],
  ["quantity", "duration:0.75:0.25", true],
  ["quantity", "duration:0.75", false],
  ["quantity", "redshiftAtFraction:0.5", true],
  ["quantity", "redshiftAtFraction:half", false],
])("%s %s: %s", (field, value, expected) => {
  expect(isWordChoice(field, value)).toBe(expected);
});

it.each<[WordField, string, string]>([
  ["quantity", "neutralFraction", "Neutral fraction"],
  ["quantity", "ionizedFraction", "Fraction of ionized hydrogen"],
  ["quantity", "electronFraction", "Electrons per hydrogen"],
  ["quantity", "opticalDepth", "Optical depth, total"],
  ["quantity", "redshiftAtFraction:0.5", "Redshift at a fraction, 0.5"],
  ["quantity", "duration:0.75:0.25", "Duration between two fractions, 0.75 to 0.25"],
  ["level", "other:99.7", "99.7 %"],
  ["level", "oneSigma", "One sigma (68.27 %)"],
  ["methodTags", "darkGaps", "Dark gaps"],
  ["conditionedOn", "cmb", "CMB"],
  ["conditionedOn", "FL-0012", "FL-0012"],
])("%s %s is said as %s", (field, value, words) => {
  expect(choiceWords(field, value)).toBe(words);
});

it.each<[string, string | null]>([
  ["fl-12", "FL-0012"],
  ["CMB optical depth", "cmb"],
  ["21 cm", "twentyOneCm"],
  ["UV luminosity function", "luminosityFunction"],
  ["UVLF", "luminosityFunction"],
  ["Lyα forest", "lymanAlpha"],
  ["Lyman-alpha data", "lymanAlpha"],
  ["nothing of the kind", null],
])("conditioned on %s means %s", (word, condition) => {
  expect(proposeWords("conditionedOn", word)).toBe(condition);
});
