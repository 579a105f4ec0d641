import "reflect-metadata";

import { text } from "node:stream/consumers";

import { readConfig } from "~server/config/config";
import { createDataSource } from "~server/database/dataSource";
import { connectDatabase } from "~server/database/prepare";
import { verifyEvidence } from "~server/evidence/verifyEvidence";

import type { Anchor } from "./anchors";
import { verifyLog } from "./verifyLog";

/**
 * `npm run verify-log`, behind the script that finds the database: heads kept outside of it come
 * as JSON on the input. It changes nothing, the schema included.
 */
async function main(): Promise<void> {
  const anchors = JSON.parse(await text(process.stdin)) as Anchor[];
  const dataSource = createDataSource(readConfig(process.env).databaseUrl);
  try {
    await connectDatabase(dataSource);
    const { holds, lines } = await verifyLog(dataSource.manager, anchors);
    const { files, problems } = await verifyEvidence(dataSource.manager);
    if (files > 0 && problems.length === 0) lines.push(`The evidence holds: ${files} files.`);
    process.stdout.write(`${[...lines, ...problems].join("\n")}\n`);
    if (!holds || problems.length > 0) process.exitCode = 1;
  } finally {
    if (dataSource.isInitialized) await dataSource.destroy();
  }
}

main().catch((error: unknown) => {
  const missing = (error as { code?: string }).code === "ER_NO_SUCH_TABLE";
  const sentence = error instanceof Error ? error.message : String(error);
  process.stderr.write(`${missing ? "This database holds no registry." : sentence}\n`);
  process.exitCode = 2;
});
