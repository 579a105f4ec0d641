"use strict";
const crypto = require("node:crypto");
const fs = require("node:fs");
const path = require("node:path");
const readline = require("node:readline");
const { pipeline } = require("node:stream/promises");
const { Transform } = require("node:stream");
const zlib = require("node:zlib");

const { query } = require("./database");
const { PlainFailure } = require("./failure");
const { findProgram, requireSpace } = require("./install");
const { rememberHead, setAsideBeyond } = require("./logHeads");
const { readJson } = require("./paths");
const { atEnd, endChild, startChild } = require("./processes");
const { say, step } = require("./steps");

const FORMAT = "fogline-backup-1";
const DUMP = "database.sql.gz";
const MANIFEST = "manifest.json";
/** Contents that are only good for the running server: whoever holds a backup shall not be signed in with it. */
const WITHOUT_ROWS = ["session", "rate_limit"];

/**
 * Writes a consistent copy of the registry into a new or empty folder: the dump, and a manifest
 * with its checksum, the rows of each table and the head of the event log. Evidence files live in
 * the database and are therefore in the dump.
 */
async function writeBackup(connection, folder) {
  const target = path.resolve(folder);
  if (fs.existsSync(target) && fs.readdirSync(target).length > 0)
    throw new PlainFailure(`${target} is not empty. Give each backup a folder of its own.`);
  fs.mkdirSync(target, { recursive: true, mode: 0o700 });
  requireSpace(target, 50);
  const forget = atEnd(() => {
    for (const name of [DUMP, MANIFEST]) fs.rmSync(path.join(target, name), { force: true });
  });
  let manifest;
  await step("database written", async () => {
    const [[version]] = await query(connection.options, connection.database, "SELECT VERSION()");
    const tables = await query(
      connection.options,
      connection.database,
      "SELECT table_name FROM information_schema.tables WHERE table_schema = DATABASE() AND table_type = 'BASE TABLE' ORDER BY 1",
    );
    if (tables.length === 0) throw new PlainFailure("The database is empty: nothing to keep.");
    const counts = Object.fromEntries(tables.map(([name]) => [name, 0]));
    const watch = countRows(counts);
    const { sha256, bytes } = await dump(connection, path.join(target, DUMP), watch.stream);
    manifest = {
      format: FORMAT,
      made: new Date().toISOString(),
      database: version,
      file: { name: DUMP, bytes, sha256 },
      tables: counts,
      eventLog: watch.head(),
    };
    fs.writeFileSync(path.join(target, MANIFEST), `${JSON.stringify(manifest, null, 2)}\n`, {
      mode: 0o600,
    });
    const rows = Object.values(counts).reduce((sum, n) => sum + n, 0);
    return `${tables.length} tables with ${rows} rows written to ${target}`;
  });
  forget();
  rememberHead(target, manifest);
  say("Keep the folder private: it holds addresses, password hashes and unpublished drafts.");
}

/** One row per INSERT, so that rows can be counted in the very snapshot that is written. */
async function dump(connection, file, watcher) {
  const child = startChild(
    findProgram("mariadb-dump"),
    [
      connection.options,
      "--single-transaction",
      "--quick",
      "--skip-lock-tables",
      "--skip-extended-insert",
      "--complete-insert",
      "--no-autocommit",
      "--order-by-primary",
      "--hex-blob",
      "--skip-dump-date",
      "--skip-comments",
      "--routines",
      "--triggers",
      ...WITHOUT_ROWS.map((name) => `--ignore-table-data=${connection.database}.${name}`),
      connection.database,
    ],
    { stdio: ["ignore", "pipe", "pipe"] },
  );
  let said = "";
  child.stderr.on("data", (chunk) => (said += chunk));
  const hash = crypto.createHash("sha256");
  let bytes = 0;
  const tally = new Transform({
    transform(chunk, _encoding, done) {
      hash.update(chunk);
      bytes += chunk.length;
      done(null, chunk);
    },
  });
  const sink = fs.createWriteStream(file, { mode: 0o600 });
  await pipeline(child.stdout, watcher, zlib.createGzip({ level: 6 }), tally, sink).catch(
    async (error) => {
      await endChild(child);
      throw error;
    },
  );
  const { code } = await child.ended;
  if (code !== 0)
    throw new PlainFailure("mariadb-dump could not read the database; its own words follow.", {
      output: said,
    });
  return { sha256: hash.digest("hex"), bytes };
}

/** Passes a dump through and counts its rows by table; line ends inside values are escaped there. */
function countRows(counts) {
  let rest = "";
  let head = null;
  const seeLine = (line) => {
    const insert = /^INSERT INTO `((?:[^`]|``)+)` \(([^)]*)\) VALUES \(/.exec(line);
    if (!insert) return;
    const table = insert[1].replace(/``/g, "`");
    counts[table] = (counts[table] ?? 0) + 1;
    if (table === "event_head") head = readHead(insert[2], line.slice(insert[0].length));
  };
  const stream = new Transform({
    transform(chunk, _encoding, done) {
      // Latin-1 keeps bytes as they are and never splits a character between chunks.
      const lines = (rest + chunk.toString("latin1")).split("\n");
      rest = lines.pop();
      lines.forEach(seeLine);
      done(null, chunk);
    },
    flush(done) {
      seeLine(rest);
      done();
    },
  });
  return { stream, head: () => head };
}

