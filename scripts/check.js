"use strict";
// Types, lint, format, generated files, unused code: everything that needs no database.
require("./lib/nodeVersion").requireNode20();
require("./lib/program").program(async () => {
  const fs = require("node:fs");
  const path = require("node:path");
  const { PlainFailure } = require("./lib/failure");
  const { ensureModules } = require("./lib/install");
  const { withProject } = require("./lib/lock");
  const { CACHE, fromRoot, shortTemporaryFolder } = require("./lib/paths");
  const { atEnd, run } = require("./lib/processes");
  const { step, say } = require("./lib/steps");

  await withProject(() => ensureModules());
  const folder = shortTemporaryFolder("check");
  atEnd(() => fs.rmSync(folder, { recursive: true, force: true }));

  const node = (script, ...args) =>
    run(process.execPath, [fromRoot(script), ...args], { allowFailure: true });
  const typescript = (script, ...args) =>
    run(process.execPath, ["-r", "@swc-node/register", fromRoot(script), ...args], {
      allowFailure: true,
    });
  const cache = (name) => path.join(CACHE, name);
  const sdl = path.join(folder, "schema.graphql");

  const checks = {
    "types (tsc)": () => node("node_modules/typescript/bin/tsc", "--noEmit", "-p", "."),
    "lint (eslint)": () => node("node_modules/eslint/bin/eslint.js", "."),
    "format (prettier)": () =>
      node(
        "node_modules/prettier/bin/prettier.cjs",
        ...[
          "--check",
          "--log-level",
          "warn",
          "--cache",
          "--cache-location",
          cache("prettier"),
          ".",
        ],
      ),
    "emitted schema (graphql/schema.graphql; renew with npm run generate)": async () => {
      const emitted = await typescript("scripts/emitSchema.ts", sdl);
      if (typeof emitted !== "string") return emitted;
      const same = fs.readFileSync(sdl).equals(fs.readFileSync(fromRoot("graphql/schema.graphql")));
      return same || run("diff", ["-u", "graphql/schema.graphql", sdl], { allowFailure: true });
    },
    "generated client types (graphql/generated; renew with npm run generate)": () =>
      typescript("scripts/tasks/checkGenerated.js"),
    "unused dependencies, files and exports (knip)": () => node("node_modules/knip/bin/knip.js"),
  };
  const failed = [];
  for (const [label, check] of Object.entries(checks)) {
    let problem = null;
    await step(label, async () => {
      const result = await check();
      if (typeof result === "object") problem = result.output;
      return problem === null ? label : `${label}: NOT in order`;
    });
    if (problem === null) continue;
    failed.push(label);
    say(problem.trimEnd());
  }
  if (failed.length > 0)
    throw new PlainFailure(`${failed.length} of ${Object.keys(checks).length} checks failed.`);
  say("All in order.");
});
