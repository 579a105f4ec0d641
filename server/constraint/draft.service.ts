import { randomUUID } from "node:crypto";

import { In, type EntityManager } from "typeorm";

import { Citation } from "~server/citation/citation.entity";
import { done, refuse, type Done, type Refusal } from "~server/common/outcomes";
import { change, type Acting } from "~server/event/acting";
import { appendEvent, digestOf } from "~server/event/eventLog";
import {
  carryEvidenceOver,
  dropEvidence,
  evidenceOf,
  hasSameEvidence,
} from "~server/evidence/ofRevision";
import { holdVocabulary } from "~server/method/vocabulary";
import { FieldCommentRecord } from "~server/review/comment.entity";
import { tellEditors } from "~server/review/mails";
import { formatQuotable } from "~shared/identifiers/recordNumber";
import { canMove, mayWithOwn, type Action } from "~shared/review/policy";
import { diffFields } from "~shared/review/reading";
import { emptyFields, type ConstraintFields } from "~shared/statement/fields";

import { Constraint } from "./constraint.entity";
import { fieldsFromInput, type ConstraintFieldsInput } from "./fields.type";
import { allFindings, neighbours } from "./neighbours";
import { contextOf } from "./paperContext";
import { refuseLinks, writeLinks } from "./links";
import { indexColumns, writeDataNames } from "./revision.index";
import { Revision, type StoredAnswer } from "./revision.entity";

/** What a new draft starts from. */
export interface NewDraft {
  ownerId: string;
  citationId: string | null;
  fields: ConstraintFields;
  /** Names the imported row among this person's rows; a second draft with it is refused by the database. */
  importIdentity?: string | null;
  at?: Date;
}

const MOST_OPEN_DRAFTS = 1000;

const STALE =
  "This draft was changed in another window since you opened it. Reload it to see the newer text.";

/** Unique value of an imported row over all people, or null. */
function importKey(ownerId: string, identity: string | null | undefined): string | null {
  return identity ? digestOf([ownerId, identity]) : null;
}

/** Which of these imported rows this person has here already, whatever became of them. */
export async function findImported(
  manager: EntityManager,
  ownerId: string,
  identities: readonly string[],
): Promise<Set<string>> {
  if (identities.length === 0) return new Set();
  const byKey = new Map(identities.map((identity) => [importKey(ownerId, identity), identity]));
  const found = await manager.find(Constraint, {
    select: { id: true, importIdentity: true },
    where: { importIdentity: In([...byKey.keys()]) },
  });
  return new Set(found.map((record) => byKey.get(record.importIdentity) ?? ""));
}

/** Adds a record with its first draft and its event. Runs in the caller's transaction. */
export async function createDraft(manager: EntityManager, draft: NewDraft): Promise<Revision> {
  const at = draft.at ?? new Date();
  const inserted = await manager.insert(Constraint, {
    state: "current",
    ownerId: draft.ownerId,
    approvedRevisionId: null,
    importIdentity: importKey(draft.ownerId, draft.importIdentity),
  });
  const constraintId = Number((inserted.identifiers[0] as { id: number }).id);
  const revision = await insertRevision(manager, {
    constraintId,
    ordinal: 1,
    fields: draft.fields,
    citationId: draft.citationId,
    followsId: null,
    answers: [],
    at,
  });
  await appendEvent(manager, {
    kind: "revision.drafted",
    actorId: draft.ownerId,
    subject: formatQuotable(constraintId, 1),
    detail: draft.importIdentity ? { from: "import" } : {},
    at,
  });
  return revision;
}

async function insertRevision(
  manager: EntityManager,
  parts: Pick<
    Revision,
    "constraintId" | "ordinal" | "fields" | "citationId" | "followsId" | "answers"
  > & { at: Date },
): Promise<Revision> {
  const { at, ...content } = parts;
  const id = randomUUID();
  await manager.insert(Revision, {
    id,
    ...content,
    state: "draft",
    version: 1,
    findings: [],
    createdAt: at,
    updatedAt: at,
    searchText: "",
  } as never);
  return loadRevision(manager, id).then((revision) => {
    if (!revision) throw new Error(`revision ${id} vanished in its own transaction`);
    return revision;
  });
}

