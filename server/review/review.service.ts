import type { EntityManager } from "typeorm";

import { done, refuse, type Done, type Refusal } from "~server/common/outcomes";
import { Constraint } from "~server/constraint/constraint.entity";
import { reload, updateAt } from "~server/constraint/draft.service";
import { FIELD_NAMES_IN_ORDER } from "~server/constraint/fields.type";
import { Revision } from "~server/constraint/revision.entity";
import { change, type Acting } from "~server/event/acting";
import { comeIntoUse, refuseIntoUse } from "~server/recordLife/intoUse";
import {
  READING_FIELDS,
  compareReading,
  fieldsToReread,
  mergeReading,
  readingFieldName,
  readingMissing,
  type ReadingContent,
  type ReadingField,
} from "~shared/review/reading";
import { checklistFor } from "~shared/review/checklist";
import { emptyFields, type ConstraintFields } from "~shared/statement/fields";

import { CHANGED, held, holdsClaim, subjectOf } from "./claim.service";
import { FieldCommentRecord } from "./comment.entity";
import { tellApproved, tellReturned } from "./mails";
import { Reading } from "./reading.entity";
import { readingFromInput, type ReadingInput } from "./reading.input";
import { barredBecause, papersLeftBy, type Editor } from "./recusal.service";

export { claim, releaseClaim } from "./claim.service";

/** What an earlier reading of this record already settles, if this revision follows a read one. */
export async function earlierReading(
  manager: EntityManager,
  revision: Revision,
): Promise<{ reading: ReadingContent; submitted: ConstraintFields } | null> {
  if (revision.followsId === null) return null;
  const followed = await manager.findOneBy(Revision, { id: revision.followsId });
  if (!followed || followed.citationId !== revision.citationId) return null;
  const [reading] = await manager.find(Reading, {
    where: { revisionId: followed.id },
    order: { storedAt: "DESC" },
    take: 1,
  });
  return reading ? { reading: reading.latest, submitted: followed.fields } : null;
}

/** Fields this editor types: all of them, or in a resubmission the changed and the differing ones. */
export async function fieldsToRead(
  manager: EntityManager,
  revision: Revision,
): Promise<ReadingField[]> {
  const earlier = await earlierReading(manager, revision);
  return earlier
    ? fieldsToReread(earlier.reading, earlier.submitted, revision.fields)
    : [...READING_FIELDS];
}

/**
 * Stores the blind reading, once. It must be complete by the editor's own choice of
 * quantity and statement: the submitted ones are not known to them.
 */
export async function storeReading(
  who: Acting,
  id: string,
  input: ReadingInput,
): Promise<Revision | Refusal> {
  const parsed = readingFromInput(input);
  if ("tooLong" in parsed) {
    return refuse("tooLong", "This text is too long to keep.", parsed.tooLong);
  }
  return change<Revision | Refusal>(who, async (here) => {
    const revision = await held(here, who, id);
    if (!(revision instanceof Revision)) return revision;
    const { manager } = here;
    if (await manager.existsBy(Reading, { revisionId: id, editorId: who.viewer.id })) {
      return refuse("alreadyRead", "Your reading is stored. Correct single fields instead.");
    }
    const earlier = await earlierReading(manager, revision);
    const typed = await fieldsToRead(manager, revision);
    const content = mergeReading(earlier?.reading ?? emptyFields(), parsed.reading, typed);
    const missing = readingMissing(content, typed);
    const [first] = missing;
    if (first !== undefined) {
      return refuse(
        "incomplete",
        `Read this too: ${missing.map(readingFieldName).join(", ")}.`,
        first,
      );
    }
    await manager.insert(Reading, {
      revisionId: id,
      editorId: who.viewer.id,
      storedAt: who.now,
      first: content,
      latest: content,
      typed,
      corrections: [],
      ticked: [],
    } as never);
    await here.event({ kind: "reading.stored", subject: subjectOf(revision) });
    return reload(manager, id);
  });
}

const LONGEST_WHY = 1000;

