import { createUnionType, Field, ID, InputType, Int, ObjectType } from "type-graphql";

import { DataKindEnum } from "~server/common/enums";
import { Refusal } from "~server/common/outcomes";
import { sexagesimal, type DataKind } from "~shared/dependence/namedData";

import type { NamedData } from "./namedData.entity";

@ObjectType({ description: "A named thing as another entry points to it." })
export class DataLink {
  @Field(() => String) slug!: string;
  @Field(() => String) name!: string;
  @Field(() => DataKindEnum) kind!: DataKind;
}

@ObjectType("NamedData", { description: "A named sightline, field or sample." })
export class NamedDataType {
  @Field(() => ID) slug!: string;
  @Field(() => String) name!: string;
  @Field(() => DataKindEnum) kind!: DataKind;
  @Field(() => String, { nullable: true, description: "Degrees, J2000." }) ra!: string | null;
  @Field(() => String, { nullable: true, description: "Degrees, J2000." }) dec!: string | null;
  @Field(() => String, { nullable: true, description: "The same, as 07h12m04.80s +05°30′00.0″." })
  sexagesimal!: string | null;
  @Field(() => String, { nullable: true }) extent!: string | null;
  @Field(() => String, { nullable: true }) note!: string | null;
  @Field(() => Int, { description: "Version to send back with a change." }) version!: number;
  @Field(() => [String], { description: "Other names that it goes by." }) aliases!: string[];

  // Not in the API: what its resolvers need.
  id!: number;
}

@InputType()
export class NamedDataInput {
  @Field(() => ID) slug!: string;
  @Field(() => Int) version!: number;
  @Field(() => String) name!: string;
  @Field(() => DataKindEnum) kind!: DataKind;
  @Field(() => String, { nullable: true }) ra?: string | null;
  @Field(() => String, { nullable: true }) dec?: string | null;
  @Field(() => String, { nullable: true }) extent?: string | null;
  @Field(() => String, { nullable: true }) note?: string | null;
  @Field(() => [String]) aliases!: string[];
}

export const NamedDataResult = createUnionType({
  name: "NamedDataResult",
  types: () => [NamedDataType, Refusal] as const,
});

export function dataLink({ slug, name, kind }: NamedData): DataLink {
  return Object.assign(new DataLink(), { slug, name, kind });
}

export function namedDataType(thing: NamedData, aliases: readonly string[]): NamedDataType {
  const { id, slug, name, kind, ra, dec, extent, note, version } = thing;
  return Object.assign(new NamedDataType(), {
    ...{ id, slug, name, kind, ra, dec, extent, note, version },
    sexagesimal: ra !== null && dec !== null ? sexagesimal(Number(ra), Number(dec)) : null,
    aliases: [...aliases],
  });
}
