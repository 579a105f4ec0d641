import "reflect-metadata";

import { spawn } from "node:child_process";
import { readFileSync } from "node:fs";
import { join } from "node:path";

import { createConnection } from "mysql2/promise";

import type { User } from "~server/account/user.entity";
import { Citation } from "~server/citation/citation.entity";
import { Constraint } from "~server/constraint/constraint.entity";
import { discardDraft } from "~server/constraint/draft.service";
import { Revision } from "~server/constraint/revision.entity";
import { verifyChain } from "~server/event/eventLog";
import { ImportMatch } from "~server/import/importMatch.entity";
import type { Role } from "~shared/review/states";

import { actingAs } from "../../factories/constraint";
import { startTestServer, type Agent, type TestServer } from "../support/harness";

// A database is made first, on a machine that may be busy.
jest.setTimeout(120_000);

// One group's list and bibliography, all invented: sixteen good rows, four wrong on purpose.
const samples = join(__dirname, "../../fixtures/samples");
const CSV = readFileSync(join(samples, "group-list.csv"), "utf8");
const BIB = readFileSync(join(samples, "group-list.bib"), "utf8");

let server: TestServer;
beforeAll(async () => {
  server = await startTestServer();
});
afterAll(() => server.stop());

interface Importer {
  agent: Agent;
  user: User;
}
interface Uploads {
  csvUploadId: string;
  bibUploadId: string;
}

const PREVIEW = `mutation Preview($input: ImportInput!) {
  previewImport(input: $input) {
    __typename
    ... on ImportPreview {
      good refused alreadyHere remembered
      columns { column proposedField sample }
      words { field word proposed choices }
      rows {
        line key outcome grade citationShortName openFields
        fields { quantity species kind value plus minus level z zLow zHigh remark methodTags }
        refusals { file line column reason }
      }
    }
    ... on Refusal { code message field }
  }
}`;
const RUN = `mutation Run($input: ImportInput!) {
  runImport(input: $input) {
    __typename
    ... on ImportDone { created alreadyHere refused submissionIds }
    ... on Refusal { code message field }
  }
}`;

async function upload(agent: Agent, kind: "csv" | "bib", text: string): Promise<string> {
  const { body } = await agent
    .post("/api/uploads")
    .field("kind", kind)
    .attach("file", Buffer.from(text), `group-list.${kind}`);
  return body.id as string;
}

async function uploads({ agent }: Importer, csv = CSV, bib = BIB): Promise<Uploads> {
  return {
    csvUploadId: await upload(agent, "csv", csv),
    bibUploadId: await upload(agent, "bib", bib),
  };
}

async function ask(query: string, { agent }: Importer, input: object) {
  const body = await server.graphql(agent, query, { input });
  if (body.errors) throw new Error(JSON.stringify(body.errors));
  return body.data.previewImport ?? body.data.runImport;
}
const preview = (who: Importer, input: object) => ask(PREVIEW, who, input);
const run = (who: Importer, input: object) => ask(RUN, who, input);

const contributor = (): Promise<Importer> => server.signedIn(["contributor"]);

function draftsOf(user: User): Promise<Revision[]> {
  return server.dataSource.manager.find(Revision, {
    where: { constraint: { ownerId: user.id } },
    relations: { citation: true },
    order: { constraintId: "ASC" },
  });
}

describe("who may import", () => {
  it.each([[[]], [["editor"]], [["maintainer"]]] as [Role[]][])("%j may not", async (roles) => {
    const who = await server.signedIn(roles);
    for (const query of [PREVIEW, RUN]) {
      const input = { csvUploadId: "x", bibUploadId: "x" };
      const { errors } = await server.graphql(who.agent, query, { input });
      expect(errors?.[0]?.extensions.code).toBe("FORBIDDEN");
    }
  });

  it("nobody may without signing in", async () => {
    for (const query of [PREVIEW, RUN]) {
      const input = { csvUploadId: "x", bibUploadId: "x" };
      const { errors } = await server.graphql(server.agent(), query, { input });
      expect(errors?.[0]?.extensions.code).toBe("UNAUTHENTICATED");
    }
  });

  it("one person's files are unknown to another", async () => {
    const input = await uploads(await contributor());
    const other = await contributor();
    for (const outcome of [await preview(other, input), await run(other, input)]) {
      expect(outcome).toMatchObject({ __typename: "Refusal", code: "notFound", field: "csv" });
    }
    expect(await draftsOf(other.user)).toEqual([]);
  });
});

