import { createHash, createHmac, randomBytes, timingSafeEqual } from "node:crypto";

import type { EntityManager } from "typeorm";

import { sessionSecret } from "~server/database/settings";

/** "<random>.<signature>": longer texts are not worth looking at. */
const TOKEN = /^([\w-]{32})\.([\w-]{43})$/;

async function signature(manager: EntityManager, random: string): Promise<string> {
  const secret = await sessionSecret(manager);
  // The purpose is signed too: what opens a check opens nothing else.
  return createHmac("sha256", secret).update(`author check:${random}`).digest("base64url");
}

/** SHA-256 of a token, which is all that is stored of it. */
export function tokenHash(token: string): string {
  return createHash("sha256").update(token, "utf8").digest("hex");
}

/** A new link's token: 192 random bits, signed. */
export async function newToken(manager: EntityManager): Promise<string> {
  const random = randomBytes(24).toString("base64url");
  return `${random}.${await signature(manager, random)}`;
}

/** What a token is looked up by; null when it was not made here, without asking for it. */
export async function hashOfToken(manager: EntityManager, token: string): Promise<string | null> {
  const [, random, given] = TOKEN.exec(token) ?? [];
  if (random === undefined || given === undefined) return null;
  const expected = await signature(manager, random);
  return timingSafeEqual(Buffer.from(given), Buffer.from(expected)) ? tokenHash(token) : null;
}
