import type { EntityManager } from "typeorm";

import { RoleGrant } from "~server/account/roleGrant.entity";
import { User } from "~server/account/user.entity";
import { done, refuse, type Done, type Refusal } from "~server/common/outcomes";
import { loadRevision, reload, updateAt } from "~server/constraint/draft.service";
import { Revision } from "~server/constraint/revision.entity";
import { change, type Acting, type Change } from "~server/event/acting";
import { appendEvent } from "~server/event/eventLog";
import { formatQuotable } from "~shared/identifiers/recordNumber";
import { CLAIM_HOURS, MOST_RENEWALS, RENEW_WITHIN_HOURS } from "~shared/review/states";

import { tellHandedOver } from "./mails";
import { barredBecause, papersLeftBy } from "./recusal.service";

const HOUR_MS = 3_600_000;

export function claimIsLive(revision: Revision, now: Date): boolean {
  return (
    revision.state === "inReview" && revision.claimedUntil !== null && revision.claimedUntil > now
  );
}

export function holdsClaim(revision: Revision, editorId: string, now: Date): boolean {
  return claimIsLive(revision, now) && revision.claimedById === editorId;
}

/**
 * Puts submissions whose claim has run out back into the queue. Called before the queue is read
 * and before a claim is made, so no clock has to run for it.
 */
export async function lapseClaims(who: Pick<Acting, "database" | "now">): Promise<void> {
  const { database, now } = who;
  const lapsed = await database.manager
    .createQueryBuilder(Revision, "revision")
    .select(["revision.id", "revision.version", "revision.constraintId", "revision.ordinal"])
    .where("revision.state = 'inReview' AND revision.claimedUntil <= :now", { now })
    .getMany();
  for (const revision of lapsed) {
    await database.transaction("READ COMMITTED", async (manager) => {
      const won = await updateAt(manager, revision.id, revision.version, ["inReview"], {
        state: "submitted",
        claimedById: null,
        claimedUntil: null,
      });
      if (!won) return; // someone else has put it back meanwhile
      await appendEvent(manager, {
        kind: "claim.lapsed",
        actorId: null,
        subject: formatQuotable(revision.constraintId, revision.ordinal),
        at: now,
      });
    });
  }
}

/** Submissions that wait or are being read, oldest first. */
export async function queued(who: Pick<Acting, "database" | "now">): Promise<Revision[]> {
  await lapseClaims(who);
  return who.database.manager.find(Revision, {
    where: [{ state: "submitted" }, { state: "inReview" }],
    relations: { constraint: true, citation: true },
    order: { submittedAt: "ASC", id: "ASC" },
  });
}

export const notInQueue = (): Refusal =>
  refuse("notFound", "There is no such submission in the queue.");
const NOT_YOURS =
  "You don't hold this submission any more: the claim has ended or was never yours. Claim it again.";
export const CHANGED = "This submission has changed since you opened it. Reload the page.";

function claimEnd(now: Date): Date {
  return new Date(now.getTime() + CLAIM_HOURS * HOUR_MS);
}

export function subjectOf(revision: Revision): string {
  return formatQuotable(revision.constraintId, revision.ordinal);
}

/** Takes a submission for 72 hours. Of several who try at once, one gets it. */
export async function claim(who: Acting, id: string): Promise<Revision | Refusal> {
  await lapseClaims(who);
  return change<Revision | Refusal>(who, async (here) => {
    const revision = await loadRevision(here.manager, id);
    if (!revision || !["submitted", "inReview"].includes(revision.state)) return notInQueue();
    const left = await papersLeftBy(here.manager, who.viewer.id);
    const barred = barredBecause(revision, who.viewer, left);
    if (barred) return refuse("barred", barred);
    if (holdsClaim(revision, who.viewer.id, who.now)) return revision;
    const won = await updateAt(here.manager, id, revision.version, ["submitted"], {
      state: "inReview",
      claimedById: who.viewer.id,
      claimedUntil: claimEnd(who.now),
      claimRenewals: 0,
    });
    if (!won) return refuse("claimed", "Another editor is reading it already.");
    await here.event({ kind: "claim.made", subject: subjectOf(revision) });
    return reload(here.manager, id);
  });
}

/** Gives a claimed submission back to the queue. A stored reading stays on record. */
export async function releaseClaim(who: Acting, id: string): Promise<Done | Refusal> {
  return change<Done | Refusal>(who, async (here) => {
    const revision = await loadRevision(here.manager, id);
    if (!revision || !holdsClaim(revision, who.viewer.id, who.now)) {
      return refuse("notClaimed", NOT_YOURS);
    }
    const won = await updateAt(here.manager, id, revision.version, ["inReview"], {
      state: "submitted",
      claimedById: null,
      claimedUntil: null,
    });
    if (!won) return refuse("stale", CHANGED);
    await here.event({ kind: "claim.released", subject: subjectOf(revision) });
    return done("It is back in the queue.");
  });
}

