"use strict";
const fs = require("node:fs");

const { optionArgument, parseDatabaseUrl } = require("./database");
const { PlainFailure } = require("./failure");
const { MARIADB_CLIENT, MARIADB_SERVER, ensurePrograms } = require("./install");
const { lockDirectory } = require("./lock");
const { hasDatabase, runningMariaDb, startMariaDb } = require("./mariadb");
const { dataDirectory, shortTemporaryFolder } = require("./paths");
const { atEnd } = require("./processes");

/**
 * The registry's database for a command beside the server, as the user that owns the schema: the
 * one of DATABASE_OWNER_URL or DATABASE_URL, that of a start that runs, or this folder's own,
 * started for as long as the command takes.
 *
 * @param options.alone - True if no server may run over it meanwhile (only checked for our own).
 * @param options.make - True to make this folder's own database if there is none.
 * @returns Connection { host, port, user, password, database, options, url }
 * @throws {PlainFailure} If there is no database, or one that must be alone is in use.
 */
async function registryDatabase({ alone = false, make = false, doing }) {
  const external = process.env.DATABASE_URL?.trim();
  const owner = external && process.env.DATABASE_OWNER_URL?.trim();
  if (external) {
    await ensurePrograms(MARIADB_CLIENT);
    return withOptions(
      owner ? parseDatabaseUrl(owner, "DATABASE_OWNER_URL") : parseDatabaseUrl(external),
    );
  }
  const directory = dataDirectory();
  const running = runningMariaDb(directory);
  if (running && !alone) return withOptions(running);
  if (!running && !make && !hasDatabase(directory))
    throw new PlainFailure(
      "There is no registry here yet: run npm start first, or name its database with DATABASE_URL.",
    );
  await ensurePrograms(MARIADB_SERVER);
  await lockDirectory(directory, doing);
  return startMariaDb(directory);
}

function withOptions(connection) {
  const folder = shortTemporaryFolder("db");
  atEnd(() => fs.rmSync(folder, { recursive: true, force: true }));
  const { user, password, host, port, database } = connection;
  const login = `${encodeURIComponent(user)}:${encodeURIComponent(password)}`;
  const place = `${host.includes(":") ? `[${host}]` : host}:${port}`;
  return {
    ...connection,
    options: optionArgument(folder, connection),
    url: `mysql://${login}@${place}/${encodeURIComponent(database)}`,
  };
}

module.exports = { registryDatabase };
