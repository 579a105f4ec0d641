import { Arg, Ctx, FieldResolver, ID, Int, Mutation, Query, Resolver, Root } from "type-graphql";

import type { RequestContext } from "~server/common/context";
import { DoneResult, Refusal } from "~server/common/outcomes";
import { Requires } from "~server/common/requires";
import { ConstraintFilterInput, ConstraintType } from "~server/constraint/constraint.type";
import { acting } from "~server/event/acting";
import { eventMark } from "~server/event/event.type";
import { canonicalFilter } from "~shared/filter/address";
import { filterWords } from "~shared/filter/describe";

import { candidatesOf } from "./candidates";
import { tableChanges } from "./changes.service";
import { TABLE_FILES } from "./files";
import { recipeOf } from "./recipe";
import {
  ConditionWay,
  SaveRecipeInput,
  SettledRowType,
  SharedDataPair,
  TableChanges,
  TableCorrelation,
  TableDecision,
  TableFileMark,
  TableInput,
  TableMixture,
  TableProposal,
  TableProposalResult,
  TableRecipeType,
  TableSurroundingsType,
  TableVersionMark,
  VisibilityEnum,
} from "./recipe.type";
import { follow, surroundingsFor } from "./settle.service";
import { surroundingsOf } from "./surroundings";
import type { Visibility } from "./table.entity";
import * as tables from "./table.service";
import { FittingTable, FittingTableResult, fittingTableType, savedConstraint } from "./table.type";
import {
  decisionType,
  findTable,
  findVersion,
  groupTypes,
  MOST_TABLE_ROWS,
  recipeType,
  settledRowType,
  shownGroups,
  shownRows,
} from "./table.view";
import { TableVersion } from "./tableVersion.entity";
import { changeTable, saveRecipe } from "./version.service";

const viewerId = (ctx: RequestContext): string | null => ctx.viewer?.id ?? null;

@Resolver(() => FittingTable)
export class TableResolver {
  @Query(() => [FittingTable], {
    description: "Public tables and one's own, newest first.",
  })
  async fittingTables(@Ctx() ctx: RequestContext): Promise<FittingTable[]> {
    const found = await tables.findTables(ctx);
    return found.map((table) => fittingTableType(table, null, viewerId(ctx)));
  }

  @Query(() => FittingTable, { nullable: true })
  async fittingTable(
    @Ctx() ctx: RequestContext,
    @Arg("slug", () => ID) slug: string,
    @Arg("version", () => Int, { nullable: true }) version: number | null = null,
  ): Promise<FittingTable | null> {
    const { manager } = ctx.database;
    const table = await findTable(manager, viewerId(ctx), slug);
    if (!table) return null;
    const shown = await findVersion(manager, table, version);
    if (!shown) return null;
    return fittingTableType(table, shown, viewerId(ctx));
  }

  @Query(() => TableProposalResult, {
    description: "What a recipe makes: rows in and out, decisions with their proposals.",
  })
  async tableProposal(
    @Ctx() ctx: RequestContext,
    @Arg("recipe", () => TableInput) input: TableInput,
  ): Promise<typeof TableProposalResult> {
    const recipe = recipeOf(input);
    if (recipe instanceof Refusal) return recipe;
    const followed = await follow(ctx.database.manager, ctx.viewer, recipe);
    if (followed instanceof Refusal) return followed;
    const { candidates, settled } = followed;
    return Object.assign(new TableProposal(), {
      rows: settled.rows.map((row) => settledRowType(row, settled.decisions)),
      constraints: candidates.records.map(savedConstraint),
      decisions: settled.decisions.map(decisionType),
      open: settled.open,
      ...groupTypes(settled),
      filter: filterWords(recipe.filter),
      lastEvent: eventMark(candidates.lastEvent),
    });
  }

  @Query(() => TableSurroundingsType, {
    description:
      "Shared data among the latest approved records that a filter matches, and what each is conditioned on.",
  })
  async tableSurroundings(
    @Ctx() ctx: RequestContext,
    @Arg("filter", () => ConstraintFilterInput, { nullable: true })
    filter: ConstraintFilterInput | null = null,
  ): Promise<TableSurroundingsType> {
    const { manager } = ctx.database;
    const wanted = { release: null, filter: canonicalFilter(filter ?? {}) };
    const candidates = await candidatesOf(manager, ctx.viewer, wanted);
    const none = Object.assign(new TableSurroundingsType(), { overlaps: [], conditions: [] });
    if (candidates instanceof Refusal) return none;
    const { overlaps, conditions } = surroundingsOf(
      await surroundingsFor(manager, ctx.viewer, null),
      candidates.records,
    );
    return Object.assign(none, {
      overlaps: overlaps.map((pair) => Object.assign(new SharedDataPair(), pair)),
      conditions: [...conditions.values()]
        .flat()
        .map(({ through, on }) => Object.assign(new ConditionWay(), { through: [...through], on })),
    });
  }

  @Query(() => TableChanges, {
    nullable: true,
    description: "What the newest release, or the records of now, would make of a table.",
  })
  async tableChanges(
    @Ctx() ctx: RequestContext,
    @Arg("slug", () => ID) slug: string,
  ): Promise<TableChanges | null> {
    const { manager } = ctx.database;
    const table = await findTable(manager, viewerId(ctx), slug);
    return table && tableChanges(manager, ctx.viewer, table);
  }

