import { createHash, randomBytes } from "node:crypto";

import { sweep } from "~server/database/housekeeping";
import { EventRecord } from "~server/event/event.entity";
import { Evidence, EvidenceChunk, EvidenceFile } from "~server/evidence/evidence.entity";
import {
  discardDraft,
  reload,
  reviseSubmission,
  saveDraft,
  submitDraft,
} from "~server/constraint/draft.service";
import { verifyEvidence } from "~server/evidence/verifyEvidence";
import { claim, releaseClaim, storeReading } from "~server/review/review.service";
import type { Revision } from "~server/constraint/revision.entity";
import { formatQuotable, formatRecordNumber } from "~shared/identifiers/recordNumber";

import { actingAs, approveAs, buildDraft, granted, send } from "../../factories/constraint";
import { startTestServer, type Agent, type TestServer } from "../support/harness";
import { CSV, jpeg, PAGE, pdf, png, zip } from "./files";

// A database is made first, on a machine that may be busy.
jest.setTimeout(60_000);

let server: TestServer;
beforeAll(async () => {
  server = await startTestServer();
});
afterAll(() => server.stop());

type Person = Awaited<ReturnType<TestServer["signedIn"]>>;

const draftOf = (person: Person, at: TestServer = server): Promise<Revision> =>
  buildDraft(at.dataSource, person.user);

interface Sent {
  name?: string;
  type?: string;
  caption?: string;
}

function post(agent: Agent, revision: string, bytes: Buffer | string, sent: Sent = {}) {
  const { name = "table.csv", type, caption } = sent;
  const request = agent.post("/api/evidence").field("revision", revision);
  if (caption !== undefined) request.field("caption", caption);
  // As a `filename` the test's own client would leave the folders out.
  const named = name.includes("/") ? { filepath: name } : { filename: name };
  return request.attach("file", Buffer.from(bytes), { ...named, contentType: type } as never);
}

const LIST = `query ($number: String!) {
  evidence(number: $number) { id kind bytes digest name caption uploadedAt address }
}`;

// eslint-disable-next-line @typescript-eslint/no-explicit-any
async function list(agent: Agent, number: string): Promise<any[]> {
  const { data, errors } = await server.graphql(agent, LIST, { number });
  expect(errors).toBeUndefined();
  return data.evidence;
}

async function mutate(agent: Agent, mutation: string, variables: object) {
  const [declared, call] = mutation.split(" => ");
  const body = await server.graphql(
    agent,
    `mutation (${declared}) { ${call} { __typename ... on Refusal { code message } } }`,
    variables,
  );
  expect(body.errors).toBeUndefined();
  return Object.values(body.data as Record<string, { __typename: string; code?: string }>)[0];
}
const remove = (agent: Agent, id: string) =>
  mutate(agent, "$id: ID! => removeEvidence(id: $id)", { id });
const describeAs = (agent: Agent, id: string, caption: string) =>
  mutate(agent, "$id: ID!, $caption: String! => describeEvidence(id: $id, caption: $caption)", {
    id,
    caption,
  });

const sha256 = (bytes: Buffer): string => createHash("sha256").update(bytes).digest("hex");
const download = (agent: Agent, id: string) =>
  agent
    .get(`/api/evidence/${id}`)
    .buffer(true)
    .parse((res, done) => {
      const parts: Buffer[] = [];
      res.on("data", (part: Buffer) => parts.push(part));
      res.on("end", () => done(null, Buffer.concat(parts)));
    });

