import { createHash, randomBytes } from "node:crypto";
import { appendFileSync, readFileSync } from "node:fs";
import path from "node:path";
import { gunzipSync } from "node:zlib";

import type { RowDataPacket } from "mysql2/promise";

import { command, emptyDatabase, temporaryFolder, type TestDatabase } from "./support";

/** Texts that a careless dump breaks: quotes, escapes, line ends, characters outside the BMP. */
const HARD_TEXTS = [
  "plain",
  'it\'s "quoted" `so`',
  "back\\slash, percent %, semicolon; -- comment",
  "two\nlines\r\nand\ttab",
  "x̄ₕᵢ 𝑥 ± 0.1 − ½ 😀 Ångström",
  "INSERT INTO `note` (`id`) VALUES (9);",
  "",
];
const DIGEST = "5e".repeat(32);

const folder = temporaryFolder();
const place = (name: string) => path.join(folder, name);
let source: TestDatabase;

async function fill({ connection }: TestDatabase): Promise<void> {
  await connection.query(
    "CREATE TABLE note (id INT PRIMARY KEY, text TEXT, bytes BLOB, facts JSON)",
  );
  await connection.query(
    "CREATE TABLE part (id INT PRIMARY KEY, note INT NOT NULL, at DATETIME(6), CONSTRAINT part_note FOREIGN KEY (note) REFERENCES note (id))",
  );
  for (const [i, text] of HARD_TEXTS.entries()) {
    const bytes = Buffer.from([0, 10, 39, 92, 255, i]);
    await connection.query("INSERT INTO note VALUES (?, ?, ?, ?)", [
      i,
      text,
      bytes,
      JSON.stringify({ text }),
    ]);
    await connection.query("INSERT INTO part VALUES (?, ?, '2026-11-30 23:59:59.123456')", [i, i]);
  }
  await connection.query(
    "CREATE TABLE event_head (id INT PRIMARY KEY, sequence INT, digest CHAR(64))",
  );
  await connection.query("INSERT INTO event_head VALUES (1, 42, ?)", [DIGEST]);
  await connection.query("CREATE TABLE session (session_id VARCHAR(128) PRIMARY KEY, data TEXT)");
  await connection.query("INSERT INTO session VALUES ('secret-cookie', '{}')");
}

async function contents({ connection }: TestDatabase): Promise<unknown> {
  const [notes] = await connection.query<RowDataPacket[]>(
    "SELECT id, text, HEX(bytes) AS bytes, facts FROM note ORDER BY id",
  );
  const [parts] = await connection.query<RowDataPacket[]>(
    "SELECT id, note, CAST(at AS CHAR) AS at FROM part ORDER BY id",
  );
  return { notes, parts };
}

const dumpIn = (name: string) =>
  gunzipSync(readFileSync(path.join(place(name), "database.sql.gz"))).toString();

beforeAll(async () => {
  source = await emptyDatabase();
  await fill(source);
  const { code, output } = command("backup.js", [place("first")], { DATABASE_URL: source.url });
  if (code !== 0) throw new Error(output);
}, 30_000);

describe("backup", () => {
  it("counts the rows of each table and keeps the head of the event log", () => {
    const manifest = JSON.parse(readFileSync(path.join(place("first"), "manifest.json"), "utf8"));
    expect(manifest.tables).toEqual({ event_head: 1, note: 7, part: 7, session: 0 });
    expect(manifest.eventLog).toEqual({ sequence: 42, digest: DIGEST });
  });

  it("holds nobody's session", () => {
    expect(dumpIn("first")).not.toContain("secret-cookie");
  });

  it("does not write into a folder that holds something", () => {
    const { code, output } = command("backup.js", [place("first")], { DATABASE_URL: source.url });
    expect([code, output]).toEqual([1, expect.stringContaining("is not empty")]);
  });
});

