import "reflect-metadata";

import Papa from "papaparse";

import type { User } from "~server/account/user.entity";
import { isProblem, parseBibtex } from "~server/citation/bibtex";
import { claim, storeReading } from "~server/review/review.service";
import { reviseSubmission } from "~server/constraint/draft.service";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";

import {
  actingAs,
  buildApproved,
  buildCitation,
  buildDraft,
  buildSubmission,
  granted,
  send,
} from "../../factories/constraint";
import { startTestServer, type TestServer } from "../support/harness";

// A database is made first, on a machine that may be busy.
jest.setTimeout(60_000);

let server: TestServer;
let owner: User;
let editor: User;
const numbers: Record<string, string> = {};

beforeAll(async () => {
  server = await startTestServer();
  owner = (await server.signedIn(["contributor"])).user;
  editor = (await server.signedIn(["editor"])).user;
  const { dataSource } = server;
  const paper = await buildCitation(dataSource, owner, {
    author: "{\\v{S}ediv{\\'y}}, J. and Umber, P.",
    year: 2030,
  });
  const add = async (name: string, overrides: object, citation?: typeof paper) => {
    const revision = await buildApproved(dataSource, owner, editor, overrides, citation);
    numbers[name] = formatRecordNumber(revision.constraintId);
  };
  await add("far", { z: "9.30", value: "0.81" }, paper);
  await add("near", { z: "6.10", value: "0.30" }, paper);
  await add("middle", { z: "7.10", methodTags: ["darkPixels"], dataUsed: ["Field 2"] });
  await buildDraft(dataSource, owner, { z: "7.2", value: "0.5432" });
  await buildSubmission(dataSource, owner, { z: "7.3", value: "0.6543" });
});
afterAll(() => server.stop());

function rows(text: string): Record<string, string>[] {
  const table = text
    .split("\r\n")
    .filter((line) => !line.startsWith("#"))
    .join("\r\n");
  return Papa.parse<Record<string, string>>(table, { header: true, skipEmptyLines: true }).data;
}

const csv = (query = "", agent = server.agent()) => agent.get(`/api/constraints.csv${query}`);

