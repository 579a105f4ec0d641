"use strict";
const fs = require("node:fs");
const path = require("node:path");

const { parseDatabaseUrl } = require("./database");
const { dataDirectory, readJson, writePrivate } = require("./paths");

/**
 * Heads of the event log that backups keep, remembered in the data folder: `npm run verify-log`
 * holds the log against them even when it is not told where the backups are. Each is
 * { registry, made, folder, sequence, digest } and, once a restore went back behind it, setAside.
 */
const file = () => path.join(dataDirectory(), "log-heads.json");

/** Which registry a head belongs to: one data folder may have served several databases. */
function registryName() {
  const external = process.env.DATABASE_URL?.trim();
  if (!external) return "own";
  const { host, port, database } = parseDatabaseUrl(external);
  return `${host}:${port}/${database}`;
}

function allHeads() {
  const heads = readJson(file());
  return Array.isArray(heads) ? heads : [];
}

/** Heads of this registry, oldest first. */
function rememberedHeads() {
  return allHeads().filter((head) => head.registry === registryName());
}

function keep(heads) {
  fs.mkdirSync(dataDirectory(), { recursive: true, mode: 0o700 });
  writePrivate(file(), `${JSON.stringify(heads, null, 2)}\n`);
}

/** @param manifest - Of the backup that was just written. */
function rememberHead(folder, manifest) {
  if (manifest.eventLog === null) return;
  const head = { registry: registryName(), made: manifest.made, folder, ...manifest.eventLog };
  keep([...allHeads(), head]);
}

/** After a restore: events beyond the restored head are gone with the operator's will. */
function setAsideBeyond(manifest) {
  const heads = allHeads();
  const ends = manifest.eventLog?.sequence ?? 0;
  const beyond = heads.filter(
    (head) => head.registry === registryName() && !head.setAside && head.sequence > ends,
  );
  if (beyond.length === 0) return;
  const restored = new Date().toISOString();
  for (const head of beyond) head.setAside = restored;
  keep(heads);
}

module.exports = { rememberedHeads, rememberHead, setAsideBeyond };
