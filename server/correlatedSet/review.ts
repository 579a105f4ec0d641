import type { EntityManager } from "typeorm";

import { done, refuse, Refusal, type Done } from "~server/common/outcomes";
import type { ViewerIdentity } from "~server/common/context";
import { change, type Acting, type Change } from "~server/event/acting";
import { appendEvent } from "~server/event/eventLog";
import { hasReadSet, recordsReadBlind } from "~server/review/blindness";
import { LONGEST_ENTRY, MOST_MEMBERS, type MatrixKind } from "~shared/correlatedSet/content";
import {
  compareSetReading,
  setReadingMissing,
  tidySetReading,
  type SetReadingContent,
} from "~shared/correlatedSet/reading";
import { parseRecordNumber } from "~shared/identifiers/recordNumber";
import { formatSetNumber } from "~shared/identifiers/setNumber";
import { mayWithOwn } from "~shared/review/policy";
import { CLAIM_HOURS } from "~shared/review/states";

import { CorrelatedSet, SetReading } from "./correlatedSet.entity";
import { alreadyIn } from "./draft";
import { barredFromSetsPaper, tellOwnerOfSet } from "./mails";
import { loadSet, lockMembers, membersFor, reloadSet, setWithMember, updateSetAt } from "./store";

const HOUR_MS = 3_600_000;
const LONGEST_COMMENT = 2000;

const unknown = (): Refusal => refuse("notFound", "There is no such set in the queue.");
const NOT_YOURS =
  "You don't hold this set any more: the claim has ended or was never yours. Claim it again.";
const CHANGED = "This set has changed since you opened it. Reload the page.";

export function setClaimIsLive(set: CorrelatedSet, now: Date): boolean {
  return set.state === "inReview" && set.claimedUntil !== null && set.claimedUntil > now;
}

export function holdsSetClaim(set: CorrelatedSet, editorId: string, now: Date): boolean {
  return setClaimIsLive(set, now) && set.claimedById === editorId;
}

/**
 * Why this person can't read this set now, in words, or null. A variance is an error squared: a set
 * opens to editors only when all its records are approved, and to none who is reading one of them blind.
 */
export async function barredFromSet(
  manager: EntityManager,
  set: CorrelatedSet,
  editor: ViewerIdentity,
  now: Date,
): Promise<string | null> {
  if (!mayWithOwn("reviewSet", set.ownerId === editor.id)) {
    return "You submitted it. Another editor has to read it.";
  }
  const paper = await barredFromSetsPaper(manager, editor, set);
  if (paper) return paper;
  const blind = await recordsReadBlind(manager, editor, now);
  const held = set.members.find((number) => blind.has(parseRecordNumber(number) ?? 0));
  if (held !== undefined) return `You are reading ${held} yourself. Store that reading first.`;
  const approved = new Set(
    (await membersFor(manager, null, set.members)).map(({ number }) => number),
  );
  const waiting = set.members.find((number) => !approved.has(number));
  return waiting === undefined ? null : `It waits until ${waiting} is approved.`;
}

/** Puts sets whose claim has run out back into the queue. */
export async function lapseSetClaims(who: Pick<Acting, "database" | "now">): Promise<void> {
  const { database, now } = who;
  const lapsed = await database.manager
    .createQueryBuilder(CorrelatedSet, "lapsed")
    .where("lapsed.state = 'inReview' AND lapsed.claimedUntil <= :now", { now })
    .getMany();
  for (const set of lapsed) {
    await database.transaction("READ COMMITTED", async (manager) => {
      const won = await updateSetAt(manager, set.id, set.version, ["inReview"], {
        state: "submitted",
        claimedById: null,
        claimedUntil: null,
      });
      if (!won) return; // someone else has put it back meanwhile
      await appendEvent(manager, {
        kind: "correlatedSet.claimLapsed",
        actorId: null,
        subject: formatSetNumber(set.id),
        at: now,
      });
    });
  }
}

/** Sets that wait or are being read, oldest first. */
export async function queuedSets(who: Pick<Acting, "database" | "now">): Promise<CorrelatedSet[]> {
  await lapseSetClaims(who);
  return who.database.manager.find(CorrelatedSet, {
    where: [{ state: "submitted" }, { state: "inReview" }],
    relations: { citation: true },
    order: { submittedAt: "ASC", id: "ASC" },
  });
}

