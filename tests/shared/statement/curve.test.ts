import { rowLikelihood } from "~shared/likelihood";
import { asUsed } from "~shared/statement/asUsed";
import { curveFacts, curveNodes, curveText, parseCurve } from "~shared/statement/curve";
import { curveSummary } from "~shared/statement/curveSummary";
import type { ConstraintFields } from "~shared/statement/fields";
import { HELIUM_PER_HYDROGEN } from "~shared/statement/helium";
import { lineText, notationAsPrinted, notationAsUsed } from "~shared/statement/notation";
import { fieldFindings } from "~shared/statement/rules";

import { buildFields } from "../buildFields";

/** A normal density as a paper would tabulate it: step 0.02 from 0 to 1, five digits. */
function gaussianTable(mean: number, sigma: number, ends: [number, number] = [0, 1]): string {
  const rows: string[] = ["x_HI,density"];
  for (let i = Math.round(ends[0] * 50); i <= Math.round(ends[1] * 50); i++) {
    const x = i / 50;
    const density = Math.exp(-0.5 * ((x - mean) / sigma) ** 2) / (sigma * Math.sqrt(2 * Math.PI));
    rows.push(`${x.toFixed(2)},${density.toPrecision(5)}`);
  }
  return rows.join("\n");
}

function curveFields(overrides: Partial<ConstraintFields> = {}): ConstraintFields {
  return buildFields({
    kind: "curve",
    value: null,
    plus: null,
    minus: null,
    level: null,
    estimator: null,
    curveTable: gaussianTable(0.4, 0.1),
    curveColumn: "density",
    printedText: "The posterior is given in Table 4 at z = 7.12.",
    ...overrides,
  });
}

const codes = (fields: ConstraintFields) =>
  fieldFindings(fields, { citation: true }).map(({ grade, code }) => `${grade} ${code}`);

describe("parseCurve", () => {
  it.each([
    ["commas", "0.1,2\n0.2,3"],
    ["semicolons", "0.1;2\n0.2;3"],
    ["tabs", "0.1\t2\n0.2\t3"],
    ["blanks", "  0.1   2\n  0.2   3  "],
    ["quotes", '"0.1","2"\n"0.2","3"'],
    ["a comma at the end", "0.1,2,\n0.2,3,"],
    ["comments, empty lines and a header", "# z = 7\n\nx,p\n0.1,2\r\n# more\n0.2,3\n"],
  ])("reads columns set apart by %s", (_, text) => {
    expect(
      parseCurve(text, "density").rows.map(({ text: value, height }) => [value, height]),
    ).toEqual([
      ["0.1", 2],
      ["0.2", 3],
    ]);
  });

  it("keeps values as typed and the lines they stand on", () => {
    const { rows, header } = parseCurve("# from Table 4\nx,p\n0.10,2e-120\n.2,1.5", "density");
    expect(header).toEqual(["x", "p"]);
    expect(rows.map(({ line, text }) => [line, text])).toEqual([
      [3, "0.10"],
      [4, ".2"],
    ]);
    expect(rows[0]!.height).toBe(2e-120);
  });

  /** Thirty good rows with one line put in the place of the fifth. */
  function withLine(line: string): string {
    const rows = Array.from({ length: 30 }, (_, i) => `${(i / 100).toFixed(2)},1`);
    rows[4] = line;
    return rows.join("\n");
  }

  it.each([
    ["a letter", "O.04,1", '"O.04" is not a number.'],
    ["text for a density", "0.04,high", '"high" is not a number.'],
    ["an infinite density", "0.04,inf", '"inf" can\'t be drawn.'],
    ["no density", "0.04", "It has one column."],
    ["three columns", "0.04,1,2", "It has 3 columns."],
    ["a negative density", "0.04,-1", "The density is −1; it can't be negative."],
    ["a value twice", "0.03,1", "The value 0.03 stands there a second time."],
    ["a value out of order", "0.02,1", "The value 0.02 follows 0.03: the values must rise"],
    ["a zero inside", "0.04,0", "The density is 0 at 0.04, between places where it is not."],
  ])("refuses %s at its line", (_, line, message) => {
    const { problems } = parseCurve(withLine(line), "density");
    expect(problems).toEqual([{ line: 5, message: expect.stringContaining(message) }]);
  });

  it("asks for twenty rows and takes two thousand", () => {
    const rows = (n: number) => Array.from({ length: n }, (_, i) => `${i},1`).join("\n");
    expect(parseCurve(rows(19), "density").problems).toEqual([
      { line: null, message: expect.stringContaining("The curve has 19 rows; it needs 20") },
    ]);
    expect(parseCurve(rows(20), "density").problems).toEqual([]);
    expect(parseCurve(rows(2000), "density").problems).toEqual([]);
    expect(parseCurve(rows(2001), "density").problems).toEqual([
      { line: null, message: "The curve has 2001 rows; 2000 at most." },
    ]);
    expect(parseCurve("1,1\n".repeat(30_000), "density").problems[0]!.message).toMatch(
      /^The curve has 120000 characters; 100000 at most/,
    );
  });

  it("takes values that fall, and negative ln L", () => {
    const falling = Array.from({ length: 20 }, (_, i) => `${20 - i},${-i}`).join("\n");
    expect(parseCurve(falling, "lnLikelihood").problems).toEqual([]);
    expect(curveText(falling, "lnLikelihood")).toBe("20 rows from 20 to 1, highest at 20");
  });

  it("says what stands in it at a glance, as typed", () => {
    expect(curveFacts(gaussianTable(0.4, 0.1), "density")).toEqual({
      rows: "51",
      first: "0.00",
      last: "1.00",
      peak: "0.40",
    });
    expect(curveFacts("no curve", "density")).toBeNull();
    expect(curveFacts(null, "density")).toBeNull();
  });
});

