import { createUnionType, Field, ID, InputType, Int, ObjectType } from "type-graphql";

import { MethodFamilyEnum } from "~server/common/enums";
import { Refusal } from "~server/common/outcomes";
import type { MethodFamily } from "~shared/methods/vocabulary";

import type { MethodRow } from "./method.entity";

@ObjectType("MethodTag", { description: "A method of the vocabulary that maintainers keep." })
export class MethodTagType {
  @Field(() => ID, { description: "camelCase; never changes." }) tag!: string;
  @Field(() => MethodFamilyEnum) family!: MethodFamily;
  @Field(() => String) name!: string;
  @Field(() => String, { description: "One line." }) definition!: string;
  @Field(() => String, { description: "The usual systematic." }) caution!: string;
  @Field(() => [String], { description: "Other spellings met in hand-kept lists." })
  aliases!: string[];
  @Field(() => Boolean, { description: "Its results contain or assume others." })
  neverIndependent!: boolean;
  @Field(() => Int, { description: "Place in its family's list, lower first." }) position!: number;
  @Field(() => String, { nullable: true, description: "The tag that took it over." })
  retiredInto!: string | null;
  @Field(() => Int, { description: "Version to send back with a change." }) version!: number;
}

@InputType()
export class MethodTagInput {
  @Field(() => ID) tag!: string;
  @Field(() => MethodFamilyEnum) family!: MethodFamily;
  @Field(() => String) name!: string;
  @Field(() => String) definition!: string;
  @Field(() => String) caution!: string;
  @Field(() => [String]) aliases!: string[];
  @Field(() => Boolean) neverIndependent!: boolean;
  @Field(() => Int) position!: number;
}

export const MethodTagResult = createUnionType({
  name: "MethodTagResult",
  types: () => [MethodTagType, Refusal] as const,
});

export function methodTagType(row: MethodRow): MethodTagType {
  return Object.assign(new MethodTagType(), row);
}
