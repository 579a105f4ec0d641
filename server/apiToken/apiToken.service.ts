import { IsNull, type EntityManager } from "typeorm";

import { withOwnPassword } from "~server/account/account.service";
import { normalName } from "~server/account/rules";
import { User } from "~server/account/user.entity";
import { requireViewer, type RequestContext } from "~server/common/context";
import { done, refuse, Refusal, type Done } from "~server/common/outcomes";
import { acting, change } from "~server/event/acting";
import { overLimit } from "~server/security/overLimit";
import {
  MOST_TOKENS,
  TOKEN_DAYS,
  TOKEN_NAME_MAX,
  TOKEN_SCOPES,
  type TokenScope,
} from "~shared/review/tokenScopes";

import { ApiToken } from "./apiToken.entity";
import { tokenMadeMail } from "./mails";
import { hashOf, newSecret, startOf } from "./secret";
import { countLive } from "./store";

const DAY_MS = 86_400_000;

export interface TokenWish {
  name: string;
  scopes: readonly TokenScope[];
  days: number;
}

/** A person's tokens, newest first; those that ended among them, for a while. */
export function findTokens(manager: EntityManager, ownerId: string): Promise<ApiToken[]> {
  return manager.find(ApiToken, {
    where: { ownerId },
    order: { createdAt: "DESC", id: "ASC" },
  });
}

function wishProblem(name: string, { scopes, days }: TokenWish): Refusal | null {
  if (name === "") return refuse("NAME_MISSING", "Name the token after what uses it.", "name");
  if (name.length > TOKEN_NAME_MAX) {
    const sentence = `A token's name has at most ${TOKEN_NAME_MAX} characters.`;
    return refuse("NAME_TOO_LONG", sentence, "name");
  }
  if (/[\u0000-\u001f\u007f<>]/.test(name)) {
    return refuse("NAME_INVALID", "A name has no line breaks and no angle brackets.", "name");
  }
  if (scopes.length > TOKEN_SCOPES.length) {
    return refuse("SCOPES_INVALID", "Name each scope once.", "scopes");
  }
  if (!Number.isInteger(days) || days < 1 || days > TOKEN_DAYS.most) {
    const sentence = `A token lasts from 1 to ${TOKEN_DAYS.most} days.`;
    return refuse("DAYS_INVALID", sentence, "days");
  }
  return null;
}

/**
 * Makes a token for the signed-in person. The secret is in the answer and nowhere else: what is
 * kept is its SHA-256, which is enough for 256 random bits.
 */
export async function makeToken(
  ctx: RequestContext,
  wish: TokenWish,
  password: string,
): Promise<{ token: ApiToken; secret: string } | Refusal> {
  const name = normalName(wish.name);
  const problem = wishProblem(name, wish);
  if (problem) return problem;
  const owner = await withOwnPassword(ctx, password, "password");
  if (owner instanceof Refusal) return owner;
  const over = await overLimit(ctx, [["tokensPerPerson", owner.id]]);
  if (over) return over;

  const who = acting(ctx);
  const secret = newSecret();
  const expiresAt = new Date(who.now.getTime() + wish.days * DAY_MS);
  const scopes = TOKEN_SCOPES.filter((scope) => scope === "read" || wish.scopes.includes(scope));
  return change<{ token: ApiToken; secret: string } | Refusal>(who, async (here) => {
    const { manager } = here;
    // One at a time, or two could both be the last that is allowed.
    await manager.findOneOrFail(User, {
      where: { id: owner.id, formerAt: IsNull() },
      lock: { mode: "pessimistic_write" },
    });
    const live = await countLive(manager, owner.id, who.now);
    if (live >= MOST_TOKENS) {
      return refuse("TOO_MANY_TOKENS", `You have ${live} tokens. Revoke one first.`);
    }
    const { identifiers } = await manager.insert(ApiToken, {
      ownerId: owner.id,
      name,
      scopes,
      hash: hashOf(secret),
      start: startOf(secret),
      createdAt: who.now,
      expiresAt,
      lastUsedAt: null,
      revokedAt: null,
    });
    const id = String(identifiers[0]?.id);
    await here.event({
      kind: "apiToken.made",
      subject: `user:${owner.id}`,
      detail: { token: id, scopes, ends: expiresAt.toISOString().slice(0, 10) },
    });
    const token = await manager.findOneByOrFail(ApiToken, { id });
    await here.mail(tokenMadeMail(owner, token, who.publicUrl));
    return { token, secret };
  });
}

/** Ends one of the signed-in person's tokens, at once and for good. */
export async function revokeToken(ctx: RequestContext, id: string): Promise<Done | Refusal> {
  const ownerId = requireViewer(ctx).id;
  const who = acting(ctx);
  return change<Done | Refusal>(who, async (here) => {
    const token = await here.manager.findOneBy(ApiToken, { id, ownerId });
    if (!token) return refuse("NOT_FOUND", "You have no such token.");
    const { affected } = await here.manager.update(
      ApiToken,
      { id, revokedAt: IsNull() },
      { revokedAt: who.now },
    );
    // Two presses, or two windows: it is revoked, which is what was wanted.
    if (affected === 1) {
      await here.event({
        kind: "apiToken.revoked",
        subject: `user:${ownerId}`,
        detail: { token: id },
      });
    }
    return done(`The token “${token.name}” is revoked. Whatever uses it is refused from now on.`);
  });
}
