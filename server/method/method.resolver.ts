import { Arg, Ctx, FieldResolver, ID, Int, Mutation, Query, Resolver, Root } from "type-graphql";

import type { RequestContext } from "~server/common/context";
import { Refusal } from "~server/common/outcomes";
import { Requires } from "~server/common/requires";
import { perRequest } from "~server/constraint/batch";
import { approved } from "~server/constraint/constraint.query";
import { acting } from "~server/event/acting";

import type { MethodRow } from "./method.entity";
import { addMethod, changeMethod, retireMethod } from "./method.service";
import { MethodTagInput, MethodTagResult, methodTagType, MethodTagType } from "./method.type";
import { keptMethods } from "./vocabulary";

/** Approved records by tag in use, as far as this viewer may see them. */
const countsOnce = perRequest(async (ctx: RequestContext): Promise<Map<string, number>> => {
  const rows: { tags: string }[] = await approved(ctx).select("revision.tags", "tags").getRawMany();
  const counts = new Map<string, number>();
  for (const tag of rows.flatMap(({ tags }) => tags.split(","))) {
    counts.set(tag, (counts.get(tag) ?? 0) + 1);
  }
  return counts;
});

const outcomeType = (outcome: MethodRow | Refusal): typeof MethodTagResult =>
  outcome instanceof Refusal ? outcome : methodTagType(outcome);

@Resolver(() => MethodTagType)
export class MethodResolver {
  @Query(() => [MethodTagType], {
    description: "Every method, retired ones too, by place. The list is short.",
  })
  async methodVocabulary(@Ctx() ctx: RequestContext): Promise<MethodTagType[]> {
    return (await keptMethods(ctx.database.manager)).map(methodTagType);
  }

  @FieldResolver(() => Int, {
    description: "Approved constraints found under it; none under a retired one.",
  })
  async constraintCount(
    @Ctx() ctx: RequestContext,
    @Root() { tag }: MethodTagType,
  ): Promise<number> {
    return (await countsOnce(ctx)).get(tag) ?? 0;
  }

  @Requires("keepVocabulary")
  @Mutation(() => MethodTagResult)
  async addMethodTag(
    @Ctx() ctx: RequestContext,
    @Arg("input", () => MethodTagInput) input: MethodTagInput,
  ): Promise<typeof MethodTagResult> {
    return outcomeType(await addMethod(acting(ctx), { ...input }));
  }

  @Requires("keepVocabulary")
  @Mutation(() => MethodTagResult)
  async changeMethodTag(
    @Ctx() ctx: RequestContext,
    @Arg("input", () => MethodTagInput) input: MethodTagInput,
    @Arg("version", () => Int) version: number,
  ): Promise<typeof MethodTagResult> {
    return outcomeType(await changeMethod(acting(ctx), { ...input }, version));
  }

  @Requires("keepVocabulary")
  @Mutation(() => MethodTagResult, {
    description: "Makes a method a word for another one; answers with that one.",
  })
  async retireMethodTag(
    @Ctx() ctx: RequestContext,
    @Arg("tag", () => ID) tag: string,
    @Arg("version", () => Int) version: number,
    @Arg("into", () => ID) into: string,
  ): Promise<typeof MethodTagResult> {
    return outcomeType(await retireMethod(acting(ctx), tag, version, into));
  }
}
