"use strict";
require("./lib/nodeVersion").requireNode20();
require("./lib/program").program(async () => {
  const { writeBackup } = require("./lib/backup");
  const { registryDatabase } = require("./lib/withDatabase");
  const folder = process.argv[2];
  if (!folder)
    throw new (require("./lib/failure").PlainFailure)("Say where to: npm run backup -- FOLDER");
  await writeBackup(await registryDatabase({ doing: "making a backup" }), folder);
});
