import { IsNull, type EntityManager } from "typeorm";

import type { RequestContext } from "~server/common/context";
import { perRequest } from "~server/constraint/batch";
import { DataRegister, type NamedThing } from "~shared/dependence/sharedData";

import { NamedData, NamedDataAlias, NamedDataRelation } from "./namedData.entity";

/** Everything the registry knows of named data; a few hundred things, so whole. */
export interface KeptData {
  register: DataRegister;
  things: Map<number, NamedData>;
  aliases: NamedDataAlias[];
  relations: NamedDataRelation[];
}

/** Named data with aliases and relations, as they stand in this transaction. */
export async function keptData(manager: EntityManager): Promise<KeptData> {
  const [things, aliases, relations] = await Promise.all([
    manager.find(NamedData, {
      where: { mergedIntoId: IsNull() },
      order: { name: "ASC", id: "ASC" },
    }),
    manager.find(NamedDataAlias, { order: { id: "ASC" } }),
    manager.find(NamedDataRelation, { order: { id: "ASC" } }),
  ]);
  const spellings = new Map<number, string[]>();
  for (const { dataId, name } of aliases) {
    spellings.set(dataId, [...(spellings.get(dataId) ?? []), name]);
  }
  const related = (id: number, relation: string): number[] =>
    relations
      .filter((one) => one.fromId === id && one.relation === relation)
      .map(({ toId }) => toId);
  const register = new DataRegister(
    things.map((thing): NamedThing => ({
      id: thing.id,
      name: thing.name,
      aliases: spellings.get(thing.id) ?? [],
      subsetOf: related(thing.id, "subsetOf"),
      overlaps: related(thing.id, "overlaps"),
    })),
  );
  return { register, things: new Map(things.map((one) => [one.id, one])), aliases, relations };
}

export const keptDataOnce = perRequest((ctx: RequestContext) => keptData(ctx.database.manager));
