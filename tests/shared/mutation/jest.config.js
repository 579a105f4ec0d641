"use strict";
// The tests of what is mutated, each folder as one: a mutant waits for a realm and its modules once, not
// once for every file.
const shared = require("../../../jest.config").projects[0];

/** @type {import('jest').Config} */
module.exports = {
  ...shared,
  rootDir: "../../..",
  moduleNameMapper: {
    ...shared.moduleNameMapper,
    "^fast-check$": "<rootDir>/tests/shared/mutation/quickProperties.js",
  },
  watchman: false,
  testMatch: ["<rootDir>/tests/shared/mutation/every*.js"],
};
