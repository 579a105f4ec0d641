import { setFindings } from "~shared/correlatedSet/checks";
import {
  emptySetContent,
  fitTriangle,
  NEXT_SET_STATES,
  rearrange,
  SET_STATES,
  type SetContent,
} from "~shared/correlatedSet/content";
import { correlations, usedCorrelations } from "~shared/correlatedSet/matrix";
import { whyNotMember, type SetMember } from "~shared/correlatedSet/members";
import { readMatrixText } from "~shared/correlatedSet/paste";
import {
  compareSetReading,
  setReadingMissing,
  tidySetReading,
} from "~shared/correlatedSet/reading";
import { formatSetNumber, parseSetNumber } from "~shared/identifiers/setNumber";
import { parseRecordNumber } from "~shared/identifiers/recordNumber";
import { correlatedSet } from "~shared/likelihood/correlatedSet";
import type { ConstraintFields } from "~shared/statement/fields";

import { buildFields } from "../buildFields";

const PAPER = "paper";

function member(number: string, overrides: Partial<ConstraintFields> = {}): SetMember {
  return {
    number,
    citation: PAPER,
    fields: buildFields({
      kind: "twoSided",
      value: "0.40",
      plus: "0.10",
      minus: "0.10",
      level: "oneSigma",
      ...overrides,
    }),
  };
}

function content(overrides: Partial<SetContent> = {}): SetContent {
  return {
    ...emptySetContent(),
    label: "Two bins",
    place: "Table 5",
    members: ["FL-0001", "FL-0002"],
    matrixKind: "correlation",
    triangle: [["1"], ["0.6", "1"]],
    ...overrides,
  };
}

const PAIR = [member("FL-0001"), member("FL-0002", { value: "0.55" })];
const codes = (set: SetContent, members = PAIR) =>
  setFindings(set, members, PAPER).map(({ code, grade }) => `${grade} ${code}`);

