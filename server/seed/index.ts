import "reflect-metadata";

import { readConfig } from "~server/config/config";
import { createDataSource } from "~server/database/dataSource";
import { prepareDatabase } from "~server/database/prepare";

import { seedDemonstration } from "./demonstration";

export { seedDemonstration } from "./demonstration";

/** `node -r @swc-node/register server/seed/index.ts`, with DATABASE_URL set. */
async function main(): Promise<void> {
  const config = readConfig(process.env);
  const dataSource = createDataSource(config.databaseUrl);
  try {
    await prepareDatabase(dataSource);
    const seeded = await seedDemonstration(dataSource, config.passwordCost, config.publicUrl);
    process.stdout.write(
      seeded
        ? "The demonstration is in place.\n"
        : "There are records already: nothing was added.\n",
    );
  } finally {
    if (dataSource.isInitialized) await dataSource.destroy();
  }
}

if (require.main === module) {
  main().catch((error: unknown) => {
    process.stderr.write(`${error instanceof Error ? error.message : String(error)}\n`);
    process.exitCode = 1;
  });
}
