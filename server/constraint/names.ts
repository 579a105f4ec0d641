import { In } from "typeorm";

import { User } from "~server/account/user.entity";
import type { RequestContext } from "~server/common/context";
import { FORMER_MEMBER } from "~shared/review/formerMember";

import { batched, perRequest } from "./batch";

/** Name on papers of a person, by id; people are looked up together. */
export const nameOf = perRequest((ctx: RequestContext) => {
  const load = batched<string, string>(async (ids) => {
    const people = await ctx.database.manager.find(User, {
      select: { id: true, nameOnPapers: true },
      where: { id: In([...ids]) },
    });
    return new Map(people.map((person) => [person.id, person.nameOnPapers]));
  });
  return async (id: string | null): Promise<string> =>
    (id === null ? undefined : await load(id)) ?? FORMER_MEMBER;
});
