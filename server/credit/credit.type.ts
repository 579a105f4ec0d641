import { Field, ID, Int, ObjectType } from "type-graphql";

import { ConstraintType } from "~server/constraint/constraint.type";

/** Who did something to a record, as the public reads it. */
@ObjectType()
export class Credit {
  @Field(() => String) name!: string;
  @Field(() => ID, {
    nullable: true,
    description: "Address of the person's page, /people/…; null for an anonymous former member.",
  })
  personId!: string | null;
}

/** What a person brought to the registry, for the public. */
@ObjectType()
export class PersonCredit {
  @Field(() => ID) id!: string;
  @Field(() => String) nameOnPapers!: string;
  @Field(() => String, { nullable: true }) orcid!: string | null;
  @Field(() => Date, { description: "First approval of something this person entered or read." })
  since!: Date;
  @Field(() => Boolean, { description: "True for who has deleted the account." }) former!: boolean;
  @Field(() => Int) enteredTotal!: number;
  @Field(() => [ConstraintType], { description: "Records this person entered, newest first." })
  entered!: ConstraintType[];
  @Field(() => Int) readTotal!: number;
  @Field(() => [ConstraintType], {
    description: "Records of which this person did a second reading that was approved.",
  })
  read!: ConstraintType[];
}
