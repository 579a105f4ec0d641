import { requireViewer, type RequestContext } from "~server/common/context";
import { fieldChanges, FindingAnswer, FindingType } from "~server/constraint/constraint.type";
import { fieldsType } from "~server/constraint/fields.type";
import { nameOf } from "~server/constraint/names";
import { Revision } from "~server/constraint/revision.entity";
import { checklistFor } from "~shared/review/checklist";
import {
  compareReading,
  readingText,
  type ReadingContent,
  type ReadingField,
} from "~shared/review/reading";
import type { ConstraintFields } from "~shared/statement/fields";

import { findingFor, recordsReadBlind, seesRevision } from "./blindness";
import { commentsOf } from "./comments";
import { Reading } from "./reading.entity";
import { blockersOf, fieldsToRead } from "./review.service";
import { papersLeftBy } from "./recusal.service";
import { ChecklistPoint, queueItem, Review, ReviewField } from "./review.type";

/** A submission as this editor may see it now: after the reading with everything, before it without. */
export async function reviewFor(ctx: RequestContext, revision: Revision): Promise<Review> {
  const { manager } = ctx.database;
  const editor = requireViewer(ctx);
  const now = new Date();
  const waiting = revision.state === "submitted" || revision.state === "inReview";
  const left = await papersLeftBy(manager, editor.id);
  const reading = await manager.findOneBy(Reading, {
    revisionId: revision.id,
    editorId: editor.id,
  });
  const review = Object.assign(new Review(), {
    item: queueItem(revision, editor, left, now),
    fieldsToRead: waiting && !reading ? await fieldsToRead(manager, revision) : [],
    readingStoredAt: reading?.storedAt ?? null,
    blockers: waiting ? [] : ["It is decided."],
    comparison: [],
    contributor: null,
    submission: null,
    findings: [],
    answers: [],
    comments: [],
    changes: [],
    checklist: [],
  });
  if (waiting && !reading) {
    // Said without comparing anything: before the reading a blocker tells nothing of the content.
    review.blockers = blockersOf(revision, null, editor, left, now);
    return review;
  }
  if (!reading || !(await seesRevision(manager, editor, revision, now))) return review;

  const followed =
    revision.followsId === null
      ? null
      : await manager.findOneBy(Revision, { id: revision.followsId });
  const blind = await recordsReadBlind(manager, editor, now);
  return Object.assign(review, {
    blockers: waiting ? blockersOf(revision, reading, editor, left, now) : review.blockers,
    comparison: comparison(reading, revision.fields),
    contributor: await nameOf(ctx)(revision.constraint.ownerId),
    submission: fieldsType(revision.fields),
    findings: revision.findings.map((finding) =>
      Object.assign(new FindingType(), findingFor(finding, blind)),
    ),
    answers: revision.answers.map((answer) => Object.assign(new FindingAnswer(), answer)),
    comments: await commentsOf(
      ctx,
      revision.state === "returned" ? revision.id : (revision.followsId ?? revision.id),
    ),
    changes: followed ? fieldChanges(followed.fields, revision.fields) : [],
    checklist: checklistFor(revision.fields).map(({ code, text }) =>
      Object.assign(new ChecklistPoint(), { code, text, ticked: reading.ticked.includes(code) }),
    ),
  });
}

function comparison(reading: Reading, submitted: ConstraintFields): ReviewField[] {
  return compareReading(reading.latest, submitted).map((compared) =>
    Object.assign(new ReviewField(), {
      ...compared,
      earlier: earlierTexts(reading, compared.field),
    }),
  );
}

function earlierTexts(reading: Reading, field: ReadingField): string[] {
  return reading.corrections
    .filter((correction) => correction.field === field)
    .map((correction) => {
      const then = { ...reading.latest, [field]: correction.before } as ReadingContent;
      return readingText(field, then) ?? "open";
    });
}
