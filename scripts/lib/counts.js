"use strict";

/**
 * Facts that held and facts that did not, from a report of jest --json. A file that could not
 * run is one failure; where nothing may be skipped, each skipped test is one too.
 */
function countReport(report, { skippedFails }) {
  const skipped = report.numPendingTests + report.numTodoTests;
  return {
    passed: report.numPassedTests,
    failed: report.numFailedTests + report.numRuntimeErrorTestSuites + (skippedFails ? skipped : 0),
    skipped,
  };
}

function addCounts(a, b) {
  return {
    passed: a.passed + b.passed,
    failed: a.failed + b.failed,
    skipped: a.skipped + b.skipped,
  };
}

module.exports = { countReport, addCounts };
