import type { EntityManager } from "typeorm";

import { requireViewer, type RequestContext } from "~server/common/context";
import { forbidden } from "~server/common/errors";
import { refuse, type Refusal } from "~server/common/outcomes";
import { transact } from "~server/database/transaction";
import { appendEvent } from "~server/event/eventLog";
import { queueMail } from "~server/mail/outbox";
import type { Role } from "~shared/review/states";

import { personType, type Person } from "./account.type";
import { roleMail } from "./mails";
import { RoleGrant } from "./roleGrant.entity";
import { User } from "./user.entity";

const LISTED = 200;
const SEARCH_MAX = 100;

export async function findPeople(ctx: RequestContext, text: string): Promise<Person[]> {
  const wanted = text
    .trim()
    .slice(0, SEARCH_MAX)
    .replace(/[\\%_]/g, "\\$&");
  const query = ctx.database.manager
    .createQueryBuilder(User, "user")
    .leftJoinAndSelect("user.roles", "grant")
    .where("user.formerAt is null")
    .orderBy("user.nameOnPapers")
    .addOrderBy("user.email")
    .take(LISTED);
  if (wanted !== "") {
    query.andWhere("(user.nameOnPapers like :like or user.email like :mail)", {
      like: `%${wanted}%`,
      mail: `%${wanted.toLowerCase()}%`,
    });
  }
  return (await query.getMany()).map(personType);
}

const NOBODY = "There is no such person.";

export async function grantRole(
  ctx: RequestContext,
  personId: string,
  role: Role,
): Promise<Person | Refusal> {
  const viewer = requireViewer(ctx);
  return transact(ctx.database, async (manager) => {
    await requireMaintainer(manager, viewer.id);
    const user = await findPerson(manager, personId);
    if (!user) return refuse("NOT_FOUND", NOBODY);
    if (!user.confirmedAt) {
      return refuse("NOT_CONFIRMED", "This person has not confirmed the address yet.");
    }
    if (user.roles.some((grant) => grant.role === role)) return personType(user);
    await manager.insert(RoleGrant, { userId: user.id, role, grantedById: viewer.id });
    await record(manager, "granted", { actorId: viewer.id, user, role });
    return personType((await findPerson(manager, personId)) ?? user);
  });
}

export async function revokeRole(
  ctx: RequestContext,
  personId: string,
  role: Role,
): Promise<Person | Refusal> {
  const viewer = requireViewer(ctx);
  return transact(ctx.database, async (manager) => {
    const maintainers = await requireMaintainer(manager, viewer.id);
    const user = await findPerson(manager, personId);
    if (!user) return refuse("NOT_FOUND", NOBODY);
    if (!user.roles.some((grant) => grant.role === role)) return personType(user);
    if (role === "maintainer" && maintainers.length === 1) {
      return refuse(
        "LAST_MAINTAINER",
        "This is the last maintainer. Make somebody else a maintainer first.",
      );
    }
    await manager.delete(RoleGrant, { userId: user.id, role });
    await record(manager, "revoked", { actorId: viewer.id, user, role });
    return personType((await findPerson(manager, personId)) ?? user);
  });
}

/**
 * Locks the maintainers' rows until the transaction ends: changes of roles come one after the
 * other, so that two maintainers can't take the role from each other at once.
 */
async function requireMaintainer(manager: EntityManager, viewerId: string): Promise<RoleGrant[]> {
  const maintainers = await lockMaintainers(manager);
  if (!maintainers.some((grant) => grant.userId === viewerId)) throw forbidden();
  return maintainers;
}

/** Every maintainer's grant, locked until the transaction ends. */
export function lockMaintainers(manager: EntityManager): Promise<RoleGrant[]> {
  return manager
    .createQueryBuilder(RoleGrant, "grant")
    .setLock("pessimistic_write")
    .where("grant.role = :role", { role: "maintainer" })
    .orderBy("grant.userId")
    .getMany();
}

function findPerson(manager: EntityManager, id: string): Promise<User | null> {
  // Through the lock, so that it is the person of now and not of the transaction's first look.
  return manager
    .createQueryBuilder(User, "user")
    .setLock("pessimistic_write")
    .leftJoinAndSelect("user.roles", "grant")
    .where("user.id = :id and user.formerAt is null", { id })
    .getOne();
}

async function record(
  manager: EntityManager,
  change: "granted" | "revoked",
  { actorId, user, role }: { actorId: string | null; user: User; role: Role },
): Promise<void> {
  await appendEvent(manager, {
    kind: `role.${change}`,
    actorId,
    subject: `user:${user.id}`,
    detail: { role },
  });
  await queueMail(manager, roleMail(user, role, change));
}

/**
 * Gives a role from the command line, by address; this is how the first maintainer comes to be.
 * The operator vouches for the address, so it counts as confirmed.
 *
 * @returns What was done, in a sentence, or null when nobody has registered that address.
 */
export async function grantByAddress(
  manager: EntityManager,
  email: string,
  role: Role,
): Promise<string | null> {
  return transact(manager, async (inside) => {
    const found = await inside.findOneBy(User, { email });
    const user = found && (await findPerson(inside, found.id));
    if (!user) return null;
    if (!user.confirmedAt) {
      await inside.update(User, { id: user.id }, { confirmedAt: new Date() });
    }
    if (user.roles.some((grant) => grant.role === role)) return `${email} is ${role} already.`;
    await inside.insert(RoleGrant, { userId: user.id, role, grantedById: null });
    await record(inside, "granted", { actorId: null, user, role });
    return `${email} is now ${role}.`;
  });
}