describe("attaching", () => {
  it.each([
    ["pdf", pdf(), "Fig. 2 (left).pdf", "application/pdf"],
    ["png", png(), "Ålesund.png", "image/png"],
    ["jpeg", jpeg(), "IMG_1.JPG", "image/jpeg"],
    ["csv", Buffer.from(CSV), "curve.csv", "text/csv"],
  ] as const)("keeps a %s, byte for byte, under its digest", async (kind, bytes, name, type) => {
    const person = await server.signedIn(["contributor"]);
    const draft = await draftOf(person);
    const { status, body } = await post(person.agent, draft.id, bytes, {
      ...{ name, type, caption: "  Table 2, third row  " },
    });
    expect(status).toBe(201);
    expect(body).toMatchObject({ kind, name, bytes: bytes.length, digest: sha256(bytes) });
    const [listed] = await list(person.agent, formatQuotable(draft.constraintId, 1));
    expect(listed).toMatchObject({ id: body.id, caption: "Table 2, third row", kind });
    const back = await download(person.agent, body.id);
    expect(Buffer.compare(back.body, bytes)).toBe(0);
  });

  it("keeps 10 MB in pieces, and refuses a byte more", async () => {
    const person = await server.signedIn(["contributor"]);
    const draft = await draftOf(person);
    const whole = pdf(`% ${"x".repeat(10_000_000 - pdf("% \n").length)}\n`);
    // The table of places grows by the digits of its own place.
    const bytes = whole.subarray(0, 10_000_000).equals(whole)
      ? whole
      : pdf(`% ${"x".repeat(10_000_000 - pdf("% \n").length - (whole.length - 10_000_000))}\n`);
    expect(bytes.length).toBe(10_000_000);
    const kept = await post(person.agent, draft.id, bytes, { name: "paper.pdf" });
    expect(kept.status).toBe(201);
    const pieces = await server.dataSource.manager.find(EvidenceChunk, {
      where: { digest: sha256(bytes) },
    });
    expect(Math.max(...pieces.map(({ data }) => data.length))).toBeLessThanOrEqual(1_000_000);
    expect(Buffer.compare((await download(person.agent, kept.body.id)).body, bytes)).toBe(0);

    const more = await post(person.agent, draft.id, Buffer.concat([bytes, Buffer.from("\n")]), {
      name: "paper.pdf",
    });
    expect([more.status, more.body.message]).toEqual([413, "The file is larger than 10 MB."]);
  });

  it.each([
    ["a zip called a PDF", zip(), "paper.pdf", "application/pdf", "archive"],
    ["a page called a PDF", PAGE, "paper.pdf", "application/pdf", "markup"],
    ["a page called a table", PAGE, "table.csv", "text/csv", "markup"],
    ["a page in a table", `a,b\n1,<b onclick=alert(1)>\n`, "table.csv", "text/csv", "markup"],
    ["an SVG called a PNG", "<svg onload='alert(1)'/>", "figure.png", "image/png", "SVG"],
    ["a PNG called a PDF", png(), "paper.pdf", "application/pdf", "name does not end"],
    ["a PDF sent as a page", pdf(), "paper.pdf", "text/html", "sent as text/html"],
    ["a table that ends in .html", CSV, "table.html", "text/csv", "name does not end"],
    [
      "a page, then a PDF",
      PAGE + pdf().toString("latin1"),
      "paper.pdf",
      "application/pdf",
      "markup",
    ],
    ["an empty file", "", "table.csv", "text/csv", "empty"],
    ["a path", CSV, "../../table.csv", "text/csv", "path"],
    ["a Windows path", CSV, "C:\\temp\\table.csv", "text/csv", "path"],
  ] as const)(
    "%s is refused, with the reason, and nothing is kept",
    async (_w, bytes, name, type, reason) => {
      const person = await server.signedIn(["contributor"]);
      const draft = await draftOf(person);
      const files = await server.dataSource.manager.count(EvidenceFile);
      const { status, body } = await post(person.agent, draft.id, bytes as string, { name, type });
      expect([status, body.message]).toEqual([400, expect.stringContaining(reason)]);
      expect(await server.dataSource.manager.count(EvidenceFile)).toBe(files);
      expect(await list(person.agent, formatQuotable(draft.constraintId, 1))).toEqual([]);
    },
  );

  it("needs the role, a session, this origin, a form with one file, and a draft of one's own", async () => {
    const owner = await server.signedIn(["contributor"]);
    const draft = await draftOf(owner);
    const other = await server.signedIn(["contributor", "editor", "maintainer"]);
    const { agent: reader } = await server.signedIn(["editor", "maintainer"]);
    expect((await post(server.agent(), draft.id, CSV)).status).toBe(401);
    expect((await post(reader, draft.id, CSV)).status).toBe(403);
    expect((await post(other.agent, draft.id, CSV)).status).toBe(404);
    expect((await post(owner.agent, "no-such-draft", CSV)).status).toBe(404);
    const elsewhere = post(owner.agent, draft.id, CSV).set("Origin", "https://elsewhere.example");
    expect((await elsewhere).status).toBe(403);
    const none = await owner.agent.post("/api/evidence").field("revision", draft.id);
    expect([none.status, none.body.message]).toEqual([400, "Send the file in the field `file`."]);
    const two = await post(owner.agent, draft.id, CSV).attach("file", Buffer.from(CSV), "b.csv");
    expect(two.status).toBe(400);
    const long = await post(owner.agent, draft.id, CSV, { caption: "x".repeat(301) });
    expect([long.status, long.body.message]).toEqual([409, expect.stringContaining("caption")]);
  });

  it("takes the same file once for a record, and ten files at most", async () => {
    const person = await server.signedIn(["contributor"]);
    const draft = await draftOf(person);
    for (let n = 0; n < 10; n += 1) {
      const sent = await post(person.agent, draft.id, `${CSV}8.${n},0.5,0.1,0.1\n`);
      expect(sent.status).toBe(201);
    }
    const eleventh = await post(person.agent, draft.id, CSV);
    expect([eleventh.status, eleventh.body.message]).toEqual([
      409,
      expect.stringContaining("10 files"),
    ]);
    const another = await draftOf(person);
    expect((await post(person.agent, another.id, CSV)).status).toBe(201);
    const twin = await post(person.agent, another.id, CSV, { name: "again.csv" });
    expect([twin.status, twin.body.message]).toEqual([
      409,
      expect.stringContaining("attached already, as table.csv"),
    ]);
  });

  it("stops at the quota of what is not approved, counting each file once", async () => {
    const person = await server.signedIn(["contributor"]);
    const draft = await draftOf(person);
    const { body } = await post(person.agent, draft.id, CSV);
    // As if these bytes were nearly all that one person may have waiting.
    await server.dataSource.manager.update(
      EvidenceFile,
      { digest: body.digest },
      { bytes: 199_999_990 },
    );
    const more = await post(person.agent, (await draftOf(person)).id, `${CSV}9,0.9,0,0\n`);
    expect([more.status, more.body.message]).toEqual([
      409,
      expect.stringContaining("200 MB is the most"),
    ]);
    await server.dataSource.manager.update(
      EvidenceFile,
      { digest: body.digest },
      { bytes: CSV.length },
    );
  });

  it("is put off when one person sends too many within the hour", async () => {
    const limited = await startTestServer({ limits: { evidencePerHour: 1 } });
    try {
      const person = await limited.signedIn(["contributor"]);
      const draft = await draftOf(person, limited);
      expect((await post(person.agent, draft.id, CSV)).status).toBe(201);
      const { status, headers } = await post(person.agent, draft.id, pdf(), { name: "a.pdf" });
      expect(status).toBe(429);
      expect(Number(headers["retry-after"])).toBeGreaterThan(0);
    } finally {
      await limited.stop();
    }
  });

  it("receives two files of one person at once, and asks the third to wait", async () => {
    const person = await server.signedIn(["contributor"]);
    const draft = await draftOf(person);
    const answers = await Promise.all(
      [1, 2, 3, 4, 5, 6].map((n) => {
        const bytes = Buffer.concat([pdf(`% ${n} ${randomBytes(500_000).toString("hex")}\n`)]);
        return post(person.agent, draft.id, bytes, { name: `${n}.pdf` });
      }),
    );
    const statuses = answers.map(({ status }) => status);
    expect(statuses.filter((status) => status === 201).length).toBeGreaterThanOrEqual(2);
    expect(new Set(statuses)).toEqual(new Set([201, 429]));
    expect((await post(person.agent, draft.id, CSV)).status).toBe(201);
  });
});

