import { createHash, randomBytes } from "node:crypto";

import { MoreThan, type EntityManager } from "typeorm";

import { MailToken, type MailTokenPurpose } from "./mailToken.entity";

const HOUR_MS = 3_600_000;

const LIFETIME_MS: Record<MailTokenPurpose, number> = {
  confirm: 48 * HOUR_MS,
  reset: HOUR_MS,
  address: 48 * HOUR_MS,
  objection: 14 * 24 * HOUR_MS,
};

/** Longer than any token of ours; anything beyond is not worth hashing. */
const TOKEN_MAX = 200;

function hashOf(token: string): string {
  return createHash("sha256").update(token, "utf8").digest("hex");
}

/** Makes a link's token; older ones for the same purpose stop working. */
export async function issueToken(
  manager: EntityManager,
  userId: string,
  purpose: MailTokenPurpose,
): Promise<string> {
  const token = randomBytes(32).toString("base64url");
  await manager.delete(MailToken, { userId, purpose });
  await manager.insert(MailToken, {
    hash: hashOf(token),
    purpose,
    userId,
    expiresAt: new Date(Date.now() + LIFETIME_MS[purpose]),
  });
  return token;
}

/** The person a token belongs to, without using it up; null when it is worth nothing. */
export async function tokenOwner(
  manager: EntityManager,
  token: string,
  purpose: MailTokenPurpose,
): Promise<string | null> {
  if (token.length > TOKEN_MAX) return null;
  const row = await manager.findOneBy(MailToken, {
    hash: hashOf(token),
    purpose,
    expiresAt: MoreThan(new Date()),
  });
  return row?.userId ?? null;
}

/** Uses a token up. Of two who try at once, one is told true. */
export async function spendToken(
  manager: EntityManager,
  token: string,
  purpose: MailTokenPurpose,
): Promise<boolean> {
  const { affected } = await manager.delete(MailToken, {
    hash: hashOf(token),
    purpose,
    expiresAt: MoreThan(new Date()),
  });
  return affected === 1;
}
