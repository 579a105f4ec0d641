import { createHash } from "node:crypto";

import type { DataSource, EntityManager } from "typeorm";

import { hashPassword } from "~server/account/password";
import { RoleGrant } from "~server/account/roleGrant.entity";
import { User } from "~server/account/user.entity";
import { DEFAULT_PASSWORD_COST, type Config } from "~server/config/config";
import { Constraint } from "~server/constraint/constraint.entity";
import { markDemonstration } from "~server/database/settings";
import { appendEvent } from "~server/event/eventLog";

import { DEMONSTRATION_PASSWORD, PEOPLE, type PersonName } from "./people";
import { Teller } from "./teller";

/**
 * Fills an empty registry with the invented demonstration, in one transaction and through the same
 * services that people use, so that its event log is a real one. Does nothing when there is any
 * record. The story's days are fixed; only the claim under way is made now, lest it have run out.
 *
 * @returns Whether it did anything.
 */
export async function seedDemonstration(
  dataSource: DataSource,
  passwordCost: Config["passwordCost"] = DEFAULT_PASSWORD_COST,
  publicUrl = "",
): Promise<boolean> {
  return dataSource
    .transaction("READ COMMITTED", async (manager) => {
      // The first event locks the log's head: of two processes that seed, one waits and then finds records.
      await appendEvent(manager, {
        kind: "demonstration.seeded",
        actorId: null,
        subject: "registry",
        at: new Date("2026-01-12T08:00:00Z"),
      });
      if ((await manager.count(Constraint)) > 0) throw new AlreadyFilled();
      await markDemonstration(manager);
      await new Teller(manager, await createPeople(manager, passwordCost), publicUrl).tell();
      return true;
    })
    .catch((error: unknown) => {
      if (error instanceof AlreadyFilled) return false;
      throw error;
    });
}

class AlreadyFilled extends Error {}

/** The same id in every demonstration, so that two of them are alike. */
function stableId(word: string): string {
  const hex = createHash("sha256").update(`fogline demonstration: ${word}`).digest("hex");
  return `${hex.slice(0, 8)}-${hex.slice(8, 12)}-4${hex.slice(13, 16)}-8${hex.slice(17, 20)}-${hex.slice(20, 32)}`;
}

async function createPeople(
  manager: EntityManager,
  passwordCost: Config["passwordCost"],
): Promise<Map<PersonName, User>> {
  const joined = new Date("2026-01-12T09:00:00Z");
  const people = new Map<PersonName, User>();
  for (const [name, person] of Object.entries(PEOPLE) as [
    PersonName,
    (typeof PEOPLE)[PersonName],
  ][]) {
    const { email, nameOnPapers, roles } = person;
    const user = await manager.save(
      manager.create(User, {
        id: stableId(email),
        email,
        nameOnPapers,
        furtherNames: [],
        orcid: null,
        passwordHash: await hashPassword(passwordCost, DEMONSTRATION_PASSWORD),
        confirmedAt: joined,
        createdAt: joined,
      }),
    );
    for (const role of roles) {
      await manager.insert(RoleGrant, {
        userId: user.id,
        role,
        grantedById: null,
        grantedAt: joined,
      });
      await appendEvent(manager, {
        kind: "role.granted",
        actorId: null,
        subject: `user:${user.id}`,
        detail: { role },
        at: joined,
      });
    }
    people.set(name, user);
  }
  return people;
}
