import "reflect-metadata";

import { createHash } from "node:crypto";

import canonicalize from "canonicalize";
import Papa from "papaparse";
import request from "supertest";

import { User } from "~server/account/user.entity";
import { buildApp } from "~server/app";
import { isProblem, parseBibtex } from "~server/citation/bibtex";
import { Constraint } from "~server/constraint/constraint.entity";
import { reviseSubmission } from "~server/constraint/draft.service";
import { markDemonstration } from "~server/database/settings";
import { createLogger } from "~server/logging/logger";
import { claim, storeReading } from "~server/review/review.service";
import { deleteTable } from "~server/table/table.service";
import type { TableVersion } from "~server/table/tableVersion.entity";
import { changeTable } from "~server/table/version.service";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";

import { actingAs, approveAs, buildApproved, granted, send } from "../../factories/constraint";
import { buildTable } from "../../factories/table";
import { startTestServer, type TestServer } from "../support/harness";

// A database is made first, on a machine that may be busy.
jest.setTimeout(60_000);

let server: TestServer;
let owner: User;
let editor: User;

beforeAll(async () => {
  server = await startTestServer();
  owner = (await server.signedIn(["contributor"])).user;
  editor = (await server.signedIn(["editor"])).user;
});
afterAll(() => server.stop());

/** Two records of a sightline and field of their own, the second left out with a reason. */
async function tableOf(word: string): Promise<{ table: TableVersion; ids: number[] }> {
  const { dataSource } = server;
  const ids: number[] = [];
  for (const [z, value] of [
    ["6.20", "0.21"],
    ["7.40", "0.50"],
  ]) {
    const overrides = { z, value, dataUsed: [`${word} ${z}`] };
    ids.push((await buildApproved(dataSource, owner, editor, overrides)).constraintId);
  }
  const [, second] = ids.map(formatRecordNumber);
  const table = await buildTable(dataSource, owner, {
    name: `Table of ${word}`,
    filter: { text: word },
    out: [{ number: second!, reason: "Read off a poor figure, they say" }],
  });
  return { table, ids };
}

const fetchTable = (slug: string, kind: string, agent = server.agent()) =>
  agent.get(`/api/tables/${slug}.${kind}`);

it("anybody fetches a saved table in three forms, to be saved, never sniffed", async () => {
  const { table, ids } = await tableOf("Amberfield");
  const [first, second] = ids.map(formatRecordNumber);
  for (const [kind, type] of [
    ["csv", "text/csv; charset=utf-8"],
    ["json", "application/json; charset=utf-8"],
    ["bib", "application/x-bibtex; charset=utf-8"],
  ] as const) {
    const { status, headers } = await fetchTable(table.slug, kind);
    expect(status).toBe(200);
    expect(headers["content-type"]).toBe(type);
    expect(headers["content-disposition"]).toBe(
      `attachment; filename="fogline-table-${table.slug}-v1.${kind}"`,
    );
    expect(headers["x-content-type-options"]).toBe("nosniff");
  }

  const csv = (await fetchTable(table.slug, "csv")).text;
  const body = csv.split("\r\n").filter((line) => !line.startsWith("#"));
  const { data } = Papa.parse<Record<string, string>>(body.join("\r\n"), {
    header: true,
    skipEmptyLines: true,
  });
  // Rows in are columns; a row out stands at the head of the file with its reason.
  expect(data.map((row) => [row.record, row.printed_value])).toEqual([[first, "0.21"]]);
  expect(csv).toContain(`# Out: ${second}: Taken out: Read off a poor figure, they say`);
  expect(csv).toContain('# Filter: Text "Amberfield"');
  expect(csv).toContain(table.digest);
  expect(csv).toContain(`/tables/${table.slug}`);

  const json = (await fetchTable(table.slug, "json")).body;
  expect(json).toMatchObject({
    digest: `sha256:${table.digest}`,
    name: "Table of Amberfield",
    address: `http://fogline.test/tables/${table.slug}`,
    lastEvent: { sequence: table.lastEventSequence },
    content: { licence: "CC BY 4.0", filter: { recipe: { text: "Amberfield" } } },
  });
  expect(json.content.rows).toMatchObject([
    { record: first, included: true, printed: { value: "0.21" } },
    { record: second, included: false, printed: { value: "0.50" } },
  ]);

  const bib = parseBibtex((await fetchTable(table.slug, "bib")).text);
  expect(bib.filter(isProblem)).toEqual([]);
  expect(bib).toHaveLength(1);
  expect(bib[0]).toMatchObject({ givenKey: data[0]!.citation_key });
});