/** The single row of event_head: numbers and a hexadecimal digest, nothing that needs unescaping. */
function readHead(columns, values) {
  const names = columns.split(",").map((name) => name.trim().replace(/`/g, ""));
  const fields = values.replace(/\);?\s*$/, "").split(",");
  const value = (name) => fields[names.indexOf(name)]?.trim().replace(/'/g, "");
  return { sequence: Number(value("sequence")), digest: value("digest") };
}

/**
 * Puts a backup back and verifies that what came back is what was kept.
 *
 * @param connect - Gives the target's connection; called only once the backup proved whole.
 */
async function restoreBackup(connect, folder, { force }) {
  const source = path.resolve(folder);
  const manifest = readJson(path.join(source, MANIFEST));
  if (manifest?.format !== FORMAT)
    throw new PlainFailure(`${source} holds no backup made by npm run backup.`);
  const file = path.join(source, manifest.file.name === DUMP ? DUMP : "");
  await step("backup verified", () => verifyFile(file, manifest.file));
  const connection = await connect();
  const present = await tablesOf(connection);
  if (present.length > 0) {
    const { user } = connection;
    if (!force)
      throw new PlainFailure(
        `The registry in database ${connection.database} is not empty, so nothing was restored. ` +
          "To replace all it holds, add --force.",
      );
    await askOnce(
      `This replaces all ${present.length} tables of database ${connection.database} (user ${user}) ` +
        `by the backup of ${manifest.made}. Type yes to go on: `,
    );
    await step("old tables dropped", () => dropTables(connection, present));
  }
  await step("database restored", () => load(connection, file));
  await step("contents compared with the manifest", () => compare(connection, manifest));
  setAsideBeyond(manifest);
  say(`Restored from ${source}. Everybody has to sign in again.`);
}

async function verifyFile(file, { bytes, sha256 }) {
  const damaged = "The backup is damaged: its file is not the one that was written.";
  if (fs.statSync(file, { throwIfNoEntry: false })?.size !== bytes) throw new PlainFailure(damaged);
  const hash = crypto.createHash("sha256");
  await pipeline(fs.createReadStream(file), hash);
  if (hash.digest("hex") !== sha256) throw new PlainFailure(damaged);
}

async function tablesOf({ options, database }) {
  const rows = await query(
    options,
    database,
    "SELECT table_name, table_type FROM information_schema.tables WHERE table_schema = DATABASE() ORDER BY 1",
  );
  return rows.map(([name, type]) => ({ name, view: type === "VIEW" }));
}

async function dropTables({ options, database }, tables) {
  const drops = tables.map(
    ({ name, view }) => `DROP ${view ? "VIEW" : "TABLE"} \`${name.replace(/`/g, "``")}\`;`,
  );
  await query(options, database, ["SET FOREIGN_KEY_CHECKS = 0;", ...drops].join("\n"));
}

async function load({ options, database }, file) {
  const child = startChild(findProgram("mariadb"), [options, database], {
    stdio: ["pipe", "ignore", "pipe"],
  });
  let said = "";
  child.stderr.on("data", (chunk) => (said += chunk));
  await pipeline(fs.createReadStream(file), zlib.createGunzip(), child.stdin).catch(() => {});
  const { code } = await child.ended;
  if (code === 0) return;
  throw new PlainFailure(
    "The database did not take the backup; its own words follow. What is there now is incomplete.",
    { output: said },
  );
}

async function compare(connection, manifest) {
  const names = Object.keys(manifest.tables);
  const counts = names.map(
    (name) => `SELECT '${name.replace(/'/g, "''")}', COUNT(*) FROM \`${name.replace(/`/g, "``")}\``,
  );
  const rows = await query(connection.options, connection.database, counts.join(" UNION ALL "));
  const different = rows.filter(([name, n]) => manifest.tables[name] !== Number(n));
  if (different.length > 0 || rows.length !== names.length)
    throw new PlainFailure(
      `The restored database differs from the backup in: ${different.map(([name]) => name).join(", ")}.`,
    );
  if (manifest.eventLog === null) return;
  const [head] = await query(
    connection.options,
    connection.database,
    "SELECT sequence, digest FROM event_head LIMIT 1",
  );
  const { sequence, digest } = manifest.eventLog;
  if (Number(head?.[0]) !== sequence || head?.[1] !== digest)
    throw new PlainFailure("The head of the event log is not the one of the backup.");
}

async function askOnce(question) {
  const lines = readline.createInterface({ input: process.stdin, output: process.stdout });
  const answer = await new Promise((resolve) => {
    lines.question(question, resolve);
    lines.once("close", () => resolve(""));
  });
  lines.close();
  if (answer.trim().toLowerCase() !== "yes") throw new PlainFailure("Nothing was changed.");
}

module.exports = { writeBackup, restoreBackup };
