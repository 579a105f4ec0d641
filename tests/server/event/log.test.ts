import Papa from "papaparse";

import { EventRecord } from "~server/event/event.entity";
import { appendEvent, CHAIN_START, digestOf } from "~server/event/eventLog";

import { startTestServer, type Agent, type TestServer } from "../support/harness";

const QUERY = `query ($filter: EventLogFilterInput, $before: Int, $limit: Int! = 50) {
  eventLog(filter: $filter, before: $before, limit: $limit) {
    total next events { sequence kind sentence who subject digest previousDigest at }
  }
}`;

let server: TestServer;
let maintainer: Agent;
let brisa: string;
let ottla: string;

beforeAll(async () => {
  server = await startTestServer();
  const first = await server.signedIn(["maintainer"], { nameOnPapers: "Brisa Kelm" });
  const second = await server.signedIn(["contributor"], { nameOnPapers: "Ottla 100%_Firn" });
  maintainer = first.agent;
  brisa = first.user.id;
  ottla = second.user.id;
  const entries = [
    ["revision.drafted", ottla, "FL-0004.1", "2031-02-01T00:00:00.000Z"],
    ["revision.submitted", ottla, "FL-0004.1", "2031-02-02T12:00:00.000Z"],
    ["claim.made", brisa, "FL-0004.1", "2031-02-02T23:59:59.999Z"],
    ["claim.lapsed", null, "FL-0004.1", "2031-02-03T00:00:00.000Z"],
    ["revision.drafted", ottla, "FL-0004.12", "2031-02-04T00:00:00.000Z"],
    ["revision.drafted", ottla, "FL-0041.1", "2031-02-05T00:00:00.000Z"],
    ["role.granted", null, `user:${ottla}`, "2031-02-06T00:00:00.000Z"],
    ["correlatedSet.drafted", ottla, "FLS-0003", "2031-02-07T00:00:00.000Z"],
  ] as const;
  for (const [kind, actorId, subject, at] of entries) {
    await server.dataSource.transaction((manager) =>
      appendEvent(manager, {
        kind,
        actorId,
        subject,
        at: new Date(at),
        detail: kind === "role.granted" ? { role: "editor" } : {},
      }),
    );
  }
});
afterAll(() => server.stop());

async function sequences(filter: object): Promise<number[]> {
  const { data, errors } = await server.graphql(maintainer, QUERY, { filter });
  expect(errors).toBeUndefined();
  const found = data.eventLog.events.map(({ sequence }: { sequence: number }) => sequence);
  expect(data.eventLog.total).toBe(found.length);
  return found;
}

it("is read newest first, in words, page by page without gap or overlap", async () => {
  const pages: number[][] = [];
  let before: number | null = null;
  for (;;) {
    const body = await server.graphql(maintainer, QUERY, { before, limit: 3 });
    const page: { next: number | null; total: number; events: { sequence: number }[] } =
      body.data.eventLog;
    expect(page.total).toBe(8);
    pages.push(page.events.map(({ sequence }) => sequence));
    before = page.next;
    if (before === null) break;
  }
  expect(pages).toEqual([
    [8, 7, 6],
    [5, 4, 3],
    [2, 1],
  ]);
  const { data } = await server.graphql(maintainer, QUERY, { filter: { about: "fl-4.1" } });
  expect(data.eventLog.events[1]).toMatchObject({
    sentence: "Brisa Kelm claimed FL-0004.1 to read it again.",
    who: "Brisa Kelm",
    at: "2031-02-02T23:59:59.999Z",
  });
});

it.each([
  ["a record with all its revisions", { about: "FL-0004" }, [5, 4, 3, 2, 1]],
  ["one revision, however it is written", { about: " fl-4.1 " }, [4, 3, 2, 1]],
  ["a correlated set", { about: "fls3" }, [8]],
  ["part of a name, taken literally", { person: "100%_f" }, [8, 6, 5, 2, 1]],
  ["a name nobody has", { person: "100%xf" }, []],
  ["a wildcard alone", { person: "%" }, [8, 6, 5, 2, 1]],
  ["a kind", { kind: "revision.drafted" }, [6, 5, 1]],
  ["an unknown kind", { kind: "no.such" }, []],
  ["from a day on", { from: "2031-02-05" }, [8, 7, 6]],
  ["to the end of a day", { to: "2031-02-02" }, [3, 2, 1]],
  ["one day", { from: "2031-02-02", to: "2031-02-02" }, [3, 2]],
  ["a day that doesn't exist does not narrow", { from: "2031-02-30" }, [8, 7, 6, 5, 4, 3, 2, 1]],
  ["several at once", { about: "FL-0004", person: "brisa" }, [3]],
  ["quotes and backslashes", { about: "'\\\"", person: "" }, []],
] as const)("is filtered by %s", async (_what, filter, expected) => {
  expect(await sequences(filter)).toEqual(expected);
});

it("is filtered by a person's id and by a person as the subject", async () => {
  expect(await sequences({ person: brisa })).toEqual([3]);
  expect(await sequences({ about: `user:${ottla}` })).toEqual([7]);
});

it("downloads as CSV that a spreadsheet takes for text", async () => {
  const { status, text, headers } = await maintainer.get("/api/log.csv?about=FL-0004");
  expect(status).toBe(200);
  expect(headers["content-disposition"]).toBe('attachment; filename="fogline-log.csv"');
  const { data, errors } = Papa.parse<Record<string, string>>(text, {
    header: true,
    skipEmptyLines: true,
  });
  expect(errors).toEqual([]);
  expect(data.map(({ sequence }) => sequence)).toEqual(["5", "4", "3", "2", "1"]);
  expect(data[2]?.in_words).toBe("Brisa Kelm claimed FL-0004.1 to read it again.");
  expect(data[1]?.who).toBe("");
});

it("downloads as JSON lines from which anybody can follow the chain", async () => {
  const { text } = await maintainer.get("/api/log.jsonl").buffer(true);
  const events = text
    .trim()
    .split("\n")
    .map((line) => JSON.parse(line))
    .reverse();
  expect(events).toHaveLength(8);
  let previous = CHAIN_START;
  for (const { digest, ...event } of events) {
    expect(event.previousDigest).toBe(previous);
    expect(digestOf(event)).toBe(digest);
    previous = digest;
  }
  const stored = await server.dataSource.manager.findOneByOrFail(EventRecord, { sequence: 8 });
  expect(previous).toBe(stored.digest);
});

it.each([[[]], [["contributor", "editor"]]] as const)(
  "roles %j can't download it",
  async (roles) => {
    const { agent } = await server.signedIn(roles);
    expect((await agent.get("/api/log.csv")).status).toBe(403);
    expect((await agent.get("/api/log.jsonl")).status).toBe(403);
    expect((await server.agent().get("/api/log.csv")).status).toBe(401);
  },
);
