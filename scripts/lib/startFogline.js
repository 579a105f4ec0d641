"use strict";
const fs = require("node:fs");
const path = require("node:path");

const { buildClient, buildServer } = require("./build");
const { parseDatabaseUrl } = require("./database");
const { Interrupted, PlainFailure } = require("./failure");
const {
  MARIADB_SERVER,
  ensureModules,
  ensurePrograms,
  requireSpace,
  spaceNeeded,
} = require("./install");
const { lockDirectory, withProject } = require("./lock");
const { hasDatabase, startMariaDb } = require("./mariadb");
const { isStopping } = require("./processes");
const { program } = require("./program");
const { dataDirectory, fromRoot } = require("./paths");
const server = require("./server");
const { say, step } = require("./steps");

/** The password of the invented people; the seed gives it to them. */
const DEMONSTRATION_PASSWORD = "lifting-fog-2026";

function main() {
  program(start, { exitCode: (serving, number) => (serving ? 0 : number) });
}

async function start(status) {
  const began = Date.now();
  const port = server.readPort(process.env.PORT || "4600");
  const directory = dataDirectory();
  const external = process.env.DATABASE_URL?.trim();
  const externalOwner = external && process.env.DATABASE_OWNER_URL?.trim();
  if (external) parseDatabaseUrl(external);
  if (externalOwner) parseDatabaseUrl(externalOwner, "DATABASE_OWNER_URL");

  fs.mkdirSync(path.join(directory, "log"), { recursive: true, mode: 0o700 });
  await lockDirectory(directory, "running");
  await server.requireFreePort(port, process.env.HOST || undefined);
  requireSpace(directory, spaceNeeded({ database: !external && !hasDatabase(directory) }));
  const logs = openLogs(directory);
  status.log = logs.start;

  if (!external) await ensurePrograms(MARIADB_SERVER, logs.start);
  await withProject(async () => {
    await ensureModules(logs.start);
    await buildServer(logs.start);
  });
  // A database that can't be used shows before the long export.
  const database = external
    ? { url: externalOwner || external, applicationUrl: external }
    : await startMariaDb(directory);
  const environment = server.serverEnvironment(database.applicationUrl, port);
  let prepared;
  await step("database migrated", async () => {
    prepared = await server.prepareDatabase(environment, logs.start, database.url);
    return prepared.seeded ? "database migrated, demonstration seeded" : "database migrated";
  });
  await withProject(() => buildClient(logs.start));
  let running;
  await step("server ready", async () => {
    running = await server.launchServer(environment, {
      log: logs.server,
      echo: !process.stdout.isTTY,
    });
  });
  status.serving = true;
  announce(environment, running.url, prepared, logs, Date.now() - began);

  const [what, end] = await Promise.race([
    running.child.ended.then((end) => ["server", end]),
    ...(database.child ? [database.child.ended.then((end) => ["database", end])] : []),
  ]);
  if (isStopping()) throw new Interrupted();
  status.serving = false;
  throw new PlainFailure(
    `The ${what} ended unexpectedly (${end.signal ?? `code ${end.code}`}). ` +
      `Its log is ${what === "server" ? logs.server : path.join(directory, "log", "mariadb.log")}.`,
  );
}

/** Logs of this start; what an earlier one wrote is kept once, as .old. */
function openLogs(directory) {
  const file = (name) => path.join(directory, "log", `${name}.log`);
  for (const name of ["start", "server", "mariadb"])
    if (fs.existsSync(file(name))) fs.renameSync(file(name), `${file(name)}.old`);
  return { start: file("start"), server: file("server") };
}

function announce(environment, url, prepared, logs, tookMs) {
  const { demonstration, accounts, logProtected } = prepared;
  say();
  say(`Fogline is ready after ${(tookMs / 1000).toFixed(1)} s: ${url}`);
  if (environment.PUBLIC_URL) say(`Links in mails begin with ${environment.PUBLIC_URL}`);
  if (demonstration) {
    say();
    say(`Demonstration accounts, all with the password ${DEMONSTRATION_PASSWORD}`);
    for (const email of accounts) say(`  ${email}`);
    if (!environment.SMTP_URL) say("Mail goes nowhere: a maintainer reads it under Desk, Mail.");
  } else {
    say("The first maintainer: register in the browser, then npm run grant -- ADDRESS maintainer");
    if (!environment.SMTP_URL)
      say("No mail leaves this machine until SMTP_URL names a mail server.");
  }
  if (!logProtected)
    say(
      "The database does not protect the event log: DATABASE_URL's user may change it. " +
        "Give a second user with DATABASE_OWNER_URL (README, Own MariaDB).",
    );
  say();
  say(`Log: ${path.relative(fromRoot(), logs.server)}. Stop with Ctrl-C.`);
}

module.exports = { main };
