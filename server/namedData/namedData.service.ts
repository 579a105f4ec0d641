import { In, type EntityManager } from "typeorm";

import { refuse, type Refusal } from "~server/common/outcomes";
import { passRelationGate } from "~server/constraint/links";
import { change, type Acting, type Change } from "~server/event/acting";
import { comparableDataName } from "~shared/dependence/dataName";
import {
  coordinateProblem,
  DATA_LENGTHS,
  type DataKind,
  type DataRelation,
} from "~shared/dependence/namedData";
import { findCircle, type RecordEdge } from "~shared/dependence/relation";

import { addThing } from "./keepNames";
import { NamedData, NamedDataAlias, NamedDataRelation } from "./namedData.entity";

export interface DataChanges {
  slug: string;
  version: number;
  name: string;
  kind: DataKind;
  ra: string | null;
  dec: string | null;
  extent: string | null;
  note: string | null;
  /** Every other spelling; one that is left out goes its own way again. */
  aliases: readonly string[];
}

const CHANGED = "Somebody changed this entry meanwhile. Reload the page.";
const unknown = (): Refusal => refuse("notFound", "There is no such entry.");

const plain = (text: string): string => text.replace(/[\u0000-\u001f\u007f]+/g, " ").trim();
const orNull = (text: string | null): string | null => plain(text ?? "") || null;

async function thingAt(manager: EntityManager, slug: string): Promise<NamedData | null> {
  const thing = await manager.findOneBy(NamedData, { slug });
  return thing?.mergedIntoId === null ? thing : null;
}

/** Writes to a thing only if it is still at this version. */
async function written(
  manager: EntityManager,
  thing: Pick<NamedData, "id">,
  version: number,
  set: Partial<NamedData>,
): Promise<boolean> {
  const { affected } = await manager
    .createQueryBuilder()
    .update(NamedData)
    .set({ ...set, version: version + 1 })
    .where("id = :id AND version = :version AND mergedIntoId IS NULL", { id: thing.id, version })
    .execute();
  return affected === 1;
}

function lengthProblem(changes: DataChanges, extent: string | null, note: string | null) {
  const { name, aliases } = DATA_LENGTHS;
  if (changes.name === "" || changes.name.length > name) {
    return refuse("name", `A name has 1 to ${name} characters.`, "name");
  }
  if (comparableDataName(changes.name) === "") {
    return refuse("name", "A name has a letter or a digit at least.", "name");
  }
  if (changes.aliases.length > aliases || changes.aliases.some((one) => one.length > name)) {
    return refuse(
      "aliases",
      `At most ${aliases} other names of ${name} characters each.`,
      "aliases",
    );
  }
  if ((extent?.length ?? 0) > DATA_LENGTHS.extent) {
    return refuse("extent", `At most ${DATA_LENGTHS.extent} characters.`, "extent");
  }
  return (note?.length ?? 0) > DATA_LENGTHS.note
    ? refuse("note", `A note has at most ${DATA_LENGTHS.note} characters.`, "note")
    : null;
}

/** Says what a thing is and which other names it goes by. */
export async function editData(who: Acting, given: DataChanges): Promise<NamedData | Refusal> {
  const changes = { ...given, name: plain(given.name), aliases: given.aliases.map(plain) };
  const [ra, dec] = [orNull(given.ra), orNull(given.dec)].map(
    (text) => text && text.replace("\u2212", "-"),
  ) as [string | null, string | null];
  const [extent, note] = [orNull(given.extent), orNull(given.note)];
  const long = lengthProblem(changes, extent, note);
  if (long) return long;
  const place = coordinateProblem(ra, dec);
  if (place) return refuse("coordinates", place.message, place.field);
  return change<NamedData | Refusal>(who, async (here) => {
    const { manager } = here;
    await passRelationGate(manager);
    const thing = await thingAt(manager, changes.slug);
    if (!thing) return unknown();
    const spellings = new Map(
      [changes.name, ...changes.aliases].map(
        (name) => [comparableDataName(name).slice(0, 200), name] as const,
      ),
    );
    spellings.delete("");
    const taken = await refuseTaken(manager, thing, [...spellings.keys()]);
    if (taken) return taken;
    const { name, kind } = changes;
    const set = { name, kind, ra, dec, extent, note };
    if (!(await written(manager, thing, changes.version, set))) return refuse("stale", CHANGED);
    const apart = await writeSpellings(here, thing, spellings);
    await here.event({
      kind: "namedData.edited",
      subject: `data:${thing.slug}`,
      detail: { name, kind, ra, dec, aliases: [...spellings.values()], apart },
    });
    return manager.findOneByOrFail(NamedData, { id: thing.id });
  });
}

