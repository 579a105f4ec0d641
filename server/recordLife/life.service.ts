import type { EntityManager } from "typeorm";

import { refuse, type Refusal } from "~server/common/outcomes";
import { Constraint } from "~server/constraint/constraint.entity";
import { passRelationGate, recordEdges, refuseCircle } from "~server/constraint/links";
import { change, type Acting, type Change } from "~server/event/acting";
import { digestOf } from "~server/event/eventLog";
import { isReadingBlind } from "~server/review/blindness";
import { findCircle } from "~shared/dependence/relation";
import { formatRecordNumber, parseRecordNumber } from "~shared/identifiers/recordNumber";
import { NOTICE_REASON, type NoticeKind } from "~shared/review/notice";

import { tellOfLife } from "./mails";
import { endNotice, lockRecords, openNotices, settleState } from "./notices";
import { RecordNotice } from "./recordNotice.entity";

const MOST_NOTICES = 50;

function reasonProblem(reason: string): Refusal | null {
  const { shortest, longest } = NOTICE_REASON;
  if (reason.length < shortest) {
    return refuse("reason", "Say why, so that a reader who finds it later understands.", "reason");
  }
  return reason.length > longest
    ? refuse("reason", `The reason has at most ${longest} characters.`, "reason")
    : null;
}

/** An approved record that this person may see, or a refusal. */
async function approvedRecord(
  manager: EntityManager,
  who: Acting,
  given: string,
  field: string,
): Promise<Constraint | Refusal> {
  const number = parseRecordNumber(given);
  const record = number === null ? null : await manager.findOneBy(Constraint, { id: number });
  if (!record || record.approvedRevisionId === null) {
    return refuse("notFound", `There is no approved record “${given.trim().slice(0, 40)}”.`, field);
  }
  if (await isReadingBlind(manager, who.viewer, record.id, who.now)) {
    const words = "You are reading this record yourself. Store that reading first.";
    return refuse("blind", words, field);
  }
  return record;
}

interface NewNotice {
  record: Constraint;
  kind: NoticeKind;
  reason: string;
  replacedById: number | null;
  revisionId: string | null;
}

const EVENTS: Record<NoticeKind, string> = {
  erratum: "record.erratum",
  superseded: "record.superseded",
  withdrawn: "record.withdrawn",
};

function happenedWords(kind: NoticeKind, replacedById: number | null): string {
  if (kind === "erratum") return "has an erratum";
  if (kind === "withdrawn") return "was withdrawn";
  return `was superseded by ${formatRecordNumber(replacedById ?? 1)}`;
}

/**
 * Keeps a notice with its event, state and mails; in the caller's transaction, behind the gate. The
 * event holds a digest of the reason, which may quote numbers that some reader must not see yet.
 */
export async function keepNotice(here: Change, who: Acting, notice: NewNotice): Promise<void> {
  const { record, kind, reason, replacedById, revisionId } = notice;
  await here.manager.insert(RecordNotice, {
    constraintId: record.id,
    kind,
    reason,
    replacedById,
    revisionId,
    byId: who.viewer.id,
    at: who.now,
    endedAt: null,
    endedById: null,
    endedReason: null,
  });
  await settleState(here.manager, record.id);
  await here.event({
    kind: EVENTS[kind],
    subject: formatRecordNumber(record.id),
    detail: {
      ...(replacedById === null ? {} : { replacedBy: formatRecordNumber(replacedById) }),
      reasonDigest: digestOf(reason),
    },
  });
  const words = happenedWords(kind, replacedById);
  await tellOfLife(here, who, { constraintId: record.id, words });
}