/** Takes a set for 72 hours. Of several who try at once, one gets it. */
export async function claimSet(who: Acting, number: string): Promise<CorrelatedSet | Refusal> {
  await lapseSetClaims(who);
  return change<CorrelatedSet | Refusal>(who, async (here) => {
    const { manager } = here;
    const set = await loadSet(manager, number);
    if (!set || !["submitted", "inReview"].includes(set.state)) return unknown();
    const barred = await barredFromSet(manager, set, who.viewer, who.now);
    if (barred) return refuse("barred", barred);
    if (holdsSetClaim(set, who.viewer.id, who.now)) return set;
    const won = await updateSetAt(manager, set.id, set.version, ["submitted"], {
      state: "inReview",
      claimedById: who.viewer.id,
      claimedUntil: new Date(who.now.getTime() + CLAIM_HOURS * HOUR_MS),
    });
    if (!won) return refuse("claimed", "Another editor is reading it already.");
    await here.event({ kind: "correlatedSet.claimed", subject: formatSetNumber(set.id) });
    return reloadSet(manager, set.id);
  });
}

/** Gives a claimed set back to the queue. A stored reading stays on record. */
export async function releaseSet(who: Acting, number: string): Promise<Done | Refusal> {
  return change<Done | Refusal>(who, async (here) => {
    const set = await loadSet(here.manager, number);
    if (!set || !holdsSetClaim(set, who.viewer.id, who.now)) {
      return refuse("notClaimed", NOT_YOURS);
    }
    const won = await updateSetAt(here.manager, set.id, set.version, ["inReview"], {
      state: "submitted",
      claimedById: null,
      claimedUntil: null,
    });
    if (!won) return refuse("stale", CHANGED);
    await here.event({ kind: "correlatedSet.claimReleased", subject: formatSetNumber(set.id) });
    return done("It is back in the queue.");
  });
}

/** The set if this editor holds it now; its row stays locked until the change ends. */
async function held(here: Change, who: Acting, number: string): Promise<CorrelatedSet | Refusal> {
  const known = await loadSet(here.manager, number);
  if (!known) return unknown();
  await here.manager.query("SELECT id FROM correlated_set WHERE id = ? FOR UPDATE", [known.id]);
  const set = await reloadSet(here.manager, known.id);
  if (!holdsSetClaim(set, who.viewer.id, who.now)) return refuse("notClaimed", NOT_YOURS);
  const barred = await barredFromSet(here.manager, set, who.viewer, who.now);
  return barred ? refuse("barred", barred) : set;
}

/** Stores the blind reading, once. */
export async function storeSetReading(
  who: Acting,
  number: string,
  input: { matrixKind: MatrixKind | null; triangle: readonly (readonly string[])[] },
): Promise<CorrelatedSet | Refusal> {
  const tooLarge =
    input.triangle.length > MOST_MEMBERS ||
    input.triangle.some(
      (row) => row.length > MOST_MEMBERS || row.some((text) => text.length > LONGEST_ENTRY),
    );
  if (tooLarge) return refuse("tooLong", "This is too long to be a matrix.");
  return change<CorrelatedSet | Refusal>(who, async (here) => {
    const set = await held(here, who, number);
    if (!(set instanceof CorrelatedSet)) return set;
    if (await hasReadSet(here.manager, who.viewer.id, set.id)) {
      return refuse("alreadyRead", "Your reading is stored. Correct single entries instead.");
    }
    const reading = tidySetReading(
      { matrixKind: input.matrixKind, triangle: input.triangle.map((row) => [...row]) },
      set.members.length,
    );
    const missing = setReadingMissing(reading);
    if (missing) return refuse("incomplete", missing);
    await here.manager.insert(SetReading, {
      setId: set.id,
      editorId: who.viewer.id,
      storedAt: who.now,
      first: reading,
      latest: reading,
      corrections: [],
    } as never);
    await here.event({ kind: "correlatedSet.readingStored", subject: formatSetNumber(set.id) });
    return reloadSet(here.manager, set.id);
  });
}