describe("an attached file", () => {
  it("is described anew and removed by its owner only, while it is a draft's", async () => {
    const owner = await server.signedIn(["contributor"]);
    const other = await server.signedIn(["contributor", "editor", "maintainer"]);
    const draft = await draftOf(owner);
    const number = formatQuotable(draft.constraintId, 1);
    const { body } = await post(owner.agent, draft.id, CSV);
    for (const act of [remove(other.agent, body.id), describeAs(other.agent, body.id, "mine")]) {
      expect(await act).toMatchObject({ __typename: "Refusal", code: "notFound" });
    }
    expect(await describeAs(owner.agent, body.id, "x".repeat(301))).toMatchObject({
      code: "tooLong",
    });
    expect(await describeAs(owner.agent, body.id, " Figure 3 ")).toEqual({
      __typename: "Evidence",
    });
    expect((await list(owner.agent, number))[0].caption).toBe("Figure 3");
    expect(await remove(owner.agent, body.id)).toEqual({ __typename: "Done" });
    expect(await remove(owner.agent, body.id)).toMatchObject({ code: "notFound" });
    expect(await list(owner.agent, number)).toEqual([]);
  });

  it("is unchanged once submitted, and named by digest in the event", async () => {
    const owner = await server.signedIn(["contributor"]);
    const draft = await draftOf(owner);
    const { body } = await post(owner.agent, draft.id, CSV, { caption: "0.30 is here" });
    await send(server.dataSource, owner.user, draft);
    expect(await remove(owner.agent, body.id)).toMatchObject({ code: "notDraft" });
    expect(await describeAs(owner.agent, body.id, "other")).toMatchObject({ code: "notDraft" });
    const late = await post(owner.agent, draft.id, pdf(), { name: "late.pdf" });
    expect([late.status, late.body.code]).toEqual([409, "notDraft"]);
    const event = await server.dataSource.manager.findOneByOrFail(EventRecord, {
      kind: "revision.submitted",
      subject: formatQuotable(draft.constraintId, 1),
    });
    expect(event.detail.evidence).toEqual([sha256(Buffer.from(CSV))]);
    // Neither caption nor name: they may hold the numbers.
    expect(JSON.stringify(event)).not.toMatch(/0\.30|table\.csv/);
  });

  it("goes along to the next revision, where it can be removed without touching the one before", async () => {
    const owner = await server.signedIn(["contributor"]);
    const { user: editor } = await server.signedIn(["editor"]);
    const draft = await draftOf(owner);
    const { body } = await post(owner.agent, draft.id, CSV, { caption: "Table 2" });
    const approved = await approveAs(
      server.dataSource,
      editor,
      await send(server.dataSource, owner.user, draft),
    );
    const next = granted(
      await reviseSubmission(actingAs(server.dataSource, owner.user), approved.id),
    );
    const [one, two] = [1, 2].map((ordinal) => formatQuotable(draft.constraintId, ordinal)) as [
      string,
      string,
    ];
    const [carried] = await list(owner.agent, two);
    expect(carried).toMatchObject({ digest: body.digest, caption: "Table 2" });
    expect(carried.id).not.toBe(body.id);
    // Nothing differs yet; a removed file is a difference.
    const who = actingAs(server.dataSource, owner.user);
    const { version } = await reload(server.dataSource.manager, next.id);
    expect(await submitDraft(who, next.id, version, true)).toMatchObject({ code: "unchanged" });
    expect(await remove(owner.agent, carried.id)).toEqual({ __typename: "Done" });
    expect(await list(owner.agent, two)).toEqual([]);
    expect(await list(owner.agent, one)).toHaveLength(1);
    expect((await download(owner.agent, body.id)).status).toBe(200);
    expect(granted(await submitDraft(who, next.id, version, true))).toMatchObject({
      state: "submitted",
    });
  });

  it("goes with a discarded draft, and its bytes with the last revision that keeps them", async () => {
    const { manager } = server.dataSource;
    const owner = await server.signedIn(["contributor"]);
    const bytes = `${CSV}9.9,0.${Date.now()},0,0\n`;
    const digest = sha256(Buffer.from(bytes));
    const [first, second] = [await draftOf(owner), await draftOf(owner)];
    for (const draft of [first, second]) await post(owner.agent, draft.id, bytes);
    expect(await manager.countBy(EvidenceFile, { digest })).toBe(1);
    const who = actingAs(server.dataSource, owner.user);
    granted(await discardDraft(who, first.id, first.version));
    expect(await manager.countBy(Evidence, { digest })).toBe(1);
    expect(await manager.countBy(EvidenceChunk, { digest })).toBe(1);
    granted(await discardDraft(who, second.id, second.version));
    expect(await manager.countBy(EvidenceFile, { digest })).toBe(0);
    expect(await manager.countBy(EvidenceChunk, { digest })).toBe(0);
  });

  it("that nothing names any more is swept away, and no other", async () => {
    const { manager } = server.dataSource;
    const owner = await server.signedIn(["contributor"]);
    const draft = await draftOf(owner);
    const { body } = await post(owner.agent, draft.id, pdf("% kept\n"), { name: "kept.pdf" });
    await manager.insert(EvidenceFile, { digest: "ab".repeat(32), kind: "csv", bytes: 1 });
    await sweep(manager);
    expect(await manager.countBy(EvidenceFile, { digest: "ab".repeat(32) })).toBe(0);
    expect((await download(owner.agent, body.id)).status).toBe(200);
  });

  it("whose bytes were changed in the database is not handed out", async () => {
    const owner = await server.signedIn(["contributor"]);
    const draft = await draftOf(owner);
    const { body } = await post(owner.agent, draft.id, pdf("% changed\n"), { name: "a.pdf" });
    await server.dataSource.query(
      "UPDATE evidence_chunk SET data = INSERT(data, 20, 1, 'X') WHERE digest = ?",
      [body.digest],
    );
    expect((await download(owner.agent, body.id)).status).toBe(500);
  });
});

