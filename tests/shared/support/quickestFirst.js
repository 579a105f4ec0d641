"use strict";
const Sequencer = require("@jest/test-sequencer").default;

/** Files of sentences and closed forms first: they are quick, and notice most mutants. */
module.exports = class QuickestFirst extends Sequencer {
  sort(tests) {
    const rank = ({ path }) =>
      /(Sentences|Facts|Decisions|conversions|fieldLists|compile)\.test/.test(path) ? 0 : 1;
    return [...tests].sort((a, b) => rank(a) - rank(b) || a.path.localeCompare(b.path));
  }
};
