import { randomBytes } from "node:crypto";

import type { EntityManager } from "typeorm";

import { Setting } from "./setting.entity";

const DEMONSTRATION = "demonstration";
const SESSION_SECRET = "sessionSecret";

/** True when the registry holds the invented demonstration data. */
export async function isDemonstration(manager: EntityManager): Promise<boolean> {
  return (await manager.findOneBy(Setting, { name: DEMONSTRATION })) !== null;
}

/** Labels this registry as holding invented data; the seed calls it in its transaction. */
export async function markDemonstration(manager: EntityManager): Promise<void> {
  await insertOnce(manager, DEMONSTRATION, new Date().toISOString());
}

/** Secret that signs session cookies: made once, the same for every process of this registry. */
export async function sessionSecret(manager: EntityManager): Promise<string> {
  await insertOnce(manager, SESSION_SECRET, randomBytes(32).toString("base64url"));
  return (await manager.findOneByOrFail(Setting, { name: SESSION_SECRET })).value;
}

async function insertOnce(manager: EntityManager, name: string, value: string): Promise<void> {
  await manager
    .createQueryBuilder()
    .insert()
    .into(Setting)
    .values({ name, value })
    .orIgnore()
    .execute();
}
