import type { EntityManager } from "typeorm";

import { refuse, type Refusal } from "~server/common/outcomes";
import type { ViewerIdentity } from "~server/common/context";
import { findApproved } from "~server/constraint/constraint.query";
import { indexColumns } from "~server/constraint/revision.index";
import { lastEvent, type LastEvent } from "~server/event/eventLog";
import { releaseSurroundings, rowContent } from "~server/release/release.entity";
import { releaseRows } from "~server/release/releaseContent";
import { findRelease } from "~server/release/release.service";
import { recordsReadBlind } from "~server/review/blindness";
import { matchesFilter } from "~shared/filter/matches";

import { copyRecords } from "./copyRecords";
import type { TableRecipe } from "./recipe";
import type { SnapshotConstraint } from "./snapshot";
import { inWordsOf } from "./surroundings";

/** Rows a table can be built over; more than any group fits, and no more than one answer should hold. */
export const MOST_CANDIDATES = 2000;

/** The records that a recipe's filter matches, in the order of redshift, and where they come from. */
export interface Candidates {
  records: SnapshotConstraint[];
  /** How many match in all; more than the records when there are too many. */
  total: number;
  lastEvent: LastEvent;
}

/**
 * Finds the candidates as this person may see them: what they are reading blind is left out.
 *
 * @returns A refusal when the release does not exist or the registry is empty.
 */
export async function candidatesOf(
  manager: EntityManager,
  viewer: ViewerIdentity | null,
  recipe: Pick<TableRecipe, "release" | "filter">,
): Promise<Candidates | Refusal> {
  return recipe.release === null
    ? fromLatest(manager, viewer, recipe.filter)
    : fromRelease(manager, viewer, recipe.release, recipe.filter);
}

async function fromLatest(
  manager: EntityManager,
  viewer: ViewerIdentity | null,
  filter: TableRecipe["filter"],
): Promise<Candidates | Refusal> {
  const last = await lastEvent(manager);
  if (!last) return refuse("empty", "There is nothing in the registry yet.");
  const found = await findApproved(
    { database: { manager }, viewer },
    filter,
    "redshift",
    0,
    MOST_CANDIDATES + 1,
  );
  return {
    records: await copyRecords(manager, found.slice(0, MOST_CANDIDATES)),
    total: found.length,
    lastEvent: last,
  };
}

async function fromRelease(
  manager: EntityManager,
  viewer: ViewerIdentity | null,
  number: number,
  filter: TableRecipe["filter"],
): Promise<Candidates | Refusal> {
  const release = await findRelease(manager, number);
  if (!release) return refuse("release", `There is no release ${number}.`, "release");
  const kept = releaseSurroundings(release);
  const blind = await recordsReadBlind(manager, viewer, new Date());
  const found: { record: SnapshotConstraint; z: number | null }[] = [];
  let total = 0;
  for await (const row of releaseRows(manager, number)) {
    if (blind.has(row.constraintId)) continue;
    const record = rowContent(row);
    const { zUsed, matches } = inWordsOf(kept, () => {
      const index = indexColumns(record.id, record.fields, record.citation as never);
      const matches = matchesFilter({ ...index, state: record.state }, filter);
      return { zUsed: index.zUsed, matches };
    });
    if (!matches) continue;
    total += 1;
    if (total <= MOST_CANDIDATES) found.push({ record, z: zUsed });
  }
  found.sort((a, b) => (a.z ?? Infinity) - (b.z ?? Infinity) || a.record.id - b.record.id);
  return {
    records: found.map(({ record }) => record),
    total,
    lastEvent: {
      sequence: release.lastEventSequence,
      digest: release.lastEventDigest,
      at: release.lastEventAt,
    },
  };
}