/** Why a claim can't be lengthened now, in words, or null. */
export function notRenewable(revision: Revision, now: Date): string | null {
  if (revision.claimRenewals >= MOST_RENEWALS) {
    return "This claim was lengthened twice already. Decide, hand it over, or release it.";
  }
  const left = (revision.claimedUntil?.getTime() ?? 0) - now.getTime();
  return left > RENEW_WITHIN_HOURS * HOUR_MS
    ? `A claim can be lengthened in its last ${RENEW_WITHIN_HOURS} hours.`
    : null;
}

/** Starts the hours of a claim anew, shortly before it ends. */
export async function renewClaim(who: Acting, id: string): Promise<Revision | Refusal> {
  return change<Revision | Refusal>(who, async (here) => {
    const revision = await held(here, who, id);
    if (!(revision instanceof Revision)) return revision;
    const no = notRenewable(revision, who.now);
    if (no) return refuse("notRenewable", no);
    const won = await updateAt(here.manager, id, revision.version, ["inReview"], {
      claimedUntil: claimEnd(who.now),
      claimRenewals: revision.claimRenewals + 1,
    });
    if (!won) return refuse("stale", CHANGED);
    await here.event({ kind: "claim.renewed", subject: subjectOf(revision) });
    return reload(here.manager, id);
  });
}

/** Editors who may read a submission, but for whoever asks, by name. */
export async function otherEditors(
  manager: EntityManager,
  revision: Revision,
  exceptId: string,
): Promise<User[]> {
  const editors = await manager
    .createQueryBuilder(User, "user")
    .innerJoin(RoleGrant, "role", "role.userId = user.id AND role.role = 'editor'")
    .where("user.id <> :exceptId AND user.confirmedAt IS NOT NULL AND user.formerAt IS NULL", {
      exceptId,
    })
    .orderBy("user.nameOnPapers")
    .addOrderBy("user.id")
    .getMany();
  const free: User[] = [];
  for (const editor of editors) {
    const left = await papersLeftBy(manager, editor.id);
    if (barredBecause(revision, editor, left) === null) free.push(editor);
  }
  return free;
}

/** The submission that this editor may hand over, with those who can take it; null when they don't hold it. */
export async function handOverList(who: Acting, id: string): Promise<User[]> {
  const { manager } = who.database;
  const revision = await loadRevision(manager, id);
  if (!revision || !holdsClaim(revision, who.viewer.id, who.now)) return [];
  return otherEditors(manager, revision, who.viewer.id);
}

/**
 * Hands a claimed submission to another editor, who reads it blind on their own. The hours begin
 * anew; what was read so far stays on record.
 */
export async function handOverClaim(
  who: Acting,
  id: string,
  editorId: string,
): Promise<Done | Refusal> {
  return change<Done | Refusal>(who, async (here) => {
    const revision = await held(here, who, id);
    if (!(revision instanceof Revision)) return revision;
    const free = await otherEditors(here.manager, revision, who.viewer.id);
    const next = free.find((editor) => editor.id === editorId);
    if (!next) {
      return refuse("notAnEditor", "This person can't read it. Choose from the list of editors.");
    }
    const won = await updateAt(here.manager, id, revision.version, ["inReview"], {
      claimedById: next.id,
      claimedUntil: claimEnd(who.now),
      claimRenewals: 0,
    });
    if (!won) return refuse("stale", CHANGED);
    await here.event({
      kind: "claim.handedOver",
      subject: subjectOf(revision),
      detail: { to: next.id },
    });
    await tellHandedOver(here, who, revision, next);
    return done(`${subjectOf(revision)} is with ${next.nameOnPapers} now.`);
  });
}

/** The submission if this editor holds it now; its row stays locked until the change ends. */
export async function held(here: Change, who: Acting, id: string): Promise<Revision | Refusal> {
  await here.manager
    .createQueryBuilder(Revision, "revision")
    .select("revision.id")
    .setLock("pessimistic_write")
    .where("revision.id = :id", { id })
    .getOne();
  const revision = await loadRevision(here.manager, id);
  if (!revision) return notInQueue();
  if (!holdsClaim(revision, who.viewer.id, who.now)) return refuse("notClaimed", NOT_YOURS);
  const left = await papersLeftBy(here.manager, who.viewer.id);
  const barred = barredBecause(revision, who.viewer, left);
  return barred ? refuse("barred", barred) : revision;
}