it("its digest is SHA-256 over the RFC 8785 form of the content in the fetched JSON", async () => {
  const { table } = await tableOf("Birchfield");
  const file = JSON.parse((await fetchTable(table.slug, "json")).text);
  const digest = createHash("sha256")
    .update(canonicalize(file.content) ?? "", "utf8")
    .digest("hex");
  expect(file.digest).toBe(`sha256:${digest}`);
  // It is over all that is said: another reason is another digest.
  file.content.rows[1].reason = "Another reason";
  expect(
    createHash("sha256")
      .update(canonicalize(file.content) ?? "", "utf8")
      .digest("hex"),
  ).not.toBe(digest);
});

const threeFiles = (slug: string, agent = server.agent()) =>
  Promise.all(
    ["csv", "json", "bib"].map(async (kind) => (await fetchTable(slug, kind, agent)).text),
  );

it("its bytes stay when records, people and settings change and another program serves them", async () => {
  const { dataSource } = server;
  const { table, ids } = await tableOf("Cobaltfield");
  const before = await threeFiles(table.slug);
  const record = await dataSource.manager.findOneByOrFail(Constraint, { id: ids[0]! });
  const who = actingAs(dataSource, owner);
  const draft = granted(await reviseSubmission(who, record.approvedRevisionId!));
  const fields = { ...draft.fields, value: "0.22", printedText: "we find 6.20, 0.22, 0.12, 0.15" };
  await approveAs(dataSource, editor, await send(dataSource, owner, { ...draft, fields }));
  await dataSource.manager.update(Constraint, { id: ids[1]! }, { state: "superseded" });
  granted(
    await changeTable(who, table.slug, { name: "Renamed", visibility: "link", notify: false }),
  );
  const renamed = { nameOnPapers: "Quite Another" };
  await dataSource.manager.update(User, { id: owner.id }, renamed);
  await dataSource.manager.update(User, { id: editor.id }, renamed);
  await markDemonstration(dataSource.manager);
  expect(await threeFiles(table.slug)).toEqual(before);

  // As after a restart with other settings.
  const config = { ...server.config, licence: "CC0 1.0", publicUrl: "http://moved.test" };
  const restarted = await buildApp(config, dataSource, createLogger("silent"));
  expect(await threeFiles(table.slug, request.agent(restarted.app))).toEqual(before);
  const list = (await request(restarted.app).get("/api/constraints.csv")).text;
  expect(list).toContain("CC0 1.0");
  expect(list).toContain("Demonstration");
  await restarted.close();
});

it("answers 304 to who has it already", async () => {
  const { table } = await tableOf("Dunefield");
  const { headers } = await fetchTable(table.slug, "json");
  const again = await fetchTable(table.slug, "json").set("If-None-Match", headers.etag as string);
  expect(again.status).toBe(304);
});

it.each(["nosuchtable", "%2e%2e%2fetc", "x'--"])("%s: no such table, in words", async (slug) => {
  for (const kind of ["csv", "json", "bib"]) {
    const { status, text } = await fetchTable(slug, kind);
    expect(status).toBe(404);
    expect(text).toContain("There is no table at this address.");
  }
});

it("a deleted table's address says that it is gone", async () => {
  const { table } = await tableOf("Elmfield");
  granted(await deleteTable(actingAs(server.dataSource, owner), table.slug));
  const { status, text } = await fetchTable(table.slug, "csv");
  expect(status).toBe(410);
  expect(text).toContain("deleted");
});

it("an editor gets no table that holds what the editor reads blind, until the reading is stored", async () => {
  const { dataSource } = server;
  const { table, ids } = await tableOf("Foxfield");
  const record = await dataSource.manager.findOneByOrFail(Constraint, { id: ids[0]! });
  const draft = granted(
    await reviseSubmission(actingAs(dataSource, owner), record.approvedRevisionId!),
  );
  const fields = { ...draft.fields, remark: "Place corrected." };
  const submitted = await send(dataSource, owner, { ...draft, fields });
  const { agent, user } = await server.signedIn(["editor"]);
  granted(await claim(actingAs(dataSource, user), submitted.id));
  for (const kind of ["csv", "json", "bib"]) {
    const { status, text } = await fetchTable(table.slug, kind, agent);
    expect(status).toBe(403);
    expect(text).not.toContain("0.21");
    expect((await fetchTable(table.slug, kind)).status).toBe(200);
  }
  granted(await storeReading(actingAs(dataSource, user), submitted.id, fields));
  expect((await fetchTable(table.slug, "csv", agent)).status).toBe(200);
});
