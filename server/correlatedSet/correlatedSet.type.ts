import { createUnionType, Field, Float, ID, InputType, Int, ObjectType } from "type-graphql";

import { CitationType } from "~server/citation/citation.type";
import { MatrixKindEnum, SetStateEnum } from "~server/common/enums";
import { Refusal } from "~server/common/outcomes";
import { FindingAnswer, FindingType } from "~server/constraint/constraint.type";
import { ConstraintFieldsType } from "~server/constraint/fields.type";
import { AnswerInput } from "~server/constraint/submission.type";
import type { MatrixKind, SetState } from "~shared/correlatedSet/content";

@ObjectType({ description: "A record in a correlated set, or one that could stand in it." })
export class SetMemberType {
  @Field(() => String, { description: "FL-0042" }) number!: string;
  @Field(() => String, { nullable: true, description: "FL-0042.3, of the revision in use." })
  quotable!: string | null;
  @Field(() => ConstraintFieldsType, {
    nullable: true,
    description: "What it prints; null while this person may not see it.",
  })
  fields!: ConstraintFieldsType | null;
  @Field(() => Boolean) approved!: boolean;
  @Field(() => String, {
    nullable: true,
    description: "Why it can't be part of a set, as the end of a sentence, or null.",
  })
  cannotJoin!: string | null;
}

@ObjectType({ description: "An approved correlated set, for its records." })
export class SetLink {
  @Field(() => String) number!: string;
  @Field(() => String) label!: string;
  @Field(() => [String]) members!: string[];
}

@ObjectType("CorrelatedSet", {
  description:
    "Records of one paper with the matrix it prints for them: all of them count together, or a part by its exact marginal.",
})
export class CorrelatedSetType {
  @Field(() => String, { description: "FLS-0003" }) number!: string;
  @Field(() => SetStateEnum) state!: SetState;
  @Field(() => Int) version!: number;
  @Field(() => String, { nullable: true }) label!: string | null;
  @Field(() => CitationType) citation!: CitationType;
  @Field(() => [SetMemberType], { description: "In the order of the matrix." })
  members!: SetMemberType[];
  @Field(() => MatrixKindEnum, { nullable: true }) matrixKind!: MatrixKind | null;
  @Field(() => [[String]], { description: "Lower triangle as printed." })
  triangle!: string[][];
  @Field(() => [[Float]], {
    nullable: true,
    description: "Correlations as printed; null while an entry is open.",
  })
  printedRho!: number[][] | null;
  @Field(() => [[Float]], {
    nullable: true,
    description:
      "Correlations as used: turned round where one of two records is an ionized fraction.",
  })
  usedRho!: number[][] | null;
  @Field(() => String, { nullable: true }) place!: string | null;
  @Field(() => String, { nullable: true }) page!: string | null;
  @Field(() => String, { nullable: true }) note!: string | null;
  @Field(() => String) submittedBy!: string;
  @Field(() => String, { nullable: true }) readBy!: string | null;
  @Field(() => Date, { nullable: true }) submittedAt!: Date | null;
  @Field(() => Date, { nullable: true }) decidedAt!: Date | null;
  @Field(() => Date) updatedAt!: Date;
  @Field(() => [String], { description: "Members whose revision in use is a later one by now." })
  changedMembers!: string[];
  @Field(() => String, { nullable: true }) withdrawnBecause!: string | null;
  @Field(() => String, { nullable: true, description: "The set that this one follows." })
  follows!: string | null;
  @Field(() => Boolean) mine!: boolean;
  @Field(() => String, { nullable: true, description: "The editor's comment; for its owner." })
  decisionNote!: string | null;
  @Field(() => [FindingType], { description: "For its owner, and for an editor who has read it." })
  findings!: FindingType[];
  @Field(() => [FindingAnswer]) answers!: FindingAnswer[];
}

@ObjectType({ description: "A waiting set before its second reading: nothing of its matrix." })
export class SetQueueItem {
  @Field(() => String) number!: string;
  @Field(() => SetStateEnum) state!: SetState;
  @Field(() => Int) version!: number;
  @Field(() => CitationType) citation!: CitationType;
  @Field(() => [String]) members!: string[];
  @Field(() => String, { nullable: true }) place!: string | null;
  @Field(() => String, { nullable: true }) page!: string | null;
  @Field(() => Date) submittedAt!: Date;
  @Field(() => Boolean) claimedByMe!: boolean;
  @Field(() => Date, { nullable: true }) claimedUntil!: Date | null;
  @Field(() => String, { nullable: true, description: "Why this person can't claim it, or null." })
  barredBecause!: string | null;
}

@ObjectType()
export class SetEntry {
  @Field(() => Int, { nullable: true, description: "From 0; null for the kind of matrix." })
  row!: number | null;
  @Field(() => Int, { nullable: true }) column!: number | null;
  @Field(() => String) reading!: string;
  @Field(() => String) submitted!: string;
  @Field(() => Boolean) agrees!: boolean;
  @Field(() => [String], { description: "Earlier readings of this entry, oldest first." })
  earlier!: string[];
}

@ObjectType()
export class SetReview {
  @Field(() => SetQueueItem) item!: SetQueueItem;
  @Field(() => [SetMemberType]) members!: SetMemberType[];
  @Field(() => Date, { nullable: true }) readingStoredAt!: Date | null;
  @Field(() => [String]) blockers!: string[];
  @Field(() => [SetEntry], { description: "Empty until the reading is stored." })
  comparison!: SetEntry[];
  @Field(() => CorrelatedSetType, {
    nullable: true,
    description: "Null until the reading is stored.",
  })
  set!: CorrelatedSetType | null;
}

@InputType()
export class SaveSetInput {
  @Field(() => String) number!: string;
  @Field(() => Int) version!: number;
  @Field(() => String, { nullable: true }) label?: string | null;
  @Field(() => [String]) members!: string[];
  @Field(() => MatrixKindEnum, { nullable: true }) matrixKind?: MatrixKind | null;
  @Field(() => [[String]]) triangle!: string[][];
  @Field(() => String, { nullable: true }) place?: string | null;
  @Field(() => String, { nullable: true }) page?: string | null;
  @Field(() => String, { nullable: true }) note?: string | null;
  @Field(() => [AnswerInput], { nullable: true }) answers?: AnswerInput[] | null;
}

@InputType()
export class StartSetInput {
  @Field(() => ID) citationId!: string;
  @Field(() => [String]) members!: string[];
}

@InputType()
export class SetReadingInput {
  @Field(() => MatrixKindEnum, { nullable: true }) matrixKind?: MatrixKind | null;
  @Field(() => [[String]]) triangle!: string[][];
}

@InputType()
export class SetEntryInput {
  @Field(() => Int, { nullable: true }) row?: number | null;
  @Field(() => Int, { nullable: true }) column?: number | null;
  @Field(() => String, { description: "The entry as read now, or the kind of matrix." })
  text!: string;
  @Field(() => String) why!: string;
}

export const CorrelatedSetResult = createUnionType({
  name: "CorrelatedSetResult",
  types: () => [CorrelatedSetType, Refusal] as const,
});

export const SetReviewResult = createUnionType({
  name: "SetReviewResult",
  types: () => [SetReview, Refusal] as const,
});