describe("the sample", () => {
  it("is previewed as 16 good rows and 4 refusals, and nothing is kept", async () => {
    const who = await contributor();
    const shown = await preview(who, await uploads(who));
    expect(shown).toMatchObject({ good: 16, refused: 4, alreadyHere: 0, remembered: false });
    expect(await draftsOf(who.user)).toEqual([]);
    expect(await server.dataSource.manager.count(Citation)).toBe(0);
  });

  it("names file, line, column and reason of each refusal", async () => {
    const who = await contributor();
    const { rows } = await preview(who, await uploads(who));
    const refusals = rows.flatMap((row: { refusals: object[] }) => row.refusals);
    expect(refusals).toMatchObject([
      {
        file: "group-list.csv",
        line: 18,
        column: "value",
        reason: expect.stringContaining("1.20"),
      },
      { file: "group-list.csv", line: 19, column: "zlo", reason: expect.stringContaining("6.7") },
      {
        file: "group-list.csv",
        line: 20,
        column: "value",
        reason: expect.stringContaining("O.25"),
      },
      {
        file: "group-list.csv",
        line: 21,
        column: "key",
        reason: expect.stringContaining("Merlin2036"),
      },
    ]);
  });

  it("becomes 16 drafts with their papers, and importing it again adds nothing", async () => {
    const who = await contributor();
    const first = await run(who, await uploads(who));
    expect(first).toMatchObject({ created: 16, alreadyHere: 0, refused: 4 });
    const drafts = await draftsOf(who.user);
    expect(drafts).toHaveLength(16);
    expect(drafts.map((draft) => draft.id).sort()).toEqual([...first.submissionIds].sort());
    expect(drafts.every((draft) => draft.state === "draft")).toBe(true);
    expect(drafts.map((draft) => [draft.citation!.key, draft.fields.value])).toEqual([
      ["Arvensis2031", "0.42"],
      ["Arvensis2031", "0.57"],
      ["Brodowska2029", "0.30"],
      ["CoralFields2033", "0.23"],
      ["CoralFields2033", "0.28"],
      ["CoralFields2033", "0.35"],
      ["Dresnok2030", null],
      ["Dresnok2030", null],
      ["Dresnok2030", "0.63"],
      ["Eisvogel2034", "0.63"],
      ["Eisvogel2034", "0.44"],
      ["Fjellheim2028", "0.45"],
      ["Gannet2032", "0.12"],
      ["Halcyon2035", "0.0551"],
      ["Halcyon2035", "0.016"],
      ["Isbrand2033", "3.6"],
    ]);
    // Papers of refused rows are not kept.
    expect(await server.dataSource.manager.count(Citation)).toBe(9);

    const again = await uploads(who);
    const shown = await preview(who, again);
    expect(shown).toMatchObject({ good: 0, refused: 4, alreadyHere: 16, remembered: true });
    expect(await run(who, again)).toMatchObject({ created: 0, alreadyHere: 16, refused: 4 });
    expect(await draftsOf(who.user)).toHaveLength(16);
    expect(await server.dataSource.manager.count(Citation)).toBe(9);
    expect(await verifyChain(server.dataSource.manager)).toMatchObject({ intact: true });
  });

  it("another person gets drafts of their own, and the same papers", async () => {
    const who = await contributor();
    const before = await server.dataSource.manager.count(Citation);
    expect(await run(who, await uploads(who))).toMatchObject({ created: 16, alreadyHere: 0 });
    expect(await server.dataSource.manager.count(Citation)).toBe(before);
  });

  it("imported five times at once it is there once", async () => {
    const who = await contributor();
    const input = await uploads(who);
    const outcomes = await Promise.all(Array.from({ length: 5 }, () => run(who, input)));
    expect(outcomes.reduce((sum, outcome) => sum + outcome.created, 0)).toBe(16);
    expect(await draftsOf(who.user)).toHaveLength(16);
  });

  it("a discarded row does not come back by itself", async () => {
    const who = await contributor();
    await run(who, await uploads(who));
    const [first] = await draftsOf(who.user);
    await discardDraft(actingAs(server.dataSource, who.user), first!.id, first!.version);
    expect(await run(who, await uploads(who))).toMatchObject({ created: 0, alreadyHere: 16 });
  });

  it("rows added to the list later are added, the others are not", async () => {
    const who = await contributor();
    const lines = CSV.trimEnd().split("\n");
    await run(who, await uploads(who, `${lines.slice(0, 6).join("\n")}\n`));
    expect(await draftsOf(who.user)).toHaveLength(5);
    expect(await run(who, await uploads(who))).toMatchObject({ created: 11, alreadyHere: 5 });
  });

  it("a row that stands in the list twice becomes one draft", async () => {
    const who = await contributor();
    const [head, row] = CSV.split("\n");
    const twice = await uploads(who, `${head}\n${row}\n${row}\n`);
    expect(await preview(who, twice)).toMatchObject({ good: 1, alreadyHere: 1, refused: 0 });
    expect(await run(who, twice)).toMatchObject({ created: 1, alreadyHere: 1, refused: 0 });
  });
});

