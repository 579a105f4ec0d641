"use strict";
// The tests of what is mutated: elsewhere it is only used, at a length that every mutant would wait for.
const [shared] = require("../../jest.config").projects;

/** @type {import('jest').Config} */
module.exports = {
  ...shared,
  rootDir: "../..",
  setupFiles: ["<rootDir>/tests/shared/support/failAtOnce.js"],
  testMatch: ["<rootDir>/tests/shared/{likelihood,statement}/**/*.test.ts"],
};
