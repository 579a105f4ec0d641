import { FITTING_COLUMNS, fittingCells, type FittingRow } from "~shared/formats/fittingRow";
import { latexRow, latexStatement, latexTable, latexText } from "~shared/formats/latexTable";
import { asUsed } from "~shared/statement/asUsed";
import { emptyFields, type ConstraintFields } from "~shared/statement/fields";
import { notationAsUsed } from "~shared/statement/notation";
import { NO_CHOICES } from "~shared/table/decision";
import { settleTable } from "~shared/table/settleTable";

const TWO_SIDED: ConstraintFields = {
  ...emptyFields(),
  quantity: "neutralFraction",
  species: "ionized",
  scale: "linear",
  weighting: "volume",
  zRole: "binAverage",
  zLow: "6.5",
  zHigh: "7.5",
  kind: "twoSided",
  value: "0.30",
  plus: "0.10",
  minus: "0.05",
  level: "percent68",
  estimator: "median",
  methodTags: ["quasarDampingWing"],
  dataUsed: ["QV 0001+01"],
  dataKnown: true,
  versionRead: "published",
  printedText: "x = 0.30 +0.10 -0.05",
};

function rowOf(fields: ConstraintFields, number = "FL-0001"): FittingRow {
  const { rows } = settleTable(
    [
      {
        number,
        fields,
        citation: "a",
        shortName: "A 2024",
        year: 2024,
        state: "current",
        supersededBy: null,
      },
    ],
    { overlaps: [], conditions: new Map(), sets: [] },
    NO_CHOICES,
  );
  const [settled] = rows;
  if (!settled) throw new Error("no row was settled");
  return {
    record: {
      number,
      quotable: `${number}.1`,
      state: "current",
      fields,
      citation: {
        key: "Tarrowin2024",
        shortName: "A & B 2024",
        year: 2024,
        doi: null,
        arxiv: null,
        bibcode: null,
      },
    },
    settled,
    setLabel: null,
  };
}

const statement = (change: Partial<ConstraintFields>): string => {
  const used = asUsed({ ...TWO_SIDED, ...change });
  if (!used) throw new Error("the statement can't be used");
  return latexStatement(notationAsUsed(used));
};

describe("latexStatement", () => {
  it("sets the used statement as a paper does: the ionized fraction flipped, errors swapped", () => {
    expect(statement({})).toBe("$x_\\mathrm{HI} = 0.70^{+0.05}_{-0.10}$");
    expect(statement({ plus: "0.10", minus: "0.10" })).toBe("$x_\\mathrm{HI} = 0.70 \\pm 0.10$");
    expect(statement({ kind: "lowerLimit", value: "0.80", level: "percent95" })).toBe(
      "$x_\\mathrm{HI} < 0.20$",
    );
    expect(statement({ kind: "band", bandLow: "0.2", bandHigh: "0.6" })).toBe(
      "$x_\\mathrm{HI} = 0.4$--$0.8$",
    );
  });
});

describe("latexTable", () => {
  it("writes a booktabs table row by row, with escaped words", async () => {
    let text = "";
    for await (const piece of latexTable(
      "5 % of it & more",
      ["Cite_all"],
      [latexRow(rowOf(TWO_SIDED))],
    ))
      text += piece;
    expect(text).toContain("\\caption{5 \\% of it \\& more}");
    expect(text).toContain(
      "\\citet{Tarrowin2024} & 6.5--7.5 & $x_\\mathrm{HI} = 0.70^{+0.05}_{-0.10}$ & 68\\,\\% & ",
    );
    expect(text).toContain("& FL-0001.1 \\\\\n\\bottomrule");
    expect(text).toContain("\\footnotesize Cite\\_all");
  });

  it("escapes every character that LaTeX reads as a command", () => {
    expect(latexText("a_b{c}$%#&~^\\")).toBe(
      "a\\_b\\{c\\}\\$\\%\\#\\&\\textasciitilde{}\\textasciicircum{}\\textbackslash{}",
    );
  });
});

describe("the columns of a fitting table", () => {
  const cells = (row: FittingRow) =>
    Object.fromEntries(FITTING_COLUMNS.map(({ name }, index) => [name, fittingCells(row)[index]]));

  it("have names of their own, each once", () => {
    const names = FITTING_COLUMNS.map(({ name }) => name);
    expect(new Set(names).size).toBe(names.length);
    expect(names.every((name) => /^[a-z][a-z_]*$/.test(name))).toBe(true);
  });

  it("say what is used beside what is printed, digits kept", () => {
    expect(cells(rowOf(TWO_SIDED))).toMatchObject({
      used_value: "0.70",
      used_plus: "0.05",
      used_minus: "0.10",
      printed_value: "0.30",
      level: 0.68,
      printed_level_probability: 0.68,
      level_decided: false,
      upper_limit: false,
      likelihood: "quantileMatched",
      z: null,
      z_low: 6.5,
      z_treatment: "binMean",
      weight: 1,
    });
  });

  it("tell a limit by a flag and leave every width empty", () => {
    expect(
      cells(
        rowOf({
          ...TWO_SIDED,
          kind: "lowerLimit",
          value: "0.80",
          plus: null,
          minus: null,
          level: "percent95",
        }),
      ),
    ).toMatchObject({
      upper_limit: true,
      lower_limit: false,
      used_value: "0.20",
      used_plus: null,
      used_minus: null,
    });
  });
});