describe("checks of a set", () => {
  it("find nothing in two bins with a correlation of 0.6", () => {
    expect(codes(content())).toEqual([]);
  });

  it("ask for label, place, kind of matrix and two records", () => {
    expect(codes(emptySetContent(), [])).toEqual([
      "error label",
      "error place",
      "error matrixKind",
      "error tooFew",
    ]);
  });

  it("name open entries, strange entries, and what a correlation can't be", () => {
    expect(codes(content({ triangle: [["1"], ["", "1"]] }))).toEqual(["error open"]);
    expect(codes(content({ triangle: [["1"], ["O.6", "1"]] }))).toEqual(["error number.entry.2.1"]);
    expect(codes(content({ triangle: [["1"], ["1.2", "1"]] }))).toEqual(["error beyond.entry.2.1"]);
    expect(codes(content({ triangle: [["0.99"], ["0.6", "1.00"]] }))).toEqual([
      "error diagonal.entry.1.1",
    ]);
    expect(codes(content({ triangle: [["1", "0.6"]] }))).toEqual(["error shape"]);
  });

  it("refuse a matrix that is not positive definite", () => {
    // Closed form: det = 1 + 2abc − a² − b² − c² = 1 − 0.9² · 3 − 2 · 0.9³ < 0.
    const members = [...PAIR, member("FL-0003")];
    const set = content({
      members: members.map(({ number }) => number),
      triangle: [["1"], ["0.9", "1"], ["0.9", "-0.9", "1"]],
    });
    expect(codes(set, members)).toEqual(["error positiveDefinite"]);
    expect(codes(content({ triangle: [["1"], ["1", "1"]] }))).toEqual(["error positiveDefinite"]);
  });

  it("note a matrix that rounding could make singular", () => {
    const members = [...PAIR, member("FL-0003")];
    const printed = (high: string, low: string) =>
      codes(
        content({
          members: members.map(({ number }) => number),
          triangle: [["1"], [high, "1"], [high, low, "1"]],
        }),
        members,
      );
    // det = 1 + 2 · 0.9² · 0.63 − 2 · 0.9² − 0.63² = 0.0037 above 0, with 0.63 as 0.62 it is below.
    expect(printed("0.9", "0.63")).toEqual(["note nearlySingular"]);
    expect(printed("0.9000", "0.6300")).toEqual([]);
    expect(printed("0.9", "0.61")).toEqual(["error positiveDefinite"]);
  });

  it("hold a covariance's diagonal against the errors squared, within the printed digits", () => {
    const covariance = (triangle: string[][]) => content({ matrixKind: "covariance", triangle });
    // 0.10² = 0.0100; the errors are printed to 0.01, so that 0.105² = 0.0110 is still the same number.
    expect(codes(covariance([["0.010"], ["0.006", "0.011"]]))).toEqual([]);
    expect(codes(covariance([["0.010"], ["0.006", "0.020"]]))).toEqual([
      "mustAnswer variance.FL-0002",
    ]);
    expect(codes(covariance([["0"], ["0.006", "0.010"]]))).toEqual(["error variance.entry.1.1"]);
    // At 95 % one sigma is 0.10 / 1.960 = 0.0510: its square is 0.0026, and 0.010 is another level.
    const wide = [member("FL-0001"), member("FL-0002", { level: "percent95" })];
    expect(codes(covariance([["0.010"], ["0.001", "0.0026"]]), wide)).toEqual([]);
    expect(codes(covariance([["0.010"], ["0.001", "0.0100"]]), wide)).toEqual([
      "mustAnswer variance.FL-0002",
    ]);
    // Unequal errors count by their average: (0.08 + 0.12) / 2.
    const uneven = [member("FL-0001", { plus: "0.12", minus: "0.08" }), member("FL-0002")];
    expect(codes(covariance([["0.0100"], ["0.006", "0.0100"]]), uneven)).toEqual([]);
  });

  it("keep out what has no two-sided number, with the reason", () => {
    const cases: [Partial<ConstraintFields>, RegExp][] = [
      [{ kind: "upperLimit" }, /limit/],
      [{ kind: "band" }, /band/],
      [{ kind: "curve" }, /curve/],
      [{ kind: "qualitative" }, /qualitative/],
      [{ zRole: "uncertain" }, /uncertain redshift/],
      [{ plus: null }, /two errors/],
    ];
    for (const [overrides, words] of cases) {
      expect(whyNotMember(member("FL-0001", overrides).fields)).toMatch(words);
      expect(codes(content(), [member("FL-0001", overrides), PAIR[1]!])).toContain(
        "error cannot.FL-0001",
      );
    }
    expect(codes(content(), [PAIR[0]!])).toContain("error unknown.FL-0002");
    expect(codes(content(), [PAIR[0]!, { ...PAIR[1]!, citation: "another" }])).toContain(
      "error otherPaper.FL-0002",
    );
    expect(codes(content({ members: ["FL-0001", "FL-0001"] }))).toContain("error twice");
  });

  it("say which correlations change their sign as used", () => {
    const ionized = member("FL-0002", { species: "ionized" });
    const [note] = setFindings(content(), [PAIR[0]!, ionized], PAPER);
    expect(note).toMatchObject({ grade: "note", code: "flipped" });
    expect(note?.message).toContain("FL-0002 is printed");
  });
});

describe("the matrix", () => {
  it("gives correlations of a covariance: 0.006 over 0.1 · 0.2 is 0.3", () => {
    const rho = correlations(
      { matrixKind: "covariance", triangle: [["0.01"], ["0.006", "0.04"]] },
      2,
    );
    expect(rho?.[0]?.[1]).toBeCloseTo(0.3, 14);
    expect(rho?.[1]?.[0]).toBeCloseTo(0.3, 14);
    expect(rho?.[1]?.[1]).toBe(1);
  });

  it("keeps a correlation where both members are turned round, and turns its sign where one is", () => {
    const rho = [
      [1, 0.6, 0],
      [0.6, 1, 0.2],
      [0, 0.2, 1],
    ];
    const ionized = { species: "ionized" } as const;
    const used = usedCorrelations(rho, [
      member("FL-0001", ionized),
      member("FL-0002", ionized),
      member("FL-0003"),
    ]);
    expect(used).toEqual([
      [1, 0.6, 0],
      [0.6, 1, -0.2],
      [0, -0.2, 1],
    ]);
    expect(Object.is(used[0]?.[2], -0)).toBe(false);
    // An optical depth has no ionized counterpart to turn.
    expect(
      usedCorrelations(
        rho.slice(0, 2).map((row) => row.slice(0, 2)),
        [member("FL-0001", { quantity: "redshiftAtFraction", ...ionized }), member("FL-0002")],
      ),
    ).toEqual([
      [1, 0.6],
      [0.6, 1],
    ]);
  });

  it("gives χ² 1.25 for two bins at ρ 0.6, both one sigma up (PHYSICS.md, worked values)", () => {
    const rho = correlations(content(), 2);
    expect(correlatedSet(rho!).chiSquared([1, 1])).toBeCloseTo(1.25, 12);
  });

  it("keeps its entries with their records when these are put in another order", () => {
    const set = content({
      members: ["FL-0001", "FL-0002", "FL-0003"],
      triangle: [["11"], ["21", "22"], ["31", "32", "33"]],
    });
    expect(rearrange(set, [2, 0])).toMatchObject({
      members: ["FL-0003", "FL-0001"],
      triangle: [["33"], ["31", "11"]],
    });
    expect(fitTriangle([["1"], ["0.6", "1"]], 3)).toEqual([["1"], ["0.6", "1"], ["", "", ""]]);
  });
});

