import { Not, type EntityManager } from "typeorm";

import { countLive, tokensGoOn } from "~server/apiToken/store";
import { requireViewer, type RequestContext } from "~server/common/context";
import { done, refuse, Refusal, type Done } from "~server/common/outcomes";
import { transact } from "~server/database/transaction";
import { queueMail } from "~server/mail/outbox";
import { limitKey, overLimit } from "~server/security/overLimit";
import { normalizeOrcid } from "~shared/identifiers/orcid";

import { viewerType, type Viewer } from "./account.type";
import { alreadyRegisteredMail, confirmMail, passwordChangedMail, resetMail } from "./mails";
import { MailToken } from "./mailToken.entity";
import { hashPassword, passwordMatches } from "./password";
import {
  emailProblem,
  furtherNamesOf,
  furtherNamesProblem,
  nameProblem,
  normalEmail,
  normalName,
  PASSWORD_MAX,
  passwordProblem,
} from "./rules";
import { issueToken, spendToken, tokenOwner } from "./tokens";
import { User } from "./user.entity";
import { viewerOf } from "./viewer";

export async function register(
  ctx: RequestContext,
  input: { email: string; nameOnPapers: string; password: string },
): Promise<Done | Refusal> {
  const nameOnPapers = normalName(input.nameOnPapers);
  const email = normalEmail(input.email);
  const problem =
    nameProblem(nameOnPapers) ??
    emailProblem(email) ??
    passwordProblem(input.password, email, "password") ??
    (await overLimit(ctx, [
      ["registerPerCaller", ctx.ip],
      ["mailPerAddress", email],
    ]));
  if (problem) return problem;

  const passwordHash = await hashPassword(ctx.config.passwordCost, input.password);
  await transact(
    ctx.database,
    (manager) =>
      storeRegistration(manager, ctx.config.publicUrl, { email, nameOnPapers, passwordHash }),
    // Two registrations of one address at once: the later one finds the account of the earlier.
    ["ER_DUP_ENTRY"],
  );
  return done(`We sent a mail to ${email}. Open the link in it to go on.`);
}

/** The same to see from outside, whether or not the address has an account. */
async function storeRegistration(
  manager: EntityManager,
  publicUrl: string,
  given: { email: string; nameOnPapers: string; passwordHash: string },
): Promise<void> {
  const existing = await manager.findOne(User, {
    where: { email: given.email },
    lock: { mode: "pessimistic_write" },
  });
  if (existing?.confirmedAt) {
    await queueMail(manager, alreadyRegisteredMail(existing, publicUrl));
    return;
  }
  // Until an address is confirmed, whoever registers it last is taken to be its owner: the link
  // goes to the address, and must not open an account whose password somebody else chose before.
  const id =
    existing?.id ??
    (await manager.insert(User, { ...given, furtherNames: [], confirmedAt: null, orcid: null }))
      .identifiers[0]?.id;
  if (existing) await manager.update(User, { id }, given);
  const token = await issueToken(manager, String(id), "confirm");
  await queueMail(manager, confirmMail(given, publicUrl, token));
}

export const BAD_LINK = "This link has been used already, or is too old. Ask for a new one.";

export async function confirmEmail(ctx: RequestContext, token: string): Promise<Done | Refusal> {
  return transact(ctx.database, async (manager) => {
    const userId = await tokenOwner(manager, token, "confirm");
    if (userId === null || !(await spendToken(manager, token, "confirm"))) {
      return refuse("LINK_INVALID", BAD_LINK);
    }
    await manager.update(User, { id: userId }, { confirmedAt: new Date() });
    return done("Your address is confirmed. You can sign in now.");
  });
}

export async function resendConfirmation(
  ctx: RequestContext,
  address: string,
): Promise<Done | Refusal> {
  const email = normalEmail(address);
  const problem = emailProblem(email) ?? (await mailLimit(ctx, email));
  if (problem) return problem;
  await transact(ctx.database, async (manager) => {
    const user = await manager.findOneBy(User, { email });
    if (!user || user.confirmedAt) return;
    const token = await issueToken(manager, user.id, "confirm");
    await queueMail(manager, confirmMail(user, ctx.config.publicUrl, token));
  });
  return done(`If ${email} waits to be confirmed, a new link is on its way to it.`);
}

