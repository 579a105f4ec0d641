import Papa from "papaparse";

import { curveCsv } from "~shared/formats/curveCsv";
import type { ExportHeader, ExportRow } from "~shared/formats/exportRow";
import type { ConstraintFields } from "~shared/statement/fields";

import { buildFields } from "../buildFields";

const HEADER: ExportHeader = {
  registry: "Fogline",
  demonstration: true,
  lastEvent: { sequence: 7, at: "2026-12-01T06:00:00.000Z", digest: "ab12" },
  filter: "One record",
  licence: "CC BY 4.0",
};

/** 21 rows from 0.00 to 1.00; a triangle in ln L that is highest at 0.40. */
const lnTable = Array.from({ length: 21 }, (_, i) => {
  const x = i / 20;
  return `${x.toFixed(2)},${(-10 * Math.abs(x - 0.4)).toFixed(3)}`;
}).join("\n");

function row(changes: Partial<ConstraintFields> = {}): ExportRow {
  return {
    number: "FL-0042",
    quotable: "FL-0042.1",
    state: "current",
    fields: buildFields({
      kind: "curve",
      value: null,
      plus: null,
      minus: null,
      level: null,
      curveTable: lnTable,
      curveColumn: "lnLikelihood",
      ...changes,
    }),
    citation: {
      key: "Arvensis2031",
      shortName: "Arvensis et al. 2031",
      year: 2031,
      doi: null,
      arxiv: null,
      bibcode: null,
    },
  };
}

function read(csv: string | null) {
  if (csv === null) throw new Error("no curve was written");
  return Papa.parse<Record<string, string>>(csv.replace(/^#.*\r\n/gm, ""), {
    header: true,
    skipEmptyLines: true,
  });
}

it("says whose curve it is, that it is invented, up to which event, and under which licence", () => {
  const head = curveCsv(row(), HEADER)!
    .split("\r\n")
    .filter((line) => line.startsWith("# "));
  expect(head.slice(0, 5)).toEqual([
    "# Fogline: the tabulated curve of FL-0042.1 (Arvensis et al. 2031)",
    "# Demonstration: all records, papers and numbers are invented.",
    "# Last event: 7 of 2026-12-01T06:00:00.000Z, digest ab12",
    "# Licence: CC BY 4.0",
    expect.stringMatching(/^# Printed: .*, linear$/),
  ]);
  expect(curveCsv(row(), { ...HEADER, demonstration: false })).not.toContain("invented");
});

it("holds every printed row, its digits kept, and L over its peak beside it", () => {
  const { data, meta } = read(curveCsv(row(), HEADER));
  expect(meta.fields).toEqual([
    "printed_value",
    "printed_ln_likelihood",
    "used_value",
    "used_relative_likelihood",
  ]);
  expect(data).toHaveLength(21);
  expect(data[8]).toEqual({
    printed_value: "0.40",
    printed_ln_likelihood: "0",
    used_value: "0.4",
    used_relative_likelihood: "1",
  });
  // L falls by e⁻¹ over 0.1.
  expect(Number(data[10]!.used_relative_likelihood)).toBeCloseTo(Math.exp(-1), 12);
});

it("turns an ionized curve over beside its printed values", () => {
  const { data } = read(curveCsv(row({ species: "ionized" }), HEADER));
  expect(data[8]).toMatchObject({ printed_value: "0.40", used_value: "0.6" });
  expect(data.map((one) => Number(one.used_value) + Number(one.printed_value))).toEqual(
    data.map(() => expect.closeTo(1, 12)),
  );
});

it("names densities as such, and leaves what is used empty where the density is zero", () => {
  const table = Array.from(
    { length: 22 },
    (_, i) => `${(i / 25).toFixed(2)},${i === 0 ? 0 : i === 11 ? 4 : 2}`,
  );
  const { data, meta } = read(
    curveCsv(row({ curveTable: table.join("\n"), curveColumn: "density" }), HEADER),
  );
  expect(meta.fields![1]).toBe("printed_density");
  expect(data[0]).toEqual({
    printed_value: "0.00",
    printed_density: "0",
    used_value: "",
    used_relative_likelihood: "",
  });
  expect(data[1]!.used_relative_likelihood).toBe("0.5");
  expect(data[11]!.used_relative_likelihood).toBe("1");
});

it("writes a true minus as the hyphen that programs read, and names log10", () => {
  const table = Array.from(
    { length: 20 },
    (_, i) => `\u2212${(3 - i / 10).toFixed(1)},${i === 10 ? 0 : -1}`,
  );
  const { data, meta } = read(
    curveCsv(row({ scale: "log10", curveTable: table.join("\n") }), HEADER),
  );
  expect(meta.fields![2]).toBe("used_log10_value");
  expect(data[10]).toMatchObject({ printed_value: "-2.0", used_log10_value: "-2" });
});

it("gives the same bytes again, each line ended by CR and LF", () => {
  const csv = curveCsv(row(), HEADER)!;
  expect(curveCsv(row(), HEADER)).toBe(csv);
  expect(csv.replaceAll("\r\n", "")).not.toMatch(/[\r\n]/);
});

it.each<[string, Partial<ConstraintFields>]>([
  ["of another kind", { kind: "upperLimit", value: "0.3" }],
  ["without a table", { curveTable: null }],
  ["whose table is none", { curveTable: "0.1,1\n0.2,2" }],
])("is null for a record %s", (_, changes) => {
  expect(curveCsv(row(changes), HEADER)).toBeNull();
});
