import type { ReadingContent } from "~shared/review/reading";
import type { ConstraintFields } from "~shared/statement/fields";

import { buildCitation, buildFields } from "../../factories/constraint";
import { startTestServer, type TestServer } from "../support/harness";
import { deskOf } from "./desk";

// A database is made first, on a machine that may be busy.
jest.setTimeout(60_000);

const noNumbers = { value: null, plus: null, minus: null, level: null, estimator: null } as const;

/** ln L of a normal curve about 0.30, as a file with a head and comments holds it. */
const CURVE = [
  "# invented",
  "x_HI,lnL",
  ...Array.from({ length: 41 }, (_, i) => {
    const x = i / 40;
    return `${x.toFixed(3)},${(-0.5 * ((x - 0.3) / 0.08) ** 2).toFixed(4)}`;
  }),
].join("\n");

/** A statement of each kind and quantity, with the reading of somebody who writes numbers in another way. */
const STATEMENTS: readonly [
  name: string,
  fields: Partial<ConstraintFields>,
  reading: Partial<ReadingContent>,
  differing: Partial<ReadingContent>,
][] = [
  [
    "a curve without an interval",
    { kind: "curve", ...noNumbers, curveTable: CURVE, curveColumn: "lnLikelihood" },
    { curveTable: null, curveRows: "41", curveFirst: "0", curveLast: "1.0", curvePeak: ".3" },
    { curvePeak: "0.325" },
  ],
  [
    "a curve with its interval",
    {
      kind: "curve",
      value: "0.30",
      plus: "0.08",
      minus: "0.08",
      curveTable: CURVE,
      curveColumn: "lnLikelihood",
    },
    {
      value: "0.3",
      curveTable: null,
      curveRows: "41",
      curveFirst: "0.000",
      curveLast: "1.000",
      curvePeak: "0.300",
    },
    { curveRows: "40" },
  ],
  ["a qualitative statement", { kind: "qualitative", ...noNumbers }, {}, { z: "7.31" }],
  [
    "a band",
    { kind: "band", ...noNumbers, level: "percent95", bandLow: "0.20", bandHigh: "0.6" },
    { bandLow: ".2" },
    { bandHigh: "0.9" },
  ],
  [
    "a limit with its own sigma",
    {
      kind: "upperLimit",
      ...noNumbers,
      limitBase: "0.10",
      limitSigma: "0.20",
      level: "oneSigma",
    },
    { limitBase: "0.1" },
    { limitSigma: "0.02" },
  ],
  [
    "log10 of a mass-weighted fraction",
    { scale: "log10", weighting: "mass", value: "-3.2", plus: "0.4", minus: "0.5" },
    { value: "\u22123.20", minus: "-0.5" },
    { weighting: "volume" },
  ],
  [
    "an electron fraction with helium",
    { species: "electron", helium: "included", value: "0.80", plus: "0.10", minus: "0.10" },
    { value: "0.8" },
    { helium: "notIncluded" },
  ],
  [
    "an optical depth over a range",
    {
      quantity: "opticalDepthRange",
      species: null,
      scale: null,
      weighting: null,
      z: null,
      zRole: null,
      rangeLow: "15",
      rangeHigh: "30",
      kind: "upperLimit",
      ...noNumbers,
      value: "0.019",
      level: "percent95",
      historyAssumed: "Free electron fraction in knots",
      heliumAssumed: "First ionization with hydrogen",
      truncationAssumed: "From redshift 30",
      methodTags: ["cmbPolarization"],
    },
    { rangeLow: "15.0", value: ".019" },
    { rangeHigh: "50" },
  ],
  [
    "a redshift at an ionized fraction",
    {
      quantity: "redshiftAtFraction",
      species: "ionized",
      scale: null,
      weighting: null,
      z: null,
      zRole: null,
      fraction: "0.50",
      value: "7.64",
      plus: "0.74",
      minus: "0.74",
      methodTags: ["cmbPolarization"],
    },
    { fraction: "0.5" },
    { fraction: "0.05" },
  ],
  [
    "a duration in million years",
    {
      quantity: "duration",
      species: "neutral",
      scale: null,
      weighting: null,
      z: null,
      zRole: null,
      fractionFrom: "0.90",
      fractionTo: "0.10",
      durationUnit: "myr",
      value: "310",
      plus: "60",
      minus: "50",
      methodTags: ["kineticSz"],
    },
    { value: "310.0", fractionFrom: ".9" },
    { durationUnit: "redshift" },
  ],
];

