import type { EntityManager } from "typeorm";

import { refuse, Refusal } from "~server/common/outcomes";
import type { ViewerIdentity } from "~server/common/context";
import { setNumbersReadBlind } from "~server/correlatedSet/tableSets";
import { Release, releaseSurroundings } from "~server/release/release.entity";
import type { TableChoices } from "~shared/table/decision";
import { settleTable, type SettledTable } from "~shared/table/settleTable";

import { candidatesOf, MOST_CANDIDATES, type Candidates } from "./candidates";
import type { TableRecipe } from "./recipe";
import type { SnapshotConstraint } from "./snapshot";
import { presentSurroundings, surroundingsOf, type KeptSurroundings } from "./surroundings";

/** A recipe followed: its candidates and what became of them. */
export interface Followed {
  candidates: Candidates;
  settled: SettledTable;
}

/** Follows a recipe as far as this person may see its records. */
export async function follow(
  manager: EntityManager,
  viewer: ViewerIdentity | null,
  recipe: TableRecipe,
): Promise<Followed | Refusal> {
  const candidates = await candidatesOf(manager, viewer, recipe);
  if (candidates instanceof Refusal) return candidates;
  if (candidates.total > candidates.records.length) {
    return refuse(
      "tooMany",
      `${candidates.total} records match; a table is built over ${MOST_CANDIDATES} at most. Narrow the filter.`,
      "filter",
    );
  }
  const surroundings = await surroundingsFor(manager, recipe.release);
  const blind = await setNumbersReadBlind(manager, viewer, new Date());
  const kept = { ...surroundings, sets: surroundings.sets.filter(({ id }) => !blind.has(id)) };
  return { candidates, settled: settleRecords(kept, candidates.records, recipe.choices) };
}

/** Surroundings as a release froze them, or as they stand now. */
export async function surroundingsFor(
  manager: EntityManager,
  release: number | null,
): Promise<KeptSurroundings> {
  if (release === null) return presentSurroundings(manager);
  return releaseSurroundings(await manager.findOneByOrFail(Release, { number: release }));
}

/** Settles records that are at hand with what a person chose. */
export function settleRecords(
  kept: KeptSurroundings,
  records: readonly SnapshotConstraint[],
  choices: TableChoices,
): SettledTable {
  return settleTable(
    records.map((record) => ({
      number: record.number,
      fields: record.fields,
      citation: record.citation.id,
      shortName: record.citation.shortName,
      year: record.citation.year,
      state: record.state,
      supersededBy: record.supersededBy ?? null,
    })),
    surroundingsOf(kept, records),
    choices,
  );
}
