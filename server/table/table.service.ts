import { In, IsNull, type EntityManager } from "typeorm";

import { done, refuse, type Done, type Refusal } from "~server/common/outcomes";
import type { Asking } from "~server/constraint/constraint.query";
import { setNumbersReadBlind } from "~server/correlatedSet/readBlind";
import { change, type Acting } from "~server/event/acting";
import { recordsReadBlind } from "~server/review/blindness";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";

import { SavedTable } from "./table.entity";
import { findVersion } from "./table.view";
import { TableVersionRow, type TableVersion } from "./tableVersion.entity";

/** Public tables and this person's own, newest first. */
export async function findTables(ctx: Asking): Promise<SavedTable[]> {
  return ctx.database.manager
    .createQueryBuilder(SavedTable, "saved")
    .innerJoinAndSelect("saved.owner", "owner")
    .select(["saved", "owner.id", "owner.nameOnPapers"])
    .where("saved.deletedAt IS NULL AND (saved.visibility = 'public' OR saved.ownerId = :own)", {
      own: ctx.viewer?.id ?? "",
    })
    .orderBy("saved.createdAt", "DESC")
    .addOrderBy("saved.slug", "ASC")
    .getMany();
}

export type TableLookup =
  | { found: "table"; table: SavedTable; version: TableVersion }
  /** Never existed, or somebody else's private one. */
  | { found: "nothing" }
  /** Its owner deleted it: the address is not given again. */
  | { found: "deleted" }
  /** It holds a record that this viewer is reading blind: files open after the reading. */
  | { found: "blind"; numbers: string[] };

/**
 * A saved table for a download. A file is handed out whole or not at all, since its bytes never
 * change: while the viewer reads one of its records blind, not at all.
 *
 * @param version - Null for the newest.
 */
export async function loadTableFile(
  ctx: Asking,
  slug: string,
  version: number | null = null,
): Promise<TableLookup> {
  const { manager } = ctx.database;
  const table = await manager.findOne(SavedTable, { where: { slug }, relations: { owner: true } });
  if (!table || (table.visibility === "private" && table.ownerId !== ctx.viewer?.id)) {
    return { found: "nothing" };
  }
  if (table.deletedAt) return { found: "deleted" };
  const shown = await findVersion(manager, table, version);
  if (!shown) return { found: "nothing" };
  const blind = await recordsReadBlind(manager, ctx.viewer, new Date());
  const sets = await setNumbersReadBlind(manager, ctx.viewer, new Date());
  const numbers = [
    ...(blind.size === 0 ? [] : await heldNumbers(manager, shown, blind)),
    ...shown.sets.map(({ id }) => id).filter((id) => sets.has(id)),
  ];
  return numbers.length > 0
    ? { found: "blind", numbers }
    : { found: "table", table, version: shown };
}

async function heldNumbers(
  manager: EntityManager,
  shown: TableVersion,
  blind: ReadonlySet<number>,
): Promise<string[]> {
  const held = await manager.find(TableVersionRow, {
    select: { slug: true, version: true, position: true, constraintId: true },
    where: { slug: shown.slug, version: shown.version, constraintId: In([...blind]) },
    order: { constraintId: "ASC" },
  });
  return held.map((row) => formatRecordNumber(row.constraintId));
}

/** Takes a table of one's own from the public; its address answers that it is gone. */
export async function deleteTable(who: Acting, slug: string): Promise<Done | Refusal> {
  return change<Done | Refusal>(who, async (here) => {
    const result = await here.manager.update(
      SavedTable,
      { slug, ownerId: who.viewer.id, deletedAt: IsNull() },
      { deletedAt: who.now },
    );
    if (result.affected !== 1) {
      return refuse("notFound", "There is no such table among yours.");
    }
    await here.event({ kind: "table.deleted", subject: `table:${slug}` });
    return done("The table is deleted.");
  });
}
