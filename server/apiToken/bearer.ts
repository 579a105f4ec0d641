import { timingSafeEqual } from "node:crypto";

import type { RequestHandler } from "express";
import type { DataSource } from "typeorm";

import { viewerOf } from "~server/account/viewer";
import type { TokenIdentity, ViewerIdentity } from "~server/common/context";
import { HttpProblem } from "~server/common/errors";
import { tooMany } from "~server/security/limitTo";
import { limitKey } from "~server/security/overLimit";
import type { RateLimits } from "~server/security/rateLimits";

import { ApiToken } from "./apiToken.entity";
import * as refusals from "./refusals";
import { hashOf, isWellFormed } from "./secret";

declare module "express-serve-static-core" {
  interface Request {
    /** The person behind a valid API token, and what the token may do. */
    bearer?: { viewer: ViewerIdentity; token: TokenIdentity };
  }
}

/** Schemes of servers in front of us, which pass them on; they are no business of ours. */
const OTHERS = /^(?:Basic|Digest|Negotiate|NTLM)\s/i;
const BEARER = /^Bearer +(\S+) *$/i;
/** How coarse the time of last use is. */
const USE_MS = 60_000;

/**
 * Takes `Authorization: Bearer fgl_…`. With a token the cookie is ignored, so that a program has
 * what its token gives and nothing else; a token that opens nothing is an error, never a stranger.
 * Callers who fail too often wait, with right tokens too: else the wait would tell right from wrong.
 */
export function bearer(database: DataSource, limits: RateLimits): RequestHandler {
  return async (req, _res, next) => {
    const header = req.get("authorization");
    if (header === undefined || OTHERS.test(header)) {
      next();
      return;
    }
    delete req.headers.cookie;
    const caller = limitKey(req.ip ?? "unknown");
    const wait = await limits.tokenFailure.peek(caller);
    if (wait > 0) throw tooMany(wait);
    try {
      const [, secret = ""] = BEARER.exec(header) ?? [];
      req.bearer = await opened(database, secret);
    } catch (problem) {
      if (problem instanceof HttpProblem) await limits.tokenFailure.take(caller);
      throw problem;
    }
    next();
  };
}

/** Who a token stands for. @throws {HttpProblem} that says why it opens nothing. */
async function opened(
  { manager }: DataSource,
  secret: string,
): Promise<{ viewer: ViewerIdentity; token: TokenIdentity }> {
  if (!isWellFormed(secret)) throw refusals.malformed();
  const hash = hashOf(secret);
  const found = await manager.findOne(ApiToken, {
    where: { hash },
    relations: { owner: { roles: true } },
  });
  // The index finds by a hash that nobody can steer; compared once more without regard to its bytes.
  if (!found || !timingSafeEqual(Buffer.from(found.hash), Buffer.from(hash))) {
    throw refusals.unknown();
  }
  if (found.owner.formerAt !== null) throw refusals.unknown();
  if (found.revokedAt) throw refusals.revoked(found.revokedAt);
  const now = new Date();
  if (found.expiresAt <= now) throw refusals.expired(found.expiresAt);
  if (!found.lastUsedAt || now.getTime() - found.lastUsedAt.getTime() >= USE_MS) {
    await manager.update(ApiToken, { id: found.id }, { lastUsedAt: now });
  }
  return { viewer: viewerOf(found.owner), token: { id: found.id, scopes: found.scopes } };
}
