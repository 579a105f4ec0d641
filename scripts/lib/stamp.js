"use strict";
const crypto = require("node:crypto");
const fs = require("node:fs");
const path = require("node:path");

const { ROOT } = require("./paths");

/** Digest over names and contents of files and folders: two stamps are equal only if nothing changed. */
function contentStamp(places) {
  const hash = crypto.createHash("sha256");
  for (const place of places) addPlace(hash, path.resolve(ROOT, place));
  return hash.digest("hex");
}

function addPlace(hash, place) {
  const about = fs.statSync(place, { throwIfNoEntry: false });
  if (about === undefined) return;
  if (about.isDirectory()) {
    for (const name of fs.readdirSync(place).sort()) addPlace(hash, path.join(place, name));
    return;
  }
  const content = fs.readFileSync(place);
  hash.update(`${path.relative(ROOT, place)}\0${content.length}\0`).update(content);
}

module.exports = { contentStamp };
