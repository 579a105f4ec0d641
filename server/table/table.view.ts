/** What a table's version shows. */
import { In, IsNull, type EntityManager } from "typeorm";

import type { RequestContext } from "~server/common/context";
import { setNumbersReadBlind } from "~server/correlatedSet/readBlind";
import { recordsReadBlind } from "~server/review/blindness";
import { choosableForms } from "~shared/table/choosableForms";
import { filterToQuery } from "~shared/filter/address";
import type { Decision } from "~shared/table/decision";
import type { SettledRow, SettledTable } from "~shared/table/settleTable";

import type { TableRecipe } from "./recipe";
import {
  DecisionOption,
  RecipeDecision,
  RecipeForm,
  RecipeOut,
  SettledRowType,
  TableCorrelation,
  TableDecision,
  TableMixture,
  TableRecipeType,
} from "./recipe.type";
import type { SnapshotConstraint } from "./snapshot";
import { SavedTable } from "./table.entity";
import type { FittingTable } from "./table.type";
import { TableVersion, TableVersionRow } from "./tableVersion.entity";

/** A table this viewer may open by its address. */
export async function findTable(
  manager: EntityManager,
  viewerId: string | null,
  slug: string,
): Promise<SavedTable | null> {
  const table = await manager.findOne(SavedTable, {
    where: { slug, deletedAt: IsNull() },
    relations: { owner: true },
  });
  if (!table) return null;
  return table.visibility === "private" && table.ownerId !== viewerId ? null : table;
}

/** @param version - Null for the newest, which every table has. */
export async function findVersion(
  manager: EntityManager,
  table: SavedTable,
  version: number | null,
): Promise<TableVersion | null> {
  return manager.findOneBy(TableVersion, { slug: table.slug, version: version ?? table.version });
}

/** The version that a FittingTable shows. */
async function versionOf(ctx: RequestContext, root: FittingTable): Promise<TableVersion> {
  const { slug, version } = root.saved;
  root.shown ??= await ctx.database.manager.findOneByOrFail(TableVersion, { slug, version });
  return root.shown;
}

/** Rows at once through the API. */
export const MOST_TABLE_ROWS = 2000;

interface ShownRow {
  row: SettledRowType;
  record: SnapshotConstraint;
}

/** Rows of the version shown. Of what the viewer reads blind neither content nor reason is shown. */
export async function shownRows(
  ctx: RequestContext,
  root: FittingTable,
  offset: number,
  limit: number,
): Promise<(ShownRow & { blind: boolean })[]> {
  const { manager } = ctx.database;
  const blind = await recordsReadBlind(manager, ctx.viewer, new Date());
  const version = await versionOf(ctx, root);
  const rows = await manager.find(TableVersionRow, {
    where: { slug: version.slug, version: version.version },
    order: { position: "ASC" },
    skip: offset,
    take: limit,
  });
  return rows
    .map((row) => versionRow(row, version))
    .map((shown) =>
      blind.has(shown.record.id)
        ? { ...shown, blind: true, row: withoutContent(shown.row) }
        : { ...shown, blind: false },
    );
}

function withoutContent(row: SettledRowType): SettledRowType {
  return Object.assign(new SettledRowType(), row, {
    reason: null,
    cautions: [],
    formula: null,
    formReason: null,
    form: null,
    forms: [],
    level: null,
  });
}

function versionRow(row: TableVersionRow, version: TableVersion): ShownRow {
  const record = JSON.parse(row.record) as SnapshotConstraint;
  const content = JSON.parse(row.content) as {
    reason: string | null;
    cautions: string[];
    likelihood: {
      form: SettledRowType["form"];
      formula: string;
      redshift: SettledRowType["redshift"];
      level: number | null;
      reason: string | null;
    } | null;
    weight: number;
    mixture: string | null;
    correlatedSet: string | null;
  };
  const { likelihood } = content;
  return {
    record,
    row: Object.assign(new SettledRowType(), {
      number: record.number,
      included: row.included,
      reason: content.reason,
      proposed: isProposed(record.number, version),
      open: [],
      cautions: content.cautions,
      form: likelihood?.form ?? null,
      forms: [],
      formula: likelihood?.formula ?? null,
      formReason: likelihood?.reason ?? null,
      redshift: likelihood?.redshift ?? null,
      level: likelihood?.level ?? null,
      weight: content.weight,
      mixture: content.mixture,
      set: content.correlatedSet,
    }),
  };
}

