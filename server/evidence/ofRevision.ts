import { randomUUID } from "node:crypto";

import type { EntityManager } from "typeorm";

import { Evidence } from "./evidence.entity";
import { forgetUnused } from "./store";

/** The files of a revision, oldest first. */
export async function evidenceOf(manager: EntityManager, revisionId: string): Promise<Evidence[]> {
  return manager.find(Evidence, {
    where: { revisionId },
    relations: { file: true },
    order: { at: "ASC", id: "ASC" },
  });
}

/** A new revision of a record begins with the files of the one before. Runs in the caller's transaction. */
export async function carryEvidenceOver(
  manager: EntityManager,
  fromRevisionId: string,
  toRevisionId: string,
): Promise<void> {
  for (const { digest, name, caption, uploadedById, at } of await evidenceOf(
    manager,
    fromRevisionId,
  )) {
    await manager.insert(Evidence, {
      id: randomUUID(),
      ...{ revisionId: toRevisionId, digest, name, caption, uploadedById, at },
    });
  }
}

/** Whether two revisions keep the same files with the same captions. */
export async function hasSameEvidence(
  manager: EntityManager,
  one: string,
  other: string,
): Promise<boolean> {
  const told = async (id: string): Promise<string> =>
    JSON.stringify(
      (await evidenceOf(manager, id)).map(({ digest, caption }) => [digest, caption]).sort(),
    );
  return (await told(one)) === (await told(other));
}

/** With a draft that is put aside its files go; it was never shown to anybody. */
export async function dropEvidence(manager: EntityManager, revisionId: string): Promise<void> {
  const there = await evidenceOf(manager, revisionId);
  await manager.delete(Evidence, { revisionId });
  await forgetUnused(
    manager,
    there.map(({ digest }) => digest),
  );
}
