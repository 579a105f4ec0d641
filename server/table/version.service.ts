import { IsNull, type EntityManager } from "typeorm";

import { refuse, Refusal } from "~server/common/outcomes";
import { isDemonstration } from "~server/database/settings";
import { change, type Acting } from "~server/event/acting";
import { filterWords } from "~shared/filter/describe";

import { recipeOf } from "./recipe";
import type { SaveRecipeInput } from "./recipe.type";
import { follow } from "./settle.service";
import { SavedTable } from "./table.entity";
import { newSlug } from "./slug";
import { tableFigure } from "./tableFigure";
import { writeTable } from "./tableContent";
import { TableVersion, TableVersionRow } from "./tableVersion.entity";

const LONGEST_NAME = 120;
const MOST_TABLES = 500;
const MOST_VERSIONS = 200;

/**
 * Saves a complete table: a new one, or a new version of one's own. The version holds all its files will ever
 * say; what an editor reads blind is not among its rows, so it can't be saved meanwhile.
 */
export async function saveRecipe(
  who: Acting,
  input: SaveRecipeInput,
): Promise<TableVersion | Refusal> {
  const name = input.name.replace(/\s+/g, " ").trim();
  if (name === "" || name.length > LONGEST_NAME) {
    return refuse("name", `Give the table a name of 1 to ${LONGEST_NAME} characters.`, "name");
  }
  const recipe = recipeOf(input.recipe);
  if (recipe instanceof Refusal) return recipe;

  return change<TableVersion | Refusal>(who, async (here) => {
    const { manager } = here;
    const table = input.slug ? await lockOwn(manager, who.viewer.id, input.slug) : null;
    if (input.slug && !table) return refuse("notFound", "There is no such table among yours.");
    if (table && table.version >= MOST_VERSIONS) {
      return refuse("tooMany", `This table has ${table.version} versions. Save a copy instead.`);
    }
    if (!table) {
      const own = await manager.countBy(SavedTable, {
        ownerId: who.viewer.id,
        deletedAt: IsNull(),
      });
      if (own >= MOST_TABLES) {
        return refuse("tooMany", `You have ${own} tables. Delete one first.`);
      }
    }
    const followed = await follow(manager, who.viewer, recipe);
    if (followed instanceof Refusal) return followed;
    const { candidates, settled, methods } = followed;
    const incomplete = refuseIncomplete(settled);
    if (incomplete) return incomplete;

    const slug = table?.slug ?? newSlug();
    const version = (table?.version ?? 0) + 1;
    const demonstration = await isDemonstration(manager);
    const { lastEvent, records } = candidates;
    const source = {
      recipe,
      records,
      settled,
      methods,
      lastEvent,
      licence: who.licence,
      demonstration,
      address: `${who.publicUrl}/tables/${slug}`,
    };
    const written = await writeTable(source);
    const rowsIn = written.rows.filter(({ included }) => included).length;
    const facts = {
      filterWords: filterWords(recipe.filter).slice(0, 2000),
      digest: written.digest,
      rowsIn,
      rowsOut: written.rows.length - rowsIn,
      releaseNumber: recipe.release,
      lastEventSequence: lastEvent.sequence,
      lastEventDigest: lastEvent.digest,
      lastEventAt: lastEvent.at,
    };
    const shown = {
      name,
      visibility: input.visibility,
      notify: input.notify ?? false,
      version,
      ...facts,
    };
    if (table) await manager.update(SavedTable, { slug }, shown);
    else {
      await manager.insert(SavedTable, {
        slug,
        ...shown,
        ownerId: who.viewer.id,
        createdAt: who.now,
        deletedAt: null,
        adaptedFrom: await knownTable(manager, input.adaptedFrom ?? null),
      });
    }
    await manager.insert(TableVersion, {
      slug,
      version,
      createdAt: who.now,
      name,
      address: source.address,
      recipe,
      ...facts,
      licence: who.licence,
      demonstration,
      decisions: [...settled.decisions],
      mixtures: [...settled.mixtures],
      sets: [...settled.sets],
      lines: written.lines,
      cautions: written.cautions,
      columns: written.columns,
      methods: written.methods,
      figure: tableFigure(name, source),
    } as never);
    for (const [position, row] of written.rows.entries()) {
      await manager.insert(TableVersionRow, { slug, version, position, ...row } as never);
    }
    await here.event({
      kind: "table.saved",
      subject: `table:${slug}`,
      detail: { version, digest: written.digest, rowsIn, release: recipe.release },
    });
    return manager.findOneOrFail(TableVersion, {
      where: { slug, version },
      relations: { table: { owner: true } },
    });
  });
}

function refuseIncomplete(settled: {
  open: number;
  rows: readonly { included: boolean }[];
}): Refusal | null {
  if (settled.open > 0) {
    return refuse(
      "open",
      settled.open === 1
        ? "One decision is still open."
        : `${settled.open} decisions are still open.`,
      "decisions",
    );
  }
  if (!settled.rows.some(({ included }) => included)) {
    return refuse("rows", "No row is left in. Widen the filter or decide otherwise.", "rows");
  }
  return null;
}

/** The table if it is this person's; its row stays locked until the change ends. */
async function lockOwn(
  manager: EntityManager,
  ownerId: string,
  slug: string,
): Promise<SavedTable | null> {
  return manager.findOne(SavedTable, {
    where: { slug, ownerId, deletedAt: IsNull() },
    lock: { mode: "pessimistic_write" },
  });
}

async function knownTable(manager: EntityManager, slug: string | null): Promise<string | null> {
  if (slug === null) return null;
  return (await manager.existsBy(SavedTable, { slug })) ? slug : null;
}

/** Changes what is no part of a table's content: its name, who sees it, whether its owner is told. */
export async function changeTable(
  who: Acting,
  slug: string,
  to: { name: string; visibility: SavedTable["visibility"]; notify: boolean },
): Promise<SavedTable | Refusal> {
  const name = to.name.replace(/\s+/g, " ").trim();
  if (name === "" || name.length > LONGEST_NAME) {
    return refuse("name", `Give the table a name of 1 to ${LONGEST_NAME} characters.`, "name");
  }
  return change<SavedTable | Refusal>(who, async (here) => {
    const table = await lockOwn(here.manager, who.viewer.id, slug);
    if (!table) return refuse("notFound", "There is no such table among yours.");
    await here.manager.update(SavedTable, { slug }, { ...to, name });
    await here.event({
      kind: "table.changed",
      subject: `table:${slug}`,
      detail: { visibility: to.visibility },
    });
    return here.manager.findOneOrFail(SavedTable, { where: { slug }, relations: { owner: true } });
  });
}
