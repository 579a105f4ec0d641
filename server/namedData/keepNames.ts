import type { EntityManager } from "typeorm";

import { comparableDataName } from "~shared/dependence/dataName";
import { dataSlug } from "~shared/dependence/namedData";
import type { ConstraintFields } from "~shared/statement/fields";
import type { Change } from "~server/event/acting";

import { NamedData, NamedDataAlias } from "./namedData.entity";

/**
 * Makes things of the names that the registry doesn't know yet. Only once their revision is approved:
 * what a submission names is as unread as its numbers. Behind the relation gate, so one at a time.
 */
export async function keepNames(here: Change, fields: ConstraintFields): Promise<void> {
  if (fields.dataKnown === false) return;
  for (const name of fields.dataUsed) {
    const comparable = comparableDataName(name).slice(0, 200);
    if (comparable === "") continue;
    if (await here.manager.existsBy(NamedDataAlias, { comparable })) continue;
    const thing = await addThing(here.manager, name, comparable);
    await here.event({ kind: "namedData.added", subject: `data:${thing.slug}` });
  }
}

/** A thing with this one spelling, of a kind not said yet. */
export async function addThing(
  manager: EntityManager,
  name: string,
  comparable: string,
): Promise<NamedData> {
  const slug = await freeSlug(manager, name);
  const inserted = await manager.insert(NamedData, { slug, name, kind: "unknown" });
  const id = Number((inserted.identifiers[0] as { id: number }).id);
  await manager.insert(NamedDataAlias, { dataId: id, name, comparable });
  return manager.findOneByOrFail(NamedData, { id });
}

async function freeSlug(manager: EntityManager, name: string): Promise<string> {
  const wanted = dataSlug(name);
  for (let count = 1; ; count += 1) {
    const slug = count === 1 ? wanted : `${wanted}-${count}`;
    if (!(await manager.existsBy(NamedData, { slug }))) return slug;
  }
}
