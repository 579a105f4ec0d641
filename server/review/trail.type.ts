import { Field, ID, Int, ObjectType } from "type-graphql";

import { RevisionStateEnum } from "~server/common/enums";
import { FieldChange, FieldComment } from "~server/constraint/constraint.type";
import type { RevisionState } from "~shared/review/states";

@ObjectType({ description: "What had to be answered before a submission, and the answer." })
export class AnsweredFinding {
  @Field(() => String) message!: string;
  @Field(() => String) answer!: string;
  @Field(() => Boolean) accepted!: boolean;
}

@ObjectType({ description: "One revision of a record as its contributor looks back on it." })
export class TrailRound {
  @Field(() => ID) id!: string;
  @Field(() => Int) ordinal!: number;
  @Field(() => RevisionStateEnum) state!: RevisionState;
  @Field(() => String) enteredBy!: string;
  @Field(() => Date) begunAt!: Date;
  @Field(() => Date, { nullable: true }) submittedAt!: Date | null;
  @Field(() => [FieldChange], { description: "Against the revision that it follows." })
  changes!: FieldChange[];
  @Field(() => [AnsweredFinding]) answers!: AnsweredFinding[];
  @Field(() => String, {
    nullable: true,
    description: "Who read the paper again and decided; null until it is decided.",
  })
  readBy!: string | null;
  @Field(() => Date, { nullable: true }) readAt!: Date | null;
  @Field(() => Date, { nullable: true }) decidedAt!: Date | null;
  @Field(() => String, { nullable: true }) decisionNote!: string | null;
  @Field(() => [FieldComment]) comments!: FieldComment[];
}