describe("curveNodes", () => {
  it("keeps the places of a neutral fraction and sets the highest density to one", () => {
    const nodes = curveNodes(curveFields())!;
    expect(nodes.x).toHaveLength(51);
    expect(nodes.x[20]).toBe(0.4);
    expect(nodes.p[20]).toBe(1);
    // One sigma away from a normal density's peak it is e^(−1/2) of it.
    expect(nodes.p[25]).toBeCloseTo(Math.exp(-0.5), 4);
  });

  it("flips an ionized fraction in decimal and turns the order round", () => {
    const nodes = curveNodes(curveFields({ species: "ionized" }))!;
    expect(nodes.x[0]).toBe(0);
    expect(nodes.x[30]).toBe(0.6);
    expect(nodes.p[30]).toBe(1);
    // 1 − 0.9 in doubles is 0.09999999999999998.
    expect(nodes.x[5]).toBe(0.1);
  });

  it("takes ln L relative to its highest value", () => {
    const table = Array.from({ length: 21 }, (_, i) => `${i / 20},${-700 - (i - 10) ** 2 / 2}`);
    const fields = curveFields({ curveTable: table.join("\n"), curveColumn: "lnLikelihood" });
    expect(curveNodes(fields)!.p[10]).toBe(1);
    expect(curveNodes(fields)!.p[12]).toBeCloseTo(Math.exp(-2), 12);
  });

  it("undoes helium in an electron fraction", () => {
    const fields = curveFields({ species: "electron", helium: "included" });
    const { x, p } = curveNodes(fields)!;
    const at = p.indexOf(1);
    expect(x[at]).toBeCloseTo(1 - 0.4 / (1 + HELIUM_PER_HYDROGEN), 12);
    expect(curveNodes({ ...fields, helium: "notIncluded" })!.x[p.indexOf(1)]).toBe(0.6);
    expect(curveNodes({ ...fields, helium: "unknown" })).toBeNull();
  });

  it("stays in log10 of a neutral fraction and leaves log10 of an ionized one", () => {
    const table = Array.from({ length: 21 }, (_, i) => `${(-2 + i / 10).toFixed(1)},${i + 1}`);
    const log = curveFields({ scale: "log10", curveTable: table.join("\n") });
    expect(asUsed(log)!.evaluatedIn).toBe("log10");
    expect(curveNodes(log)!.x[0]).toBe(-2);
    const ionized = curveNodes({ ...log, species: "ionized" })!;
    expect(ionized.x[0]).toBe(0);
    expect(ionized.p[0]).toBe(1);
    expect(ionized.x[20]).toBeCloseTo(0.99, 12);
  });

  it("trims zeros at the ends only", () => {
    const rows = Array.from({ length: 30 }, (_, i) => `${i / 100},${i < 4 || i > 26 ? 0 : 1}`);
    const nodes = curveNodes(curveFields({ curveTable: rows.join("\n") }))!;
    expect([nodes.x[0], nodes.x[nodes.x.length - 1]]).toEqual([0.04, 0.26]);
    const used = asUsed(curveFields({ curveTable: rows.join("\n") }))!;
    expect(used.steps.map(({ text }) => text).join(" ")).toContain(
      "7 rows of zero at the ends are left out",
    );
  });

  it("is nothing for a table with a problem and for another kind of statement", () => {
    expect(curveNodes(curveFields({ curveTable: "0.1,1\n0.2,2" }))).toBeNull();
    expect(curveNodes(curveFields({ curveColumn: null }))).toBeNull();
    expect(curveNodes(curveFields({ kind: "qualitative" }))).toBeNull();
  });
});

