import { createUnionType, Field, ID, Int, ObjectType } from "type-graphql";

import { LinkRelationEnum, NoticeKindEnum, RecordStateEnum } from "~server/common/enums";
import { Refusal } from "~server/common/outcomes";
import { ConstraintType } from "~server/constraint/constraint.type";
import type { LinkRelation } from "~shared/dependence/relation";
import type { NoticeKind } from "~shared/review/notice";
import type { RecordState } from "~shared/review/states";

@ObjectType("RecordNotice", { description: "What was recorded about a record after its approval." })
export class RecordNoticeType {
  @Field(() => ID) id!: string;
  @Field(() => NoticeKindEnum) kind!: NoticeKind;
  @Field(() => String) reason!: string;
  @Field(() => String) by!: string;
  @Field(() => Date) at!: Date;
  @Field(() => String, { nullable: true, description: "FL-0042: the record in its place." })
  replacedBy!: string | null;
  @Field(() => Date, { nullable: true, description: "When it was taken back or corrected." })
  endedAt!: Date | null;
  @Field(() => String, { nullable: true }) endedBy!: string | null;
  @Field(() => String, { nullable: true }) endedReason!: string | null;
}

@ObjectType({ description: "Another record that this one names, or that names it." })
export class RecordRelationType {
  @Field(() => LinkRelationEnum) relation!: LinkRelation;
  @Field(() => Boolean, { description: "Whether the other record says it of this one." })
  inverse!: boolean;
  @Field(() => String) number!: string;
  @Field(() => String) shortName!: string;
  @Field(() => RecordStateEnum) state!: RecordState;
}

@ObjectType({ description: "One way to something that a record is conditioned on." })
export class ConditionChainType {
  @Field(() => [String], { description: "Records on the way, this one first." })
  through!: string[];
  @Field(() => String, { description: "Kind of data, or number of a record, at its end." })
  on!: string;
}

@ObjectType({ description: "One thing that happened to a record, by the event log." })
export class RecordEventType {
  @Field(() => Int) sequence!: number;
  @Field(() => String, { description: "revision.approved, record.superseded, …" }) kind!: string;
  @Field(() => Date) at!: Date;
  @Field(() => String) by!: string;
  @Field(() => String, { description: "FL-0042 or FL-0042.3" }) subject!: string;
  @Field(() => String, { nullable: true }) replacedBy!: string | null;
}

@ObjectType({ description: "What happened to a row of a saved table since it was saved." })
export class RowSinceType {
  @Field(() => String) number!: string;
  @Field(() => RecordStateEnum) state!: RecordState;
  @Field(() => [RecordNoticeType], { description: "Notices since then that hold." })
  notices!: RecordNoticeType[];
  @Field(() => String, { nullable: true, description: "FL-0042.3: a newer revision in use." })
  newerRevision!: string | null;
}

@ObjectType("RecordLife", {
  description:
    "A record with what it is to others and what became of it; for one record at a time.",
})
export class RecordLifeType {
  @Field(() => ConstraintType) constraint!: ConstraintType;
}

export const RecordLifeResult = createUnionType({
  name: "RecordLifeResult",
  types: () => [RecordLifeType, Refusal] as const,
});
