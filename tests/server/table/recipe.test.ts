import { createHash } from "node:crypto";
import { setFlagsFromString } from "node:v8";
import { runInNewContext } from "node:vm";

import Ajv2020 from "ajv/dist/2020";
import canonicalize from "canonicalize";
import Papa from "papaparse";
import { Like } from "typeorm";

import { tellOwners } from "~server/table/tellOwners";
import { TableVersionRow } from "~server/table/tableVersion.entity";
import { NamedData } from "~server/namedData/namedData.entity";
import { relateData } from "~server/namedData/namedData.service";
import { OutboxMail } from "~server/mail/outboxMail.entity";
import { Constraint } from "~server/constraint/constraint.entity";
import { Release } from "~server/release/release.entity";
import { cutRelease } from "~server/release/release.service";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";
import { emptyFields } from "~shared/statement/fields";

import { actingAs, buildApproved, buildCitation, granted } from "../../factories/constraint";
import { startTestServer, type Agent, type TestServer } from "../support/harness";

type Signed = Awaited<ReturnType<TestServer["signedIn"]>>;

const PROPOSAL = `__typename
  ... on Refusal { code message }
  ... on TableProposal { open filter
    rows { number included reason open form forms weight mixture level }
    decisions { id kind rows words proposed options { code override } taken }
    mixtures { label members standardDeviation } sets { id rho whole } }`;

