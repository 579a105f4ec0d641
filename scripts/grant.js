"use strict";
require("./lib/nodeVersion").requireNode20();
require("./lib/program").program(async () => {
  const { buildServer } = require("./lib/build");
  const { PlainFailure, lastWords } = require("./lib/failure");
  const { ensureModules } = require("./lib/install");
  const { withProject } = require("./lib/lock");
  const { fromRoot } = require("./lib/paths");
  const { run } = require("./lib/processes");
  const { registryDatabase } = require("./lib/withDatabase");
  const [address, role, ...more] = process.argv.slice(2);
  if (!address || !role || more.length > 0)
    throw new PlainFailure("Say to whom and what: npm run grant -- ADDRESS ROLE");
  await withProject(async () => {
    await ensureModules();
    await buildServer();
  });
  const { url } = await registryDatabase({ doing: "granting a role" });
  const result = await run(
    process.execPath,
    [fromRoot("build/server/account/grant.js"), address, role],
    { env: { ...process.env, DATABASE_URL: url, NODE_ENV: "production" }, allowFailure: true },
  );
  if (typeof result !== "string") throw new PlainFailure(lastWords(result.output, 1));
  process.stdout.write(result);
});
