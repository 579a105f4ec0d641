/** @jest-environment jsdom */
import Papa from "papaparse";

import { ascii } from "~shared/formats/columnFile/ascii";
import { byteByByte, fieldWidths } from "~shared/formats/columnFile/byteByByte";
import { numberText, type FileColumn, type FileRow } from "~shared/formats/columnFile/columnFile";
import { csv } from "~shared/formats/columnFile/csv";
import { ecsv } from "~shared/formats/columnFile/ecsv";
import { votable } from "~shared/formats/columnFile/votable";

import { HEAD, ROWS } from "./rows";

async function whole(pieces: AsyncIterable<string>): Promise<string> {
  let text = "";
  for await (const piece of pieces) text += piece;
  return text;
}

/** Rows that say when they are read. */
function* watched(seen: number[]): Generator<FileRow> {
  for (const [index, row] of ROWS.entries()) {
    seen.push(index);
    yield row;
  }
}

describe("numbers in cells", () => {
  const column = (kind: FileColumn["kind"]): FileColumn => ({ name: "x", meaning: "x", kind });

  it("keep the digits of a decimal, with the sign and the zero that programs read", () => {
    const texts = ["0.30", "\u22120.5", "+1.0", ".4", "-.4", " 7 "];
    expect(texts.map((text) => numberText(text, column("decimal")))).toEqual([
      "0.30",
      "-0.5",
      "1.0",
      "0.4",
      "-0.4",
      "7",
    ]);
  });

  it("refuse what is no finite number", () => {
    for (const cell of ["", "0.3a", Infinity, NaN]) {
      expect(() => numberText(cell, column("double"))).toThrow(TypeError);
    }
  });
});

describe("ecsv", () => {
  it("declares each column and leaves a missing value empty", async () => {
    const text = await whole(ecsv(HEAD, ROWS));
    const head = text.split("\n").filter((line) => line.startsWith("#"));
    expect(head[0]).toBe("# %ECSV 1.0");
    expect(head[5]).toBe(
      '# - {name: "z", datatype: float64, description: "Redshift", meta: {ucd: "src.redshift"}}',
    );
    const body = text.split("\n").filter((line) => !line.startsWith("#"));
    const { data, errors } = Papa.parse<string[]>(body.join("\n"), { skipEmptyLines: true });
    expect(errors).toEqual([]);
    expect(data).toEqual([
      ["record", "z", "age", "year", "upper_limit", "printed_text"],
      [
        "FL-0001",
        "7.10",
        "0.7512345678901234",
        "2024",
        "False",
        "x = 0.30 +0.10 \u22120.05, \u201ctop\u201d # 1",
      ],
      ["FL-0002", "5.9", "", "", "True", ""],
      ["FL-0003", "", "1e-7", "1999", "", 'Ly\u03b1 at "z" next line, M\u00fcller'],
      ["FL-10000", "-0.5", "12", "2026", "True", "="],
    ]);
  });

  it("hands out its header before it reads a row, and each row as it comes", async () => {
    const seen: number[] = [];
    const pieces = ecsv(HEAD, watched(seen));
    await pieces.next();
    expect(seen).toEqual([]);
    await pieces.next();
    expect(seen).toEqual([0]);
  });
});