describe("restore", () => {
  it("brings back the same rows and the same bytes", async () => {
    const target = await emptyDatabase();
    const env = { DATABASE_URL: target.url };
    const restored = command("restore.js", [place("first")], env);
    expect(restored).toEqual({ code: 0, output: expect.stringContaining("Restored from") });
    expect(await contents(target)).toEqual(await contents(source));
    expect(command("backup.js", [place("again")], env).code).toBe(0);
    expect(dumpIn("again")).toBe(dumpIn("first"));
  });

  it("leaves a registry alone that holds something, unless forced and answered yes", async () => {
    const target = await emptyDatabase();
    await target.connection.query("CREATE TABLE kept (id INT PRIMARY KEY)");
    const restore = (args: string[], answer: string) =>
      command("restore.js", [place("first"), ...args], { DATABASE_URL: target.url }, answer);
    const tables = async () => {
      const [rows] = await target.connection.query<RowDataPacket[]>("SHOW TABLES");
      return rows.flatMap((row) => Object.values(row));
    };
    const refused = restore([], "yes\n");
    expect(refused.output).toContain("is not empty, so nothing was restored");
    const declined = [restore(["--force"], "no\n"), restore(["--force"], "")];
    for (const { code, output } of [refused, ...declined])
      expect([code, output]).toEqual([1, expect.not.stringContaining("Restored")]);
    expect(await tables()).toEqual(["kept"]);
    expect(restore(["--force"], "yes\n").code).toBe(0);
    expect(await tables()).toEqual(["event_head", "note", "part", "session"]);
  });

  it("refuses a damaged backup before it touches the database", async () => {
    const target = await emptyDatabase();
    expect(command("backup.js", [place("bad")], { DATABASE_URL: source.url }).code).toBe(0);
    appendFileSync(path.join(place("bad"), "database.sql.gz"), "x");
    const { code, output } = command("restore.js", [place("bad")], { DATABASE_URL: target.url });
    expect([code, output]).toEqual([1, expect.stringContaining("The backup is damaged")]);
    const [tables] = await target.connection.query<RowDataPacket[]>("SHOW TABLES");
    expect(tables).toEqual([]);
  });

  it("refuses a folder that holds no backup", () => {
    const { code, output } = command("restore.js", [folder], { DATABASE_URL: source.url });
    expect([code, output]).toEqual([1, expect.stringContaining("holds no backup")]);
  });
});

it("10 MB of evidence, in pieces as the registry keeps them, come back byte for byte", async () => {
  const [from, to] = [await emptyDatabase(), await emptyDatabase()];
  const made = command("tasks/prepareDatabase.js", [], { DATABASE_URL: from.url, DEMO: "0" });
  expect(made.code).toBe(0);
  const bytes = randomBytes(10_000_000);
  const digest = createHash("sha256").update(bytes).digest("hex");
  await from.connection.query("INSERT INTO evidence_file VALUES (?, 'pdf', ?)", [
    digest,
    bytes.length,
  ]);
  const piece = 256 * 1024;
  for (let at = 0; at < bytes.length; at += piece) {
    const row = [digest, at / piece, bytes.subarray(at, at + piece)];
    await from.connection.query("INSERT INTO evidence_chunk VALUES (?, ?, ?)", row);
  }
  expect(command("backup.js", [place("evidence")], { DATABASE_URL: from.url }).code).toBe(0);
  expect(command("restore.js", [place("evidence")], { DATABASE_URL: to.url }).code).toBe(0);
  const [rows] = await to.connection.query<RowDataPacket[]>(
    "SELECT data FROM evidence_chunk WHERE digest = ? ORDER BY ordinal",
    [digest],
  );
  const back = Buffer.concat(rows.map((row) => row.data as Buffer));
  expect(createHash("sha256").update(back).digest("hex")).toBe(digest);
}, 60_000);

it("a password with quotes, backslashes and hashes reaches MariaDB's programs", async () => {
  const { connection } = source;
  const password = `a"b\\c#d e'f;=`;
  await connection.query("CREATE OR REPLACE USER 'fogline_ops'@'%' IDENTIFIED BY ?", [password]);
  await connection.query("GRANT ALL ON *.* TO 'fogline_ops'@'%'");
  try {
    const url = new URL(source.url);
    url.username = "fogline_ops";
    url.password = encodeURIComponent(password);
    const { code, output } = command("backup.js", [place("hard")], { DATABASE_URL: url.href });
    expect([code, output]).toEqual([0, expect.stringContaining("written to")]);
  } finally {
    await connection.query("DROP USER 'fogline_ops'@'%'");
  }
});
