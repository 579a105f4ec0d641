import { Arg, Ctx, ID, Mutation, Query, Resolver } from "type-graphql";

import type { RequestContext } from "~server/common/context";
import { DoneResult, Refusal } from "~server/common/outcomes";
import { Requires } from "~server/common/requires";
import { acting } from "~server/event/acting";
import { recordsReadBlind } from "~server/review/blindness";

import * as tables from "./table.service";
import { SavedTable } from "./table.entity";
import { FittingTable, FittingTableResult, fittingTableType, SaveTableInput } from "./table.type";

async function shown(ctx: RequestContext, saved: readonly SavedTable[]): Promise<FittingTable[]> {
  const blind = await recordsReadBlind(ctx.database.manager, ctx.viewer, new Date());
  return saved.map((table) => fittingTableType(table, ctx.viewer?.id ?? null, blind));
}

@Resolver(() => FittingTable)
export class TableResolver {
  @Query(() => [FittingTable])
  async fittingTables(@Ctx() ctx: RequestContext): Promise<FittingTable[]> {
    return shown(ctx, await tables.findTables(ctx));
  }

  @Query(() => FittingTable, { nullable: true })
  async fittingTable(
    @Ctx() ctx: RequestContext,
    @Arg("slug", () => ID) slug: string,
  ): Promise<FittingTable | null> {
    const table = await ctx.database.manager.findOne(SavedTable, {
      where: { slug },
      relations: { owner: true },
    });
    if (!table || table.deletedAt) return null;
    return (await shown(ctx, [table]))[0] ?? null;
  }

  @Requires("saveTable")
  @Mutation(() => FittingTableResult)
  async saveTable(
    @Ctx() ctx: RequestContext,
    @Arg("input", () => SaveTableInput) input: SaveTableInput,
  ): Promise<typeof FittingTableResult> {
    const saved = await tables.saveTable(acting(ctx), input);
    if (saved instanceof Refusal) return saved;
    const [table] = await shown(ctx, [saved]);
    if (!table) throw new Error("the saved table has no form");
    return table;
  }

  @Requires("deleteTable")
  @Mutation(() => DoneResult)
  deleteTable(
    @Ctx() ctx: RequestContext,
    @Arg("slug", () => ID) slug: string,
  ): Promise<typeof DoneResult> {
    return tables.deleteTable(acting(ctx), slug);
  }
}
