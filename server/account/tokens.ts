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

/**
 * Makes a link's token; older ones for the same purpose stop working. Only a way to object stays
 * open beside a newer one: who takes an account over must not close it by asking again.
 *
 * @param address - The mail address that the link is about, where it is about one.
 */
export async function issueToken(
  manager: EntityManager,
  userId: string,
  purpose: MailTokenPurpose,
  address: string | null = null,
): Promise<string> {
  const token = randomBytes(32).toString("base64url");
  if (purpose !== "objection") await manager.delete(MailToken, { userId, purpose });
  await manager.insert(MailToken, {
    hash: hashOf(token),
    purpose,
    userId,
    address,
    expiresAt: new Date(Date.now() + LIFETIME_MS[purpose]),
  });
  return token;
}

/** What a token stands for, without using it up; null when it is worth nothing. */
export async function readToken(
  manager: EntityManager,
  token: string,
  purpose: MailTokenPurpose,
): Promise<Pick<MailToken, "userId" | "address"> | null> {
  if (token.length > TOKEN_MAX) return null;
  return manager.findOneBy(MailToken, {
    hash: hashOf(token),
    purpose,
    expiresAt: MoreThan(new Date()),
  });
}

/** The person a token belongs to, without using it up; null when it is worth nothing. */
export async function tokenOwner(
  manager: EntityManager,
  token: string,
  purpose: MailTokenPurpose,
): Promise<string | null> {
  return (await readToken(manager, token, purpose))?.userId ?? null;
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