export interface EntryReading {
  /** From 0; null for the kind of matrix. */
  row: number | null;
  column: number | null;
  /** The entry as read now, or the kind of matrix. */
  text: string;
  why: string;
}

/** Reads one differing entry again; what stood there first stays on record. */
export async function correctSetReading(
  who: Acting,
  number: string,
  entry: EntryReading,
): Promise<CorrelatedSet | Refusal> {
  const why = entry.why.trim();
  if (why === "") return refuse("why", "Say why you read it differently now.", "why");
  if (why.length > LONGEST_COMMENT || entry.text.length > LONGEST_ENTRY) {
    return refuse("tooLong", "This is too long to keep.");
  }
  return change<CorrelatedSet | Refusal>(who, async (here) => {
    const set = await held(here, who, number);
    if (!(set instanceof CorrelatedSet)) return set;
    const reading = await readingOf(here.manager, set.id, who.viewer.id);
    if (!reading) return refuse("notRead", "Store your own reading first.");
    const differs = compareSetReading(reading.latest, set).find(
      (one) => one.row === entry.row && one.column === entry.column && !one.agrees,
    );
    if (!differs) return refuse("agrees", "This entry doesn't differ.");
    const next = corrected(reading.latest, entry, set.members.length);
    const missing = setReadingMissing(next);
    if (missing) return refuse("incomplete", missing);
    await here.manager.update(SetReading, { id: reading.id }, {
      latest: next,
      corrections: [
        ...reading.corrections,
        {
          row: entry.row,
          column: entry.column,
          before: differs.reading,
          why,
          at: who.now.toISOString(),
        },
      ],
    } as never);
    await here.event({
      kind: "correlatedSet.readingCorrected",
      subject: formatSetNumber(set.id),
      detail: { row: entry.row, column: entry.column },
    });
    return reloadSet(here.manager, set.id);
  });
}

function corrected(
  reading: SetReadingContent,
  { row, column, text }: EntryReading,
  size: number,
): SetReadingContent {
  if (row === null || column === null) {
    const matrixKind = text === "covariance" ? "covariance" : "correlation";
    return tidySetReading({ ...reading, matrixKind }, size);
  }
  return {
    ...reading,
    triangle: reading.triangle.map((entries, i) =>
      entries.map((old, j) => (i === row && j === column ? text.trim() : old)),
    ),
  };
}

export async function readingOf(
  manager: EntityManager,
  setId: number,
  editorId: string,
): Promise<SetReading | null> {
  return manager.findOneBy(SetReading, { setId, editorId });
}

/** Why approval is not open yet, beside answers that are not accepted; empty when it is. */
export function setBlockersOf(
  set: CorrelatedSet,
  reading: SetReading | null,
  holds: boolean,
): string[] {
  if (!holds) return ["Claim it first."];
  if (!reading) return ["Your second reading is not stored yet."];
  const differing = compareSetReading(reading.latest, set).filter(({ agrees }) => !agrees);
  if (differing.length === 0) return [];
  const places = differing.map(({ row, column }) =>
    row === null || column === null ? "kind of matrix" : `row ${row + 1}, column ${column + 1}`,
  );
  return [`Your reading differs at: ${places.join("; ")}. Correct it, or return the set.`];
}

/**
 * Puts a set in use. Of a chain one set is in use: the approved one before it is withdrawn with it.
 *
 * @param acceptedAnswers - Codes of the contributor's answers that the editor accepts.
 */
