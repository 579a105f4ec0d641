import fc from "fast-check";
import Papa from "papaparse";

import { bibliography } from "~shared/formats/bibliography";
import { CONSTRAINT_COLUMNS, constraintsCsv } from "~shared/formats/constraintCsv";
import { commentLine, safeCell } from "~shared/formats/exportRow";
import type { ExportHeader, ExportRow } from "~shared/formats/exportRow";
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
