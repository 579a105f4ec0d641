import { IsNull, LessThan, MoreThan, type EntityManager } from "typeorm";

import { ApiToken } from "./apiToken.entity";

const DAY_MS = 86_400_000;
/** Days for which a token that ended is kept, so that whoever still sends it is told when it did. */
const ENDED_DAYS = 180;

/** How many tokens of a person work now. */
export function countLive(
  manager: EntityManager,
  ownerId: string,
  now = new Date(),
): Promise<number> {
  return manager.countBy(ApiToken, { ownerId, revokedAt: IsNull(), expiresAt: MoreThan(now) });
}

/** " Your API token goes on working; …", for what ends sessions and leaves tokens; or nothing. */
export function tokensGoOn(live: number): string {
  if (live === 0) return "";
  return live === 1
    ? " Your API token goes on working; revoke it if somebody else may have it."
    : ` Your ${live} API tokens go on working; revoke those that somebody else may have.`;
}

/** Ends all tokens of an account that somebody else had hold of. */
export async function revokeAll(manager: EntityManager, ownerId: string): Promise<void> {
  await manager.update(ApiToken, { ownerId, revokedAt: IsNull() }, { revokedAt: new Date() });
}

/** Forgets tokens that ended long ago. */
export async function sweepTokens(manager: EntityManager, now: Date): Promise<void> {
  const before = new Date(now.getTime() - ENDED_DAYS * DAY_MS);
  await manager.delete(ApiToken, { expiresAt: LessThan(before) });
  await manager.delete(ApiToken, { revokedAt: LessThan(before) });
}