async function refuseTaken(
  manager: EntityManager,
  thing: NamedData,
  comparables: readonly string[],
): Promise<Refusal | null> {
  const others = await manager.find(NamedDataAlias, {
    where: { comparable: In([...comparables]) },
    relations: { data: true },
  });
  const taken = others.find(({ dataId }) => dataId !== thing.id);
  if (!taken) return null;
  const words = `“${taken.name}” is a name of ${taken.data.name} already. Merge the two if they are one.`;
  return refuse("taken", words, "aliases");
}

/**
 * Brings a thing's spellings to those given. What is dropped while records use it becomes a thing of its
 * own again, which takes back a wrong merge.
 *
 * @returns Names that go their own way.
 */
async function writeSpellings(
  here: Change,
  thing: NamedData,
  spellings: ReadonlyMap<string, string>,
): Promise<string[]> {
  const { manager } = here;
  const apart: string[] = [];
  const before = await manager.findBy(NamedDataAlias, { dataId: thing.id });
  for (const alias of before) {
    const now = spellings.get(alias.comparable);
    if (now !== undefined) {
      if (now !== alias.name) await manager.update(NamedDataAlias, { id: alias.id }, { name: now });
      continue;
    }
    await manager.delete(NamedDataAlias, { id: alias.id });
    if (!(await isUsed(manager, alias.comparable))) continue;
    await goApart(manager, thing, alias);
    apart.push(alias.name);
  }
  const had = new Set(before.map(({ comparable }) => comparable));
  for (const [comparable, name] of spellings) {
    if (!had.has(comparable)) {
      await manager.insert(NamedDataAlias, { dataId: thing.id, name, comparable });
    }
  }
  return apart;
}

async function isUsed(manager: EntityManager, comparable: string): Promise<boolean> {
  const [used]: unknown[] = await manager.query(
    `SELECT 1 FROM revision_data data
       JOIN constraint_record record ON record.approvedRevisionId = data.revisionId
      WHERE data.comparable = ? LIMIT 1`,
    [comparable],
  );
  return used !== undefined;
}

async function goApart(
  manager: EntityManager,
  thing: NamedData,
  { name, comparable }: NamedDataAlias,
): Promise<void> {
  const merged = await manager.findBy(NamedData, { mergedIntoId: thing.id });
  const former = merged.find((one) => comparableDataName(one.name).slice(0, 200) === comparable);
  if (!former) {
    await addThing(manager, name, comparable);
    return;
  }
  await manager.update(NamedData, { id: former.id }, { mergedIntoId: null });
  await manager.insert(NamedDataAlias, { dataId: former.id, name, comparable });
}

/** Makes one thing an alias of another: its spellings and relations go over, its address leads there. */
export async function mergeData(
  who: Acting,
  slug: string,
  version: number,
  intoSlug: string,
): Promise<NamedData | Refusal> {
  return change<NamedData | Refusal>(who, async (here) => {
    const { manager } = here;
    await passRelationGate(manager);
    const [thing, into] = [await thingAt(manager, slug), await thingAt(manager, intoSlug)];
    if (!thing) return unknown();
    if (!into) return refuse("into", "Choose the entry that it is the same as.", "into");
    if (thing.id === into.id) return refuse("into", "It is the same entry already.", "into");
    const circle = await circleOfMerged(manager, thing, into);
    if (circle) return circle;
    const won = await written(manager, thing, version, { mergedIntoId: into.id });
    if (!won) return refuse("stale", CHANGED);
    await manager.update(NamedDataAlias, { dataId: thing.id }, { dataId: into.id });
    await manager.update(NamedData, { mergedIntoId: thing.id }, { mergedIntoId: into.id });
    await moveRelations(manager, thing.id, into.id);
    const kept = {
      kind: into.kind === "unknown" ? thing.kind : into.kind,
      ...(into.ra === null ? { ra: thing.ra, dec: thing.dec } : {}),
      extent: into.extent ?? thing.extent,
    };
    if (!(await written(manager, into, into.version, kept))) return refuse("stale", CHANGED);
    await here.event({
      kind: "namedData.merged",
      subject: `data:${thing.slug}`,
      detail: { into: `data:${into.slug}` },
    });
    return manager.findOneByOrFail(NamedData, { id: into.id });
  });
}