/** Whether no person's own choice concerns the row. */
function isProposed(number: string, { decisions, recipe }: TableVersion): boolean {
  return (
    !recipe.choices.out.some((choice) => choice.number === number) &&
    !recipe.choices.forms.some((choice) => choice.number === number) &&
    !decisions.some(({ rows, taken }) => taken?.by === "person" && rows.includes(number))
  );
}

/** A settled row as the API shows it while a table is being built. */
export function settledRowType(row: SettledRow, decisions: readonly Decision[]): SettledRowType {
  const { likelihood } = row;
  const known = "leftOut" in likelihood ? null : likelihood;
  return Object.assign(new SettledRowType(), {
    number: row.number,
    included: row.included,
    reason: row.reason,
    proposed:
      row.formReason === null &&
      !decisions.some(({ rows, taken }) => taken?.by === "person" && rows.includes(row.number)),
    open: [...row.open],
    cautions: [...row.cautions],
    form: known?.form ?? null,
    forms: choosableForms(row.used, row.options),
    formula: known?.formula ?? null,
    formReason: row.formReason,
    redshift: known?.redshift ?? null,
    level: row.used?.level ?? row.options.level ?? null,
    weight: row.weight,
    mixture: row.mixture,
    set: row.set,
  });
}

export function decisionType(decision: Decision): TableDecision {
  return Object.assign(new TableDecision(), {
    id: decision.id,
    kind: decision.kind,
    rows: [...decision.rows],
    words: decision.words,
    options: decision.options.map((option) => Object.assign(new DecisionOption(), option)),
    proposed: decision.proposed,
    because: decision.because,
    taken: decision.taken?.option ?? null,
    byDefault: decision.taken?.by === "default",
    reason: decision.taken?.reason ?? null,
  });
}

export function groupTypes({ mixtures, sets }: Pick<SettledTable, "mixtures" | "sets">): {
  mixtures: TableMixture[];
  sets: TableCorrelation[];
} {
  return {
    mixtures: mixtures.map((mixture) => Object.assign(new TableMixture(), mixture)),
    sets: sets.map((set) => Object.assign(new TableCorrelation(), set)),
  };
}

/** Decisions, mixtures and sets of the version shown. */
export async function shownGroups(ctx: RequestContext, root: FittingTable) {
  const version = await versionOf(ctx, root);
  const { manager } = ctx.database;
  const blind = await recordsReadBlind(manager, ctx.viewer, new Date());
  const sets = await setNumbersReadBlind(manager, ctx.viewer, new Date());
  const hidden =
    version.sets.some(({ id }) => sets.has(id)) ||
    (blind.size > 0 && (await holdsAny(manager, version, blind)));
  return {
    version,
    hidden,
    decisions: !hidden ? version.decisions.map(decisionType) : [],
    ...(!hidden ? groupTypes(version) : { mixtures: [], sets: [] }),
  };
}

async function holdsAny(
  manager: EntityManager,
  { slug, version }: TableVersion,
  ids: ReadonlySet<number>,
): Promise<boolean> {
  return manager.existsBy(TableVersionRow, { slug, version, constraintId: In([...ids]) });
}

export function recipeType(recipe: TableRecipe): TableRecipeType {
  const { decisions, out, forms } = recipe.choices;
  return Object.assign(new TableRecipeType(), {
    release: recipe.release,
    filter: filterToQuery(recipe.filter),
    decisions: decisions.map(({ id, option, by, reason }) =>
      Object.assign(new RecipeDecision(), { id, option, byDefault: by === "default", reason }),
    ),
    out: out.map((choice) => Object.assign(new RecipeOut(), choice)),
    forms: forms.map(({ number, options, reason }) =>
      Object.assign(new RecipeForm(), {
        number,
        form: options.form ?? null,
        smoothing: options.smoothing ?? null,
        redshift: options.redshift ?? null,
        reason,
      }),
    ),
  });
}
