import type { Request, Response } from "express";
import type { DataSource } from "typeorm";

import { User } from "~server/account/user.entity";
import { viewerOf } from "~server/account/viewer";
import { BEARER_CHALLENGE, closedToTokens, withoutScope } from "~server/apiToken/refusals";
import type { RequestContext, ViewerIdentity } from "~server/common/context";
import { HttpProblem } from "~server/common/errors";
import type { Config } from "~server/config/config";
import type { RateLimits } from "~server/security/rateLimits";
import { useKeptVocabulary } from "~server/method/vocabulary";
import { may, type Action } from "~shared/review/policy";
import { SCOPE_OF } from "~shared/review/tokenScopes";

import { requestId } from "./requestId";
import { endSession, SESSION_COOKIE, startSession } from "./session";

export interface ContextParts {
  config: Config;
  database: DataSource;
  limits: RateLimits;
}

/** Who asks, and what the answer may use. The person is read anew for each request. */
export async function buildContext(
  parts: ContextParts,
  req: Request,
  res: Response,
): Promise<RequestContext> {
  await useKeptVocabulary(parts.database.manager);
  return {
    requestId: requestId(),
    ip: req.ip ?? "unknown",
    viewer: req.bearer?.viewer ?? (await findViewer(parts.database, req)),
    token: req.bearer?.token ?? null,
    foreign: req.foreign === true,
    database: parts.database,
    config: parts.config,
    limits: parts.limits,
    signIn: (userId, epoch) => startSession(req, userId, epoch),
    signOut: async () => {
      await endSession(req);
      res.clearCookie(SESSION_COOKIE, { httpOnly: true, sameSite: "lax", path: "/" });
    },
  };
}

async function findViewer(database: DataSource, req: Request): Promise<ViewerIdentity | null> {
  const userId = req.session?.userId;
  if (userId === undefined) return null;
  const user = await database.manager.findOne(User, {
    where: { id: userId },
    relations: { roles: true },
  });
  // A changed or reset password moves the epoch on, and every older session ends with it.
  if (!user || user.sessionEpoch !== req.session.epoch) return null;
  return viewerOf(user);
}

/** Guard of a plain HTTP address, with the answers that GraphQL's guard gives. */
export function requireMay(ctx: RequestContext, action: Action): ViewerIdentity {
  if (!ctx.viewer) {
    throw new HttpProblem(401, "UNAUTHENTICATED", "Sign in first.", BEARER_CHALLENGE);
  }
  if (ctx.token) {
    const scope = SCOPE_OF[action];
    if (scope === null) throw closedToTokens();
    if (!ctx.token.scopes.includes(scope)) throw withoutScope(scope);
  }
  if (!may(action, ctx.viewer.roles)) {
    throw new HttpProblem(403, "FORBIDDEN", "Your account may not do this.");
  }
  return ctx.viewer;
}