async function moveRelations(manager: EntityManager, from: number, into: number): Promise<void> {
  const relations = await manager.find(NamedDataRelation, {
    where: [{ fromId: from }, { toId: from }],
  });
  for (const { id, fromId, toId, relation } of relations) {
    await manager.delete(NamedDataRelation, { id });
    const moved = { fromId: fromId === from ? into : fromId, toId: toId === from ? into : toId };
    if (moved.fromId === moved.toId) continue;
    if (await relationBetween(manager, moved.fromId, moved.toId)) continue;
    await manager.insert(NamedDataRelation, { ...moved, relation });
  }
}

async function relationBetween(
  manager: EntityManager,
  one: number,
  other: number,
): Promise<NamedDataRelation | null> {
  return manager.findOneBy(NamedDataRelation, [
    { fromId: one, toId: other },
    { fromId: other, toId: one },
  ]);
}

async function subsetEdges(manager: EntityManager): Promise<RecordEdge[]> {
  const relations = await manager.findBy(NamedDataRelation, { relation: "subsetOf" });
  return relations.map(({ fromId, toId }) => ({ from: fromId, relation: "subsetOf", to: toId }));
}

async function circleWords(manager: EntityManager, circle: readonly RecordEdge[]): Promise<string> {
  const things = await manager.findBy(NamedData, { id: In(circle.map(({ from }) => from)) });
  const name = (id: number): string => things.find((one) => one.id === id)?.name ?? "";
  const [first, ...rest] = circle;
  return rest.reduce(
    (words, { to }) => `${words}, which is a part of ${name(to)}`,
    `${name(first?.from ?? 0)} is a part of ${name(first?.to ?? 0)}`,
  );
}

async function circleOfMerged(
  manager: EntityManager,
  thing: NamedData,
  into: NamedData,
): Promise<Refusal | null> {
  const as = (id: number): number => (id === thing.id ? into.id : id);
  const edges = (await subsetEdges(manager))
    .map((edge) => ({ ...edge, from: as(edge.from), to: as(edge.to) }))
    .filter(({ from, to }) => from !== to);
  const own = edges.filter(({ from }) => from === into.id);
  const circle = findCircle(into.id, own, edges);
  if (!circle) return null;
  const words = await circleWords(manager, circle);
  return refuse("circle", `As one entry they would be a part of themselves: ${words}.`, "into");
}

/** States that a thing is a part of another, or overlaps with it. */
export async function relateData(
  who: Acting,
  slug: string,
  relation: DataRelation,
  otherSlug: string,
): Promise<NamedData | Refusal> {
  return change<NamedData | Refusal>(who, async (here) => {
    const { manager } = here;
    await passRelationGate(manager);
    const [thing, other] = [await thingAt(manager, slug), await thingAt(manager, otherSlug)];
    if (!thing) return unknown();
    if (!other) return refuse("other", "Choose the other entry.", "other");
    if (thing.id === other.id) {
      return refuse("other", "An entry has no relation to itself.", "other");
    }
    if (await relationBetween(manager, thing.id, other.id)) {
      const words = `A relation between ${thing.name} and ${other.name} stands already. Take it back first.`;
      return refuse("related", words, "other");
    }
    const count = await manager.countBy(NamedDataRelation, { fromId: thing.id });
    if (count >= DATA_LENGTHS.relations) return refuse("tooMany", "It has too many relations.");
    const edges = await subsetEdges(manager);
    const own = [
      ...edges.filter(({ from }) => from === thing.id),
      { relation: "subsetOf" as const, to: other.id },
    ];
    const circle = relation === "subsetOf" ? findCircle(thing.id, own, edges) : null;
    if (circle) {
      const words = await circleWords(manager, circle);
      return refuse("circle", `Nothing is a part of itself: ${words}.`, "other");
    }
    await manager.insert(NamedDataRelation, { fromId: thing.id, relation, toId: other.id });
    await here.event({
      kind: "namedData.related",
      subject: `data:${thing.slug}`,
      detail: { relation, to: `data:${other.slug}` },
    });
    return thing;
  });
}

/** Takes a relation back, from either end. */
export async function unrelateData(
  who: Acting,
  slug: string,
  otherSlug: string,
): Promise<NamedData | Refusal> {
  return change<NamedData | Refusal>(who, async (here) => {
    const { manager } = here;
    await passRelationGate(manager);
    const [thing, other] = [await thingAt(manager, slug), await thingAt(manager, otherSlug)];
    if (!thing || !other) return unknown();
    const found = await relationBetween(manager, thing.id, other.id);
    if (!found) return refuse("notFound", "There is no such relation any more.");
    await manager.delete(NamedDataRelation, { id: found.id });
    await here.event({
      kind: "namedData.unrelated",
      subject: `data:${thing.slug}`,
      detail: { relation: found.relation, to: `data:${other.slug}` },
    });
    return thing;
  });
}
