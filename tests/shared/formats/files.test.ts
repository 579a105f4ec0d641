import fc from "fast-check";
import Papa from "papaparse";

import { bibliography } from "~shared/formats/bibliography";
import { CONSTRAINT_COLUMNS, constraintsCsv } from "~shared/formats/constraintCsv";
import { commentLine, safeCell } from "~shared/formats/exportRow";
import type { ExportHeader, ExportRow } from "~shared/formats/exportRow";
import {
  tableBibliographyLines,
  tableContent,
  tableCsv,
  tableJson,
} from "~shared/formats/tableFiles";
import type { TableFile, TableFileRow } from "~shared/formats/tableFiles";
import type { ConstraintFields } from "~shared/statement/fields";

import { buildFields } from "../buildFields";
import { arbitraryFields } from "../statement/arbitraryFields";

function row(changes: Partial<ConstraintFields> = {}, number = "FL-0042"): ExportRow {
  return {
    number,
    quotable: `${number}.1`,
    state: "current",
    fields: buildFields(changes),
    citation: {
      key: "Arvensis2031",
      shortName: "Arvensis et al. 2031",
      year: 2031,
      doi: "10.5555/apj.2031.0077",
      arxiv: "3101.01234",
      bibcode: null,
    },
  };
}

const header: ExportHeader = {
  registry: "Fogline",
  demonstration: true,
  lastEvent: { sequence: 7, at: "2026-12-01T06:00:00.000Z", digest: "ab12" },
  filter: "All constraints",
  licence: "CC BY 4.0",
};

function tableRow(changes: Partial<TableFileRow> = {}): TableFileRow {
  return {
    ...row(),
    included: true,
    proposed: true,
    reason: null,
    likelihoodForm: "Quantile-matched",
    likelihoodFormula: "…",
    ...changes,
  };
}

function table(changes: Partial<TableFile> = {}): TableFile {
  return {
    ...header,
    name: "Wings",
    address: "/tables/wings",
    filterRecipe: { families: ["dampingWing"] },
    rows: [tableRow()],
    papers: [{ key: "Arvensis2031", bibtex: "@misc{Arvensis2031}", csl: "{}" }],
    ...changes,
  };
}

function read(csv: string) {
  return Papa.parse<Record<string, string>>(csv, {
    header: true,
    comments: "#",
    skipEmptyLines: true,
  });
}

describe("the list as CSV", () => {
  it("says what it is before the column line, and reads back as a table", () => {
    const csv = constraintsCsv(
      [
        row(),
        row(
          { kind: "upperLimit", value: "0.30", plus: null, minus: null, level: "percent95" },
          "FL-0043",
        ),
      ],
      header,
    );
    const lines = csv.split("\r\n");
    const columnLine = lines.findIndex((line) => !line.startsWith("# "));
    expect(lines.slice(0, columnLine).join("\n")).toMatch(
      /Demonstration[^]*Filter: All constraints[^]*Last event: 7[^]*Licence: CC BY 4\.0/,
    );
    const { data, errors } = read(csv);
    expect(errors).toEqual([]);
    expect(data[0]).toMatchObject({
      record: "FL-0042",
      citation_key: "Arvensis2031",
      printed_value: "0.42",
      used_value: "0.42",
      printed_text: "x_HI = 0.42 +0.19 -0.17 (68%)",
      level_probability: "0.68",
    });
    expect(Object.keys(data[0]!)).toEqual(CONSTRAINT_COLUMNS.map((column) => column.name));
  });

  it("tells a limit by its kind and flag and leaves its widths empty", () => {
    const { data } = read(
      constraintsCsv(
        [row({ species: "ionized", kind: "lowerLimit", value: "0.45", plus: null, minus: null })],
        header,
      ),
    );
    expect(data[0]).toMatchObject({
      printed_kind: "lowerLimit",
      printed_value: "0.45",
      used_kind: "upperLimit",
      used_upper_limit: "true",
      used_lower_limit: "false",
      used_value: "0.55",
      used_plus: "",
      used_minus: "",
      used_sigma_plus: "",
    });
  });

  it("gives a not stated level as an empty cell and a flag", () => {
    const { data } = read(constraintsCsv([row({ level: "notStated" })], header));
    expect(data[0]).toMatchObject({ level_probability: "", level_not_stated: "true", used_k: "" });
  });

  it("has the same bytes for the same rows", () => {
    expect(constraintsCsv([row()], header)).toBe(constraintsCsv([row()], header));
  });

  it("brings any text through unharmed, in rows of equal length", () => {
    fc.assert(
      fc.property(arbitraryFields, (fields) => {
        const csv = constraintsCsv([{ ...row(), fields }, row()], header);
        const { data, errors } = read(csv);
        expect(errors).toEqual([]);
        expect(data).toHaveLength(2);
        expect(data[1]?.record).toBe("FL-0042");
        const place = data[0]?.place ?? "";
        expect(place).toBe(safeCell(fields.place ?? ""));
        for (const cell of Object.values(data[0] ?? {})) expect(cell).not.toMatch(/^[=@\t\r]/);
      }),
      { seed: 20261201, numRuns: 300 },
    );
  });
});

describe("safeCell", () => {
  it.each([
    ["=1+1", "'=1+1"],
    ["@SUM(A1)", "'@SUM(A1)"],
    ["-see note", "'-see note"],
    ["+0.19", "+0.19"],
    ["-3.5", "-3.5"],
    ["\u22123.5", "-3.5"],
    ["0.30", "0.30"],
    ["x_HI = 0.42", "x_HI = 0.42"],
  ])("%p becomes %p", (text, cell) => {
    expect(safeCell(text)).toBe(cell);
  });

  it("keeps a header line on one line", () => {
    expect(commentLine("a\r\nrecord,b\u2028c")).toBe("# a record,b c");
  });
});

