import { createUnionType, Field, ID, InputType, Int, ObjectType } from "type-graphql";

import { CitationType, citationType } from "~server/citation/citation.type";
import { RevisionStateEnum } from "~server/common/enums";
import { Refusal } from "~server/common/outcomes";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";
import type { RevisionState } from "~shared/review/states";

import { ConstraintFieldsInput, ConstraintFieldsType, fieldsType } from "./fields.type";
import type { Revision } from "./revision.entity";

@ObjectType({ description: "A revision as its contributor sees it." })
export class Submission {
  @Field(() => ID) id!: string;
  @Field(() => String) number!: string;
  @Field(() => Int) ordinal!: number;
  @Field(() => RevisionStateEnum) state!: RevisionState;
  @Field(() => Int, {
    description: "Version to send back with the next save; a save with an older one is refused.",
  })
  version!: number;
  @Field(() => CitationType, { nullable: true }) citation!: CitationType | null;
  @Field(() => ConstraintFieldsType) fields!: ConstraintFieldsType;
  @Field(() => Date, { nullable: true }) submittedAt!: Date | null;
  @Field(() => Date) updatedAt!: Date;
  @Field(() => String, { nullable: true }) decisionNote!: string | null;

  // Not in the API: what its resolvers need.
  revision!: Revision;
}

@InputType()
export class AnswerInput {
  @Field(() => String) code!: string;
  @Field(() => String) answer!: string;
}

@InputType()
export class CommentAnswerInput {
  @Field(() => ID) commentId!: string;
  @Field(() => String) answer!: string;
}

@InputType()
export class SaveDraftInput {
  @Field(() => ID) id!: string;
  @Field(() => Int) version!: number;
  @Field(() => ID, { nullable: true }) citationId?: string | null;
  @Field(() => ConstraintFieldsInput) fields!: ConstraintFieldsInput;
  @Field(() => [AnswerInput], { nullable: true }) answers?: AnswerInput[] | null;
  @Field(() => [CommentAnswerInput], { nullable: true })
  commentAnswers?: CommentAnswerInput[] | null;
}

export const SubmissionResult = createUnionType({
  name: "SubmissionResult",
  types: () => [Submission, Refusal] as const,
});

/** A revision for its owner; nobody else is handed one. */
export function submissionType(revision: Revision): Submission {
  return Object.assign(new Submission(), {
    id: revision.id,
    number: formatRecordNumber(revision.constraintId),
    ordinal: revision.ordinal,
    state: revision.state,
    version: revision.version,
    citation: revision.citation && citationType(revision.citation),
    fields: fieldsType(revision.fields),
    submittedAt: revision.submittedAt,
    updatedAt: revision.updatedAt,
    decisionNote: revision.decisionNote,
    revision,
  });
}

export function submissionOutcome(outcome: Revision | Refusal): Submission | Refusal {
  return outcome instanceof Refusal ? outcome : submissionType(outcome);
}