describe("the proof of the evidence", () => {
  it("holds for what was kept, and names changed bytes and files taken off a submission", async () => {
    const own = await startTestServer();
    try {
      const { manager } = own.dataSource;
      const person = await own.signedIn(["contributor"]);
      const draft = await draftOf(person, own);
      const { body } = await post(person.agent, draft.id, CSV);
      await post(person.agent, draft.id, pdf(), { name: "a.pdf" });
      await send(own.dataSource, person.user, draft);
      // A draft's file is nobody's claim yet.
      await post(person.agent, (await draftOf(person, own)).id, png(), { name: "a.png" });
      expect(await verifyEvidence(manager)).toEqual({ files: 3, problems: [] });

      const change = (byte: string) =>
        manager.query("UPDATE evidence_chunk SET data = INSERT(data, 3, 1, ?) WHERE digest = ?", [
          byte,
          body.digest,
        ]);
      await change("y");
      expect((await verifyEvidence(manager)).problems).toEqual([
        `The bytes of evidence ${body.digest} are not those that were kept.`,
      ]);
      await change("x");
      expect((await verifyEvidence(manager)).problems).toEqual([]);

      await manager.delete(Evidence, { id: body.id });
      const number = formatQuotable(draft.constraintId, 1);
      expect((await verifyEvidence(manager)).problems).toEqual([
        expect.stringMatching(
          new RegExp(
            `^Event \\d+: ${number} does not keep the evidence with which it was submitted`,
          ),
        ),
      ]);
    } finally {
      await own.stop();
    }
  });
});