describe("a fitting table", () => {
  const rows = [
    tableRow({
      included: false,
      reason: "Same data as FL-0043",
      number: "FL-0041",
      quotable: "FL-0041.2",
    }),
    tableRow(),
    tableRow({
      included: true,
      proposed: false,
      reason: "Needed at z = 7",
      number: "FL-0044",
      quotable: "FL-0044.1",
    }),
  ];

  it("lists rows in, then rows out, each with its reason and who chose", () => {
    const { data } = read(tableCsv(table({ rows }), "cd34"));
    expect(data.map(({ record, included, by, reason }) => [record, included, by, reason])).toEqual([
      ["FL-0042", "true", "default", ""],
      ["FL-0044", "true", "person", "Needed at z = 7"],
      ["FL-0041", "false", "default", "Same data as FL-0043"],
    ]);
    expect(data[0]).toMatchObject({
      likelihood_form: "Quantile-matched",
      citation_key: "Arvensis2031",
    });
  });

  it("names filter, last event, digest, choices, licence and cautions in the header", () => {
    const head = tableCsv(table({ rows }), "cd34")
      .split("\r\n")
      .filter((line) => line.startsWith("# "))
      .join("\n");
    for (const part of [
      "sha256:cd34",
      "Filter: All constraints",
      "Last event: 7",
      "Choice: FL-0041.2 out (default): Same data as FL-0043",
      "Choice: FL-0044.1 in (person): Needed at z = 7",
      "Address: /tables/wings",
      "Weighting of the neutral fractions in: Volume-weighted 2",
      "Rows are taken as independent",
      "CC BY 4.0",
      "not the authors'",
      "Cite the original papers",
    ]) {
      expect(head).toContain(part);
    }
  });

  it("holds the same in JSON", () => {
    const { content, ...file } = JSON.parse(tableJson(table({ rows }), "cd34"));
    expect(file).toMatchObject({ digest: "sha256:cd34", name: "Wings", address: "/tables/wings" });
    expect(content).toMatchObject({
      filter: { words: "All constraints" },
      licence: "CC BY 4.0",
      demonstration: true,
      weighting: [{ weighting: "volume", rows: 2 }],
      cautions: expect.arrayContaining([
        "The choices are this table's, not the authors'; cite the originals.",
        "Rows are taken as independent of one another.",
      ]),
      papers: [{ key: "Arvensis2031", bibtex: "@misc{Arvensis2031}" }],
    });
    expect(content.rows[1]).toMatchObject({
      record: "FL-0042",
      included: true,
      printed: { value: "0.42" },
      used: { value: "0.42", k: expect.any(Number) },
    });
    expect(content.choices).toEqual([
      { record: "FL-0041.2", included: false, by: "default", reason: "Same data as FL-0043" },
      { record: "FL-0044.1", included: true, by: "person", reason: "Needed at z = 7" },
    ]);
  });

  it("names its address, digest and choices at the head of its bibliography, too", () => {
    const lines = tableBibliographyLines(table({ rows }), "cd34").join("\n");
    for (const part of ["/tables/wings", "sha256:cd34", "CC BY 4.0", "Needed at z = 7"]) {
      expect(lines).toContain(part);
    }
  });

  it("says when neutral fractions of different weightings or an optical depth are in it", () => {
    const mixed = table({
      rows: [
        tableRow(),
        tableRow({ fields: buildFields({ weighting: "mass" }), number: "FL-0045" }),
        tableRow({ fields: buildFields({ quantity: "opticalDepth" }), number: "FL-0046" }),
        tableRow({
          fields: buildFields({ weighting: "unknown" }),
          number: "FL-0047",
          included: false,
          reason: "Too dim",
        }),
      ],
    });
    const csv = tableCsv(mixed, "cd34");
    expect(csv).toContain("Volume-weighted 1, mass-weighted 1 (mixed)");
    expect(csv).toContain("different weightings");
    expect(csv).toContain("came from a history family");
    expect(tableCsv(table(), "cd34")).not.toContain("different weightings");
    expect(tableCsv(table(), "cd34")).not.toContain("came from a history family");
  });

  it("says the same whatever its name, address, hour and last event are", () => {
    const other = table({ rows, name: "Other", address: "/tables/other", lastEvent: null });
    expect(tableContent(other)).toEqual(tableContent(table({ rows })));
  });
});

describe("bibliography", () => {
  const entry = "@article{A, title = {Wings}, journal = {\\apj} }";

  it("defines the macros its entries use, and no other", () => {
    expect(
      bibliography([entry, entry], { apj: "Invented J.", aap: "Other & Other" }, ["made by x@y"]),
    ).toBe(`% made by x(at)y\n\n@preamble{"\\providecommand{\\apj}{Invented J.}"}\n\n${entry}\n`);
  });

  it("escapes an ampersand in a journal's name", () => {
    expect(bibliography(["@misc{B, journal = {\\aap}}"], { aap: "A&A" })).toContain("{A\\&A}");
  });

  it("keeps the entries as they are, in their order", () => {
    const other = '@misc{B, title = {M{\\"u}ller}}';
    expect(bibliography([other, entry], {})).toBe(`${other}\n\n${entry}\n`);
  });
});
