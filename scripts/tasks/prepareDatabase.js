"use strict";
/**
 * Brings the database of DATABASE_URL up to date and fills an empty one with the demonstration,
 * unless DEMO=0. Prints one JSON line: { migrated, seeded, demonstration, accounts }.
 */
require("reflect-metadata");

const { readConfig } = require("../../build/server/config/config");
const { createDataSource } = require("../../build/server/database/dataSource");
const { prepareDatabase } = require("../../build/server/database/prepare");
const { isDemonstration } = require("../../build/server/database/settings");

/** Remembers that a registry began empty, so that no later start fills it with invented data. */
const STARTED_EMPTY = "startedEmpty";

async function main() {
  const { databaseUrl, demo, publicUrl } = readConfig(process.env);
  const dataSource = createDataSource(databaseUrl);
  try {
    await prepareDatabase(dataSource);
    let demonstration = await isDemonstration(dataSource.manager);
    let seeded = false;
    if (demonstration && !demo)
      throw new Error(
        "This database holds the demonstration, and DEMO=0 asks for a registry without it. " +
          "Give another DATABASE_URL, or move the .fogline folder away, and run the command again.",
      );
    if (!demonstration && demo && (await isUntouched(dataSource))) {
      const { seedDemonstration } = require("../../build/server/seed");
      await seedDemonstration(dataSource, undefined, publicUrl);
      demonstration = await isDemonstration(dataSource.manager);
      seeded = true;
    }
    if (!demonstration)
      await dataSource.query("INSERT IGNORE INTO setting (name, value) VALUES (?, ?)", [
        STARTED_EMPTY,
        new Date().toISOString(),
      ]);
    const accounts = demonstration ? await accountsOf(dataSource) : [];
    process.stdout.write(`${JSON.stringify({ seeded, demonstration, accounts })}\n`);
  } finally {
    if (dataSource.isInitialized) await dataSource.destroy();
  }
}

async function isUntouched(dataSource) {
  const [row] = await dataSource.query(
    "SELECT (SELECT COUNT(*) FROM `user`) + (SELECT COUNT(*) FROM setting WHERE name = ?) AS n",
    [STARTED_EMPTY],
  );
  return Number(row.n) === 0;
}

/** Addresses and roles of the invented people, for the start command to print. */
async function accountsOf(dataSource) {
  const rows = await dataSource.query(
    "SELECT email FROM `user` WHERE email LIKE ? ORDER BY email",
    ["%@fogline.example"],
  );
  return rows.map((row) => row.email);
}

main().catch((error) => {
  process.stderr.write(`${error instanceof Error ? error.message : error}\n`);
  if (process.env.LOG_LEVEL === "debug") process.stderr.write(`${error.stack}\n`);
  process.exitCode = 1;
});
