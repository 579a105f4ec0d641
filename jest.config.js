const web = require("jest-expo/web/jest-preset");

/** @type {import('jest').Config} */
const alias = {
  "^@/(.*)$": "<rootDir>/src/$1",
  "^~shared/(.*)$": "<rootDir>/shared/$1",
  "^~server/(.*)$": "<rootDir>/server/$1",
  "^~graphql/(.*)$": "<rootDir>/graphql/$1",
  "^@expo/vector-icons(/.*)?$": "<rootDir>/src/components/Icon.tsx",
};
// Packages that come as modules only, which Jest has to translate.
const modulesOnly = "d3-array|d3-contour|internmap";
const node = {
  testEnvironment: "node",
  transform: { "^.+\\.[cm]?[jt]sx?$": ["@swc/jest", {}] },
  transformIgnorePatterns: [`/node_modules/(?!(${modulesOnly})/)`],
  moduleNameMapper: alias,
};
module.exports = {
  projects: [
    { ...node, displayName: "shared", testMatch: ["<rootDir>/tests/shared/**/*.test.ts"] },
    { ...node, displayName: "server", testMatch: ["<rootDir>/tests/server/**/*.test.ts"] },
    {
      displayName: "client",
      preset: "jest-expo/web",
      transformIgnorePatterns: web.transformIgnorePatterns.map((pattern) =>
        pattern.replace("(?!(", `(?!(${modulesOnly}|`),
      ),
      testMatch: ["<rootDir>/tests/client/**/*.test.tsx"],
      moduleNameMapper: alias,
      setupFilesAfterEnv: ["<rootDir>/tests/client/patience.ts"],
    },
    { ...node, displayName: "ops", testMatch: ["<rootDir>/tests/ops/**/*.test.ts"] },
    {
      ...node,
      displayName: "e2e",
      testMatch: ["<rootDir>/tests/e2e/**/*.test.ts"],
      globalSetup: "<rootDir>/tests/e2e/support/prepare.js",
      setupFilesAfterEnv: ["<rootDir>/tests/e2e/support/patience.ts"],
    },
  ],
};
