import { In, type EntityManager } from "typeorm";

import { User } from "~server/account/user.entity";
import type { ApprovedRow } from "~server/constraint/constraint.query";
import { replacementsOf } from "~server/recordLife/notices";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";
import { FORMER_MEMBER } from "~shared/review/formerMember";

import { snapshotConstraint, type SnapshotConstraint } from "./snapshot";

/** Copies of these records: who entered and read each by the names of now, and what took its place. */
export async function copyRecords(
  manager: EntityManager,
  rows: readonly ApprovedRow[],
): Promise<SnapshotConstraint[]> {
  const names = await creditNames(manager, rows);
  const replaced = await replacementsOf(
    manager,
    rows.map(({ constraint }) => constraint.id),
  );
  return rows.map((row) => {
    const by = replaced.get(row.constraint.id);
    return snapshotConstraint(row, names(row), by === undefined ? null : formatRecordNumber(by));
  });
}

async function creditNames(
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