describe("recipes of fitting tables", () => {
  let server: TestServer;
  let contributor: Signed;
  let editor: Signed;
  let maintainer: Signed;
  let theorist: Signed;
  let stranger: Agent;

  beforeAll(async () => {
    server = await startTestServer();
    contributor = await server.signedIn(["contributor"], { nameOnPapers: "Ottla Firn" });
    editor = await server.signedIn(["editor"], { nameOnPapers: "Brisa Kelm" });
    maintainer = await server.signedIn(["maintainer"]);
    theorist = await server.signedIn([], { nameOnPapers: "Sefa Lornhill" });
    stranger = server.agent();
  });
  afterAll(() => server.stop());

  const propose = async (recipe: object, agent: Agent = stranger) =>
    (
      await server.graphql(
        agent,
        `query ($recipe: TableInput!) { tableProposal(recipe: $recipe) { ${PROPOSAL} } }`,
        { recipe },
      )
    ).data?.tableProposal;
  const save = async (input: object, agent: Agent = theorist.agent) => {
    const { data, errors } = await server.graphql(
      agent,
      `mutation ($input: SaveRecipeInput!) { saveRecipe(input: $input) { __typename
        ... on Refusal { code message }
        ... on FittingTable { slug version digest rowsIn rowsOut release visibility } } }`,
      { input: { visibility: "public", ...input } },
    );
    if (errors) throw new Error(errors[0]?.message);
    return data.saveRecipe;
  };
  const file = (name: string, agent: Agent = stranger) =>
    agent.get(`/api/tables/${name}`).buffer(true).parse(asText);

  /** Three answers of one paper; their authors prefer none. */
  async function alternatives(word: string): Promise<string[]> {
    const paper = await buildCitation(server.dataSource, contributor.user, { title: word });
    const numbers: string[] = [];
    for (const value of ["0.45", "0.55", "0.65"]) {
      const revision = await buildApproved(
        server.dataSource,
        contributor.user,
        editor.user,
        {
          z: "7.1",
          value,
          plus: "0.10",
          minus: "0.10",
          estimator: "mean",
          alternativesGroup: "model",
          dataUsed: [`${word} field`],
        },
        paper,
      );
      numbers.push(formatRecordNumber(revision.constraintId));
    }
    return numbers;
  }

  it("enter three alternatives as an equal mixture with a third each, never as one value", async () => {
    const numbers = await alternatives("Heathmoor");
    const filter = { text: "Heathmoor" };
    const proposal = await propose({ filter });
    expect(proposal).toMatchObject({
      open: 1,
      decisions: [{ kind: "alternatives", rows: numbers, proposed: "mixture", taken: null }],
      mixtures: [{ members: numbers }],
    });
    expect(proposal.mixtures[0].standardDeviation.toFixed(3)).toBe("0.129");
    expect(proposal.decisions[0].options.map(({ code }: { code: string }) => code)).not.toContain(
      "product",
    );

    const refused = await save({ name: "Open", recipe: { filter } });
    expect(refused).toMatchObject({ code: "open", message: "One decision is still open." });
    const taken = { id: proposal.decisions[0].id, option: "mixture", byDefault: true };
    const saved = await save({ name: "Mixture", recipe: { filter, decisions: [taken] } });
    expect(saved).toMatchObject({ version: 1, rowsIn: 3, rowsOut: 0, release: null });

    const { content } = JSON.parse((await file(`${saved.slug}.json`).expect(200)).body as string);
    expect(
      content.rows.map((row: { weight: number; mixture: string; used: { value: string } }) => [
        row.weight,
        row.mixture,
        row.used.value,
      ]),
    ).toEqual([
      [1 / 3, "model", "0.45"],
      [1 / 3, "model", "0.55"],
      [1 / 3, "model", "0.65"],
    ]);
  });

  it("block a row that contains, through another record, what the table holds; an override's reason is in every file", async () => {
    const through = await buildApproved(server.dataSource, contributor.user, editor.user, {
      z: "6.8",
      dataUsed: ["Farther off"],
      conditionedOn: ["cmb"],
    });
    const middle = formatRecordNumber(through.constraintId);
    const joint = await buildApproved(server.dataSource, contributor.user, editor.user, {
      z: "7.3",
      dataUsed: ["Yewmoor sightline"],
      conditionedOn: [middle],
    });
    const number = formatRecordNumber(joint.constraintId);
    const depth = await buildApproved(server.dataSource, contributor.user, editor.user, {
      quantity: "opticalDepth",
      species: null,
      scale: null,
      weighting: null,
      zRole: null,
      z: null,
      value: "0.061",
      plus: "0.008",
      minus: "0.008",
      estimator: "mean",
      methodTags: ["cmbPolarization"],
      dataUsed: ["Yewmoor sky"],
    });
    const tau = formatRecordNumber(depth.constraintId);
    const filter = { text: "Yewmoor" };
    const proposal = await propose({ filter });
    const [decision] = proposal.decisions;
    expect(decision).toMatchObject({ kind: "conditioned", taken: null });
    expect(decision.words).toContain(
      `${number} is conditioned on ${middle}, which is conditioned on CMB; in the table: ${tau}`,
    );
    const reason = "The prior is ten times wider than this row.";
    const override = { id: decision.id, option: "keep", byDefault: false };
    expect(
      await save({ name: "Kept", recipe: { filter, decisions: [{ ...override, reason: " " }] } }),
    ).toMatchObject({ code: "open" });
    const { slug, rowsIn } = await save({
      name: "Kept",
      recipe: { filter, decisions: [{ ...override, reason }] },
    });
    expect(rowsIn).toBe(2);
    for (const kind of ["csv", "json", "ecsv", "vot", "txt", "bib", "methods.tex"]) {
      const text = (await file(`${slug}.${kind}`).expect(200)).body as string;
      const flat = text.replace(/\s*\n(#\s*)?\s*/g, " ");
      expect([kind, flat.includes("ten times wider than this row")]).toEqual([kind, true]);
    }
  });

  it("make one cluster of two analyses of a sightline and a stack that contains it", async () => {
    const numbers: string[] = [];
    for (const dataUsed of ["Reedholm 1", "Reedholm 1", "Reedholm stack"]) {
      const { constraintId } = await buildApproved(
        server.dataSource,
        contributor.user,
        editor.user,
        { z: "7.6", dataUsed: [dataUsed], value: `0.3${numbers.length}` },
      );
      numbers.push(formatRecordNumber(constraintId));
    }
    const { manager } = server.dataSource;
    const [part, whole] = await Promise.all(
      ["Reedholm 1", "Reedholm stack"].map((name) => manager.findOneByOrFail(NamedData, { name })),
    );
    if (!part || !whole) throw new Error("the names were not kept");
    const who = actingAs(server.dataSource, editor.user);
    granted(await relateData(who, part.slug, "subsetOf", whole.slug));
    const { decisions, rows } = await propose({ filter: { text: "Reedholm" } });
    expect(decisions).toMatchObject([{ kind: "overlap", rows: numbers }]);
    // Every two of them overlap, so a largest set holds one; all else equal, the lowest number.
    expect(decisions[0].proposed).toBe(`keep:${numbers[0]}`);
    expect(rows.map(({ included }: { included: boolean }) => included)).toEqual([
      true,
      false,
      false,
    ]);
  });

  it("hand out the same choices in every file, under the published schema and a digest over the content", async () => {
    const level = await buildApproved(server.dataSource, contributor.user, editor.user, {
      z: "6.4",
      value: "0.31",
      level: "notStated",
      dataUsed: ["Quillmere sightline"],
      remark: "Quillmere",
    });
    const number = formatRecordNumber(level.constraintId);
    const filter = { text: "Quillmere" };
    const open = await propose({ filter });
    expect(open.rows).toMatchObject([{ included: false, reason: "Level not stated" }]);
    const reason = "Their earlier paper says 95 %.";
    const decision = { id: open.decisions[0].id, option: "level:0.95", byDefault: false, reason };
    expect(
      await save({ name: "x", recipe: { filter, decisions: [{ ...decision, reason: "" }] } }),
    ).toMatchObject({ code: "open" });
    const saved = await save({ name: "Ninety-five", recipe: { filter, decisions: [decision] } });

    const body = (await file(`${saved.slug}.json`).expect(200)).body as string;
    const json = JSON.parse(body);
    expect(
      createHash("sha256")
        .update(canonicalize(json.content) ?? "")
        .digest("hex"),
    ).toBe(saved.digest);
    expect(json.digest).toBe(`sha256:${saved.digest}`);
    const schema = (
      await stranger.get("/api/schemas/fitting-table-2.json").buffer(true).parse(asText).expect(200)
    ).body as string;
    const validate = new Ajv2020({ allowUnionTypes: true }).compile(JSON.parse(schema));
    expect([validate(json), validate.errors]).toEqual([true, null]);
    expect(json.content.rows[0].likelihood).toMatchObject({ level: 0.95 });

    const csv = (await file(`${saved.slug}.csv`).expect(200)).body as string;
    const { data } = Papa.parse<Record<string, string>>(csv.replace(/^#.*\r\n/gm, ""), {
      header: true,
      skipEmptyLines: true,
    });
    expect(data).toMatchObject([
      { record: number, used_value: "0.31", level: "0.95", level_decided: "true", weight: "1" },
    ]);
    for (const kind of ["csv", "json", "ecsv", "vot", "txt", "bib", "methods.tex"]) {
      const text = (await file(`${saved.slug}.${kind}`).expect(200)).body as string;
      expect([
        kind,
        text.replace(/\s*\n(#\s*)?\s*/g, " ").includes("Their earlier paper says 95"),
      ]).toEqual([kind, true]);
    }
    const latex = (await file(`${saved.slug}.tex`).expect(200)).body as string;
    expect(latex).toContain("& $x_\\mathrm{HI} = 0.31^{+0.12}_{-0.15}$ & 95\\,\\% &");
    expect((await file(`${saved.slug}.svg`).expect(200)).body).toContain("<svg xmlns=");
  });

  it("make an archive of all files whose bytes depend on nothing else", async () => {
    const filter = { text: "Quillmere" };
    const open = await propose({ filter });
    const recipe = {
      filter,
      decisions: [{ id: open.decisions[0].id, option: "level:0.6827", byDefault: true }],
    };
    const { slug } = await save({ name: "Archive", recipe });
    const zip = async () =>
      (await stranger.get(`/api/tables/${slug}@1.zip`).buffer(true).parse(asBytes).expect(200))
        .body as Buffer;
    const [one, two] = [await zip(), await zip()];
    expect(one.equals(two)).toBe(true);
    const names = one.toString("latin1").match(/(?:README|table|methods)\.[a-z]+/g);
    expect([...new Set(names)].sort()).toEqual([
      "README.txt",
      "methods.tex",
      "table.bib",
      "table.csv",
      "table.ecsv",
      "table.json",
      "table.svg",
      "table.tex",
      "table.txt",
      "table.vot",
    ]);
  });

  it("find the records of a release by the state they had in it", async () => {
    const numbers: string[] = [];
    for (const z of ["6.1", "6.2"]) {
      const { constraintId } = await buildApproved(
        server.dataSource,
        contributor.user,
        editor.user,
        { z, dataUsed: [`Ashcombe ${z}`] },
      );
      if (z === "6.2") {
        await server.dataSource.manager.update(Constraint, constraintId, { state: "superseded" });
      }
      numbers.push(formatRecordNumber(constraintId));
    }
    const { number: release } = granted(
      await cutRelease(actingAs(server.dataSource, maintainer.user), "States"),
    );
    const found = async (source: number | null, states: string[]) =>
      (await propose({ release: source, filter: { text: "Ashcombe", states } })).rows.map(
        ({ number }: { number: string }) => number,
      );
    for (const source of [release, null]) {
      expect(await found(source, [])).toEqual(numbers);
      expect(await found(source, ["current"])).toEqual([numbers[0]]);
      expect(await found(source, ["superseded"])).toEqual([numbers[1]]);
      expect(await found(source, ["withdrawn"])).toEqual([]);
    }
  });

  it("pin a release and say what the next one would change, in rows and in numbers", async () => {
    for (const [z, value] of [
      ["6.0", "0.10"],
      ["7.0", "0.40"],
      ["8.0", "0.80"],
    ] as const) {
      await buildApproved(server.dataSource, contributor.user, editor.user, {
        z,
        value,
        dataUsed: [`Tarnfold ${z}`],
      });
    }
    const who = actingAs(server.dataSource, maintainer.user);
    const { number: release } = granted(await cutRelease(who, "One"));
    const filter = { text: "Tarnfold" };
    const saved = await save({ name: "Pinned", recipe: { release, filter } });
    expect(saved).toMatchObject({ release, rowsIn: 3 });
    const before = (await file(`${saved.slug}@1.json`).expect(200)).body;

    const added = await buildApproved(server.dataSource, contributor.user, editor.user, {
      z: "7.5",
      value: "0.90",
      dataUsed: ["Tarnfold 7.5"],
    });
    granted(await cutRelease(who, "Two"));
    const { data } = await server.graphql(
      stranger,
      `query ($slug: ID!) { tableChanges(slug: $slug) { release open rows { number words } midpoint midpointThen opticalDepth opticalDepthThen } }`,
      { slug: saved.slug },
    );
    expect(data.tableChanges).toMatchObject({
      release: release + 1,
      open: 0,
      rows: [{ number: formatRecordNumber(added.constraintId), words: "New, and in." }],
    });
    expect(data.tableChanges.midpoint).toBeLessThan(data.tableChanges.midpointThen);
    expect((await file(`${saved.slug}@1.json`).expect(200)).body).toBe(before);

    const next = await save({
      slug: saved.slug,
      name: "Pinned",
      recipe: { release: release + 1, filter },
    });
    expect(next).toMatchObject({ slug: saved.slug, version: 2, rowsIn: 4 });
    expect((await file(`${saved.slug}@1.json`).expect(200)).body).toBe(before);
    const page = await server.graphql(
      stranger,
      `query ($slug: ID!) { fittingTable(slug: $slug, version: 1) { version rowsIn versions { version rowsIn release }
        rows(limit: 1) { number } recipe { release filter } files { kind path } } }`,
      { slug: saved.slug },
    );
    expect(page.data.fittingTable).toMatchObject({
      version: 1,
      rowsIn: 3,
      versions: [
        { version: 2, rowsIn: 4, release: release + 1 },
        { version: 1, rowsIn: 3, release },
      ],
      recipe: { release, filter: "?q=Tarnfold" },
    });
    expect(page.data.fittingTable.files[0].path).toBe(`/api/tables/${saved.slug}@1.csv`);
  });

  it("tell an owner who asked for it once that a release would change the table, and nobody else", async () => {
    const { manager } = server.dataSource;
    const filter = { text: "Wendmere" };
    const add = (z: string) =>
      buildApproved(server.dataSource, contributor.user, editor.user, {
        z,
        value: "0.30",
        dataUsed: [`Wendmere ${z}`],
      });
    await add("6.5");
    await save({ name: "Told", notify: true, recipe: { filter } });
    await save({ name: "Silent", notify: false, recipe: { filter } });
    await save({ name: "Untouched", notify: true, recipe: { filter: { ...filter, zTo: 7 } } });
    const cut = () =>
      server.graphql(maintainer.agent, `mutation { cutRelease(notes: "More") { __typename } }`);
    const mails = () =>
      manager.find(OutboxMail, {
        where: { subject: Like("%would change%") },
        order: { id: "ASC" },
      });

    await cut();
    expect(await mails()).toEqual([]);
    const added = await add("7.5");
    await cut();
    const number = formatRecordNumber(added.constraintId);
    expect(await mails()).toMatchObject([
      { to: theorist.user.email, subject: expect.stringContaining("would change Told") },
    ]);
    expect((await mails())[0]?.text).toContain(`Rows: ${number}`);
    expect((await mails())[0]?.text).not.toContain("0.30");
    // Told of a release once, whoever asks again.
    const [release] = await manager.find(Release, { order: { number: "DESC" }, take: 1 });
    if (!release) throw new Error("no release was cut");
    expect(await tellOwners(actingAs(server.dataSource, maintainer.user), release)).toBe(0);
  });

  it("are private, by link or public", async () => {
    const recipe = { filter: { text: "Tarnfold" } };
    const slugs: Record<string, string> = {};
    for (const visibility of ["private", "link", "public"]) {
      slugs[visibility] = (await save({ name: visibility, visibility, recipe })).slug;
    }
    const listed = async (agent: Agent) =>
      (await server.graphql(agent, "{ fittingTables { slug } }")).data.fittingTables.map(
        (table: { slug: string }) => table.slug,
      );
    const [seen, own] = [await listed(stranger), await listed(theorist.agent)];
    expect(Object.values(slugs).map((slug) => [seen.includes(slug), own.includes(slug)])).toEqual([
      [false, true],
      [false, true],
      [true, true],
    ]);
    await file(`${slugs.private}.csv`).expect(404);
    await file(`${slugs.private}.csv`, theorist.agent).expect(200);
    await file(`${slugs.link}.csv`).expect(200);

    const change = (agent: Agent) =>
      server.graphql(
        agent,
        `mutation ($slug: ID!) { changeTable(slug: $slug, name: "Seen", visibility: public, notify: true) {
        __typename ... on Refusal { code } ... on FittingTable { name visibility notify } } }`,
        { slug: slugs.private },
      );
    expect((await change(contributor.agent)).data.changeTable).toMatchObject({ code: "notFound" });
    expect((await change(theorist.agent)).data.changeTable).toMatchObject({
      name: "Seen",
      visibility: "public",
      notify: true,
    });
    await file(`${slugs.private}.csv`).expect(200);
  });

  it("take another likelihood form only with a reason, and no row by hand without one", async () => {
    const filter = { text: "Tarnfold" };
    const [first] = (await propose({ filter })).rows;
    expect(first.forms).toEqual(["quantileMatched", "twoPiece", "variableWidth"]);
    const forms = [{ number: first.number, form: "variableWidth", reason: "" }];
    expect(await save({ name: "Form", recipe: { filter, forms } })).toMatchObject({
      code: "reason",
    });
    const recipe = {
      filter,
      forms: [{ number: first.number, form: "variableWidth", reason: "as in our last paper" }],
      out: [{ number: (await propose({ filter })).rows[1].number, reason: "same field as ours" }],
    };
    const saved = await save({ name: "Form", recipe });
    expect(saved).toMatchObject({ rowsIn: 3, rowsOut: 1 });
    const { content } = JSON.parse((await file(`${saved.slug}.json`).expect(200)).body as string);
    expect(content.rows[0].likelihood).toMatchObject({
      form: "variableWidth",
      reason: "as in our last paper",
    });
    expect(content.rows[1]).toMatchObject({
      included: false,
      reason: "Taken out: same field as ours",
    });
  });

  it("refuse what is no recipe", async () => {
    const filter = { text: "Tarnfold" };
    expect(await propose({ filter, release: 99 })).toMatchObject({ code: "release" });
    expect(await propose({ filter, out: [{ number: "x", reason: "y" }] })).toMatchObject({
      code: "rows",
    });
    expect(
      await propose({
        filter,
        decisions: [{ id: "a", option: "b", byDefault: false, reason: "x".repeat(501) }],
      }),
    ).toMatchObject({ code: "reason" });
    expect(await save({ name: " ", recipe: { filter } })).toMatchObject({ code: "name" });
    expect(
      await save({ name: "None", recipe: { filter: { text: "nothing of this" } } }),
    ).toMatchObject({ code: "rows" });
    expect(await save({ slug: "aaaaaaaaaaaa", name: "Other", recipe: { filter } })).toMatchObject({
      code: "notFound",
    });
  });

  it("stream ten thousand rows in every format without holding them", async () => {
    const { slug } = await save({ name: "Long", recipe: { filter: { text: "Tarnfold" } } });
    const { manager } = server.dataSource;
    const row = await manager.findOneByOrFail(TableVersionRow, { slug, version: 1, position: 0 });
    for (let from = 100; from < 10_100; from += 500) {
      await manager.insert(
        TableVersionRow,
        Array.from({ length: 500 }, (_, index) => ({
          ...row,
          position: from + index,
          citationKey: `Key${from + index}`,
        })) as never,
      );
    }
    const rows = await manager.countBy(TableVersionRow, { slug });
    for (const kind of ["csv", "json", "ecsv", "vot", "txt", "tex"]) {
      const held = liveBytes();
      let most = 0;
      let bytes = 0;
      const { body } = await stranger
        .get(`/api/tables/${slug}.${kind}`)
        .buffer(true)
        .parse((res, done) => {
          res.on("data", (part: Buffer) => {
            if (
              Math.floor(bytes / MEASURED_EVERY) <
              Math.floor((bytes + part.length) / MEASURED_EVERY)
            ) {
              most = Math.max(most, liveBytes() - held);
            }
            bytes += part.length;
          });
          res.on("end", () => done(null, bytes));
        })
        .expect(200);
      expect([kind, (body as number) > rows * 60]).toEqual([kind, true]);
      expect([kind, most < 64 * 2 ** 20]).toEqual([kind, true]);
    }
  });

  it("know every field of a record in the published schema", async () => {
    const { text } = await stranger.get("/api/schemas/fitting-table-2.json").expect(200);
    for (const field of Object.keys(emptyFields())) expect(text).toContain(`"${field}"`);
  });
});

const MEASURED_EVERY = 2 ** 20;

/** What is still held after everything else was collected. */
function liveBytes(): number {
  setFlagsFromString("--expose-gc");
  (runInNewContext("gc") as () => void)();
  const { heapUsed, external } = process.memoryUsage();
  return heapUsed + external;
}

function asText(res: NodeJS.EventEmitter, done: (error: Error | null, text: string) => void): void {
  const parts: Buffer[] = [];
  res.on("data", (part: Buffer | string) => parts.push(Buffer.from(part)));
  res.on("end", () => done(null, Buffer.concat(parts).toString("utf8")));
}

function asBytes(
  res: NodeJS.EventEmitter,
  done: (error: Error | null, bytes: Buffer) => void,
): void {
  const parts: Buffer[] = [];
  res.on("data", (part: Buffer | string) => parts.push(Buffer.from(part as string, "binary")));
  res.on("end", () => done(null, Buffer.concat(parts)));
}