describe("all or nothing", () => {
  it("an error at the last row leaves no draft, no paper, no event", async () => {
    const who = await contributor();
    const { manager } = server.dataSource;
    const bib = BIB.replace(/10\.5555\//g, "10.5555/fault-")
      .replace(/33(06|09)\.(\d)/g, "44$1.$2")
      .replace(/3101\.0/g, "4401.0")
      .replace(/3402\.0/g, "4402.0")
      .replace(/1201\.\.\.77A/g, "1299...77A")
      .replace(/title = /g, "title = {Another } # ");
    const input = await uploads(who, CSV, bib);
    const before = [
      await manager.count(Citation),
      await manager.query("SELECT sequence FROM event_head"),
    ];
    await manager.query(`CREATE TRIGGER break_import BEFORE INSERT ON revision FOR EACH ROW
      IF JSON_VALUE(NEW.fields, '$.value') = '3.6' THEN
        SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'broken on purpose';
      END IF`);
    const { errors } = await server.graphql(who.agent, RUN, { input });
    await manager.query("DROP TRIGGER break_import");
    expect(errors?.[0]?.extensions.code).toBe("INTERNAL");
    expect(JSON.stringify(errors)).not.toContain("on purpose");
    expect(await draftsOf(who.user)).toEqual([]);
    const after = [
      await manager.count(Citation),
      await manager.query("SELECT sequence FROM event_head"),
    ];
    expect(after).toEqual(before);
    expect(await run(who, input)).toMatchObject({ created: 16, refused: 4 });
  });

  it("killed in the middle it leaves nothing; run again it is whole", async () => {
    const fresh = await startTestServer();
    try {
      const who = await fresh.signedIn(["contributor"]);
      const input = await uploads(who);
      const url = fresh.config.databaseUrl;
      // The eleventh row stops at a lock that the test holds: ten drafts written, none committed.
      const gate = await createConnection(url);
      const lock = `import of ${who.user.id}`;
      await gate.query("DO GET_LOCK(?, 0)", [lock]);
      await gate.query(`CREATE TRIGGER hold_import BEFORE INSERT ON revision FOR EACH ROW
        IF JSON_VALUE(NEW.fields, '$.value') = '0.44' THEN DO GET_LOCK('${lock}', 600); END IF`);
      const watcher = await createConnection(url);
      await watcher.query("SET SESSION TRANSACTION ISOLATION LEVEL READ UNCOMMITTED");
      const dirty = async (table: string): Promise<number> => {
        const [rows] = await watcher.query(`SELECT COUNT(*) AS n FROM ${table}`);
        return Number((rows as { n: number }[])[0]!.n);
      };

      const child = spawn(
        process.execPath,
        [
          "-r",
          "@swc-node/register",
          join(__dirname, "import.child.ts"),
          who.user.id,
          input.csvUploadId,
          input.bibUploadId,
        ],
        { env: { ...process.env, DATABASE_URL: url }, stdio: ["ignore", "pipe", "pipe"] },
      );
      let said = "";
      child.stdout.on("data", (part) => (said += part));
      child.stderr.on("data", (part) => (said += part));
      const ended = new Promise<string | null>((resolve) =>
        child.on("exit", (_code, signal) => resolve(signal)),
      );
      try {
        await until(async () => {
          if (child.exitCode !== null) throw new Error(`the import ended by itself: ${said}`);
          return (await dirty("citation")) === 9 && (await dirty("constraint_record")) === 11;
        });
      } finally {
        child.kill("SIGKILL");
      }
      expect(await ended).toBe("SIGKILL");
      await gate.query("DO RELEASE_LOCK(?)", [lock]);
      await until(async () => (await dirty("citation")) === 0);
      expect(await dirty("constraint_record")).toBe(0);
      expect(await dirty("revision")).toBe(0);
      expect(await dirty("event")).toBe(0);
      await gate.query("DROP TRIGGER hold_import");
      await gate.end();
      await watcher.end();

      const body = await fresh.graphql(who.agent, RUN, { input });
      expect(body.data.runImport).toMatchObject({ created: 16, alreadyHere: 0, refused: 4 });
      expect(await fresh.dataSource.manager.count(Constraint)).toBe(16);
    } finally {
      await fresh.stop();
    }
  });
});

/** Waits for a fact; the test's own limit ends it. */
async function until(fact: () => Promise<boolean>): Promise<void> {
  while (!(await fact())) await new Promise((resolve) => setTimeout(resolve, 50));
}

describe("the match", () => {
  const other = `paper;place in paper;how sure;worth;redshift
Arvensis2031;Table 9;1 sigma;0.40;7.9
Brodowska2029;Fig. 1;sure enough;0.31;7.7
`;
  const columns = [
    { column: "paper", field: "citationKey" },
    { column: "place in paper", field: "place" },
    { column: "how sure", field: "level" },
    { column: "worth", field: "value" },
    { column: "redshift", field: "z" },
  ];

  it("columns and words the person chose are used and remembered for the same header", async () => {
    const who = await contributor();
    const input = await uploads(who, other);
    const words = [{ field: "level", word: "sure enough", value: "percent95" }];
    const chosen = await preview(who, { ...input, columns, words });
    expect(chosen.rows.map((row: { fields: object }) => row.fields)).toMatchObject([
      { value: "0.40", z: "7.9", level: "oneSigma" },
      { value: "0.31", z: "7.7", level: "percent95" },
    ]);
    const again = await preview(who, await uploads(who, other));
    expect(again.remembered).toBe(true);
    expect(again.rows).toEqual(chosen.rows);
    expect(again.columns.map((one: { proposedField: string }) => one.proposedField)).toEqual(
      columns.map((one) => one.field),
    );
    expect(again.words).toContainEqual(
      expect.objectContaining({ word: "sure enough", proposed: "percent95" }),
    );
  });

  it("is one person's own, and one header's", async () => {
    const who = await contributor();
    const input = await uploads(who, other);
    await preview(who, { ...input, columns });
    const stranger = await contributor();
    expect((await preview(stranger, await uploads(stranger, other))).remembered).toBe(false);
    expect((await preview(who, await uploads(who))).remembered).toBe(false);
    const { manager } = server.dataSource;
    expect(await manager.countBy(ImportMatch, { ownerId: who.user.id })).toBe(1);
  });

  it("a column matched to nothing is left out", async () => {
    const who = await contributor();
    const input = await uploads(who, other);
    const without = columns.map((one) => (one.column === "worth" ? { column: "worth" } : one));
    const { rows } = await preview(who, { ...input, columns: without });
    expect(rows[0].fields.value).toBeNull();
  });

  it.each([
    ["an unknown column", { columns: [{ column: "nothing", field: "z" }] }],
    ["an unknown field", { columns: [{ column: "worth", field: "price" }] }],
    ["a field of every object", { columns: [{ column: "worth", field: "constructor" }] }],
    [
      "one field twice",
      {
        columns: [
          { column: "worth", field: "z" },
          { column: "redshift", field: "z" },
        ],
      },
    ],
    ["a field without words", { words: [{ field: "z", word: "7", value: "8" }] }],
    [
      "a choice that is none",
      { words: [{ field: "level", word: "sure enough", value: "certain" }] },
    ],
  ])("%s is refused in words", async (_what, match) => {
    const who = await contributor();
    const input = await uploads(who, other);
    expect(await preview(who, { ...input, ...match })).toMatchObject({ __typename: "Refusal" });
    expect(await run(who, { ...input, ...match })).toMatchObject({ __typename: "Refusal" });
    expect(await draftsOf(who.user)).toEqual([]);
  });
});

describe("files that don't do", () => {
  it("a list of a header alone, and one of too many rows", async () => {
    const who = await contributor();
    const [head, row] = CSV.split("\n");
    const empty = await run(who, await uploads(who, `${head}\n`));
    expect(empty).toMatchObject({ __typename: "Refusal", code: "unreadable" });
    const many = await run(who, await uploads(who, `${head}\n${`${row}\n`.repeat(1001)}`));
    expect(many).toMatchObject({ __typename: "Refusal", code: "tooMany" });
  });

  it("a broken entry refuses its rows, naming the line of the .bib; the others stay", async () => {
    const who = await contributor();
    const bib = BIB.replace("{Galaxy damping wings", "Galaxy damping wings");
    const shown = await preview(who, await uploads(who, CSV, bib));
    expect(shown).toMatchObject({ good: 14, refused: 6 });
    const [refusal] = shown.rows.find((row: { line: number }) => row.line === 11).refusals;
    expect(refusal.reason).toContain("group-list.bib, line 32");
  });

  it("a text too long to keep refuses its row", async () => {
    const who = await contributor();
    const [head, row = ""] = CSV.split("\n");
    const long = row.replace("Table 4, row 1", `Table 4 ${"x".repeat(3000)}`);
    const shown = await preview(who, await uploads(who, `${head}\n${long}\n`));
    expect(shown).toMatchObject({ good: 0, refused: 1 });
    expect(shown.rows[0].refusals[0]).toMatchObject({ column: "place", line: 2 });
  });
});