describe("a curve as used", () => {
  it("is evaluated as it stands, by History and by tables alike", () => {
    const row = rowLikelihood(asUsed(curveFields()));
    if ("leftOut" in row) throw new Error(row.leftOut);
    expect(row.form).toBe("tabulated");
    expect(row.minus2LnL(0.4)).toBeCloseTo(0, 12);
    // Two sigma away; the table has five digits.
    expect(row.minus2LnL(0.6)).toBeCloseTo(4, 3);
  });

  it("carries the interval quoted beside it, converted with it", () => {
    const fields = curveFields({
      species: "ionized",
      value: "0.40",
      plus: "0.12",
      minus: "0.09",
      level: "oneSigma",
      estimator: "median",
    });
    const used = asUsed(fields)!;
    expect(used).toMatchObject({ kind: "curve", value: "0.60", plus: "0.09", minus: "0.12" });
    expect(lineText(notationAsPrinted(fields))).toBe(
      "x_HII = 0.40 +0.12 −0.09 at one sigma, tabulated curve",
    );
    expect(lineText(notationAsUsed(used))).toBe(
      "x_HI = 0.60 +0.09 −0.12 at 68.27 %, tabulated curve",
    );
  });

  it("says what the quoted numbers lose: little for a normal curve quoted well, more for a skewed one", () => {
    const quoted = { value: "0.40", plus: "0.10", minus: "0.10", level: "oneSigma" } as const;
    const lost = (overrides: Partial<ConstraintFields>) => {
      const row = rowLikelihood(
        asUsed(curveFields({ ...quoted, estimator: "mode", ...overrides })),
      );
      if ("leftOut" in row) throw new Error(row.leftOut);
      return row.informationLost()!;
    };
    expect(lost({})).toBeLessThan(1e-3);
    // D_KL of N(m, σ) from N(m, 2σ) is ln 2 − 3/8 = 0.318 on the whole line; [0, 1] holds almost all of both.
    expect(lost({ plus: "0.20", minus: "0.20" })).toBeGreaterThan(0.25);
    expect(lost({ plus: "0.20", minus: "0.20" })).toBeLessThan(0.35);
    const alone = rowLikelihood(asUsed(curveFields()));
    expect("leftOut" in alone ? "left out" : alone.informationLost()).toBeNull();
  });

  it("can be used by its quoted interval when a table chooses so", () => {
    const fields = curveFields({
      value: "0.40",
      plus: "0.10",
      minus: "0.10",
      level: "oneSigma",
      estimator: "mode",
    });
    expect(rowLikelihood(asUsed(fields), { form: "twoPiece" })).toMatchObject({ form: "twoPiece" });
    expect(rowLikelihood(asUsed(curveFields()), { form: "twoPiece" })).toMatchObject({
      code: "formDoesNotFit",
    });
  });
});

