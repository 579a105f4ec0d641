import { randomUUID } from "node:crypto";

import type { EntityManager } from "typeorm";

import { done, refuse, Refusal, type Done } from "~server/common/outcomes";
import { loadRevision } from "~server/constraint/draft.service";
import { Revision } from "~server/constraint/revision.entity";
import { change, type Acting } from "~server/event/acting";
import { bytesInWords, EVIDENCE_LIMITS, type EvidenceKind } from "~shared/evidence/evidence";
import { mayWithOwn } from "~shared/review/policy";

import { Evidence } from "./evidence.entity";
import { evidenceOf } from "./ofRevision";
import { forgetUnused, keepBytes } from "./store";

/** A file that was looked into and found to be what it says. */
export interface NewEvidence {
  revisionId: string;
  name: string;
  caption: string;
  kind: EvidenceKind;
  bytes: Buffer;
}

const UNKNOWN = "There is no such draft among yours.";
const NO_DRAFT = "This is submitted: its evidence doesn't change any more.";

/** Attaches a file to a draft of one's own. Like saving, it is no change of state and leaves no event. */
export async function attachEvidence(who: Acting, given: NewEvidence): Promise<Evidence | Refusal> {
  const caption = given.caption.trim();
  if (caption.length > EVIDENCE_LIMITS.caption) {
    return refuse("tooLong", `A caption has at most ${EVIDENCE_LIMITS.caption} characters.`);
  }
  return change<Evidence | Refusal>(who, async ({ manager }) => {
    const draft = await lockOwnDraft(who, manager, given.revisionId);
    if (draft instanceof Refusal) return draft;
    const there = await evidenceOf(manager, draft.id);
    if (there.length >= EVIDENCE_LIMITS.files) {
      return refuse("tooMany", `A record keeps ${EVIDENCE_LIMITS.files} files at most.`);
    }
    const open = await openBytes(manager, who.viewer.id);
    if (open + given.bytes.length > EVIDENCE_LIMITS.bytesOpen) {
      return refuse(
        "tooMany",
        `Your records that are not approved hold ${bytesInWords(open)} of files, and ` +
          `${bytesInWords(EVIDENCE_LIMITS.bytesOpen)} is the most. Remove some first.`,
      );
    }
    const digest = await keepBytes(manager, given.bytes, given.kind);
    const twin = there.find((one) => one.digest === digest);
    if (twin) return refuse("twice", `This file is attached already, as ${twin.name}.`);
    const id = randomUUID();
    await manager.insert(Evidence, {
      id,
      revisionId: draft.id,
      digest,
      name: given.name,
      caption,
      uploadedById: who.viewer.id,
      at: who.now,
    });
    return loadEvidence(manager, id);
  });
}

/** Takes a file off a draft of one's own. */
export async function removeEvidence(who: Acting, id: string): Promise<Done | Refusal> {
  return change<Done | Refusal>(who, async ({ manager }) => {
    const evidence = await lockOwnEvidence(who, manager, id);
    if (evidence instanceof Refusal) return evidence;
    await manager.delete(Evidence, { id });
    await forgetUnused(manager, [evidence.digest]);
    return done(`${evidence.name} is removed.`);
  });
}

/** Says anew what a file of a draft of one's own shows. */
export async function describeEvidence(
  who: Acting,
  id: string,
  caption: string,
): Promise<Evidence | Refusal> {
  const text = caption.trim();
  if (text.length > EVIDENCE_LIMITS.caption) {
    return refuse("tooLong", `A caption has at most ${EVIDENCE_LIMITS.caption} characters.`);
  }
  return change<Evidence | Refusal>(who, async ({ manager }) => {
    const evidence = await lockOwnEvidence(who, manager, id);
    if (evidence instanceof Refusal) return evidence;
    await manager.update(Evidence, { id }, { caption: text });
    return loadEvidence(manager, id);
  });
}

/** Bytes of all files that a person has with revisions that are not approved; each file once. */
async function openBytes(manager: EntityManager, ownerId: string): Promise<number> {
  const [row]: { bytes: string | null }[] = await manager.query(
    `SELECT SUM(file.bytes) AS bytes FROM evidence_file file WHERE file.digest IN (
       SELECT e.digest FROM evidence e
         JOIN revision r ON r.id = e.revisionId
         JOIN constraint_record c ON c.id = r.constraintId
        WHERE c.ownerId = ? AND r.state <> 'approved')`,
    [ownerId],
  );
  return Number(row?.bytes ?? 0);
}

/** The draft, locked: who submits it meanwhile waits, and then submits it with this file. */
async function lockOwnDraft(
  who: Acting,
  manager: EntityManager,
  revisionId: string,
): Promise<Revision | Refusal> {
  const revision = await loadRevision(manager, revisionId);
  if (!revision || !mayWithOwn("keepEvidence", revision.constraint.ownerId === who.viewer.id)) {
    return refuse("notFound", UNKNOWN);
  }
  const now = await manager
    .createQueryBuilder(Revision, "revision")
    .select(["revision.id", "revision.state"])
    .setLock("pessimistic_write")
    .where("revision.id = :id", { id: revisionId })
    .getOne();
  if (!now) return refuse("notFound", UNKNOWN);
  return now.state === "draft" ? revision : refuse("notDraft", NO_DRAFT);
}

async function lockOwnEvidence(
  who: Acting,
  manager: EntityManager,
  id: string,
): Promise<Evidence | Refusal> {
  const evidence = await manager.findOneBy(Evidence, { id });
  if (!evidence) return refuse("notFound", "There is no such file among yours.");
  const draft = await lockOwnDraft(who, manager, evidence.revisionId);
  if (!(draft instanceof Refusal)) return evidence;
  // What others own is as unknown as what isn't there.
  return draft.code === "notFound"
    ? refuse("notFound", "There is no such file among yours.")
    : draft;
}

async function loadEvidence(manager: EntityManager, id: string): Promise<Evidence> {
  return manager.findOneOrFail(Evidence, { where: { id }, relations: { file: true } });
}