export async function approveSet(
  who: Acting,
  number: string,
  version: number,
  acceptedAnswers: readonly string[],
  note: string | null,
): Promise<Done | Refusal> {
  if (note !== null && note.length > LONGEST_COMMENT) {
    return refuse("tooLong", `The note has at most ${LONGEST_COMMENT} characters.`);
  }
  return change<Done | Refusal>(who, async (here) => {
    const { manager } = here;
    const set = await held(here, who, number);
    if (!(set instanceof CorrelatedSet)) return set;
    const reading = await readingOf(manager, set.id, who.viewer.id);
    const [blocker] = setBlockersOf(set, reading, true);
    if (blocker !== undefined) return refuse("blocked", blocker);
    const accepted = new Set(acceptedAnswers);
    const open = set.findings.filter(
      ({ grade, code }) => grade === "mustAnswer" && !accepted.has(code),
    );
    if (open.length > 0) {
      return refuse("blocked", "Accept each answer of the contributor, or return the set.");
    }
    await lockMembers(manager, set.members);
    const taken = await setWithMember(manager, set, ["approved"]);
    if (taken) return alreadyIn(taken);
    const members = await membersFor(manager, null, set.members);
    const quotable = new Map(members.map((member) => [member.number, member.quotable]));
    const decided = await updateSetAt(manager, set.id, version, ["inReview"], {
      state: "approved",
      decidedById: who.viewer.id,
      decidedAt: who.now,
      decisionNote: note?.trim() || null,
      answers: set.answers.map((answer) => ({ ...answer, accepted: accepted.has(answer.code) })),
      memberRevisions: set.members.map((member) => quotable.get(member) ?? member),
    });
    if (!decided) return refuse("stale", CHANGED);
    await here.event({
      kind: "correlatedSet.approved",
      subject: formatSetNumber(set.id),
      detail: { members: set.members },
    });
    await replaceEarlier(here, who, set);
    await tellOwnerOfSet(here, who, set, "approved");
    return done(`${formatSetNumber(set.id)} is approved.`);
  });
}

async function replaceEarlier(here: Change, who: Acting, set: CorrelatedSet): Promise<void> {
  const earlier = await here.manager.findBy(CorrelatedSet, {
    chainId: set.chainId,
    state: "approved",
  });
  for (const old of earlier.filter(({ id }) => id !== set.id)) {
    const by = formatSetNumber(set.id);
    await updateSetAt(here.manager, old.id, old.version, ["approved"], {
      state: "withdrawn",
      withdrawnAt: who.now,
      withdrawnBecause: `Replaced by ${by}.`,
    });
    await here.event({
      kind: "correlatedSet.withdrawn",
      subject: formatSetNumber(old.id),
      detail: { replacedBy: by },
    });
  }
}

/** Sends a set back with a comment. */
export async function returnSet(
  who: Acting,
  number: string,
  version: number,
  comment: string,
): Promise<Done | Refusal> {
  const text = comment.trim();
  if (text === "") return refuse("comment", "Say what has to change.", "comment");
  if (text.length > LONGEST_COMMENT) {
    return refuse("tooLong", `The comment has at most ${LONGEST_COMMENT} characters.`, "comment");
  }
  return change<Done | Refusal>(who, async (here) => {
    const set = await held(here, who, number);
    if (!(set instanceof CorrelatedSet)) return set;
    const decided = await updateSetAt(here.manager, set.id, version, ["inReview"], {
      state: "returned",
      decidedById: who.viewer.id,
      decidedAt: who.now,
      decisionNote: text,
    });
    if (!decided) return refuse("stale", CHANGED);
    await here.event({ kind: "correlatedSet.returned", subject: formatSetNumber(set.id) });
    await tellOwnerOfSet(here, who, set, "returned");
    return done(`${formatSetNumber(set.id)} went back to its contributor.`);
  });
}

/** Takes an approved set out of use, with the reason that stands on its page. */
export async function withdrawSet(
  who: Acting,
  number: string,
  version: number,
  reason: string,
): Promise<Done | Refusal> {
  const text = reason.trim();
  if (text === "") return refuse("reason", "Say why it is withdrawn.", "reason");
  if (text.length > LONGEST_COMMENT) {
    return refuse("tooLong", `The reason has at most ${LONGEST_COMMENT} characters.`, "reason");
  }
  return change<Done | Refusal>(who, async (here) => {
    const set = await loadSet(here.manager, number);
    if (set?.state !== "approved") {
      return refuse("notFound", "There is no such approved set.");
    }
    const won = await updateSetAt(here.manager, set.id, version, ["approved"], {
      state: "withdrawn",
      withdrawnAt: who.now,
      withdrawnBecause: text,
    });
    if (!won) return refuse("stale", CHANGED);
    await here.event({ kind: "correlatedSet.withdrawn", subject: formatSetNumber(set.id) });
    await tellOwnerOfSet(here, who, set, "withdrawn");
    return done(`${formatSetNumber(set.id)} is withdrawn.`);
  });
}