/** Reads one differing field again after the comparison. What stood there stays on record. */
export async function correctReading(
  who: Acting,
  id: string,
  field: string,
  input: ReadingInput,
  why: string,
): Promise<Revision | Refusal> {
  const name = READING_FIELDS.find((one) => one === field);
  const parsed = readingFromInput(input);
  if (!name) return refuse("unknownField", "There is no such field.", field);
  if ("tooLong" in parsed) {
    return refuse("tooLong", "This text is too long to keep.", parsed.tooLong);
  }
  const reason = why.trim();
  if (reason === "") return refuse("why", "Say in a few words why you read it differently now.");
  if (reason.length > LONGEST_WHY) {
    return refuse("why", `The reason has at most ${LONGEST_WHY} characters.`);
  }
  return change<Revision | Refusal>(who, async (here) => {
    const revision = await held(here, who, id);
    if (!(revision instanceof Revision)) return revision;
    const reading = await here.manager.findOneBy(Reading, {
      revisionId: id,
      editorId: who.viewer.id,
    });
    if (!reading) return refuse("notRead", "Store your own reading first.");
    const compared = compareReading(reading.latest, revision.fields);
    if (!compared.some((one) => one.field === name && !one.agrees)) {
      return refuse("agrees", `${readingFieldName(name)} doesn't differ.`, name);
    }
    await here.manager.update(Reading, { id: reading.id }, {
      latest: { ...reading.latest, [name]: parsed.reading[name] ?? null },
      corrections: [
        ...reading.corrections,
        {
          field: name,
          before: reading.latest[name] ?? null,
          why: reason,
          at: who.now.toISOString(),
        },
      ],
    } as never);
    await here.event({
      kind: "reading.corrected",
      subject: subjectOf(revision),
      detail: { field: name },
    });
    return reload(here.manager, id);
  });
}

/** Accepts the contributor's answer to a finding that must be answered. */
export async function acceptAnswer(
  who: Acting,
  id: string,
  code: string,
): Promise<Revision | Refusal> {
  return change<Revision | Refusal>(who, async (here) => {
    const revision = await held(here, who, id);
    if (!(revision instanceof Revision)) return revision;
    if (!(await hasStoredReading(here.manager, who, id))) {
      return refuse("notRead", "Store your own reading first.");
    }
    const answer = revision.answers.find((one) => one.code === code);
    if (!answer) return refuse("unknownAnswer", "There is no such answer.");
    if (answer.accepted) return revision;
    const won = await updateAt(here.manager, id, revision.version, ["inReview"], {
      answers: revision.answers.map((one) =>
        one.code === code ? { ...one, accepted: true } : one,
      ),
    });
    if (!won) return refuse("stale", CHANGED);
    await here.event({
      kind: "answer.accepted",
      subject: subjectOf(revision),
      detail: { code },
    });
    return reload(here.manager, id);
  });
}

/**
 * Keeps which points of the checklist this editor has ticked, all of them at once; codes that the
 * submission's checklist doesn't have are left out.
 */
export async function tickChecklist(
  who: Acting,
  id: string,
  codes: readonly string[],
): Promise<Revision | Refusal> {
  return change<Revision | Refusal>(who, async (here) => {
    const revision = await held(here, who, id);
    if (!(revision instanceof Revision)) return revision;
    const ticked = checklistFor(revision.fields)
      .map(({ code }) => code)
      .filter((code) => codes.includes(code));
    const own = { revisionId: id, editorId: who.viewer.id };
    if (!(await here.manager.existsBy(Reading, own))) {
      return refuse("notRead", "Store your own reading first.");
    }
    await here.manager.update(Reading, own, { ticked });
    return revision;
  });
}

async function hasStoredReading(
  manager: EntityManager,
  who: Acting,
  revisionId: string,
): Promise<boolean> {
  return manager.existsBy(Reading, { revisionId, editorId: who.viewer.id });
}

/** Why approval is not open yet, in words; empty when it is. */
export function blockersOf(
  revision: Revision,
  reading: Reading | null,
  editor: Editor,
  declared: ReadonlySet<string>,
  now: Date,
): string[] {
  const barred = barredBecause(revision, editor, declared);
  if (barred) return [barred];
  const blockers: string[] = [];
  if (!holdsClaim(revision, editor.id, now)) blockers.push("Claim it first.");
  if (!reading) return [...blockers, "Your second reading is not stored yet."];
  const differing = compareReading(reading.latest, revision.fields).filter((one) => !one.agrees);
  if (differing.length > 0) {
    const names = differing.map((one) => readingFieldName(one.field)).join(", ");
    blockers.push(`Your reading differs at: ${names}. Correct it, or return the submission.`);
  }
  const accepted = new Set(
    revision.answers.filter((answer) => answer.accepted).map((answer) => answer.code),
  );
  const open = revision.findings.filter(
    (finding) => finding.grade === "mustAnswer" && !accepted.has(finding.code),
  );
  if (open.length > 0) {
    blockers.push(
      open.length === 1
        ? "One answer of the contributor is not accepted yet."
        : `${open.length} answers of the contributor are not accepted yet.`,
    );
  }
  const unticked = checklistFor(revision.fields).filter(
    ({ code }) => !reading.ticked.includes(code),
  );
  if (unticked.length > 0) {
    blockers.push(
      unticked.length === 1
        ? "One point of the checklist is not ticked yet."
        : `${unticked.length} points of the checklist are not ticked yet.`,
    );
  }
  return blockers;
}

