import { createUnionType, Field, ID, InputType, Int, ObjectType } from "type-graphql";

import { CitationType } from "~server/citation/citation.type";
import { CheckStateEnum, CheckVerdictEnum, LinkStandingEnum } from "~server/common/enums";
import { Refusal } from "~server/common/outcomes";
import { ConstraintFieldsType } from "~server/constraint/fields.type";
import type { CheckState, CheckVerdict, LinkStanding } from "~shared/review/authorCheck";

@ObjectType({ description: "One entry of a check's answer trail." })
export class AuthorCheckLine {
  @Field(() => ID) id!: string;
  @Field(() => String, { nullable: true, description: "The editor; null for the author." })
  by!: string | null;
  @Field(() => CheckVerdictEnum, { nullable: true }) verdict!: CheckVerdict | null;
  @Field(() => String, { nullable: true }) text!: string | null;
  @Field(() => Date) at!: Date;
}

/** A check as the desk sees it. */
@ObjectType("AuthorCheck")
export class AuthorCheckType {
  @Field(() => ID) id!: string;
  @Field(() => Int) version!: number;
  @Field(() => String) number!: string;
  @Field(() => String) quotable!: string;
  @Field(() => CitationType, { nullable: true }) citation!: CitationType | null;
  @Field(() => CheckStateEnum) state!: CheckState;
  @Field(() => CheckVerdictEnum, { nullable: true }) verdict!: CheckVerdict | null;
  @Field(() => Boolean, { description: "Whether the link has run out." }) expired!: boolean;
  @Field(() => String, { nullable: true, description: "Null once it is forgotten." })
  authorName!: string | null;
  @Field(() => String, { nullable: true }) authorEmail!: string | null;
  @Field(() => String) sentBy!: string;
  @Field(() => Date) sentAt!: Date;
  @Field(() => Date) expiresAt!: Date;
  @Field(() => Date, { nullable: true }) answeredAt!: Date | null;
  @Field(() => Date, { nullable: true }) endedAt!: Date | null;
  @Field(() => String, { nullable: true, description: "Why the viewer can't close it, in words." })
  barredBecause!: string | null;
}

export const AuthorCheckResult = createUnionType({
  name: "AuthorCheckResult",
  types: () => [AuthorCheckType, Refusal] as const,
});

@InputType()
export class SendAuthorCheckInput {
  @Field(() => String, { description: "FL-0042.3" }) quotable!: string;
  @Field(() => String) name!: string;
  @Field(() => String) email!: string;
}

/** What an author's link opens; no account stands behind it. */
@ObjectType()
export class AuthorCheckPage {
  @Field(() => LinkStandingEnum) standing!: LinkStanding;
  @Field(() => Int) version!: number;
  @Field(() => String) quotable!: string;
  @Field(() => String, { description: "The record's address for everybody, once it is approved." })
  number!: string;
  @Field(() => Boolean) approved!: boolean;
  @Field(() => Boolean, { description: "Whether a newer revision is in use." }) outdated!: boolean;
  @Field(() => Date) expiresAt!: Date;
  @Field(() => String) askedBy!: string;
  @Field(() => Date) askedAt!: Date;
  @Field(() => String, { nullable: true }) authorName!: string | null;
  @Field(() => String, { nullable: true }) authorEmail!: string | null;
  @Field(() => CheckVerdictEnum, { nullable: true }) verdict!: CheckVerdict | null;
  @Field(() => CitationType, { nullable: true }) citation!: CitationType | null;
  @Field(() => ConstraintFieldsType, {
    nullable: true,
    description: "The record as the revision has it; null where the link is not open any more.",
  })
  fields!: ConstraintFieldsType | null;
  @Field(() => [AuthorCheckLine]) lines!: AuthorCheckLine[];
}

export const AuthorAnswerResult = createUnionType({
  name: "AuthorAnswerResult",
  types: () => [AuthorCheckPage, Refusal] as const,
});

@ObjectType({ description: "What the public learns of an author's check." })
export class AuthorCheckMark {
  @Field(() => ID) id!: string;
  @Field(() => Int, { description: "The revision that was checked." }) ordinal!: number;
  @Field(() => CheckVerdictEnum) verdict!: CheckVerdict;
  @Field(() => Date) at!: Date;
  @Field(() => Boolean) closed!: boolean;
}
