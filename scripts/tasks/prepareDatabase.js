"use strict";
/**
 * Brings the database of DATABASE_URL up to date, gives the user of APPLICATION_DATABASE_URL its
 * rights there, and fills an empty one with the demonstration, unless DEMO=0.
 * Prints one JSON line: { seeded, demonstration, accounts, logProtected }.
 */
require("reflect-metadata");

const { readConfig } = require("../../build/server/config/config");
const { createDataSource } = require("../../build/server/database/dataSource");
const { prepareDatabase } = require("../../build/server/database/prepare");
const { grantToApplication, isLogProtected } = require("../../build/server/database/privileges");
const { isDemonstration } = require("../../build/server/database/settings");

/** Remembers that a registry began empty, so that no later start fills it with invented data. */
const STARTED_EMPTY = "startedEmpty";

async function main() {
  const { databaseUrl, demo, publicUrl } = readConfig(process.env);
  const applicationUrl = process.env.APPLICATION_DATABASE_URL || databaseUrl;
  const dataSource = createDataSource(databaseUrl);
  try {
    await prepareDatabase(dataSource);
    if (applicationUrl !== databaseUrl) await grant(dataSource, applicationUrl);
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
    const logProtected = await isLogProtected(applicationUrl);
    process.stdout.write(`${JSON.stringify({ seeded, demonstration, accounts, logProtected })}\n`);
  } finally {
    if (dataSource.isInitialized) await dataSource.destroy();
  }
}

async function grant(dataSource, applicationUrl) {
  try {
    await grantToApplication(dataSource, applicationUrl);
  } catch (error) {
    if (error.code === "ER_ACCESS_DENIED_ERROR")
      throw new Error("The database refused the user or password of DATABASE_URL.");
    if (/^ER_(TABLEACCESS|DBACCESS|ACCESS)_DENIED/.test(error.code ?? ""))
      throw new Error(
        "The user of DATABASE_OWNER_URL may not give rights to that of DATABASE_URL: " +
          "it needs all rights on the database, with grant option.",
      );
    throw error;
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
