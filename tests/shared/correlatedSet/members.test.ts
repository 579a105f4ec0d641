import { setFindings } from "~shared/correlatedSet/checks";
import {
  emptySetContent,
  LONGEST_SET_LABEL,
  MOST_MEMBERS,
  type SetContent,
} from "~shared/correlatedSet/content";
import {
  isFlipped,
  memberWords,
  printedSigma,
  whyNotMember,
  type SetMember,
} from "~shared/correlatedSet/members";
import type { ConstraintFields } from "~shared/statement/fields";

import { buildFields } from "../buildFields";

const PAPER = "paper";
const member = (number: string, changes: Partial<ConstraintFields> = {}): SetMember => ({
  number,
  citation: PAPER,
  fields: buildFields({ plus: "0.10", minus: "0.10", level: "oneSigma", ...changes }),
});

function findings(members: readonly SetMember[], changes: Partial<SetContent> = {}) {
  const set: SetContent = {
    ...emptySetContent(),
    label: "Two bins",
    place: "Table 5",
    members: members.map(({ number }) => number),
    matrixKind: "correlation",
    triangle: members.map((_, i) => [...Array.from({ length: i }, () => "0.1"), "1"]),
    ...changes,
  };
  return setFindings(set, members, PAPER).map(({ grade, code, message }) => [grade, code, message]);
}
const PAIR = [member("FL-0001"), member("FL-0002", { value: "0.55" })];

it("a matrix has rows of what has a value and two errors", () => {
  expect(whyNotMember(buildFields())).toBeNull();
  const why = (changes: Partial<ConstraintFields>) => whyNotMember(buildFields(changes));
  for (const kind of ["upperLimit", "lowerLimit"] as const) {
    expect(why({ kind })).toMatch(/^is a limit:/);
  }
  expect(why({ kind: "band" })).toMatch(/^is a band:/);
  expect(why({ kind: "curve" })).toMatch(/^is a tabulated curve:/);
  expect(why({ kind: "qualitative" })).toBe("is qualitative: it has no number");
  expect(why({ kind: null })).toBe("says nothing yet");
  for (const open of ["value", "plus", "minus"]) {
    expect(why({ [open]: null })).toBe("has no value with two errors yet");
  }
  expect(why({ zRole: "uncertain" })).toMatch(/^has an uncertain redshift/);
});

it("an ionized or electron fraction is turned round, and nothing else is", () => {
  const flipped = (changes: Partial<ConstraintFields>) => isFlipped(buildFields(changes));
  expect([flipped({ species: "ionized" }), flipped({ species: "electron" })]).toEqual([true, true]);
  expect([flipped({}), flipped({ species: null })]).toEqual([false, false]);
  expect(flipped({ quantity: "opticalDepth", species: "electron" })).toBe(false);
});

it("one sigma is the mean of both errors over the sigmas of their level", () => {
  const one = printedSigma(member("FL-0001", { plus: "0.12", minus: "0.08" }).fields)!;
  // The registry's one sigma is the rounded 68.27 %, 2e-5 more than one.
  expect(one.sigma).toBeCloseTo(0.1, 5);
  expect(one.slack).toBeCloseTo(0.005, 6); // half of the last place, 0.01
  // A printed 95 % is 1.959964 sigma on either side (a table of the normal distribution).
  const two = printedSigma(
    member("FL-0001", { level: "percent95", plus: "0.2", minus: "0.2" }).fields,
  )!;
  expect(two.sigma).toBeCloseTo(0.2 / 1.959964, 6);
  expect(two.slack).toBeCloseTo(0.05 / 1.959964, 6);
  expect(printedSigma(member("FL-0001", { level: "notStated" }).fields)).toBeNull();
  expect(printedSigma(member("FL-0001", { plus: null }).fields)).toBeNull();
});

it("a row of the matrix is named by its redshift, or by its quantity", () => {
  expect(memberWords(buildFields({ z: "7.12" }))).toBe("z 7.12");
  expect(memberWords(buildFields({ z: null, zLow: "6.5", zHigh: "7.5" }))).toBe("z 6.5 to 7.5");
  expect(memberWords(buildFields({ z: null }))).toBe("Neutral fraction");
  expect(memberWords(buildFields({ quantity: "opticalDepth" }))).toBe("Optical depth, total");
  expect(memberWords(buildFields({ quantity: null }))).toBe("Open");
});

it("a label and a set have their longest", () => {
  expect(findings(PAIR, { label: "x".repeat(LONGEST_SET_LABEL) })).toEqual([]);
  expect(findings(PAIR, { label: "x".repeat(LONGEST_SET_LABEL + 1) })).toEqual([
    ["error", "label", "The label has at most 120 characters."],
  ]);
  const many = (count: number) =>
    findings(Array.from({ length: count }, (_, i) => member(`FL-${1000 + i}`)));
  expect(many(MOST_MEMBERS).filter(([grade]) => grade === "error")).toEqual([]);
  expect(many(MOST_MEMBERS + 1)).toContainEqual([
    "error",
    "tooMany",
    "A set has at most 40 records.",
  ]);
});

describe("notes to a set", () => {
  it("say which records are turned round, one, some or all", () => {
    const three = (...species: ConstraintFields["species"][]) =>
      findings(species.map((one, i) => member(`FL-000${i + 1}`, { species: one }))).filter(
        ([, code]) => code === "flipped",
      );
    expect(three("neutral", "neutral")).toEqual([]);
    expect(three("ionized", "neutral")).toEqual([
      [
        "note",
        "flipped",
        "FL-0001 is printed as ionized or electron fraction: as used it is turned round, and the correlations with the others change their sign.",
      ],
    ]);
    expect(three("ionized", "electron", "neutral")[0]?.[2]).toMatch(
      /^FL-0001, FL-0002 are printed as .* they are turned round/,
    );
    expect(three("ionized", "ionized")[0]?.[2]).toMatch(/^Every record .* stay as printed\.$/);
  });

  it("say which record waits for a level, and which is a logarithm turned round", () => {
    expect(findings([PAIR[0]!, member("FL-0002", { level: "notStated" })])).toEqual([
      [
        "note",
        "level.FL-0002",
        "FL-0002 states no level: it counts in the set once a table has decided on one.",
      ],
    ]);
    const log = { scale: "log10", value: "-0.4", species: "ionized" } as const;
    expect(
      findings([member("FL-0001", log), member("FL-0002", log)]).map(([, code]) => code),
    ).toEqual(["flipped", "log.FL-0001", "log.FL-0002"]);
  });
});
