import type { EntityManager } from "typeorm";

import { refuse, Refusal } from "~server/common/outcomes";
import type { ViewerIdentity } from "~server/common/context";
import { setNumbersReadBlind } from "~server/correlatedSet/readBlind";
import { Release, releaseSurroundings } from "~server/release/release.entity";
import { recordsReadBlind } from "~server/review/blindness";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";
import type { TableChoices } from "~shared/table/decision";
import { settleTable, type SettledTable } from "~shared/table/settleTable";

import { candidatesOf, MOST_CANDIDATES, type Candidates } from "./candidates";
import type { TableRecipe } from "./recipe";
import type { SnapshotConstraint } from "./snapshot";
import {
  inWordsOf,
  presentSurroundings,
  surroundingsOf,
  type KeptSurroundings,
} from "./surroundings";

/** A recipe followed: its candidates and what became of them. */
export interface Followed {
  candidates: Candidates;
  settled: SettledTable;
  /** The method vocabulary that it was followed in. */
  methods: KeptSurroundings["methods"];
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
  const kept = await surroundingsFor(manager, viewer, recipe.release);
  return {
    candidates,
    settled: settleRecords(kept, candidates.records, recipe.choices),
    methods: kept.methods,
  };
}

/**
 * Surroundings as a release froze them, or as they stand now, without the sets that this person is
 * reading blind and without what a record that they read blind is conditioned on.
 */
export async function surroundingsFor(
  manager: EntityManager,
  viewer: ViewerIdentity | null,
  release: number | null,
): Promise<KeptSurroundings> {
  const kept =
    release === null
      ? await presentSurroundings(manager)
      : releaseSurroundings(await manager.findOneByOrFail(Release, { number: release }));
  const now = new Date();
  const sets = await setNumbersReadBlind(manager, viewer, now);
  const records = new Set(
    [...(await recordsReadBlind(manager, viewer, now))].map(formatRecordNumber),
  );
  return {
    ...kept,
    sets: kept.sets.filter(({ id }) => !sets.has(id)),
    conditions: Object.fromEntries(
      Object.entries(kept.conditions).filter(([number]) => !records.has(number)),
    ),
  };
}

/** Settles records that are at hand with what a person chose. */
export function settleRecords(
  kept: KeptSurroundings,
  records: readonly SnapshotConstraint[],
  choices: TableChoices,
): SettledTable {
  return inWordsOf(kept, () =>
    settleTable(
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
    ),
  );
}
