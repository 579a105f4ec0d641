import fc from "fast-check";

import { emptyFields, type ConstraintFields } from "~shared/statement/fields";
import { comparableDataName } from "~shared/dependence/dataName";
import { proposeRows, type CandidateRow } from "~shared/table/proposeRows";

let next = 0;

function row(
  fields: Partial<ConstraintFields> = {},
  more: Partial<CandidateRow> = {},
): CandidateRow {
  next += 1;
  return {
    number: `FL-${String(next).padStart(4, "0")}`,
    citation: `paper ${next}`,
    year: 2024,
    ...more,
    fields: {
      ...emptyFields(),
      quantity: "neutralFraction",
      species: "neutral",
      scale: "linear",
      weighting: "volume",
      zRole: "point",
      z: "7",
      kind: "twoSided",
      value: "0.4",
      plus: "0.1",
      minus: "0.1",
      level: "oneSigma",
      estimator: "median",
      methodTags: ["quasarDampingWing"],
      dataUsed: [`sightline ${next}`],
      dataKnown: true,
      versionRead: "published",
      ...fields,
    },
  };
}

function reasons(rows: readonly CandidateRow[]): (string | null)[] {
  return proposeRows(rows).map(({ reason }) => reason);
}

describe("proposeRows", () => {
  beforeEach(() => {
    next = 0;
  });

  it("takes complete rows over separate data in", () => {
    expect(reasons([row(), row(), row()])).toEqual([null, null, null]);
  });

  it("leaves out what waits for a decision about its likelihood", () => {
    expect(reasons([row({ weighting: "mass" }), row()])).toEqual([
      "Mass-weighted: not converted to a volume average",
      null,
    ]);
  });

  it("leaves out what no likelihood can take, each with its reason", () => {
    expect(
      reasons([
        row({ level: "notStated" }),
        row({ kind: "qualitative", value: null, plus: null, minus: null }),
        row({ kind: "curve", value: null, plus: null, minus: null }),
        row({ value: null }),
      ]),
    ).toEqual([
      "Level not stated",
      "Qualitative statement",
      "Tabulated curve without its nodes",
      "Not complete enough to use",
    ]);
  });

  it("keeps the preferred alternative, else the one with the later number", () => {
    const group = { alternativesGroup: "A", dataUsed: ["fields"] };
    const paper = { citation: "one paper" };
    expect(
      reasons([
        row({ ...group, alternativesPreferred: true }, paper),
        row(group, paper),
        row(group, paper),
      ]),
    ).toEqual([
      null,
      "Alternative answer to the same question as FL-0001",
      "Alternative answer to the same question as FL-0001",
    ]);
    next = 0;
    expect(reasons([row(group, paper), row(group, paper)])).toEqual([
      "Alternative answer to the same question as FL-0002",
      null,
    ]);
  });

  it("doesn't take one label of two papers for one group", () => {
    expect(reasons([row({ alternativesGroup: "A" }), row({ alternativesGroup: "A" })])).toEqual([
      null,
      null,
    ]);
  });

  it("keeps of rows that share named data the published, then the later, then the lower number", () => {
    const shared = { dataUsed: ["QV 1"] };
    expect(
      reasons([
        row({ ...shared, versionRead: "preprint" }, { year: 2026 }),
        row(shared, { year: 2020 }),
        row({ dataUsed: ["qv1"] }, { year: 2023 }),
        row(shared, { year: 2023 }),
      ]),
    ).toEqual([
      "Shares QV 1 with FL-0003",
      "Shares QV 1 with FL-0003",
      null,
      "Shares QV 1 with FL-0003",
    ]);
  });

  it("leaves one paper's bins of one sample side by side, with a caution", () => {
    const paper = { citation: "one paper" };
    const bin = (zLow: string, zHigh: string) =>
      row({ dataUsed: ["forest"], zRole: "binAverage", z: null, zLow, zHigh }, paper);
    const proposed = proposeRows([bin("5.4", "5.7"), bin("5.7", "6.0"), bin("5.9", "6.2")]);
    // The third overlaps with the second in redshift, so it is the same data again.
    expect(proposed.map(({ reason }) => reason)).toEqual([
      null,
      null,
      "Shares forest with FL-0002",
    ]);
    expect(proposed[0]?.cautions).toEqual([
      "Another redshift of the same sample is in the table: FL-0002",
    ]);
    next = 0;
    // Another paper's bin of the same sample is no separate measurement.
    const other = [bin("5.4", "5.7"), row({ dataUsed: ["forest"], z: "6.5" })];
    expect(reasons(other)).toEqual([null, "Shares forest with FL-0001"]);
  });

  it("doesn't take unknown data for shared data, and says that they are unknown", () => {
    const unknown = { dataKnown: false, dataUsed: ["somewhere"] };
    const proposed = proposeRows([row(unknown), row(unknown)]);
    expect(proposed.map(({ included }) => included)).toEqual([true, true]);
    expect(proposed[0]?.cautions).toEqual(["The data it uses are unknown"]);
  });

  it("leaves a joint inference out beside any other row, and keeps it alone", () => {
    const joint = { methodTags: ["jointInference"] };
    expect(reasons([row(joint), row()])).toEqual([
      "Joint inference: it contains other constraints",
      null,
    ]);
    next = 0;
    expect(reasons([row(joint)])).toEqual([null]);
    next = 0;
    expect(reasons([row(joint), row({ level: "notStated" })])).toEqual([null, "Level not stated"]);
  });

  it("cautions about a row conditioned on the CMB, or on a record, that is in the table", () => {
    const cmb = row({
      quantity: "opticalDepth",
      methodTags: ["cmbPolarization"],
      value: "0.06",
      plus: "0.01",
      minus: "0.01",
    });
    const proposed = proposeRows([cmb, row({ conditionedOn: ["cmb", "FL-0001"] })]);
    expect(proposed[1]).toMatchObject({
      included: true,
      cautions: [
        "Conditioned on a CMB prior, and FL-0001 is in the table",
        "Conditioned on FL-0001, which is in the table",
      ],
    });
    next = 0;
    expect(proposeRows([row({ conditionedOn: ["cmb"] })])[0]?.cautions).toEqual([]);
  });

  it("follows conditions through records of the list, and leaves superseded ones out", () => {
    const cmb = row({
      quantity: "opticalDepth",
      species: null,
      scale: null,
      weighting: null,
      z: null,
      zRole: null,
      value: "0.0561",
      plus: "0.0071",
      minus: "0.0071",
      methodTags: ["cmbPolarization"],
    });
    const through = row({ conditionedOn: ["cmb"], dataUsed: ["One"] });
    const last = row({ conditionedOn: [through.number], dataUsed: ["Two"] });
    const [, superseded, end] = proposeRows([cmb, { ...through, state: "superseded" }, last]);
    expect(superseded).toMatchObject({ included: false, reason: "Superseded by another record" });
    expect(end?.cautions).toEqual([
      `${last.number} is conditioned on ${through.number}, which is conditioned on CMB, and ${cmb.number} is in the table`,
    ]);
  });

  it("proposes the same whatever the order of the candidates", () => {
    const data = fc.constantFrom("a", "b", "c");
    const candidate = fc.record({
      data: fc.array(data, { maxLength: 2 }),
      year: fc.integer({ min: 2020, max: 2023 }),
      group: fc.constantFrom(null, "A"),
      joint: fc.boolean(),
      citation: fc.constantFrom("p", "q"),
      z: fc.constantFrom("6", "7"),
    });
    fc.assert(
      fc.property(
        fc.array(candidate, { maxLength: 8 }),
        fc.infiniteStream(fc.nat()),
        (all, order) => {
          next = 0;
          const rows = all.map((one) =>
            row(
              {
                dataUsed: one.data,
                alternativesGroup: one.group,
                methodTags: [one.joint ? "jointInference" : "quasarDampingWing"],
                z: one.z,
              },
              { year: one.year, citation: one.citation },
            ),
          );
          const shuffled = rows
            .map((one) => ({ one, key: order.next().value as number }))
            .sort((a, b) => a.key - b.key)
            .map(({ one }) => one);
          const byNumber = (some: readonly CandidateRow[]) =>
            Object.fromEntries(proposeRows(some).map((one) => [one.number, one.reason]));
          expect(byNumber(shuffled)).toEqual(byNumber(rows));
          // Something stays in, unless nothing came.
          if (rows.length > 0)
            expect(proposeRows(rows).some(({ included }) => included)).toBe(true);
        },
      ),
      { seed: 7, numRuns: 200 },
    );
  });
});

describe("comparableDataName", () => {
  it("ignores case, blanks, dots, underscores and the kind of dash", () => {
    expect(comparableDataName("QV 0719+31")).toBe(comparableDataName("qv_0719+31 "));
    expect(comparableDataName("QV 1147\u221208")).toBe(comparableDataName("QV 1147-08"));
  });

  it("keeps the sign of a declination", () => {
    expect(comparableDataName("QV 1147+08")).not.toBe(comparableDataName("QV 1147-08"));
  });
});
