"use strict";
// Stands in for fast-check while mutants are counted: the first counterexample is enough, and a few dozen
// tries find what a thousand would.
const { default: properties } = require("../../../node_modules/fast-check/lib/cjs/fast-check.js");

const MOST_RUNS = 30;

function assert(property, { numRuns = MOST_RUNS, ...options } = {}) {
  const runs = Math.min(numRuns, MOST_RUNS);
  return properties.assert(property, { ...options, numRuns: runs, endOnFailure: true });
}

module.exports = { __esModule: true, default: { ...properties, assert } };
