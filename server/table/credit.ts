import { In, type EntityManager } from "typeorm";

import { User } from "~server/account/user.entity";
import type { ApprovedRow } from "~server/constraint/constraint.query";
import { FORMER_MEMBER } from "~shared/review/formerMember";

/** Who entered and who read each of these records, by the names as they stand now. */
export async function creditNames(
  manager: EntityManager,
  rows: readonly ApprovedRow[],
): Promise<(row: ApprovedRow) => { submittedBy: string; readBy: string }> {
  const ids = rows.flatMap(({ constraint, revision }) => [
    constraint.ownerId,
    ...(revision.decidedById === null ? [] : [revision.decidedById]),
  ]);
  const people = await manager.find(User, {
    select: { id: true, nameOnPapers: true },
    where: { id: In([...new Set(ids)]) },
  });
  const names = new Map(people.map((person) => [person.id, person.nameOnPapers]));
  return ({ constraint, revision }) => ({
    submittedBy: names.get(constraint.ownerId) ?? FORMER_MEMBER,
    readBy: names.get(revision.decidedById ?? "") ?? FORMER_MEMBER,
  });
}
