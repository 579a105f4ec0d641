import os from "node:os";
import path from "node:path";

/**
 * Mutation run over the rules of the record and the likelihood: `npm run mutate`, or one folder with
 * `npm run mutate -- --mutate 'shared/likelihood/**'`. The copies it works on stand outside the tree, where
 * no watcher and no other tool meets them.
 */
export default {
  testRunner: "jest",
  plugins: ["@stryker-mutator/jest-runner"],
  jest: {
    projectType: "custom",
    configFile: "tests/shared/mutation/jest.config.js",
    enableFindRelatedTests: false,
  },
  coverageAnalysis: "perTest",
  mutate: ["shared/likelihood/**/*.ts", "shared/statement/**/*.ts"],
  ignorePatterns: [
    "app",
    "src",
    "server",
    "graphql",
    "public",
    "tests/e2e",
    "tests/server",
    ".fogline",
  ],
  // Nothing checks types there: swc only drops them.
  disableTypeChecks: false,
  // A mutant in a number that only a module's start reads would need every test anew for each.
  ignoreStatic: true,
  // What no change touched keeps its result from the run before.
  incremental: true,
  incrementalFile: ".fogline/mutation/incremental.json",
  concurrency: 1,
  // Endless loops are counted out; on a busy machine anything shorter takes slow tests for caught mutants.
  timeoutMS: 10_000,
  timeoutFactor: 2,
  tempDirName: path.join(os.tmpdir(), "fogline-mutants"),
  reporters: ["clear-text", "progress-append-only", "html", "json"],
  clearTextReporter: { allowColor: false, logTests: false, reportTests: false },
  htmlReporter: { fileName: ".fogline/mutation/report.html" },
  jsonReporter: { fileName: ".fogline/mutation/report.json" },
  thresholds: { high: 95, low: 85, break: 85 },
};
