import { In, IsNull, type EntityManager } from "typeorm";

import { Constraint } from "~server/constraint/constraint.entity";
import { stateFromNotices } from "~shared/review/notice";

import { RecordNotice } from "./recordNotice.entity";

/** Notices of these records that hold, oldest first. */
export async function openNotices(
  manager: EntityManager,
  constraintIds: readonly number[],
): Promise<RecordNotice[]> {
  if (constraintIds.length === 0) return [];
  return manager.find(RecordNotice, {
    where: { constraintId: In([...constraintIds]), endedAt: IsNull() },
    order: { at: "ASC", id: "ASC" },
  });
}

/** Number of the record in the place of each superseded one; the latest, if several are. */
export async function replacementsOf(
  manager: EntityManager,
  constraintIds: readonly number[],
): Promise<Map<number, number>> {
  const found = new Map<number, number>();
  for (const { constraintId, replacedById } of await openNotices(manager, constraintIds)) {
    if (replacedById !== null) found.set(constraintId, replacedById);
  }
  return found;
}

/** Gives a record the state that follows from its notices. Behind the relation gate. */
export async function settleState(manager: EntityManager, constraintId: number): Promise<void> {
  const notices = await openNotices(manager, [constraintId]);
  const state = stateFromNotices(notices.map(({ kind }) => kind));
  await manager.update(Constraint, { id: constraintId }, { state });
}

/** Locks rows of records, always by ascending number, so that no two who do it wait for each other. */
export async function lockRecords(
  manager: EntityManager,
  constraintIds: readonly number[],
): Promise<void> {
  await manager
    .createQueryBuilder(Constraint, "record")
    .select("record.id")
    .setLock("pessimistic_write")
    .where("record.id IN (:...ids)", { ids: [...new Set(constraintIds), 0] })
    .orderBy("record.id", "ASC")
    .getMany();
}

/** Ends a notice unless somebody has done so before. */
export async function endNotice(
  manager: EntityManager,
  notice: Pick<RecordNotice, "id">,
  how: { at: Date; byId: string; reason: string },
): Promise<boolean> {
  const { affected } = await manager.update(
    RecordNotice,
    { id: notice.id, endedAt: IsNull() },
    { endedAt: how.at, endedById: how.byId, endedReason: how.reason },
  );
  return affected === 1;
}
