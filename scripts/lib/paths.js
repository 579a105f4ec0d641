"use strict";
const fs = require("node:fs");
const os = require("node:os");
const path = require("node:path");

const ROOT = path.resolve(__dirname, "../..");
const fromRoot = (...parts) => path.join(ROOT, ...parts);

/** Where an installation keeps its database, secrets and logs. */
function dataDirectory() {
  return path.resolve(ROOT, process.env.FOGLINE_DATA || ".fogline");
}

/** Caches of the build tools stay inside node_modules, so that nothing is left in the system's temp folder. */
const CACHE = fromRoot("node_modules", ".cache", "fogline");

/** A private folder with a short name: socket paths end at 107 characters. */
function shortTemporaryFolder(name) {
  const base = os.tmpdir().length <= 60 ? os.tmpdir() : "/tmp";
  return fs.mkdtempSync(path.join(base, `fogline-${name}-`));
}

function writePrivate(file, text) {
  fs.mkdirSync(path.dirname(file), { recursive: true });
  fs.writeFileSync(file, text, { mode: 0o600 });
  fs.chmodSync(file, 0o600);
}

function readJson(file) {
  try {
    return JSON.parse(fs.readFileSync(file, "utf8"));
  } catch {
    return null;
  }
}

module.exports = {
  ROOT,
  CACHE,
  fromRoot,
  dataDirectory,
  shortTemporaryFolder,
  writePrivate,
  readJson,
};
