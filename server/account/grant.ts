import "reflect-metadata";

import { readConfig } from "~server/config/config";
import { createDataSource } from "~server/database/dataSource";
import { prepareDatabase } from "~server/database/prepare";
import { ROLES, type Role } from "~shared/review/states";

import { grantByAddress } from "./people.service";
import { normalEmail } from "./rules";

/**
 * `npm run grant -- ADDRESS ROLE`.
 *
 * @returns A sentence for the operator, and whether it is good news.
 */
export async function grant(
  args: readonly string[],
  env: Readonly<Record<string, string | undefined>>,
): Promise<{ ok: boolean; sentence: string }> {
  const [address, role] = args;
  if (address === undefined || !ROLES.includes(role as Role) || args.length !== 2) {
    return {
      ok: false,
      sentence: `Give an address and a role: npm run grant -- ADDRESS ${ROLES.join("|")}`,
    };
  }
  const dataSource = createDataSource(readConfig(env).databaseUrl);
  try {
    await prepareDatabase(dataSource);
    const email = normalEmail(address);
    const sentence = await grantByAddress(dataSource.manager, email, role as Role);
    return sentence === null
      ? { ok: false, sentence: `Nobody has registered ${email} yet. Register it first.` }
      : { ok: true, sentence };
  } finally {
    if (dataSource.isInitialized) await dataSource.destroy();
  }
}

if (require.main === module) {
  grant(process.argv.slice(2), process.env).then(
    ({ ok, sentence }) => {
      (ok ? process.stdout : process.stderr).write(`${sentence}\n`);
      process.exitCode = ok ? 0 : 1;
    },
    (error: unknown) => {
      process.stderr.write(`${error instanceof Error ? error.message : String(error)}\n`);
      process.exitCode = 1;
    },
  );
}