/** A revision with its record and citation, or null. */
export async function loadRevision(manager: EntityManager, id: string): Promise<Revision | null> {
  return manager.findOne(Revision, {
    where: { id },
    relations: { constraint: true, citation: true },
  });
}

/** The revision if this may be done to it; what others own is as unknown as what isn't there. */
async function loadFor(
  action: Action,
  who: Acting,
  manager: EntityManager,
  id: string,
): Promise<Revision | null> {
  const revision = await loadRevision(manager, id);
  if (!revision) return null;
  return mayWithOwn(action, revision.constraint.ownerId === who.viewer.id) ? revision : null;
}

const unknownDraft = (): Refusal => refuse("notFound", "There is no such submission among yours.");

/** Starts a record: empty, for a citation, or with the context of another submission of one's own. */
export async function startDraft(
  who: Acting,
  from: { citationId?: string | null; submissionId?: string | null },
): Promise<Revision | Refusal> {
  return change(who, async ({ manager }) => {
    let fields = emptyFields();
    let citationId = from.citationId ?? null;
    if (from.submissionId) {
      const other = await loadFor("readSubmission", who, manager, from.submissionId);
      if (!other) return unknownDraft();
      fields = contextOf(other.fields);
      citationId ??= other.citationId;
    }
    if (citationId !== null && !(await manager.existsBy(Citation, { id: citationId }))) {
      return refuse("citation", "This citation is not in the registry.", "citation");
    }
    const open = await manager
      .createQueryBuilder(Revision, "revision")
      .innerJoin("revision.constraint", "record")
      .where("record.ownerId = :owner AND revision.state = 'draft'", { owner: who.viewer.id })
      .getCount();
    if (open >= MOST_OPEN_DRAFTS) {
      return refuse("tooMany", `You have ${open} open drafts. Send or discard some first.`);
    }
    return createDraft(manager, { ownerId: who.viewer.id, citationId, fields, at: who.now });
  });
}

export interface DraftChanges {
  id: string;
  version: number;
  citationId?: string | null;
  fields: ConstraintFieldsInput;
  answers?: { code: string; answer: string }[] | null;
  commentAnswers?: { commentId: string; answer: string }[] | null;
}

const LONGEST_ANSWER = 2000;

/** Keeps what was typed. Saving is no change of state and leaves no event. */
export async function saveDraft(who: Acting, changes: DraftChanges): Promise<Revision | Refusal> {
  const parsed = fieldsFromInput(changes.fields);
  if ("tooLong" in parsed) {
    return refuse("tooLong", "This text is too long to keep. Shorten it.", parsed.tooLong);
  }
  const answers = changes.answers ?? null;
  const commentAnswers = changes.commentAnswers ?? [];
  if ([...(answers ?? []), ...commentAnswers].some((one) => one.answer.length > LONGEST_ANSWER)) {
    return refuse("tooLong", `An answer has at most ${LONGEST_ANSWER} characters.`);
  }
  return change(who, async ({ manager }) => {
    const draft = await loadFor("saveDraft", who, manager, changes.id);
    if (!draft) return unknownDraft();
    if (draft.state !== "draft") return notADraft(draft);
    const citationId = changes.citationId === undefined ? draft.citationId : changes.citationId;
    if (
      citationId !== null &&
      citationId !== draft.citationId &&
      !(await manager.existsBy(Citation, { id: citationId }))
    ) {
      return refuse("citation", "This citation is not in the registry.", "citation");
    }
    const kept: StoredAnswer[] = answers
      ? dedupeAnswers(answers).map((one) => ({ ...one, accepted: false }))
      : draft.answers;
    const won = await updateAt(manager, draft.id, changes.version, ["draft"], {
      fields: parsed.fields,
      citationId,
      answers: kept,
      updatedAt: who.now,
    });
    if (!won) return refuse("stale", STALE);
    for (const { commentId, answer } of commentAnswers) {
      // Only comments of the return that this draft answers.
      await manager.update(
        FieldCommentRecord,
        { id: commentId, revisionId: draft.followsId ?? draft.id },
        { answer: answer.trim() === "" ? null : answer.trim() },
      );
    }
    return reload(manager, draft.id);
  });
}

