/** The vocabulary of the database, and the one that this process has in force. */
import type { EntityManager } from "typeorm";

import { Setting } from "~server/database/setting.entity";
import { START_VOCABULARY } from "~shared/methods/startVocabulary";
import { setVocabulary } from "~shared/methods/vocabulary";

import { MethodRow } from "./method.entity";

/** Names the setting that counts the changes. Whoever changes the vocabulary holds its row. */
const CHANGES = "vocabularyChanges";
/** Between places of the start list, so that a method can be put between two. */
const STEP = 10;

/** Gives a registry without a vocabulary the start list. Called behind the lock of the migrations. */
export async function startVocabulary(manager: EntityManager): Promise<void> {
  if ((await manager.count(MethodRow)) > 0) return;
  await manager.transaction(async (inside) => {
    await inside.insert(
      MethodRow,
      START_VOCABULARY.map((entry, index) => ({
        ...entry,
        aliases: [...entry.aliases],
        position: (index + 1) * STEP,
      })),
    );
    await inside.upsert(Setting, { name: CHANGES, value: "0" }, ["name"]);
  });
}

/** Every tag of this registry, retired ones too, by place. */
export async function keptMethods(manager: EntityManager): Promise<MethodRow[]> {
  return manager.find(MethodRow, { order: { position: "ASC", tag: "ASC" } });
}

/** The number of changes that the vocabulary in force was read after; null before it was read. */
let readAfter: string | null = null;

async function readInto(manager: EntityManager, changes: string): Promise<void> {
  if (changes === readAfter) return;
  setVocabulary(await keptMethods(manager));
  readAfter = changes;
}

/**
 * Brings this process up to what any of them has changed: one small query for each request, and the
 * whole vocabulary only after a change.
 */
export async function useKeptVocabulary(manager: EntityManager): Promise<void> {
  const row = await manager.findOneBy(Setting, { name: CHANGES });
  await readInto(manager, row?.value ?? "0");
}

/**
 * Keeps the vocabulary as it is until this transaction ends, with its latest state in force: for whoever
 * writes what follows from it.
 */
export async function holdVocabulary(manager: EntityManager): Promise<void> {
  const [row] = await manager.query("SELECT value FROM setting WHERE name = ? LOCK IN SHARE MODE", [
    CHANGES,
  ]);
  await readInto(manager, String(row?.value ?? "0"));
}

/** Waits until nobody else changes the vocabulary; call it first, and in a transaction. */
export async function passVocabularyGate(manager: EntityManager): Promise<void> {
  await manager.query("SELECT value FROM setting WHERE name = ? FOR UPDATE", [CHANGES]);
}

/** Tells every process that the vocabulary has changed, once this transaction is through. */
export async function countChange(manager: EntityManager): Promise<void> {
  await manager.query("UPDATE setting SET value = value + 1 WHERE name = ?", [CHANGES]);
}