describe("a pasted matrix", () => {
  it("is read as a square or as a lower triangle", () => {
    const triangle = [["1"], ["0.60", "1"]];
    expect(readMatrixText("1 0.6\n0.60 1")).toEqual({ triangle });
    expect(readMatrixText("1\n0.60, 1\n")).toEqual({ triangle });
    expect(readMatrixText("1 & 0.60 \\\\ 0.60 & 1")).toEqual({ triangle });
  });

  it("says what is wrong: not symmetric, not square, not a number", () => {
    expect(readMatrixText("1 0.5\n0.6 1")).toMatchObject({
      problem: expect.stringMatching(/^Not symmetric: row 2, column 1 is 0.6/),
    });
    expect(readMatrixText("1 0.5 0.2\n0.6 1")).toMatchObject({ problem: expect.any(String) });
    expect(readMatrixText("1 a\na 1")).toMatchObject({
      problem: expect.stringContaining("not a number"),
    });
    expect(readMatrixText(" \n")).toMatchObject({ problem: "There is no row." });
  });
});

describe("the second reading of a matrix", () => {
  const submitted = { matrixKind: "correlation", triangle: [["1"], ["0.60", "1"]] } as const;
  const read = (text: string, kind: "correlation" | "covariance" = "correlation") =>
    tidySetReading({ matrixKind: kind, triangle: [[""], [text, ""]] }, 2);
  const agrees = (reading: ReturnType<typeof read>) =>
    compareSetReading(reading, {
      matrixKind: submitted.matrixKind,
      triangle: submitted.triangle.map((row) => [...row]),
    }).every((entry) => entry.agrees);

  it("takes 0.6 for 0.60 and −0.6 for another number", () => {
    expect(agrees(read(".6"))).toBe(true);
    expect(agrees(read("-0.60"))).toBe(false);
    expect(agrees(read("0.06"))).toBe(false);
  });

  it("does not ask for the ones of a correlation matrix, and asks for every variance", () => {
    expect(setReadingMissing(read("0.6"))).toBeNull();
    expect(setReadingMissing(read("0.6", "covariance"))).toBe("2 entries are open.");
    expect(setReadingMissing(read("six"))).toMatch(/not a number/);
    expect(setReadingMissing({ matrixKind: null, triangle: [] })).toMatch(/covariances/);
  });

  it("tells a covariance from a correlation", () => {
    const reading = { matrixKind: "covariance" as const, triangle: [["1"], ["0.60", "1"]] };
    expect(agrees(reading)).toBe(false);
  });
});

it("a set's number is no record's number", () => {
  expect(formatSetNumber(3)).toBe("FLS-0003");
  expect(parseSetNumber("fls-3")).toBe(3);
  expect(parseSetNumber("FL-0003")).toBeNull();
  expect(parseRecordNumber("FLS-0003")).toBeNull();
});

it("every state of a set can be reached from draft", () => {
  const reached = new Set(["draft"]);
  for (const state of reached) {
    for (const next of NEXT_SET_STATES[state as keyof typeof NEXT_SET_STATES]) reached.add(next);
  }
  expect([...reached].sort()).toEqual([...SET_STATES].sort());
});