function dedupeAnswers(answers: readonly { code: string; answer: string }[]) {
  const byCode = new Map<string, string>();
  for (const { code, answer } of answers) {
    if (answer.trim() !== "") byCode.set(code.slice(0, 200), answer.trim());
  }
  return [...byCode].slice(0, 100).map(([code, answer]) => ({ code, answer }));
}

function notADraft(revision: Revision): Refusal {
  const words: Record<Revision["state"], string> = {
    draft: "It is a draft.",
    submitted: "It is submitted already and can't be changed. Discard it to start over.",
    inReview: "An editor is reviewing it; it can't be changed now.",
    returned: "It was returned. Answer it with a new revision.",
    approved: "It is approved. Change it with a new revision.",
    discarded: "It was discarded.",
  };
  return refuse("notDraft", words[revision.state]);
}

type Written = Partial<Omit<Revision, "id" | "version" | "constraint" | "citation">>;

/**
 * Writes to a revision only if it is still at this version and in one of these states.
 * The database decides between two writers; TypeORM's own version column would let both win.
 *
 * @returns Whether this writer won.
 */
export async function updateAt(
  manager: EntityManager,
  id: string,
  version: number,
  states: readonly Revision["state"][],
  set: Written,
): Promise<boolean> {
  const { state } = set;
  const forbidden = state && states.find((from) => from !== state && !canMove(from, state));
  if (forbidden) throw new Error(`no revision moves from ${forbidden} to ${state}`);
  const result = await manager
    .createQueryBuilder()
    .update(Revision)
    .set({ ...set, version: version + 1 } as never)
    .where("id = :id AND version = :version AND state IN (:...states)", { id, version, states })
    .execute();
  return result.affected === 1;
}

export async function reload(manager: EntityManager, id: string): Promise<Revision> {
  const revision = await loadRevision(manager, id);
  if (!revision) throw new Error(`revision ${id} is gone`);
  return revision;
}

/** Sends a draft to the editors, if nothing stands against it. From then on it doesn't change. */
export async function submitDraft(
  who: Acting,
  id: string,
  version: number,
  agreesToLicence: boolean,
): Promise<Revision | Refusal> {
  return change<Revision | Refusal>(who, async (here) => {
    const { manager } = here;
    const draft = await loadFor("submitDraft", who, manager, id);
    if (!draft) return unknownDraft();
    if (draft.state !== "draft") return notADraft(draft);
    if (draft.version !== version) return refuse("stale", STALE);
    if (!agreesToLicence) {
      return refuse(
        "licence",
        `Agree that the registry passes the record on under ${who.licence}.`,
      );
    }
    const findings = allFindings(
      draft.fields,
      draft.citationId,
      draft.constraintId,
      await neighbours(manager, who.viewer),
    );
    const error = findings.find((finding) => finding.grade === "error");
    if (error) return refuse("findings", error.message, error.fields[0] ?? null);
    const { citation } = draft;
    if (!citation) return refuse("findings", "Name the paper this is printed in.", "citation");

    const answered = new Set(draft.answers.map((answer) => answer.code));
    const open = findings.find(
      (finding) => finding.grade === "mustAnswer" && !answered.has(finding.code),
    );
    if (open) {
      return refuse("unanswered", `Answer this first: ${open.message}`, open.fields[0] ?? null);
    }
    const before = await unansweredOrSame(manager, draft);
    if (before) return before;
    const record = { id: draft.constraintId, fields: draft.fields };
    const linked = await refuseLinks(manager, who.viewer, record, "submission", who.now);
    if (linked) return linked;

    const codes = new Set(findings.map((finding) => finding.code));
    await holdVocabulary(manager);
    const won = await updateAt(manager, draft.id, version, ["draft"], {
      state: "submitted",
      submittedAt: who.now,
      updatedAt: who.now,
      licence: who.licence,
      findings,
      answers: draft.answers.filter((answer) => codes.has(answer.code)),
      ...indexColumns(draft.constraintId, draft.fields, citation),
    });
    if (!won) return refuse("stale", STALE);
    await writeDataNames(manager, draft.id, draft.fields);
    await writeLinks(manager, draft.id, draft.fields);
    const evidence = await evidenceOf(manager, draft.id);
    await here.event({
      kind: "revision.submitted",
      subject: formatQuotable(draft.constraintId, draft.ordinal),
      detail: {
        citation: citation.key,
        licence: who.licence,
        // So that the log vouches for the files too.
        ...(evidence.length > 0 ? { evidence: evidence.map(({ digest }) => digest) } : {}),
      },
    });
    const submitted = await reload(manager, draft.id);
    await tellEditors(here, who, submitted);
    return submitted;
  });
}