export function mailLimit(ctx: RequestContext, email: string): Promise<Refusal | null> {
  return overLimit(ctx, [
    ["mailPerCaller", ctx.ip],
    ["mailPerAddress", email],
  ]);
}

export async function signIn(
  ctx: RequestContext,
  address: string,
  password: string,
): Promise<Viewer | Refusal> {
  const email = normalEmail(address);
  const over = await overLimit(ctx, [
    ["signInPerCaller", ctx.ip],
    ["signInPerAddress", email],
  ]);
  if (over) return over;

  const user = await ctx.database.manager.findOne(User, {
    where: { email: email.slice(0, 254) },
    relations: { roles: true },
  });
  // Twice the limit in code units: a character outside the basic plane takes two.
  const plausible = password.length <= 2 * PASSWORD_MAX;
  const matches =
    plausible &&
    (await passwordMatches(ctx.config.passwordCost, user?.passwordHash ?? null, password));
  if (!user || !matches) return refuse("SIGN_IN_WRONG", "The address or the password is wrong.");
  if (!user.confirmedAt) {
    return refuse(
      "NOT_CONFIRMED",
      "Confirm your address first: open the link in the mail we sent you, or ask for a new one.",
      "email",
    );
  }
  // Only failures count.
  await Promise.all([
    ctx.limits.signInPerAddress.forget(limitKey(email)),
    ctx.limits.signInPerCaller.giveBack(limitKey(ctx.ip)),
  ]);
  await ctx.signIn(user.id, user.sessionEpoch);
  return viewerType(viewerOf(user));
}

/** Ends every session of this person, the present one included: the epoch moves on. */
export async function signOutEverywhere(ctx: RequestContext): Promise<Done> {
  const { id } = requireViewer(ctx);
  await ctx.database.manager.increment(User, { id }, "sessionEpoch", 1);
  await ctx.signOut();
  return done("You are signed out on every device.");
}

/**
 * The signed-in person, if the present password is right. Wrong ones count like failed sign-ins:
 * a borrowed session must not be a way to try passwords.
 *
 * @param field - Name of the argument the password came in.
 */
export async function withOwnPassword(
  ctx: RequestContext,
  password: string,
  field: string,
): Promise<User | Refusal> {
  const viewer = requireViewer(ctx);
  const over = await overLimit(ctx, [["signInPerAddress", viewer.email]]);
  if (over) return over;
  const user = await ctx.database.manager.findOneByOrFail(User, { id: viewer.id });
  const matches =
    password.length <= 2 * PASSWORD_MAX &&
    (await passwordMatches(ctx.config.passwordCost, user.passwordHash, password));
  if (!matches) return refuse("PASSWORD_WRONG", "Your present password is not this one.", field);
  await ctx.limits.signInPerAddress.forget(limitKey(viewer.email));
  return user;
}

/**
 * Another password. Every other session ends with the old one. API tokens go on, and the answer and
 * the mail say so: they hold no password, pipelines rest on them, and each can be revoked by itself.
 */
