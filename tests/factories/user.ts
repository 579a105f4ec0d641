import { randomUUID } from "node:crypto";

import type { EntityManager } from "typeorm";

import { hashPassword } from "~server/account/password";
import { RoleGrant } from "~server/account/roleGrant.entity";
import { User } from "~server/account/user.entity";
import type { Role } from "~shared/review/states";

export const TEST_PASSWORD = "a foggy morning 7";

/** Cheap enough for a test to sign in a hundred times. */
export const TEST_PASSWORD_COST = { memoryKiB: 64, passes: 2 };

const hashes = new Map<string, Promise<string>>();

/** Makes a confirmed person with the given roles, kept in the database. */
export async function buildUser(
  manager: EntityManager,
  roles: readonly Role[] = [],
  overrides: Partial<
    Pick<User, "email" | "nameOnPapers" | "furtherNames" | "orcid" | "confirmedAt">
  > & {
    password?: string;
  } = {},
): Promise<User> {
  const { password = TEST_PASSWORD, ...given } = overrides;
  const hash = hashes.get(password) ?? hashPassword(TEST_PASSWORD_COST, password);
  hashes.set(password, hash);
  const user = await manager.save(
    manager.create(User, {
      email: `${randomUUID()}@fogline.example`,
      nameOnPapers: "Mirelle Ostrander",
      furtherNames: [],
      orcid: null,
      passwordHash: await hash,
      confirmedAt: new Date(),
      ...given,
    }),
  );
  for (const role of roles) {
    await manager.insert(RoleGrant, { userId: user.id, role, grantedById: null });
  }
  return manager.findOneOrFail(User, { where: { id: user.id }, relations: { roles: true } });
}
