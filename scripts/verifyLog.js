"use strict";
require("./lib/nodeVersion").requireNode20();
require("./lib/program").program(async () => {
  const { headsFor } = require("./lib/verifyLog");
  const { buildServer } = require("./lib/build");
  const { PlainFailure, lastWords } = require("./lib/failure");
  const { ensureModules } = require("./lib/install");
  const { withProject } = require("./lib/lock");
  const { fromRoot } = require("./lib/paths");
  const { run } = require("./lib/processes");
  const { say } = require("./lib/steps");
  const { registryDatabase } = require("./lib/withDatabase");
  const { anchors, notes } = headsFor(process.argv.slice(2));
  await withProject(async () => {
    await ensureModules();
    await buildServer();
  });
  const { url } = await registryDatabase({ doing: "verifying the event log" });
  const result = await run(process.execPath, [fromRoot("build/server/event/verify.js")], {
    env: { ...process.env, DATABASE_URL: url, NODE_ENV: "production" },
    input: JSON.stringify(anchors),
    allowFailure: true,
  });
  const found = typeof result === "string" ? result : result.output;
  if (typeof result !== "string" && !found.startsWith("The event log"))
    throw new PlainFailure(lastWords(found, 1));
  process.stdout.write(found);
  for (const note of notes) say(note);
  return typeof result === "string" ? 0 : 1;
});