/** Records an erratum, a withdrawal, or what takes a record's place. */
export async function recordNotice(
  who: Acting,
  given: { number: string; kind: NoticeKind; reason: string; replacedBy?: string | null },
): Promise<number | Refusal> {
  const reason = given.reason.trim();
  const problem = reasonProblem(reason);
  if (problem) return problem;
  return change<number | Refusal>(who, async (here) => {
    const { manager } = here;
    await passRelationGate(manager);
    const found = await approvedRecord(manager, who, given.number, "number");
    if (!(found instanceof Constraint)) return found;
    const replacement =
      given.kind === "superseded"
        ? await approvedRecord(manager, who, given.replacedBy ?? "", "replacedBy")
        : null;
    if (replacement !== null && !(replacement instanceof Constraint)) return replacement;
    await lockRecords(manager, [found.id, ...(replacement ? [replacement.id] : [])]);
    // Read again now that nobody else changes it.
    const record = await manager.findOneByOrFail(Constraint, { id: found.id });
    const barred = await barredNotice(manager, who, record, given.kind, replacement);
    if (barred) return barred;
    const replacedById = replacement?.id ?? null;
    await keepNotice(here, who, {
      record,
      kind: given.kind,
      reason,
      replacedById,
      revisionId: null,
    });
    return record.id;
  });
}

async function barredNotice(
  manager: EntityManager,
  who: Acting,
  record: Constraint,
  kind: NoticeKind,
  replacement: Constraint | null,
): Promise<Refusal | null> {
  const number = formatRecordNumber(record.id);
  const open = await openNotices(manager, [record.id]);
  if (open.length >= MOST_NOTICES) return refuse("tooMany", `${number} has too many notices.`);
  if (record.state === "withdrawn") return refuse("state", `${number} is withdrawn already.`);
  if (kind !== "superseded" || !replacement) return null;
  const before = open.find((notice) => notice.kind === "superseded");
  if (before) {
    const other = formatRecordNumber(before.replacedById ?? 1);
    return refuse("state", `${number} is superseded by ${other} already.`);
  }
  if (replacement.id === record.id) {
    return refuse("replacedBy", "A record can't take its own place.", "replacedBy");
  }
  const other = formatRecordNumber(replacement.id);
  const { state } = await manager.findOneByOrFail(Constraint, { id: replacement.id });
  if (state === "withdrawn") {
    return refuse("replacedBy", `${other} is withdrawn: it can't take a place.`, "replacedBy");
  }
  const edges = await recordEdges(manager);
  const own = [
    ...edges.filter(({ from }) => from === replacement.id),
    { relation: "supersedes" as const, to: record.id },
  ];
  return refuseCircle(manager, who.viewer, findCircle(replacement.id, own, edges), who.now);
}

/** Takes a notice back, with a reason. It stays on record; the state follows from those that hold. */
export async function liftNotice(
  who: Acting,
  noticeId: number,
  givenReason: string,
): Promise<number | Refusal> {
  const reason = givenReason.trim();
  const problem = reasonProblem(reason);
  if (problem) return problem;
  return change<number | Refusal>(who, async (here) => {
    const { manager } = here;
    await passRelationGate(manager);
    const notice = await manager.findOneBy(RecordNotice, { id: noticeId });
    const blind =
      notice && (await isReadingBlind(manager, who.viewer, notice.constraintId, who.now));
    if (!notice || blind) return refuse("notFound", "There is no such notice.");
    await lockRecords(manager, [notice.constraintId]);
    const ended = await endNotice(manager, notice, { at: who.now, byId: who.viewer.id, reason });
    if (!ended) return refuse("stale", "It was taken back already. Reload the page.");
    await settleState(manager, notice.constraintId);
    await noteLifted(here, who, notice, reason);
    return notice.constraintId;
  });
}

/** The event and mails of a notice that holds no more. */
export async function noteLifted(
  here: Change,
  who: Acting,
  notice: RecordNotice,
  reason: string,
): Promise<void> {
  await here.event({
    kind: "record.noticeLifted",
    subject: formatRecordNumber(notice.constraintId),
    detail: {
      notice: notice.kind,
      ...(notice.replacedById === null
        ? {}
        : { replacedBy: formatRecordNumber(notice.replacedById) }),
      reasonDigest: digestOf(reason),
    },
  });
  const words: Record<NoticeKind, string> = {
    erratum: "has an erratum less",
    superseded: "is not superseded any more",
    withdrawn: "is not withdrawn any more",
  };
  await tellOfLife(here, who, { constraintId: notice.constraintId, words: words[notice.kind] });
}