describe("every statement through the desk", () => {
  let server: TestServer;
  beforeAll(async () => {
    server = await startTestServer();
  });
  afterAll(() => server.stop());

  /** Draft and submission, with an answer to what must be answered. */
  async function submitted(fields: Partial<ConstraintFields>) {
    const contributor = await server.signedIn(["contributor"]);
    const paper = await buildCitation(server.dataSource, contributor.user);
    const hers = deskOf(server, contributor.agent);
    const draft = await hers.start(paper.id);
    const content = buildFields(fields);
    const saved = await hers.save(draft.id, 1, content);
    const refused = await hers.submit(draft.id, saved.version);
    if (refused.__typename === "Submission") return { id: draft.id, content, hers };
    throw new Error(`${refused.code}: ${refused.message}`);
  }

  it.each(STATEMENTS)("reads %s blind", async (_, fields, reading, differing) => {
    const { id, content } = await submitted(fields);
    const editor = await server.signedIn(["editor"]);
    const his = deskOf(server, editor.agent);
    const claimed = await his.claim(id);
    // The same questions whatever was submitted.
    expect(claimed.fieldsToRead).toContain("curveRows");
    expect(claimed.fieldsToRead).toContain("fractionFrom");
    expect(claimed.submission).toBeNull();
    const read = await his.read(id, { ...content, ...reading, ...differing });
    const wrong = read.comparison.filter((one: { agrees: boolean }) => !one.agrees);
    expect(wrong.map((one: { field: string }) => one.field)).toEqual(Object.keys(differing));
    expect(await his.approve(id, read.item.version)).toMatchObject({ code: "blocked" });

    const [field] = Object.keys(differing);
    const corrected = await his.correct(
      id,
      field!,
      { ...content, ...reading },
      "I read the row below.",
    );
    expect(corrected.comparison.every((one: { agrees: boolean }) => one.agrees)).toBe(true);
    expect(
      corrected.comparison.find((one: { field: string }) => one.field === field).earlier,
    ).toHaveLength(1);
    expect(await his.approve(id, corrected.item.version)).toMatchObject({ __typename: "Done" });

    const record = await his.constraint(corrected.item.number);
    for (const [name, held] of Object.entries(fields)) expect(record.fields[name]).toEqual(held);
  });

  it("keeps no rows of a curve with a reading", async () => {
    const { id, content } = await submitted(STATEMENTS[0]![1]);
    const his = deskOf(server, (await server.signedIn(["editor"])).agent);
    await his.claim(id);
    await his.read(id, content);
    const [row] = await server.dataSource.query("SELECT first FROM reading WHERE revisionId = ?", [
      id,
    ]);
    const first = typeof row.first === "string" ? JSON.parse(row.first) : row.first;
    expect(first).toMatchObject({ curveTable: null, curveRows: "41", curvePeak: "0.300" });
  });

  it("names a curve's line and refuses to take it, and more than 100 000 characters", async () => {
    const contributor = await server.signedIn(["contributor"]);
    const hers = deskOf(server, contributor.agent);
    const paper = await buildCitation(server.dataSource, contributor.user);
    const draft = await hers.start(paper.id);
    const bad = CURVE.replace("0.100,", "O.100,");
    const saved = await hers.save(
      draft.id,
      1,
      buildFields({ ...STATEMENTS[0]![1], curveTable: bad }),
    );
    expect(await hers.submit(draft.id, saved.version)).toMatchObject({
      __typename: "Refusal",
      field: "curveTable",
      message: expect.stringContaining('Line 7 of the curve: "O.100" is not a number.'),
    });
    const long = "0.1,1\n".repeat(17_000);
    expect(await hers.save(draft.id, saved.version, { curveTable: long })).toMatchObject({
      code: "tooLong",
      field: "curveTable",
    });
    // 96 kB are kept.
    const most = "0.1,1\n".repeat(16_000);
    expect(await hers.save(draft.id, saved.version, { curveTable: most })).toMatchObject({
      fields: { curveTable: most.trim() },
    });
  });

  it("hands a record's curve out as printed and as used", async () => {
    const { id, content } = await submitted({ ...STATEMENTS[0]![1], species: "ionized" });
    const his = deskOf(server, (await server.signedIn(["editor"])).agent);
    const { item } = await his.claim(id);
    const file = () => server.agent().get(`/api/constraints/${item.number}/curve.csv`);
    expect((await file()).status).toBe(404);
    const read = await his.read(id, content);
    await his.approve(id, read.item.version);
    const response = await file();
    expect(response.status).toBe(200);
    expect(response.headers["content-type"]).toBe("text/csv; charset=utf-8");
    const lines = response.text.split("\r\n").filter((line) => !line.startsWith("#"));
    expect(lines[0]).toBe(
      "printed_value,printed_ln_likelihood,used_value,used_relative_likelihood",
    );
    expect(lines[13]).toBe("0.300,0,0.7,1");
    expect(lines).toHaveLength(43);
  });

  // Acceptance line 1 of issue 4.
  it("stores ionized fractions as printed and uses the neutral ones", async () => {
    const approve = async (fields: Partial<ConstraintFields>) => {
      const { id, content } = await submitted({ species: "ionized", ...fields });
      const his = deskOf(server, (await server.signedIn(["editor"])).agent);
      await his.claim(id);
      const read = await his.read(id, content);
      await his.approve(id, read.item.version);
      return his.constraint(read.item.number);
    };
    const limit = await approve({
      kind: "lowerLimit",
      ...noNumbers,
      value: "0.80",
      level: "percent95",
    });
    const value = await approve({ value: "0.30", plus: "0.10", minus: "0.05" });
    expect(limit.fields).toMatchObject({ species: "ionized", kind: "lowerLimit", value: "0.80" });
    expect(value.fields).toMatchObject({ value: "0.30", plus: "0.10", minus: "0.05" });

    const csv = (await server.agent().get("/api/constraints.csv")).text;
    const cells = (number: string) =>
      csv.split("\r\n").find((line) => line.startsWith(`${number},`));
    expect(cells(limit.number)).toContain(
      "Neutral from ionized: x_HI = 1 − x_HII; the lower limit becomes an upper limit.",
    );
    expect(cells(limit.number)).toContain("upperLimit,linear,true,false,0.20,");
    expect(cells(value.number)).toContain(
      "Neutral from ionized: x_HI = 1 − x_HII; plus and minus swap.",
    );
    expect(cells(value.number)).toContain("twoSided,linear,false,false,0.70,0.05,0.10,");
  });

  // Acceptance line 3 of issue 4.
  it("lets a limit that says nothing into use only with a written answer that an editor accepts", async () => {
    const contributor = await server.signedIn(["contributor"]);
    const hers = deskOf(server, contributor.agent);
    const paper = await buildCitation(server.dataSource, contributor.user);
    const draft = await hers.start(paper.id);
    const content = buildFields({
      kind: "upperLimit",
      ...noNumbers,
      value: "0.96",
      level: "percent95",
    });
    const saved = await hers.save(draft.id, 1, content);
    const refused = await hers.submit(draft.id, saved.version);
    expect(refused).toMatchObject({ __typename: "Refusal" });
    expect(refused.message).toMatch(/answer/i);
    for (const answer of ["", "   "]) {
      const again = await hers.save(draft.id, (await hers.submission(draft.id)).version, content, {
        answers: [{ code: "flatLimit", answer }],
      });
      expect(await hers.submit(draft.id, again.version)).toMatchObject({ __typename: "Refusal" });
    }
    const answered = await hers.save(draft.id, (await hers.submission(draft.id)).version, content, {
      answers: [{ code: "flatLimit", answer: "It is the paper's only result at z = 7.13." }],
    });
    const sent = await hers.submit(draft.id, answered.version);
    expect(sent.findings).toMatchObject([
      {
        code: "flatLimit",
        grade: "mustAnswer",
        message: expect.stringContaining("a flat prior alone says as much"),
      },
    ]);

    const his = deskOf(server, (await server.signedIn(["editor"])).agent);
    await his.claim(draft.id);
    const read = await his.read(draft.id, content);
    expect(await his.approve(draft.id, read.item.version)).toMatchObject({
      code: "blocked",
      message: "One answer of the contributor is not accepted yet.",
    });
    const accepted = await his.accept(draft.id, "flatLimit");
    expect(await his.approve(draft.id, accepted.item.version)).toMatchObject({
      __typename: "Done",
    });
  });
});
