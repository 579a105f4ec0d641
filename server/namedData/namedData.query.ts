import type { RequestContext } from "~server/common/context";
import { batched, perRequest } from "~server/constraint/batch";
import { approved, approvedRow, type ApprovedRow } from "~server/constraint/constraint.query";
import { RevisionData } from "~server/constraint/revision.entity";
import { recordsReadBlind } from "~server/review/blindness";
import { comparableDataName } from "~shared/dependence/dataName";
import type { DataKind } from "~shared/dependence/namedData";

import { NamedData, NamedDataAlias } from "./namedData.entity";
import { dataLink, namedDataType, type DataLink, type NamedDataType } from "./namedData.type";
import { keptDataOnce, type KeptData } from "./register";

/** Entries handed out at once. */
const MOST_ENTRIES = 2000;

/** Record numbers by the id of a thing they name, as far as this viewer may see them. */
const usersOnce = perRequest(async (ctx: RequestContext): Promise<Map<number, Set<number>>> => {
  const rows: { dataId: number; recordId: number }[] = await approved(ctx)
    .innerJoin(RevisionData, "data", "data.revisionId = revision.id")
    .innerJoin(NamedDataAlias, "alias", "alias.comparable = data.comparable")
    .select("alias.dataId", "dataId")
    .addSelect("record.id", "recordId")
    .getRawMany();
  const users = new Map<number, Set<number>>();
  for (const { dataId, recordId } of rows) {
    users.set(Number(dataId), (users.get(Number(dataId)) ?? new Set()).add(Number(recordId)));
  }
  return users;
});

/** Things that nothing but a record this viewer is reading blind makes known to them. */
const hiddenOnce = perRequest(async (ctx: RequestContext): Promise<ReadonlySet<number>> => {
  const { manager } = ctx.database;
  const blind = [...(await recordsReadBlind(manager, ctx.viewer, new Date()))];
  if (blind.length === 0) return new Set();
  const rows: { dataId: number }[] = await manager.query(
    `SELECT DISTINCT alias.dataId AS dataId FROM named_data_alias alias
       JOIN revision_data data ON data.comparable = alias.comparable
       JOIN constraint_record record ON record.approvedRevisionId = data.revisionId
      WHERE record.id IN (${blind.map(() => "?").join(", ")})`,
    blind,
  );
  const users = await usersOnce(ctx);
  return new Set(rows.map(({ dataId }) => Number(dataId)).filter((id) => !users.has(id)));
});

function spellings(kept: KeptData, thing: NamedData): string[] {
  const own = comparableDataName(thing.name);
  return kept.aliases
    .filter(({ dataId, name }) => dataId === thing.id && comparableDataName(name) !== own)
    .map(({ name }) => name)
    .sort((a, b) => a.localeCompare(b, "en"));
}

/** Entries whose name or an alias holds the text, by name. */
export async function findData(
  ctx: RequestContext,
  text: string,
  kind: DataKind | null,
): Promise<NamedDataType[]> {
  const [kept, hidden] = await Promise.all([keptDataOnce(ctx), hiddenOnce(ctx)]);
  const wanted = comparableDataName(text);
  return [...kept.things.values()]
    .filter((thing) => !hidden.has(thing.id) && (kind === null || thing.kind === kind))
    .map((thing) => namedDataType(thing, spellings(kept, thing)))
    .filter(({ name, aliases }) =>
      [name, ...aliases].some((one) => comparableDataName(one).includes(wanted)),
    )
    .slice(0, MOST_ENTRIES);
}

/** The entry at an address; that of a merged one leads to what it was merged into. */
export async function dataAt(ctx: RequestContext, slug: string): Promise<NamedDataType | null> {
  const found = await ctx.database.manager.findOneBy(NamedData, { slug: slug.slice(0, 90) });
  if (!found) return null;
  const [kept, hidden] = await Promise.all([keptDataOnce(ctx), hiddenOnce(ctx)]);
  const thing = kept.things.get(found.mergedIntoId ?? found.id);
  return thing && !hidden.has(thing.id) ? namedDataType(thing, spellings(kept, thing)) : null;
}

/** An entry as it stands after a change in this request. */
export async function changedData(ctx: RequestContext, thing: NamedData): Promise<NamedDataType> {
  const aliases = await ctx.database.manager.findBy(NamedDataAlias, { dataId: thing.id });
  const own = comparableDataName(thing.name);
  const others = aliases
    .map(({ name }) => name)
    .filter((name) => comparableDataName(name) !== own)
    .sort((a, b) => a.localeCompare(b, "en"));
  return namedDataType(thing, others);
}

export async function countOf(ctx: RequestContext, id: number): Promise<number> {
  return (await usersOnce(ctx)).get(id)?.size ?? 0;
}

/** Approved records that name a thing, by any of its names; in the order of their numbers. */
export async function recordsOf(ctx: RequestContext, id: number): Promise<ApprovedRow[]> {
  const numbers = [...((await usersOnce(ctx)).get(id) ?? [])];
  if (numbers.length === 0) return [];
  const rows = await approved(ctx)
    .andWhere("record.id IN (:...numbers)", { numbers })
    .orderBy("record.id")
    .getMany();
  return rows.map(approvedRow);
}

export interface RelatedData {
  subsetOf: DataLink[];
  contains: DataLink[];
  overlaps: DataLink[];
}

/** The things that an entry is a part of, contains, and overlaps with. */
export async function relatedTo(ctx: RequestContext, id: number): Promise<RelatedData> {
  const [kept, hidden] = await Promise.all([keptDataOnce(ctx), hiddenOnce(ctx)]);
  const links = (ids: readonly number[]): DataLink[] =>
    ids.flatMap((one) => {
      const thing = kept.things.get(one);
      return thing && !hidden.has(one) ? [dataLink(thing)] : [];
    });
  const relations = kept.relations.filter(({ fromId, toId }) => fromId === id || toId === id);
  const subsets = relations.filter(({ relation }) => relation === "subsetOf");
  return {
    subsetOf: links(subsets.filter(({ fromId }) => fromId === id).map(({ toId }) => toId)),
    contains: links(subsets.filter(({ toId }) => toId === id).map(({ fromId }) => fromId)),
    overlaps: links(
      relations
        .filter(({ relation }) => relation === "overlaps")
        .map(({ fromId, toId }) => (fromId === id ? toId : fromId)),
    ),
  };
}

/** What a record's own spellings of its data lead to, by record. */
export const dataOfRecords = perRequest((ctx: RequestContext) =>
  batched<number, { spelled: string; link: DataLink }[]>(async (ids) => {
    const rows: { recordId: number; spelled: string; dataId: number }[] = await ctx.database.manager
      .createQueryBuilder(RevisionData, "data")
      .innerJoin("constraint_record", "record", "record.approvedRevisionId = data.revisionId")
      .innerJoin(NamedDataAlias, "alias", "alias.comparable = data.comparable")
      .select("record.id", "recordId")
      .addSelect("data.name", "spelled")
      .addSelect("alias.dataId", "dataId")
      .where("record.id IN (:...ids)", { ids: [...ids] })
      .orderBy("data.id")
      .getRawMany();
    const kept = await keptDataOnce(ctx);
    const found = new Map<number, { spelled: string; link: DataLink }[]>(ids.map((id) => [id, []]));
    for (const { recordId, spelled, dataId } of rows) {
      const thing = kept.things.get(Number(dataId));
      if (thing) found.get(Number(recordId))?.push({ spelled, link: dataLink(thing) });
    }
    return found;
  }),
);