  @Requires("saveTable")
  @Mutation(() => FittingTableResult, {
    description: "Saves a complete table, or a new version of one's own.",
  })
  async saveRecipe(
    @Ctx() ctx: RequestContext,
    @Arg("input", () => SaveRecipeInput) input: SaveRecipeInput,
  ): Promise<typeof FittingTableResult> {
    const saved = await saveRecipe(acting(ctx), input);
    return saved instanceof Refusal ? saved : fittingTableType(saved.table, saved, viewerId(ctx));
  }

  @Requires("changeTable")
  @Mutation(() => FittingTableResult, {
    description: "Renames a table of one's own, says who sees it and whether its owner is told.",
  })
  async changeTable(
    @Ctx() ctx: RequestContext,
    @Arg("slug", () => ID) slug: string,
    @Arg("name", () => String) name: string,
    @Arg("visibility", () => VisibilityEnum) visibility: Visibility,
    @Arg("notify", () => Boolean) notify: boolean,
  ): Promise<typeof FittingTableResult> {
    const changed = await changeTable(acting(ctx), slug, { name, visibility, notify });
    return changed instanceof Refusal ? changed : fittingTableType(changed, null, viewerId(ctx));
  }

  @Requires("deleteTable")
  @Mutation(() => DoneResult)
  deleteTable(
    @Ctx() ctx: RequestContext,
    @Arg("slug", () => ID) slug: string,
  ): Promise<typeof DoneResult> {
    return tables.deleteTable(acting(ctx), slug);
  }

  @FieldResolver(() => [SettledRowType])
  async rows(
    @Ctx() ctx: RequestContext,
    @Root() root: FittingTable,
    @Arg("offset", () => Int, { nullable: true }) offset: number | null = null,
    @Arg("limit", () => Int, { nullable: true }) limit: number | null = null,
  ): Promise<SettledRowType[]> {
    const shown = await shownRows(ctx, root, ...page(offset, limit));
    return shown.map(({ row }) => row);
  }

  @FieldResolver(() => [ConstraintType], {
    description:
      "The saved constraints, as they stood when the table was saved, in the order of the rows.",
  })
  async constraints(
    @Ctx() ctx: RequestContext,
    @Root() root: FittingTable,
    @Arg("offset", () => Int, { nullable: true }) offset: number | null = null,
    @Arg("limit", () => Int, { nullable: true }) limit: number | null = null,
  ): Promise<ConstraintType[]> {
    const shown = await shownRows(ctx, root, ...page(offset, limit));
    return shown.filter(({ blind }) => !blind).map(({ record }) => savedConstraint(record));
  }

  @FieldResolver(() => [TableDecision])
  async decisions(
    @Ctx() ctx: RequestContext,
    @Root() root: FittingTable,
  ): Promise<TableDecision[]> {
    return (await shownGroups(ctx, root)).decisions;
  }

  @FieldResolver(() => [TableMixture])
  async mixtures(@Ctx() ctx: RequestContext, @Root() root: FittingTable): Promise<TableMixture[]> {
    return (await shownGroups(ctx, root)).mixtures;
  }

  @FieldResolver(() => [TableCorrelation])
  async sets(@Ctx() ctx: RequestContext, @Root() root: FittingTable): Promise<TableCorrelation[]> {
    return (await shownGroups(ctx, root)).sets;
  }

  @FieldResolver(() => String, {
    nullable: true,
    description: "The paragraph for a paper's section on methods, in LaTeX with natbib.",
  })
  async methods(@Ctx() ctx: RequestContext, @Root() root: FittingTable): Promise<string | null> {
    const { version, hidden } = await shownGroups(ctx, root);
    return hidden ? null : version.methods;
  }

  @FieldResolver(() => TableRecipeType, {
    nullable: true,
    description: "To be adapted; null while one of its records is read blind.",
  })
  async recipe(
    @Ctx() ctx: RequestContext,
    @Root() root: FittingTable,
  ): Promise<TableRecipeType | null> {
    const { version, hidden } = await shownGroups(ctx, root);
    return !hidden ? recipeType(version.recipe) : null;
  }

  @FieldResolver(() => [TableVersionMark], { description: "All versions, newest first." })
  async versions(
    @Ctx() ctx: RequestContext,
    @Root() root: FittingTable,
  ): Promise<TableVersionMark[]> {
    const found = await ctx.database.manager.find(TableVersion, {
      select: {
        slug: true,
        version: true,
        createdAt: true,
        digest: true,
        releaseNumber: true,
        rowsIn: true,
        rowsOut: true,
      },
      where: { slug: root.slug },
      order: { version: "DESC" },
    });
    return found.map(({ releaseNumber, ...mark }) =>
      Object.assign(new TableVersionMark(), { ...mark, release: releaseNumber }),
    );
  }

  @FieldResolver(() => [TableFileMark], { description: "Every file of the version shown." })
  files(@Root() root: FittingTable): TableFileMark[] {
    const at = root.shown ? `${root.slug}@${root.shown.version}` : root.slug;
    return Object.entries(TABLE_FILES).map(([kind, { words }]) =>
      Object.assign(new TableFileMark(), {
        kind,
        name: words,
        path: `/api/tables/${at}.${kind}`,
      }),
    );
  }
}

function page(offset: number | null, limit: number | null): [number, number] {
  return [
    Math.max(0, offset ?? 0),
    Math.min(MOST_TABLE_ROWS, Math.max(0, limit ?? MOST_TABLE_ROWS)),
  ];
}