describe("the list as CSV", () => {
  it("is open to anybody, to be saved, never sniffed", async () => {
    const { status, headers } = await csv();
    expect(status).toBe(200);
    expect(headers["content-type"]).toBe("text/csv; charset=utf-8");
    expect(headers["content-disposition"]).toBe('attachment; filename="fogline-constraints.csv"');
    expect(headers["x-content-type-options"]).toBe("nosniff");
  });

  it("holds the approved records only, in order of redshift, with digits as printed", async () => {
    const { text } = await csv();
    const list = rows(text);
    expect(list.map((row) => row.record)).toEqual([numbers.near, numbers.middle, numbers.far]);
    expect(list[0]).toMatchObject({ z: "6.10", printed_value: "0.30", citation_key: "Sedivy2030" });
    expect(text).not.toContain("0.5432");
    expect(text).not.toContain("0.6543");
  });

  it("filters and sorts by the parameters of the client's address", async () => {
    const list = rows((await csv("?family=dampingWing&z=6-8")).text);
    expect(list.map((row) => row.record)).toEqual([numbers.near]);
    const sorted = rows((await csv("?sort=redshiftDescending")).text);
    expect(sorted.map((row) => row.record)).toEqual([numbers.far, numbers.middle, numbers.near]);
    const text = rows((await csv("?q=Field+2")).text);
    expect(text.map((row) => row.record)).toEqual([numbers.middle]);
  });

  it("names filter, licence and last event in its header", async () => {
    const { text } = await csv("?z=6-8");
    expect(text).toContain("# Filter: Redshift 6 to 8\r\n");
    expect(text).toContain("# Licence: CC BY 4.0\r\n");
    expect(text).toMatch(/# Last event: \d+ of \S+, digest [0-9a-f]{64}\r\n/);
  });

  it("is the same bytes while nothing happens, and says so by its ETag", async () => {
    const first = await csv();
    const second = await csv();
    expect(second.text).toBe(first.text);
    const third = await csv().set("If-None-Match", first.headers.etag as string);
    expect(third.status).toBe(304);
  });

  it("nothing found is a table without rows", async () => {
    const { status, text } = await csv("?q=nosuchthing");
    expect(status).toBe(200);
    expect(rows(text)).toEqual([]);
  });

  it.each([
    ["?famly=dampingWing", "There is no parameter “famly”"],
    ["?family=dampingwing", "“family” does not know “dampingwing”"],
    ["?family=dampingWing,wings", "“family” does not know “wings”"],
    ["?tag=nothing", "“tag” does not know"],
    ["?quantity=x", "“quantity” does not know"],
    ["?kind=x", "“kind” does not know"],
    ["?weighting=x", "“weighting” does not know"],
    ["?version=x", "“version” does not know"],
    ["?sort=sideways", "“sort” does not know"],
    ["?z=high", "“z” takes a range like 6-8"],
    ["?z=6-7-8", "“z” takes a range"],
    ["?z=-", "“z” takes a range"],
    ["?z=8-6", "from a lower to a higher end"],
    ["?year=31", "“year” takes a range like 2020-2030"],
    ["?z=6&z=7", "Give “z” once"],
    [`?q=${"x".repeat(201)}`, "at most 200 characters"],
    ["?q[$ne]=1", "There is no parameter"],
    ["?__proto__=1", "There is no parameter"],
    ["?constructor=1", "There is no parameter"],
  ])("%s is refused in words", async (query, sentence) => {
    for (const kind of ["csv", "bib"]) {
      const { status, text, headers } = await server
        .agent()
        .get(`/api/constraints.${kind}${query}`);
      expect(status).toBe(400);
      expect(text).toContain(sentence);
      expect(headers["content-disposition"]).toBeUndefined();
    }
  });

  it("an open end and an empty parameter are no mistakes", async () => {
    expect(rows((await csv("?z=7-")).text)).toHaveLength(2);
    expect(rows((await csv("?z=-7")).text)).toHaveLength(1);
    expect(rows((await csv("?q=&family=")).text)).toHaveLength(3);
  });
});

describe("the list as a bibliography", () => {
  it("holds each paper once, under the registry's key, and reads back", async () => {
    const { status, text, headers } = await server.agent().get("/api/constraints.bib");
    expect(status).toBe(200);
    expect(headers["content-type"]).toBe("application/x-bibtex; charset=utf-8");
    expect(headers["content-disposition"]).toContain("fogline-constraints.bib");
    const entries = parseBibtex(text);
    expect(entries).toHaveLength(2);
    expect(entries.some(isProblem)).toBe(false);
    expect(text).toContain("@article{Sedivy2030, author = {{\\v{S}ediv{\\'y}}, J. and Umber, P.}");
  });

  it("goes by the same filter", async () => {
    const { text } = await server.agent().get("/api/constraints.bib?family=dampingWing");
    expect(text.match(/@article/g)).toHaveLength(1);
  });
});

describe("one citation", () => {
  it("is found by the record's number in any of its forms", async () => {
    const number = numbers.near!;
    for (const form of [number, number.toLowerCase(), `FL-${Number(number.slice(3))}`]) {
      const { status, text, headers } = await server.agent().get(`/api/constraints/${form}.bib`);
      expect(status).toBe(200);
      expect(headers["content-disposition"]).toContain(`${number}.bib`);
      expect(parseBibtex(text)).toMatchObject([{ givenKey: "Sedivy2030" }]);
    }
  });

  it.each(["FL-9999", "FL-0000", "42", "x", "FL-0001%27%20OR%201=1"])(
    "%s is not there",
    async (number) => {
      const { status, text } = await server.agent().get(`/api/constraints/${number}.bib`);
      expect(status).toBe(404);
      expect(text).toContain("no approved record");
    },
  );

  it("a draft's and a submission's are not there, for their owner neither", async () => {
    const { agent, user } = await server.signedIn(["contributor"]);
    const draft = await buildDraft(server.dataSource, user);
    const number = formatRecordNumber(draft.constraintId);
    expect((await agent.get(`/api/constraints/${number}.bib`)).status).toBe(404);
    await send(server.dataSource, user, draft);
    expect((await agent.get(`/api/constraints/${number}.bib`)).status).toBe(404);
  });
});

it("an editor who reads a record blind finds it in no download until the reading is stored", async () => {
  const { dataSource } = server;
  const { agent, user } = await server.signedIn(["editor"]);
  const author = await server.signedIn(["contributor"]);
  const approved = await buildApproved(dataSource, author.user, editor, {
    z: "8.20",
    value: "0.77",
    dataUsed: ["Blind field"],
  });
  const number = formatRecordNumber(approved.constraintId);
  const who = actingAs(dataSource, author.user);
  const revision = granted(await reviseSubmission(who, approved.id));
  const changed = await send(dataSource, author.user, {
    ...revision,
    fields: { ...revision.fields, remark: "Place corrected." },
  } as typeof revision);
  const reader = actingAs(dataSource, user);
  granted(await claim(reader, changed.id));
  const seen = async (client = agent) =>
    rows((await csv("", client)).text).map((row) => row.record);
  expect(await seen()).not.toContain(number);
  expect((await agent.get(`/api/constraints/${number}.bib`)).status).toBe(404);
  expect(await seen(server.agent())).toContain(number);
  granted(await storeReading(reader, changed.id, changed.fields));
  expect(await seen()).toContain(number);
});
