"use strict";
// The tests of what is mutated: elsewhere it is only used, at a length that every mutant would wait for.
const [shared] = require("../../jest.config").projects;

/** @type {import('jest').Config} */
module.exports = {
  ...shared,
  rootDir: "../..",
  moduleNameMapper: {
    ...shared.moduleNameMapper,
    "^fast-check$": "<rootDir>/tests/shared/support/quickProperties.js",
  },
  testSequencer: "<rootDir>/tests/shared/support/quickestFirst.js",
  watchman: false,
  testMatch: ["<rootDir>/tests/shared/{likelihood,statement}/**/*.test.ts"],
};