/** A reason why the answer to a return, or the change of an approved record, is not ready. */
async function unansweredOrSame(manager: EntityManager, draft: Revision): Promise<Refusal | null> {
  if (draft.followsId === null) return null;
  const followed = await manager.findOneByOrFail(Revision, { id: draft.followsId });
  if (followed.state === "approved") {
    const same =
      diffFields(followed.fields, draft.fields).length === 0 &&
      followed.citationId === draft.citationId &&
      (await hasSameEvidence(manager, followed.id, draft.id));
    return same ? refuse("unchanged", "Nothing differs from the approved revision yet.") : null;
  }
  const comments = await manager.findBy(FieldCommentRecord, { revisionId: followed.id });
  const open = comments.find((comment) => comment.answer === null);
  return open
    ? refuse("commentUnanswered", "Answer each comment of the editor first.", open.field)
    : null;
}

/** Puts a draft aside, or takes back what no editor has claimed yet. */
export async function discardDraft(
  who: Acting,
  id: string,
  version: number,
): Promise<Done | Refusal> {
  return change<Done | Refusal>(who, async (here) => {
    const draft = await loadFor("discardDraft", who, here.manager, id);
    if (!draft) return unknownDraft();
    if (!canMove(draft.state, "discarded")) return notADraft(draft);
    const won = await updateAt(here.manager, id, version, [draft.state], {
      state: "discarded",
      updatedAt: who.now,
    });
    if (!won) return refuse("stale", STALE);
    if (draft.state === "draft") await dropEvidence(here.manager, id);
    await here.event({
      kind: "revision.discarded",
      subject: formatQuotable(draft.constraintId, draft.ordinal),
      detail: { from: draft.state },
    });
    return done("Discarded.");
  });
}

/**
 * A new draft revision that answers a return or changes an approved record. An answer that was
 * begun already is handed back. The approved revision stays in use until the new one is approved.
 */
export async function reviseSubmission(who: Acting, id: string): Promise<Revision | Refusal> {
  return change<Revision | Refusal>(who, async (here) => {
    const { manager } = here;
    const followed = await loadFor("reviseSubmission", who, manager, id);
    if (!followed) return unknownDraft();
    // The record's row puts two who revise at once in a line.
    await manager
      .createQueryBuilder(Constraint, "record")
      .setLock("pessimistic_write")
      .where("record.id = :id", { id: followed.constraintId })
      .getOneOrFail();
    const all = await manager.find(Revision, {
      where: { constraintId: followed.constraintId },
      order: { ordinal: "DESC" },
    });
    const open = all.find((one) => ["draft", "submitted", "inReview"].includes(one.state));
    if (open?.state === "draft") return reload(manager, open.id);
    if (open) return refuse("open", "A newer revision of this record is with the editors already.");
    const answerable = all.find((one) => one.state === "returned" || one.state === "approved");
    if (answerable?.id !== followed.id) {
      return refuse("notLatest", "Only the last decided revision can be revised.");
    }
    const draft = await insertRevision(manager, {
      constraintId: followed.constraintId,
      ordinal: (all[0]?.ordinal ?? 0) + 1,
      fields: followed.fields,
      citationId: followed.citationId,
      followsId: followed.id,
      answers: followed.answers.map((answer) => ({ ...answer, accepted: false })),
      at: who.now,
    });
    await carryEvidenceOver(manager, followed.id, draft.id);
    await here.event({
      kind: "revision.drafted",
      subject: formatQuotable(draft.constraintId, draft.ordinal),
      detail: { follows: formatQuotable(followed.constraintId, followed.ordinal) },
    });
    return draft;
  });
}