describe("the rules about a curve", () => {
  it("finds nothing in a good one", () => {
    expect(codes(curveFields())).toEqual([]);
  });

  it("asks for the table and its column, and for a whole interval once one number of it is there", () => {
    expect(codes(curveFields({ curveTable: null, curveColumn: null }))).toEqual([
      "error missing.curveTable",
      "error missing.curveColumn",
    ]);
    expect(codes(curveFields({ value: "0.40" }))).toEqual([
      "error missing.plus",
      "error missing.minus",
      "error missing.estimator",
      "error missing.level",
      "mustAnswer printedWithoutNumbers",
    ]);
  });

  it("names the line of what it can't read and counts the rest", () => {
    const rows = Array.from({ length: 30 }, (_, i) => (i < 7 ? `a${i},1` : `${i / 100},1`));
    const found = fieldFindings(curveFields({ curveTable: rows.join("\n") }), { citation: true });
    expect(found.map(({ code }) => code)).toEqual([
      "curve.line1",
      "curve.line2",
      "curve.line3",
      "curve.line4",
      "curve.line5",
      "curve.more",
    ]);
    expect(found[0]!.message).toBe('Line 1 of the curve: "a0" is not a number.');
    expect(found[5]!.message).toBe("2 more lines of the curve have such a problem.");
  });

  it("refuses values beyond the quantity's range", () => {
    const table = gaussianTable(0.4, 0.1, [0, 1.2]);
    expect(codes(curveFields({ curveTable: table }))).toEqual(["error outsideRange.curveTable"]);
    expect(codes(curveFields({ curveTable: table, quantity: "opticalDepth" }))).not.toContain(
      "error outsideRange.curveTable",
    );
  });

  it("wants an answer for a density that does not integrate to one, within 2 %", () => {
    const scaled = (factor: number) =>
      gaussianTable(0.4, 0.1)
        .split("\n")
        .map((line, i) => {
          const [x, p] = line.split(",");
          return i === 0 ? line : `${x},${(Number(p) * factor).toPrecision(5)}`;
        })
        .join("\n");
    expect(codes(curveFields({ curveTable: scaled(1.018) }))).toEqual([]);
    expect(codes(curveFields({ curveTable: scaled(1.025) }))).toEqual(["mustAnswer curveArea"]);
    expect(codes(curveFields({ curveTable: scaled(0.25) }))).toEqual(["mustAnswer curveArea"]);
  });

  it("notes a curve that ends high up, but not at the end of the quantity's range", () => {
    const cut = gaussianTable(0.4, 0.1, [0, 0.5]);
    expect(codes(curveFields({ curveTable: cut }))).toContain("note curveCutOff");
    const wall = Array.from({ length: 51 }, (_, i) => `${i / 50},${(2 * i) / 50 || 0.001}`);
    expect(codes(curveFields({ curveTable: wall.join("\n") }))).toEqual([]);
  });

  it("doubts ln L that looks like a density", () => {
    const flat = Array.from({ length: 30 }, (_, i) => `${i / 30},${i < 15 ? 0.1 : 0.9}`);
    expect(
      codes(curveFields({ curveTable: flat.join("\n"), curveColumn: "lnLikelihood" })),
    ).toContain("mustAnswer curveColumnDoubt");
  });

  it.each([
    ["agrees", { value: "0.40", plus: "0.10", minus: "0.10" }, null],
    ["is rounded", { value: "0.4", plus: "0.1", minus: "0.1" }, null],
    ["lies a little beside it", { value: "0.42", plus: "0.10", minus: "0.10" }, "note"],
    ["lies elsewhere", { value: "0.55", plus: "0.10", minus: "0.10" }, "mustAnswer"],
    ["is twice as wide", { value: "0.40", plus: "0.20", minus: "0.20" }, "mustAnswer"],
  ] as const)("compares it with a quoted interval that %s", (_, quoted, grade) => {
    const fields = curveFields({
      ...quoted,
      level: "oneSigma",
      estimator: "median",
      printedText: `${quoted.value} +${quoted.plus} -${quoted.minus} (z = 7.12)`,
    });
    const found = fieldFindings(fields, { citation: true });
    expect(found.find(({ code }) => code === "curveUnlikeQuoted")?.grade ?? null).toBe(grade);
  });
});

describe("curveSummary", () => {
  it("gives a triangle's own numbers", () => {
    // A density rising from 0 to 1 like 2x, in closed form: median √½, mean 2/3.
    const x = Array.from({ length: 1001 }, (_, i) => i / 1000);
    const p = x.map((at) => Math.max(at, 1e-6));
    const summary = curveSummary({ x, p }, 0.6827);
    expect(summary.median).toBeCloseTo(Math.SQRT1_2, 4);
    expect(summary.mean).toBeCloseTo(2 / 3, 4);
    expect(summary.mode).toBe(1);
    expect(summary.central[0]).toBeCloseTo(Math.sqrt(0.15865), 4);
    expect(summary.highest[1]).toBeCloseTo(1, 6);
    expect(summary.highest[0]).toBeCloseTo(Math.sqrt(1 - 0.6827), 3);
  });
});
