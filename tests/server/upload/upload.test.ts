import { Upload } from "~server/upload/upload.entity";
import { findUpload, storeUpload } from "~server/upload/upload.service";

import { startTestServer, type Agent, type TestServer } from "../support/harness";

// A database is made first, on a machine that may be busy.
jest.setTimeout(60_000);

let server: TestServer;
beforeAll(async () => {
  server = await startTestServer();
});
afterAll(() => server.stop());

const BIB = "@article{k, title = {T}, author = {A, B.}, year = 2031}\n";
const CSV = "key,z,value\nk,7.1,0.30\n";

function send(agent: Agent, kind: string | null, content: Buffer | string, name = "list.txt") {
  const post = agent.post("/api/uploads");
  if (kind !== null) post.field("kind", kind);
  return post.attach("file", Buffer.from(content), name);
}

it("a contributor's file is kept whole under its own name", async () => {
  const { agent, user } = await server.signedIn(["contributor"]);
  const { status, body } = await send(agent, "bib", BIB, "Ålesund.bib");
  expect(status).toBe(201);
  expect(body.name).toBe("Ålesund.bib");
  const upload = await findUpload(server.dataSource.manager, user.id, body.id, "bib");
  expect(upload?.text).toBe(BIB);
});

it.each([[[]], [["editor"]], [["maintainer"]]] as const)(
  "roles %j may not upload",
  async (roles) => {
    const { agent } = await server.signedIn(roles);
    const { status, body } = await send(agent, "bib", BIB);
    expect(status).toBe(403);
    expect(JSON.stringify(body)).toContain("FORBIDDEN");
  },
);

it("nobody may upload without signing in", async () => {
  const { status, body } = await send(server.agent(), "bib", BIB);
  expect(status).toBe(401);
  expect(JSON.stringify(body)).toContain("UNAUTHENTICATED");
});

it("a page of another origin may not upload", async () => {
  const { agent } = await server.signedIn(["contributor"]);
  const { status } = await send(agent, "bib", BIB).set("Origin", "https://elsewhere.example");
  expect(status).toBe(403);
});

it.each([
  ["BibTeX as a table", "csv", BIB, "BibTeX, not a table"],
  ["a table as BibTeX", "bib", CSV, "no BibTeX entry"],
  ["no kind", null, BIB, "csv or bib"],
  ["an unknown kind", "exe", BIB, "csv or bib"],
  ["a file with a NUL", "csv", "a,b\n\u0000,1\n", "control characters"],
  ["Latin-1", "csv", Buffer.from([0x61, 0x2c, 0xe9, 0x0a]), "UTF-8"],
  ["a picture", "csv", Buffer.from("89504e470d0a1a0a0000000d", "hex"), "UTF-8"],
  ["an empty file", "csv", "  \n", "empty"],
  ["a page", "csv", "<html>, a\n", "no CSV table"],
] as const)("%s is refused with the reason", async (_what, kind, content, reason) => {
  const { agent } = await server.signedIn(["contributor"]);
  const before = await server.dataSource.manager.count(Upload);
  const { status, text } = await send(agent, kind, content as string);
  expect(status).toBe(400);
  expect(text).toContain(reason);
  expect(await server.dataSource.manager.count(Upload)).toBe(before);
});

it("more than 1 MB is refused", async () => {
  const { agent } = await server.signedIn(["contributor"]);
  const { status, text } = await send(agent, "csv", CSV.padEnd(1_000_001, "x"));
  expect(status).toBe(413);
  expect(text).toContain("larger than 1 MB");
});

it("a byte order mark is no part of the text", async () => {
  const { agent, user } = await server.signedIn(["contributor"]);
  const { body } = await send(agent, "csv", `\uFEFF${CSV}`);
  const upload = await findUpload(server.dataSource.manager, user.id, body.id, "csv");
  expect(upload?.text).toBe(CSV);
});

it("a name keeps no folders", async () => {
  const { agent } = await server.signedIn(["contributor"]);
  const { body } = await send(agent, "csv", CSV, "..\\..\\etc\\list.csv");
  expect(body.name).toBe("list.csv");
});

it("something that is no form is refused in words", async () => {
  const { agent } = await server.signedIn(["contributor"]);
  const { status, text } = await agent.post("/api/uploads").send({ kind: "bib" });
  expect(status).toBe(400);
  expect(text).toMatch(/kind|file/);
});

it("nobody else finds the file, and nobody finds an expired one", async () => {
  const { manager } = server.dataSource;
  const { user } = await server.signedIn(["contributor"]);
  const other = await server.signedIn(["contributor"]);
  const upload = await storeUpload(manager, {
    ownerId: user.id,
    kind: "csv",
    name: "list.csv",
    text: CSV,
  });
  expect(await findUpload(manager, other.user.id, upload.id, "csv")).toBeNull();
  expect(await findUpload(manager, user.id, upload.id, "bib")).toBeNull();
  expect(await findUpload(manager, user.id, "no-such-id", "csv")).toBeNull();
  await manager.update(Upload, { id: upload.id }, { expiresAt: new Date(Date.now() - 1000) });
  expect(await findUpload(manager, user.id, upload.id, "csv")).toBeNull();
});

it("one person keeps twenty files at most, the newest", async () => {
  const { manager } = server.dataSource;
  const { user } = await server.signedIn(["contributor"]);
  let last = "";
  for (let n = 0; n < 22; n += 1) {
    const file = { ownerId: user.id, kind: "csv" as const, name: `${n}.csv`, text: CSV };
    last = (await storeUpload(manager, file)).id;
  }
  expect(await manager.countBy(Upload, { ownerId: user.id })).toBe(20);
  expect(await findUpload(manager, user.id, last, "csv")).not.toBeNull();
});

it("too many uploads from one place are put off", async () => {
  const limited = await startTestServer({ limits: { uploadsPerMinute: 2 } });
  try {
    const { agent } = await limited.signedIn(["contributor"]);
    expect((await send(agent, "csv", CSV)).status).toBe(201);
    expect((await send(agent, "csv", CSV)).status).toBe(201);
    const { status, headers, text } = await send(agent, "csv", CSV);
    expect(status).toBe(429);
    expect(Number(headers["retry-after"])).toBeGreaterThan(0);
    expect(text).toContain("Try again");
  } finally {
    await limited.stop();
  }
});
