import type { EntityManager } from "typeorm";

import { refuse, type Refusal } from "~server/common/outcomes";
import { change, type Acting } from "~server/event/acting";
import { methodProblem, tidyMethod, type MethodWords } from "~shared/methods/entry";

import { MethodRow } from "./method.entity";
import { reindexMethod } from "./reindex";
import { countChange, keptMethods, passVocabularyGate, useKeptVocabulary } from "./vocabulary";

const CHANGED = "Somebody changed this method meanwhile. Reload the page.";
/** More than anybody would choose from. */
const MOST_METHODS = 200;

const subjectOf = (tag: string): string => `method:${tag}`;
const unknown = (): Refusal => refuse("notFound", "There is no such method.");
const retired = (): Refusal =>
  refuse("retired", "It is retired: change the method that took it over.");

/** One change of the vocabulary; afterwards this process has it in force, and others at their next request. */
async function changeVocabulary(
  who: Acting,
  work: (here: Parameters<Parameters<typeof change>[1]>[0]) => Promise<MethodRow | Refusal>,
): Promise<MethodRow | Refusal> {
  const outcome = await change(who, async (here) => {
    await passVocabularyGate(here.manager);
    return work(here);
  });
  if (outcome instanceof MethodRow) await useKeptVocabulary(who.database.manager);
  return outcome;
}

/** Writes to a method only if it is in use and still at this version. */
async function written(
  manager: EntityManager,
  tag: string,
  version: number,
  set: Partial<Omit<MethodRow, "aliases">> & { aliases?: string[] },
): Promise<boolean> {
  const { affected } = await manager
    .createQueryBuilder()
    .update(MethodRow)
    .set({ ...set, version: version + 1 })
    .where("tag = :tag AND version = :version AND retiredInto IS NULL", { tag, version })
    .execute();
  return affected === 1;
}

/** Adds a method to the vocabulary. */
export async function addMethod(who: Acting, given: MethodWords): Promise<MethodRow | Refusal> {
  const words = tidyMethod(given);
  return changeVocabulary(who, async ({ manager, event }) => {
    const others = await keptMethods(manager);
    if (others.length >= MOST_METHODS) {
      return refuse("tooMany", `The vocabulary holds at most ${MOST_METHODS} methods.`);
    }
    const problem = methodProblem(words, others);
    if (problem) return refuse("words", problem.message, problem.field);
    await manager.insert(MethodRow, { ...words, aliases: [...words.aliases] });
    await countChange(manager);
    await event({
      kind: "method.added",
      subject: subjectOf(words.tag),
      detail: { name: words.name, family: words.family },
    });
    return manager.findOneByOrFail(MethodRow, { tag: words.tag });
  });
}

/** Changes what is said of a method; its tag stays. Another family moves its records there. */
export async function changeMethod(
  who: Acting,
  given: MethodWords,
  version: number,
): Promise<MethodRow | Refusal> {
  const words = tidyMethod(given);
  return changeVocabulary(who, async ({ manager, event }) => {
    const all = await keptMethods(manager);
    const before = all.find(({ tag }) => tag === words.tag);
    if (!before) return unknown();
    if (before.retiredInto !== null) return retired();
    const problem = methodProblem(
      words,
      all.filter((other) => other !== before),
    );
    if (problem) return refuse("words", problem.message, problem.field);
    const { tag, ...set } = { ...words, aliases: [...words.aliases] };
    if (!(await written(manager, tag, version, set))) return refuse("stale", CHANGED);
    const moved = before.family !== words.family;
    if (moved) await reindexMethod(manager, tag);
    await countChange(manager);
    const fields = (Object.keys(set) as (keyof typeof set)[]).filter(
      (field) => JSON.stringify(set[field]) !== JSON.stringify(before[field]),
    );
    await event({
      kind: "method.changed",
      subject: subjectOf(tag),
      detail: {
        name: words.name,
        fields,
        ...(moved ? { familyBefore: before.family, family: words.family } : {}),
      },
    });
    return manager.findOneByOrFail(MethodRow, { tag });
  });
}

/** Makes a method a word for another one, which is then shown and found in its place. */
export async function retireMethod(
  who: Acting,
  tag: string,
  version: number,
  into: string,
): Promise<MethodRow | Refusal> {
  return changeVocabulary(who, async ({ manager, event }) => {
    const [method, next] = [
      await manager.findOneBy(MethodRow, { tag }),
      await manager.findOneBy(MethodRow, { tag: into }),
    ];
    if (!method) return unknown();
    if (method.retiredInto !== null) return retired();
    if (!next) return refuse("into", "Choose the method that takes it over.", "into");
    if (next.tag === method.tag) {
      return refuse("into", "A method can't take itself over.", "into");
    }
    if (next.retiredInto !== null) {
      return refuse("into", `${next.name} is retired itself.`, "into");
    }
    if (!(await written(manager, tag, version, { retiredInto: into }))) {
      return refuse("stale", CHANGED);
    }
    await reindexMethod(manager, tag);
    await countChange(manager);
    await event({
      kind: "method.retired",
      subject: subjectOf(tag),
      detail: { name: method.name, into: subjectOf(into) },
    });
    return manager.findOneByOrFail(MethodRow, { tag: into });
  });
}