const LONGEST_NOTE = 2000;

/** Puts a revision in use. Nothing may stand against it, and no one may have decided it before. */
export async function approve(
  who: Acting,
  id: string,
  version: number,
  note: string | null,
): Promise<Done | Refusal> {
  if (note !== null && note.length > LONGEST_NOTE) {
    return refuse("tooLong", `The note has at most ${LONGEST_NOTE} characters.`);
  }
  return change<Done | Refusal>(who, async (here) => {
    const revision = await held(here, who, id);
    if (!(revision instanceof Revision)) return revision;
    const { manager } = here;
    const reading = await manager.findOneBy(Reading, { revisionId: id, editorId: who.viewer.id });
    const left = await papersLeftBy(manager, who.viewer.id);
    const [blocker] = blockersOf(revision, reading, who.viewer, left, who.now);
    if (blocker !== undefined) return refuse("blocked", blocker);
    const linked = await refuseIntoUse(here, who, revision);
    if (linked) return linked;
    const decided = await updateAt(manager, id, version, ["inReview"], {
      state: "approved",
      decidedById: who.viewer.id,
      decidedAt: who.now,
      decisionNote: note?.trim() || null,
    });
    if (!decided) return refuse("stale", CHANGED);
    await manager.update(
      Constraint,
      { id: revision.constraintId },
      { approvedRevisionId: revision.id },
    );
    await here.event({
      kind: "revision.approved",
      subject: subjectOf(revision),
      detail: { checklist: reading?.ticked.length ?? 0 },
    });
    await comeIntoUse(here, who, revision);
    await tellApproved(here, who, revision);
    return done(`${subjectOf(revision)} is approved.`);
  });
}

const MOST_COMMENTS = 60;

/** Sends a revision back with comments at its fields. */
export async function returnSubmission(
  who: Acting,
  id: string,
  version: number,
  comments: readonly { field: string; text: string }[],
  note: string | null,
): Promise<Done | Refusal> {
  const kept = comments
    .map(({ field, text }) => ({ field, text: text.trim() }))
    .filter(({ text }) => text !== "");
  if (kept.length === 0) {
    return refuse("comments", "Say at one field at least what has to change.");
  }
  if (kept.length > MOST_COMMENTS || kept.some(({ text }) => text.length > LONGEST_NOTE)) {
    return refuse(
      "comments",
      `At most ${MOST_COMMENTS} comments of ${LONGEST_NOTE} characters each.`,
    );
  }
  if (note !== null && note.length > LONGEST_NOTE) {
    return refuse("tooLong", `The note has at most ${LONGEST_NOTE} characters.`);
  }
  const known = new Set<string>([...FIELD_NAMES_IN_ORDER, "citation"]);
  const strange = kept.find(({ field }) => !known.has(field));
  if (strange) return refuse("unknownField", "There is no such field.", strange.field);
  return change<Done | Refusal>(who, async (here) => {
    const revision = await held(here, who, id);
    if (!(revision instanceof Revision)) return revision;
    const decided = await updateAt(here.manager, id, version, ["inReview"], {
      state: "returned",
      decidedById: who.viewer.id,
      decidedAt: who.now,
      decisionNote: note?.trim() || null,
    });
    if (!decided) return refuse("stale", CHANGED);
    for (const [position, { field, text }] of kept.entries()) {
      await here.manager.insert(FieldCommentRecord, {
        revisionId: id,
        position,
        field,
        text,
        byId: who.viewer.id,
        at: who.now,
        answer: null,
      });
    }
    const fields = kept.map(({ field }) => field);
    await here.event({
      kind: "revision.returned",
      subject: subjectOf(revision),
      detail: { fields },
    });
    await tellReturned(here, who, revision, fields);
    return done(`${subjectOf(revision)} went back to its contributor.`);
  });
}
