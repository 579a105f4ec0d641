import {
  Arg,
  Ctx,
  Field,
  FieldResolver,
  ID,
  Int,
  Mutation,
  ObjectType,
  Query,
  Resolver,
  Root,
} from "type-graphql";

import type { RequestContext } from "~server/common/context";
import { DataKindEnum, DataRelationEnum } from "~server/common/enums";
import { Refusal } from "~server/common/outcomes";
import { Requires } from "~server/common/requires";
import { ConstraintType, constraintType } from "~server/constraint/constraint.type";
import { acting } from "~server/event/acting";
import type { DataKind, DataRelation } from "~shared/dependence/namedData";

import type { NamedData } from "./namedData.entity";
import {
  changedData,
  countOf,
  dataAt,
  dataOfRecords,
  findData,
  recordsOf,
  relatedTo,
} from "./namedData.query";
import { editData, mergeData, relateData, unrelateData } from "./namedData.service";
import { DataLink, NamedDataInput, NamedDataResult, NamedDataType } from "./namedData.type";

async function outcomeType(
  ctx: RequestContext,
  outcome: NamedData | Refusal,
): Promise<typeof NamedDataResult> {
  return outcome instanceof Refusal ? outcome : changedData(ctx, outcome);
}

@Resolver(() => NamedDataType)
export class NamedDataResolver {
  @Query(() => [NamedDataType], { description: "Sightlines, fields and samples, by name." })
  namedDataList(
    @Ctx() ctx: RequestContext,
    @Arg("text", () => String, { nullable: true }) text: string | null = null,
    @Arg("kind", () => DataKindEnum, { nullable: true }) kind: DataKind | null = null,
  ): Promise<NamedDataType[]> {
    return findData(ctx, (text ?? "").slice(0, 300), kind);
  }

  @Query(() => NamedDataType, { nullable: true })
  namedData(
    @Ctx() ctx: RequestContext,
    @Arg("slug", () => ID) slug: string,
  ): Promise<NamedDataType | null> {
    return dataAt(ctx, slug);
  }

  @Requires("keepNamedData")
  @Mutation(() => NamedDataResult)
  async editNamedData(
    @Ctx() ctx: RequestContext,
    @Arg("input", () => NamedDataInput) input: NamedDataInput,
  ): Promise<typeof NamedDataResult> {
    const { ra = null, dec = null, extent = null, note = null, ...rest } = input;
    return outcomeType(ctx, await editData(acting(ctx), { ...rest, ra, dec, extent, note }));
  }

  @Requires("keepNamedData")
  @Mutation(() => NamedDataResult, {
    description: "Makes an entry an alias of another one; answers with that one.",
  })
  async mergeNamedData(
    @Ctx() ctx: RequestContext,
    @Arg("slug", () => ID) slug: string,
    @Arg("version", () => Int) version: number,
    @Arg("into", () => ID) into: string,
  ): Promise<typeof NamedDataResult> {
    return outcomeType(ctx, await mergeData(acting(ctx), slug, version, into));
  }

  @Requires("keepNamedData")
  @Mutation(() => NamedDataResult)
  async relateNamedData(
    @Ctx() ctx: RequestContext,
    @Arg("slug", () => ID) slug: string,
    @Arg("relation", () => DataRelationEnum) relation: DataRelation,
    @Arg("other", () => ID) other: string,
  ): Promise<typeof NamedDataResult> {
    return outcomeType(ctx, await relateData(acting(ctx), slug, relation, other));
  }

  @Requires("keepNamedData")
  @Mutation(() => NamedDataResult)
  async unrelateNamedData(
    @Ctx() ctx: RequestContext,
    @Arg("slug", () => ID) slug: string,
    @Arg("other", () => ID) other: string,
  ): Promise<typeof NamedDataResult> {
    return outcomeType(ctx, await unrelateData(acting(ctx), slug, other));
  }

  @FieldResolver(() => Int, { description: "Approved constraints that use it." })
  constraintCount(@Ctx() ctx: RequestContext, @Root() { id }: NamedDataType): Promise<number> {
    return countOf(ctx, id);
  }

  @FieldResolver(() => [ConstraintType], { description: "Approved constraints that use it." })
  async constraints(
    @Ctx() ctx: RequestContext,
    @Root() { id }: NamedDataType,
  ): Promise<ConstraintType[]> {
    return (await recordsOf(ctx, id)).map(constraintType);
  }

  @FieldResolver(() => [DataLink], { description: "What it is a part of." })
  async subsetOf(@Ctx() ctx: RequestContext, @Root() { id }: NamedDataType): Promise<DataLink[]> {
    return (await relatedTo(ctx, id)).subsetOf;
  }

  @FieldResolver(() => [DataLink], { description: "Its parts." })
  async contains(@Ctx() ctx: RequestContext, @Root() { id }: NamedDataType): Promise<DataLink[]> {
    return (await relatedTo(ctx, id)).contains;
  }

  @FieldResolver(() => [DataLink])
  async overlaps(@Ctx() ctx: RequestContext, @Root() { id }: NamedDataType): Promise<DataLink[]> {
    return (await relatedTo(ctx, id)).overlaps;
  }
}

@ObjectType({ description: "A name of a record's data, and the entry that it leads to." })
export class UsedData {
  @Field(() => String, { description: "As the record spells it." }) spelled!: string;
  @Field(() => DataLink) entry!: DataLink;
}

@Resolver(() => ConstraintType)
export class UsedDataResolver {
  @FieldResolver(() => [UsedData])
  async dataEntries(
    @Ctx() ctx: RequestContext,
    @Root() { constraintId }: ConstraintType,
  ): Promise<UsedData[]> {
    const found = (await dataOfRecords(ctx)(constraintId)) ?? [];
    return found.map(({ spelled, link }) =>
      Object.assign(new UsedData(), { spelled, entry: link }),
    );
  }
}
