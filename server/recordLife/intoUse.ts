import { IsNull, type EntityManager } from "typeorm";

import type { Refusal } from "~server/common/outcomes";
import { refuseSecondPreferred } from "~server/constraint/alternatives";
import { Constraint } from "~server/constraint/constraint.entity";
import { passRelationGate, linksIn, refuseLinks } from "~server/constraint/links";
import type { Revision } from "~server/constraint/revision.entity";
import type { Acting, Change } from "~server/event/acting";
import { keepNames } from "~server/namedData/keepNames";
import { formatQuotable, formatRecordNumber } from "~shared/identifiers/recordNumber";

import { keepNotice, noteLifted } from "./life.service";
import { endNotice, lockRecords, openNotices, settleState } from "./notices";
import { RecordNotice } from "./recordNotice.entity";

/** Relations by whose approval the record named is superseded. */
const TAKES_PLACE = ["supersedes", "erratumOf"] as const;

/**
 * Why a revision can't come into use for what it names, or null. Whoever gets null holds the gate, and
 * the rows of the records concerned: of two whose links close a circle together, the second is refused.
 */
export async function refuseIntoUse(
  here: Change,
  who: Acting,
  revision: Revision,
): Promise<Refusal | null> {
  const { manager } = here;
  await passRelationGate(manager);
  const second = await refuseSecondPreferred(manager, revision);
  if (second) return second;
  const record = { id: revision.constraintId, fields: revision.fields };
  const linked = await refuseLinks(manager, who.viewer, record, "approval", who.now);
  if (linked) return linked;
  const said = await saidBy(manager, revision.constraintId);
  await lockRecords(manager, [
    revision.constraintId,
    ...placesTaken(revision).keys(),
    ...said.map(({ constraintId }) => constraintId),
  ]);
  return null;
}

/** Records whose place a revision takes, each with the relation that says so. */
function placesTaken(revision: Revision): Map<number, (typeof TAKES_PLACE)[number]> {
  const taken = new Map<number, (typeof TAKES_PLACE)[number]>();
  for (const { relation, targetId } of linksIn(revision.fields)) {
    const takes = TAKES_PLACE.find((one) => one === relation);
    if (takes && targetId !== null && !taken.has(targetId)) taken.set(targetId, takes);
  }
  return taken;
}

/** Notices by which other records are superseded by this one. */
async function saidBy(manager: EntityManager, constraintId: number): Promise<RecordNotice[]> {
  return manager.find(RecordNotice, {
    where: { replacedById: constraintId, endedAt: IsNull() },
    order: { constraintId: "ASC", id: "ASC" },
  });
}

/**
 * What follows from a revision's coming into use, in the transaction of its approval: names new to the
 * registry become things, errata of the record are corrected, and records whose place it takes are
 * superseded; those that an earlier revision superseded, and this one doesn't, are current again.
 * After `refuseIntoUse`, whose locks it relies on.
 */
export async function comeIntoUse(here: Change, who: Acting, revision: Revision): Promise<void> {
  const { manager } = here;
  await keepNames(here, revision.fields);
  const quotable = formatQuotable(revision.constraintId, revision.ordinal);
  await endErrata(here, who, revision, `Corrected by ${quotable}.`);

  const taken = placesTaken(revision);
  const said = await saidBy(manager, revision.constraintId);
  for (const notice of said) {
    // What a maintainer recorded stands until a maintainer takes it back.
    if (notice.revisionId === null || taken.has(notice.constraintId)) continue;
    const reason = `${quotable} doesn't take its place any more.`;
    await endNotice(manager, notice, { at: who.now, byId: who.viewer.id, reason });
    await settleState(manager, notice.constraintId);
    await noteLifted(here, who, notice, reason);
  }
  for (const [constraintId, relation] of [...taken].sort(([a], [b]) => a - b)) {
    if (said.some((notice) => notice.constraintId === constraintId)) continue;
    const record = await manager.findOneByOrFail(Constraint, { id: constraintId });
    const number = formatRecordNumber(revision.constraintId);
    await keepNotice(here, who, {
      record,
      kind: "superseded",
      reason:
        relation === "erratumOf"
          ? `${number} is the erratum of its authors.`
          : `${number} takes its place, as its paper says.`,
      replacedById: revision.constraintId,
      revisionId: revision.id,
    });
  }
}

async function endErrata(
  here: Change,
  who: Acting,
  revision: Revision,
  reason: string,
): Promise<void> {
  const open = await openNotices(here.manager, [revision.constraintId]);
  for (const notice of open) {
    if (notice.kind !== "erratum") continue;
    await endNotice(here.manager, notice, { at: who.now, byId: who.viewer.id, reason });
  }
}
