import { countReport } from "../../scripts/lib/counts";

const report = {
  numPassedTests: 7,
  numFailedTests: 2,
  numPendingTests: 3,
  numTodoTests: 1,
  numRuntimeErrorTestSuites: 1,
};

describe("countReport", () => {
  it("counts a test file that could not run as a failure", () => {
    expect(countReport(report, { skippedFails: false })).toEqual({
      passed: 7,
      failed: 3,
      skipped: 4,
    });
  });

  it("counts what was skipped as failed where nothing may be skipped", () => {
    expect(countReport(report, { skippedFails: true }).failed).toBe(7);
  });
});
