import { IsNull, type EntityManager } from "typeorm";

import { revokeAll } from "~server/apiToken/store";
import type { RequestContext } from "~server/common/context";
import { done, refuse, Refusal, type Done } from "~server/common/outcomes";
import { transact } from "~server/database/transaction";
import { appendEvent } from "~server/event/eventLog";
import { queueMail } from "~server/mail/outbox";

import { BAD_LINK, mailLimit, withOwnPassword } from "./account.service";
import { addressChangeMail, addressTakenMail, newAddressMail, resetMail } from "./mails";
import { MailToken } from "./mailToken.entity";
import { emailProblem, normalEmail } from "./rules";
import { issueToken, readToken, spendToken } from "./tokens";
import { User } from "./user.entity";

/**
 * Asks for another mail address. The new one gets a link that completes the change, the present
 * one a notice with a way to object. Nothing differs, to see from outside, when the new address
 * has an account already: then its owner is told instead.
 */
export async function requestAddressChange(
  ctx: RequestContext,
  given: string,
  password: string,
): Promise<Done | Refusal> {
  const address = normalEmail(given);
  const problem = emailProblem(address);
  if (problem) return problem;
  const user = await withOwnPassword(ctx, password, "password");
  if (user instanceof Refusal) return user;
  if (address === user.email) {
    return refuse("ADDRESS_SAME", "This is your address already.", "email");
  }
  const over = await mailLimit(ctx, address);
  if (over) return over;
  const { publicUrl } = ctx.config;
  await transact(ctx.database, async (manager) => {
    const taken = await confirmedOwner(manager, address);
    if (taken) await queueMail(manager, addressTakenMail(taken, publicUrl));
    else {
      const token = await issueToken(manager, user.id, "address", address);
      await queueMail(manager, newAddressMail(user, address, publicUrl, token));
    }
    const objection = await issueToken(manager, user.id, "objection", user.email);
    await queueMail(manager, addressChangeMail(user, address, publicUrl, objection));
  });
  return done(
    `We sent a mail to ${address}. Open the link in it to complete the change; until then your present address stays.`,
  );
}

function confirmedOwner(manager: EntityManager, email: string): Promise<User | null> {
  return manager
    .createQueryBuilder(User, "user")
    .where("user.email = :email and user.confirmedAt is not null", { email })
    .getOne();
}

/** Completes a change of address; the link came to the new one, which proves whose it is. */
export async function confirmAddressChange(
  ctx: RequestContext,
  token: string,
): Promise<Done | Refusal> {
  return transact<Done | Refusal>(
    ctx.database,
    async (manager) => {
      const asked = await readToken(manager, token, "address");
      if (!asked?.address || !(await spendToken(manager, token, "address"))) {
        return refuse("LINK_INVALID", BAD_LINK);
      }
      const { userId, address } = asked;
      if (!(await moveTo(manager, userId, address))) return refuse("LINK_INVALID", BAD_LINK);
      // What was sent to the old address opens nothing any more.
      await manager.delete(MailToken, { userId, purpose: "reset" });
      await appendEvent(manager, {
        kind: "account.addressChanged",
        actorId: userId,
        subject: `user:${userId}`,
      });
      return done("Your new address is confirmed. Sign in with it from now on.");
    },
    ["ER_DUP_ENTRY"],
  );
}

/** Gives the account this address, unless somebody else has confirmed it meanwhile. */
async function moveTo(manager: EntityManager, userId: string, email: string): Promise<boolean> {
  if (await confirmedOwner(manager, email)) return false;
  // A registration that nobody confirmed holds nothing, and its link went to this same mailbox.
  await manager.delete(User, { email, confirmedAt: IsNull() });
  const { affected } = await manager.update(User, { id: userId, formerAt: IsNull() }, { email });
  return affected === 1;
}

/**
 * The owner of the old address objects: the change is stopped or undone, every session and API
 * token ends, and a link to set a new password goes to the old address, since whoever asked knew the present one.
 */
export async function objectToAddressChange(
  ctx: RequestContext,
  token: string,
): Promise<Done | Refusal> {
  return transact<Done | Refusal>(ctx.database, async (manager) => {
    const objection = await readToken(manager, token, "objection");
    const user = objection && (await manager.findOneBy(User, { id: objection.userId }));
    if (!objection?.address || !user || user.formerAt !== null) {
      return refuse("LINK_INVALID", BAD_LINK);
    }
    const { address } = objection;
    if (user.email !== address && !(await moveTo(manager, user.id, address))) {
      return refuse(
        "ADDRESS_TAKEN",
        "This address has another account by now. Ask a maintainer of the registry for help.",
      );
    }
    if (!(await spendToken(manager, token, "objection"))) return refuse("LINK_INVALID", BAD_LINK);
    await manager.increment(User, { id: user.id }, "sessionEpoch", 1);
    await revokeAll(manager, user.id);
    await manager.delete(MailToken, { userId: user.id, purpose: "address" });
    const reset = await issueToken(manager, user.id, "reset");
    await queueMail(manager, resetMail({ ...user, email: address }, ctx.config.publicUrl, reset));
    await appendEvent(manager, {
      kind: user.email === address ? "account.addressChangeStopped" : "account.addressRestored",
      actorId: user.id,
      subject: `user:${user.id}`,
    });
    return done(
      `Your account stays with ${address}, every session is ended and every API token revoked. A link to set a new password is on its way there.`,
    );
  });
}
