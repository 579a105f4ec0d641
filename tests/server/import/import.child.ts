import "reflect-metadata";

import { User } from "~server/account/user.entity";
import { createDataSource } from "~server/database/dataSource";
import { runImport } from "~server/import/import.service";

/*
 * Imports in a process of its own, so that a test can kill it.
 * Arguments: owner, upload of the list, upload of the bibliography.
 */
async function main(): Promise<void> {
  const [ownerId = "", csvUploadId = "", bibUploadId = ""] = process.argv.slice(2);
  const database = createDataSource(process.env.DATABASE_URL ?? "");
  await database.initialize();
  const user = await database.manager.findOneByOrFail(User, { id: ownerId });
  const { id, email, nameOnPapers, furtherNames, orcid } = user;
  const outcome = await runImport(
    {
      database,
      viewer: { id, email, nameOnPapers, furtherNames, orcid, roles: ["contributor"] },
      now: new Date(),
      licence: "CC BY 4.0",
      publicUrl: "http://fogline.test",
      sendsMail: false,
    },
    { csvUploadId, bibUploadId },
  );
  process.stdout.write(JSON.stringify(outcome));
  await database.destroy();
}

void main();