export async function changePassword(
  ctx: RequestContext,
  current: string,
  next: string,
): Promise<Done | Refusal> {
  const viewer = requireViewer(ctx);
  const problem = passwordProblem(next, viewer.email, "next");
  if (problem) return problem;
  const user = await withOwnPassword(ctx, current, "current");
  if (user instanceof Refusal) return user;
  if (current === next) {
    return refuse("PASSWORD_SAME", "The new password is the old one.", "next");
  }
  const passwordHash = await hashPassword(ctx.config.passwordCost, next);
  const sessionEpoch = user.sessionEpoch + 1;
  const changed = await transact(ctx.database, async (manager) => {
    const { affected } = await manager
      .createQueryBuilder()
      .update(User)
      .set({ passwordHash, sessionEpoch })
      .where("id = :id and sessionEpoch = :epoch", { id: user.id, epoch: user.sessionEpoch })
      .execute();
    if (affected !== 1) return null;
    await manager.delete(MailToken, { userId: user.id, purpose: "reset" });
    const goOn = tokensGoOn(await countLive(manager, user.id));
    await queueMail(manager, passwordChangedMail(user, ctx.config.publicUrl, goOn));
    return goOn;
  });
  if (changed === null) {
    return refuse("PASSWORD_MOVED", "Your password was changed a moment ago. Sign in again.");
  }
  await ctx.signIn(user.id, sessionEpoch);
  return done(`Your password is changed, and your other sessions are ended.${changed}`);
}

export async function requestPasswordReset(
  ctx: RequestContext,
  address: string,
): Promise<Done | Refusal> {
  const email = normalEmail(address);
  const problem = emailProblem(email) ?? (await mailLimit(ctx, email));
  if (problem) return problem;
  await transact(ctx.database, async (manager) => {
    const user = await manager.findOneBy(User, { email });
    if (!user) return;
    const token = await issueToken(manager, user.id, "reset");
    await queueMail(manager, resetMail(user, ctx.config.publicUrl, token));
  });
  return done(`If ${email} has an account, a link to set a new password is on its way to it.`);
}

export async function resetPassword(
  ctx: RequestContext,
  token: string,
  next: string,
): Promise<Done | Refusal> {
  const { manager } = ctx.database;
  const userId = await tokenOwner(manager, token, "reset");
  const user = userId === null ? null : await manager.findOneBy(User, { id: userId });
  if (!user) return refuse("LINK_INVALID", BAD_LINK);
  // Before the link is used up: a password that is too short costs no new mail.
  const problem = passwordProblem(next, user.email, "next");
  if (problem) return problem;

  const passwordHash = await hashPassword(ctx.config.passwordCost, next);
  const changed = await transact(ctx.database, async (inside) => {
    if (!(await spendToken(inside, token, "reset"))) return null;
    await inside
      .createQueryBuilder()
      .update(User)
      .set({
        passwordHash,
        sessionEpoch: () => "sessionEpoch + 1",
        // The link came by mail, so it confirms the address too.
        confirmedAt: user.confirmedAt ?? new Date(),
      })
      .where("id = :id", { id: user.id })
      .execute();
    // A way to object against a change of address outlives whatever is done at the new one.
    await inside.delete(MailToken, { userId: user.id, purpose: Not("objection") });
    const goOn = tokensGoOn(await countLive(inside, user.id));
    await queueMail(inside, passwordChangedMail(user, ctx.config.publicUrl, goOn));
    return goOn;
  });
  if (changed === null) return refuse("LINK_INVALID", BAD_LINK);
  await ctx.limits.signInPerAddress.forget(limitKey(user.email));
  return done(`Your new password is set. You can sign in with it now.${changed}`);
}

export async function updateProfile(
  ctx: RequestContext,
  name: string,
  orcid: string | null,
  further: readonly string[] | null,
): Promise<Viewer | Refusal> {
  const viewer = requireViewer(ctx);
  const nameOnPapers = normalName(name);
  const furtherNames = furtherNamesOf(further ?? viewer.furtherNames, nameOnPapers);
  const problem = nameProblem(nameOnPapers) ?? furtherNamesProblem(furtherNames);
  if (problem) return problem;
  const given = orcid?.trim() ?? "";
  const normal = given === "" ? null : normalizeOrcid(given.slice(0, 100));
  if (given !== "" && normal === null) {
    return refuse(
      "ORCID_INVALID",
      "That is not an ORCID: sixteen characters in groups of four, the last one a check.",
      "orcid",
    );
  }
  const profile = { nameOnPapers, furtherNames, orcid: normal };
  await ctx.database.manager.update(User, { id: viewer.id }, profile);
  return viewerType({ ...viewer, ...profile });
}