describe("csv", () => {
  it("gives every cell back to another parser, numbers as printed and a missing value empty", async () => {
    const text = await whole(csv(HEAD, ROWS));
    expect(text.startsWith("# Invented rows\r\n# All of it is invented.\r\n")).toBe(true);
    const body = text.replace(/^#.*\r\n/gm, "");
    const { data, errors } = Papa.parse<string[]>(body, { skipEmptyLines: true });
    expect(errors).toEqual([]);
    expect(data[0]).toEqual(HEAD.columns.map(({ name }) => name));
    expect(data[1]?.slice(0, 5)).toEqual([
      "FL-0001",
      "7.10",
      "0.7512345678901234",
      "2024",
      "false",
    ]);
    expect(data[2]).toEqual(["FL-0002", "5.9", "", "", "true", ""]);
  });

  it("lets no spreadsheet take a text for a formula", async () => {
    expect(await whole(csv(HEAD, ROWS))).toContain('true,"\'="\r\n');
  });

  it("hands out its names before it reads a row", async () => {
    const seen: number[] = [];
    const pieces = csv(HEAD, watched(seen));
    await pieces.next();
    expect(seen).toEqual([]);
  });
});

describe("votable", () => {
  const parsed = async (): Promise<Document> => {
    return new DOMParser().parseFromString(await whole(votable(HEAD, ROWS)), "application/xml");
  };

  it("is well-formed, with typed fields, and leaves a missing value empty", async () => {
    const document = await parsed();
    expect(document.querySelector("parsererror")).toBeNull();
    expect(document.documentElement.getAttribute("version")).toBe("1.4");
    const fields = Array.from(document.querySelectorAll("FIELD"));
    expect(
      fields.map((field) => [field.getAttribute("name"), field.getAttribute("datatype")]),
    ).toEqual([
      ["record", "unicodeChar"],
      ["z", "double"],
      ["age", "double"],
      ["year", "long"],
      ["upper_limit", "boolean"],
      ["printed_text", "unicodeChar"],
    ]);
    expect(fields[2]?.getAttribute("unit")).toBe("Gyr");
    const cells = Array.from(document.querySelectorAll("TR")).map((row) =>
      Array.from(row.children).map((cell) => cell.textContent),
    );
    expect(cells[1]).toEqual(["FL-0002", "5.9", "", "", "true", ""]);
    expect(cells[2]?.[5]).toBe('Ly\u03b1 at "z" next line, M\u00fcller');
  });

  it("keeps out what XML can't hold", async () => {
    const rows: FileRow[] = [["a\u0000b\ud800<&>", null, null, null, null, null]];
    expect(await whole(votable(HEAD, rows))).toContain("<TD>a b\ufffd&lt;&amp;&gt;</TD>");
  });

  it("hands out its fields before it reads a row", async () => {
    const seen: number[] = [];
    const pieces = votable(HEAD, watched(seen));
    await pieces.next();
    expect(seen).toEqual([]);
  });
});

describe("byteByByte", () => {
  it("puts every cell at the bytes it describes, in lines of one width", async () => {
    const found = await fieldWidths(HEAD.columns, ROWS);
    const text = await whole(byteByByte(HEAD, found, ROWS));
    const lines = text.replace(/\n$/, "").split("\n");
    const rows = lines.slice(lines.lastIndexOf("-".repeat(80)) + 1);
    expect(new Set(rows.map((row) => row.length)).size).toBe(1);
    const fields = lines.flatMap((line) => {
      const match = /^ *(\d+)- *(\d+) ([AEFI]\S+) +(\S+) +(\S+) +\? /.exec(line);
      return match ? [{ from: Number(match[1]), to: Number(match[2]), name: match[5] }] : [];
    });
    expect(fields.map(({ name }) => name)).toEqual(HEAD.columns.map(({ name }) => name));
    const cells = rows.map((row) => fields.map(({ from, to }) => row.slice(from - 1, to).trim()));
    expect(cells).toEqual([
      ["FL-0001", "7.10", "0.7512345678901234", "2024", "no", 'x = 0.30 +0.10 -0.05, "top" # 1'],
      ["FL-0002", "5.9", "", "", "yes", ""],
      ["FL-0003", "", "1e-7", "1999", "", 'Lyalpha at "z" next line, Muller'],
      ["FL-10000", "-0.5", "12", "2026", "yes", "="],
    ]);
  });

  it("is ASCII throughout, in lines of description no longer than eighty bytes", async () => {
    const found = await fieldWidths(HEAD.columns, ROWS);
    const text = await whole(
      byteByByte({ ...HEAD, lines: [`Lyα ${"long ".repeat(60)}`] }, found, ROWS),
    );
    expect(text).toMatch(/^[\x20-\x7e\n]*$/);
    const head = text.slice(0, text.lastIndexOf("-".repeat(80)));
    expect(Math.max(...head.split("\n").map((line) => line.length))).toBeLessThanOrEqual(80);
  });
});

describe("ascii", () => {
  it("spells letters and signs, and never drops a digit", () => {
    expect(ascii("Ørnefjeld & Müller: τ ± 0.01, 5 ≤ z, x−1, 日")).toBe(
      "Ornefjeld & Muller: tau +/- 0.01, 5 <= z, x-1, ?",
    );
  });
});
