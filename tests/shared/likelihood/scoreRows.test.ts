import { background } from "~shared/cosmology/background";
import { tabulatedHistory } from "~shared/history/tabulated";
import { tanhHistory } from "~shared/history/tanh";
import { scoreRows } from "~shared/likelihood";
import { asUsed } from "~shared/statement/asUsed";
import { type ConstraintFields, emptyFields } from "~shared/statement/fields";

function used(fields: Partial<ConstraintFields>) {
  return asUsed({
    ...emptyFields(),
    quantity: "neutralFraction",
    species: "neutral",
    scale: "linear",
    weighting: "volume",
    zRole: "point",
    kind: "twoSided",
    value: "0.40",
    plus: "0.10",
    minus: "0.10",
    level: "oneSigma",
    estimator: "mode",
    ...fields,
  });
}
const rows = [
  { id: "a", asUsed: used({ z: "7.0" }) },
  { id: "b", asUsed: used({ z: "7.2", level: "notStated" }) },
  { id: "c", asUsed: used({ z: "6.1" }) },
  { id: "d", asUsed: null },
];

describe("scoreRows", () => {
  it("gives each row's model value and −2 ln L, their sum, and the reasons of the others", () => {
    const history = tanhHistory({ zRe: 7, deltaZ: 0.5 });
    const score = scoreRows(rows, history, background());
    // x(7) = 0.5 of a tanh at 7: one sigma above 0.40 ± 0.10, where one sigma is C = 0.6827.
    expect(score.rows[0]).toMatchObject({ id: "a", model: 0.5, reason: null, code: null });
    expect(score.rows[0]!.minus2LnL).toBeCloseTo(1.0000217133229992 ** 2, 10);
    expect(score.rows.map(({ code }) => code)).toEqual([
      null,
      "levelNotStated",
      null,
      "incomplete",
    ]);
    expect(score.minus2LnL).toBeCloseTo(score.rows[0]!.minus2LnL! + score.rows[2]!.minus2LnL!, 12);
    expect([score.scored, score.leftOut]).toEqual([2, 2]);
  });

  it("takes a decision of the table for one row", () => {
    const history = tanhHistory({ zRe: 7, deltaZ: 0.5 });
    const decided = rows.map((row) =>
      row.id === "b" ? { ...row, options: { level: 0.68 } } : row,
    );
    expect(scoreRows(decided, history, background()).scored).toBe(3);
  });

  it("names a row that an own history does not cover", () => {
    const table = tabulatedHistory([6.5, 7, 8], [0.1, 0.5, 1]);
    const score = scoreRows(rows, table, background());
    expect(score.rows[2]).toMatchObject({ id: "c", minus2LnL: null, code: "outsideTable" });
    expect(score.scored).toBe(1);
  });

  it("gives the same result the second time", () => {
    const history = tanhHistory({ zRe: 7, deltaZ: 0.5 });
    expect(scoreRows(rows, history, background())).toEqual(scoreRows(rows, history, background()));
  });

  it("sums to zero over no rows", () => {
    const score = scoreRows([], tanhHistory({ zRe: 7 }), background());
    expect(score).toEqual({ rows: [], mixtures: [], minus2LnL: 0, scored: 0, leftOut: 0 });
  });

  describe("alternatives of one paper", () => {
    const history = tanhHistory({ zRe: 7, deltaZ: 0.5 });
    const alternatives = (preferred: number | null) =>
      ["0.45", "0.55", "0.65"].map((value, i) => ({
        id: value,
        asUsed: used({ z: "7.0", value }),
        alternativesGroup: "three answers",
        alternativesPreferred: i === preferred,
      }));

    it("enter as the preferred one alone", () => {
      const score = scoreRows(alternatives(1), history, background());
      expect(score.rows.map(({ code }) => code)).toEqual([
        "anotherAlternative",
        null,
        "anotherAlternative",
      ]);
      expect(score.mixtures).toEqual([]);
      expect(score.minus2LnL).toBe(score.rows[1]!.minus2LnL);
    });

    it("enter as one equal mixture without a preferred one, never multiplied", () => {
      const score = scoreRows(alternatives(null), history, background());
      expect(score.mixtures.map(({ group }) => group)).toEqual(["three answers"]);
      expect(score.minus2LnL).toBe(score.mixtures[0]!.minus2LnL);
      expect(score.scored).toBe(3);
      // x = 0.5 lies among the three: the mixture is close to its peak, their product is not.
      expect(score.minus2LnL).toBeLessThan(0.5);
      expect(score.rows.reduce((sum, row) => sum + row.minus2LnL!, 0)).toBeGreaterThan(2);
      expect(scoreRows(alternatives(null), history, background()).minus2LnL).toBe(score.minus2LnL);
    });
  });
});
