import { createHmac, timingSafeEqual } from "node:crypto";

import type { EntityManager } from "typeorm";

import { sessionSecret } from "~server/database/settings";

/** "<report id>.<signature>": longer texts are not worth looking at. */
const TOKEN = /^([0-9a-f]{8}(?:-[0-9a-f]{4}){3}-[0-9a-f]{12})\.([\w-]{43})$/;

async function signature(manager: EntityManager, reportId: string): Promise<string> {
  const secret = await sessionSecret(manager);
  // The purpose is signed too: what opens a report opens nothing else.
  return createHmac("sha256", secret).update(`error report:${reportId}`).digest("base64url");
}

/** The token by which whoever reported an error finds the answer; the same one every time. */
export async function reportToken(manager: EntityManager, reportId: string): Promise<string> {
  return `${reportId}.${await signature(manager, reportId)}`;
}

/** The report a token opens; null when it was not made here. */
export async function reportOfToken(manager: EntityManager, token: string): Promise<string | null> {
  const [, reportId, given] = TOKEN.exec(token) ?? [];
  if (reportId === undefined || given === undefined) return null;
  const expected = await signature(manager, reportId);
  return timingSafeEqual(Buffer.from(given), Buffer.from(expected)) ? reportId : null;
}
