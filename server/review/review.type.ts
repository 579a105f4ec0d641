import { createUnionType, Field, ID, InputType, Int, ObjectType } from "type-graphql";

import { CitationType, citationType } from "~server/citation/citation.type";
import { RevisionStateEnum, VersionReadEnum } from "~server/common/enums";
import { Refusal } from "~server/common/outcomes";
import {
  FieldChange,
  FieldComment,
  FindingAnswer,
  FindingType,
} from "~server/constraint/constraint.type";
import { ConstraintFieldsType } from "~server/constraint/fields.type";
import type { Revision } from "~server/constraint/revision.entity";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";
import type { RevisionState } from "~shared/review/states";
import type { VersionRead } from "~shared/statement/fields";

import { claimIsLive, notRenewable } from "./claim.service";
import { barredBecause, type Editor } from "./recusal.service";

@ObjectType({
  description: "What an editor sees of a submission before the second reading: no number of it.",
})
export class QueueItem {
  @Field(() => ID) id!: string;
  @Field(() => String) number!: string;
  @Field(() => Int) ordinal!: number;
  @Field(() => RevisionStateEnum) state!: RevisionState;
  @Field(() => Int) version!: number;
  @Field(() => CitationType) citation!: CitationType;
  @Field(() => VersionReadEnum, { nullable: true }) versionRead!: VersionRead | null;
  @Field(() => String, { nullable: true }) place!: string | null;
  @Field(() => String, { nullable: true }) page!: string | null;
  @Field(() => Date) submittedAt!: Date;
  @Field(() => Boolean) claimedByMe!: boolean;
  @Field(() => Date, { nullable: true }) claimedUntil!: Date | null;
  @Field(() => String, {
    nullable: true,
    description: "Why this person can't claim it, or null.",
  })
  barredBecause!: string | null;
  @Field(() => Boolean, { description: "Whether this person leaves the paper to other editors." })
  leftToOthers!: boolean;
  @Field(() => String, {
    nullable: true,
    description:
      "Why one's own claim can't be lengthened now; null when it can, or is not one's own.",
  })
  notRenewable!: string | null;
}

@ObjectType({ description: "An editor who can take a submission over." })
export class OtherEditor {
  @Field(() => ID) id!: string;
  @Field(() => String) nameOnPapers!: string;
}

@ObjectType({ description: "A paper that the viewer leaves to other editors." })
export class LeftPaper {
  @Field(() => CitationType) citation!: CitationType;
  @Field(() => String, { nullable: true }) reason!: string | null;
  @Field(() => Date) at!: Date;
}

@ObjectType()
export class ChecklistPoint {
  @Field(() => String) code!: string;
  @Field(() => String) text!: string;
  @Field(() => Boolean) ticked!: boolean;
}

@ObjectType({ description: "A comment with everything written below it." })
export class CommentThread {
  @Field(() => FieldComment) comment!: FieldComment;
}

export const ThreadResult = createUnionType({
  name: "ThreadResult",
  types: () => [CommentThread, Refusal] as const,
});

@ObjectType()
export class ReviewField {
  @Field(() => String) field!: string;
  @Field(() => String, { nullable: true, description: "Stored reading, latest." })
  reading!: string | null;
  @Field(() => String, { nullable: true }) submitted!: string | null;
  @Field(() => Boolean) agrees!: boolean;
  @Field(() => [String], { description: "Earlier readings of this field, oldest first." })
  earlier!: string[];
}

@ObjectType()
export class Review {
  @Field(() => QueueItem) item!: QueueItem;
  @Field(() => [String], {
    description: "Fields to read again; the second reading is stored when all are given.",
  })
  fieldsToRead!: string[];
  @Field(() => Date, { nullable: true }) readingStoredAt!: Date | null;
  @Field(() => [String], {
    description: "Why approval is not open yet, in words; empty when it is.",
  })
  blockers!: string[];
  @Field(() => [ReviewField], {
    description: "Everything below is null or empty until the reading is stored.",
  })
  comparison!: ReviewField[];
  @Field(() => String, { nullable: true }) contributor!: string | null;
  @Field(() => ConstraintFieldsType, { nullable: true }) submission!: ConstraintFieldsType | null;
  @Field(() => [FindingType]) findings!: FindingType[];
  @Field(() => [FindingAnswer]) answers!: FindingAnswer[];
  @Field(() => [FieldComment]) comments!: FieldComment[];
  @Field(() => [FieldChange]) changes!: FieldChange[];
  @Field(() => [ChecklistPoint], { description: "All are ticked before it can be approved." })
  checklist!: ChecklistPoint[];
}

export const ReviewResult = createUnionType({
  name: "ReviewResult",
  types: () => [Review, Refusal] as const,
});

@InputType()
export class ReturnComment {
  @Field(() => String) field!: string;
  @Field(() => String) text!: string;
}

/** A waiting submission for one editor: place, page and version lead to the paper, no more. */
export function queueItem(
  revision: Revision,
  editor: Editor,
  declared: ReadonlySet<string>,
  now: Date,
): QueueItem {
  if (!revision.citation || !revision.submittedAt) {
    throw new Error(`revision ${revision.id} was submitted without a citation or a date`);
  }
  const live = claimIsLive(revision, now);
  return Object.assign(new QueueItem(), {
    id: revision.id,
    number: formatRecordNumber(revision.constraintId),
    ordinal: revision.ordinal,
    state: revision.state,
    version: revision.version,
    citation: citationType(revision.citation),
    versionRead: revision.fields.versionRead,
    place: revision.fields.place,
    page: revision.fields.page,
    submittedAt: revision.submittedAt,
    claimedByMe: live && revision.claimedById === editor.id,
    claimedUntil: live ? revision.claimedUntil : null,
    barredBecause: barredBecause(revision, editor, declared),
    leftToOthers: declared.has(revision.citation.id),
    notRenewable: live && revision.claimedById === editor.id ? notRenewable(revision, now) : null,
  });
}
