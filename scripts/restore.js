"use strict";
require("./lib/nodeVersion").requireNode20();
require("./lib/program").program(async () => {
  const { restoreBackup } = require("./lib/backup");
  const { registryDatabase } = require("./lib/withDatabase");
  const words = process.argv.slice(2);
  const folder = words.find((word) => !word.startsWith("--"));
  const unknown = words.find((word) => word.startsWith("--") && word !== "--force");
  if (!folder || unknown)
    throw new (require("./lib/failure").PlainFailure)(
      "Say where from: npm run restore -- FOLDER (and --force to replace what the registry holds)",
    );
  await restoreBackup(
    () => registryDatabase({ alone: true, make: true, doing: "restoring a backup" }),
    folder,
    { force: words.includes("--force") },
  );
});