describe("serving", () => {
  it.each([
    ["pdf", pdf(), "a.pdf", "application/pdf"],
    ["png", png(), "a.png", "image/png"],
    ["jpeg", jpeg(), "a.jpg", "image/jpeg"],
    ["csv", Buffer.from(CSV), 'Å "b"; x=y.csv', "text/plain; charset=utf-8"],
  ] as const)("sends a %s to be saved, never as a page", async (_kind, bytes, name, type) => {
    const person = await server.signedIn(["contributor"]);
    const draft = await draftOf(person);
    const { body } = await post(person.agent, draft.id, bytes, { name });
    const { status, headers } = await download(person.agent, body.id).set("Accept", "text/html");
    expect(status).toBe(200);
    expect(headers["content-type"]).toBe(type);
    expect(headers["content-disposition"]).toMatch(/^attachment; filename=/);
    expect(headers["x-content-type-options"]).toBe("nosniff");
    expect(headers["content-security-policy"]).toBe("default-src 'none'; sandbox");
    expect(headers["cross-origin-resource-policy"]).toBe("same-origin");
    expect(headers["cache-control"]).toBe("no-store");
    expect(headers.etag).toBeUndefined();
  });
});

describe("who sees it", () => {
  const NUMBERS = "0.41637 at 7.3819";

  it("the owner always; an editor once the reading is stored; a maintainer once approved; the public never", async () => {
    const owner = await server.signedIn(["contributor"]);
    const editor = await server.signedIn(["contributor", "editor"]);
    const other = await server.signedIn(["editor"]);
    const maintainer = await server.signedIn(["maintainer"]);
    const theorist = await server.signedIn([]);
    const nobody = server.agent();
    const draft = await draftOf(owner);
    const number = formatQuotable(draft.constraintId, 1);
    const { body } = await post(owner.agent, draft.id, CSV, {
      name: `${NUMBERS}.csv`,
      caption: NUMBERS,
    });
    const statuses = async () => ({
      owner: (await download(owner.agent, body.id)).status,
      editor: (await download(editor.agent, body.id)).status,
      other: (await download(other.agent, body.id)).status,
      maintainer: (await download(maintainer.agent, body.id)).status,
      theorist: (await download(theorist.agent, body.id)).status,
      nobody: (await download(nobody, body.id)).status,
    });
    const ownerOnly = {
      owner: 200,
      editor: 404,
      other: 404,
      maintainer: 404,
      theorist: 404,
      nobody: 401,
    };
    const everybodyElse = [editor, other, maintainer, theorist]
      .map(({ agent }) => agent)
      .concat(nobody);
    expect(await statuses()).toEqual(ownerOnly);

    const submitted = await send(server.dataSource, owner.user, draft);
    expect(await statuses()).toEqual(ownerOnly);
    const his = actingAs(server.dataSource, editor.user);
    granted(await claim(his, submitted.id));
    expect(await statuses()).toEqual(ownerOnly);
    for (const agent of everybodyElse) expect(await list(agent, number)).toEqual([]);

    granted(await storeReading(his, submitted.id, submitted.fields));
    expect(await statuses()).toEqual({ ...ownerOnly, editor: 200 });
    expect(await list(editor.agent, number)).toMatchObject([{ caption: NUMBERS, id: body.id }]);
    for (const agent of everybodyElse.slice(1)) expect(await list(agent, number)).toEqual([]);

    // The claim goes to another editor, who approves it.
    granted(await releaseClaim(his, submitted.id));
    await approveAs(server.dataSource, other.user, submitted);
    const approved = {
      owner: 200,
      editor: 200,
      other: 200,
      maintainer: 200,
      theorist: 404,
      nobody: 401,
    };
    expect(await statuses()).toEqual(approved);
    const marks = [
      {
        kind: "csv",
        bytes: CSV.length,
        digest: body.digest,
        id: null,
        name: null,
        caption: null,
        uploadedAt: null,
        address: null,
      },
    ];
    for (const agent of [theorist.agent, nobody]) {
      expect(await list(agent, number)).toEqual(marks);
      expect(await list(agent, formatRecordNumber(draft.constraintId))).toEqual(marks);
    }

    // A newer revision waits: the same page of the paper may hold its numbers too.
    const hers = actingAs(server.dataSource, owner.user);
    const next = granted(await reviseSubmission(hers, submitted.id));
    const saved = granted(
      await saveDraft(hers, {
        id: next.id,
        version: next.version,
        fields: { ...next.fields, remark: "Anew" },
      }),
    );
    granted(await submitDraft(hers, next.id, saved.version, true));
    expect(await statuses()).toEqual({ ...approved, editor: 404, other: 404 });
    granted(await claim(his, next.id));
    expect(await list(editor.agent, number)).toEqual([]);
    expect(await list(editor.agent, formatQuotable(draft.constraintId, 2))).toEqual([]);
    granted(await storeReading(his, next.id, next.fields));
    expect(await statuses()).toEqual({ ...approved, other: 404 });
  });

  it("a number that is none, or of nothing, has no files", async () => {
    for (const number of ["", "FL-9999", "FL-9999.1", "nonsense", "FL-0001.99"]) {
      expect(await list(server.agent(), number)).toEqual([]);
    }
    const { agent } = await server.signedIn(["contributor"]);
    expect((await agent.get("/api/evidence/nonsense")).status).toBe(404);
  });
});
