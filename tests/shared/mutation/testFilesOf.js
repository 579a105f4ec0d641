"use strict";
const fs = require("node:fs");
const path = require("node:path");

/** The test files of a folder of tests/shared. */
exports.testFilesOf = (folder) => {
  const place = path.join(__dirname, "..", folder);
  return fs
    .readdirSync(place)
    .filter((name) => name.endsWith(".test.ts"))
    .map((name) => path.join(place, name));
};
