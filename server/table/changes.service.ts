import type { EntityManager } from "typeorm";

import { Refusal } from "~server/common/outcomes";
import type { ViewerIdentity } from "~server/common/context";
import { findReleases } from "~server/release/release.service";
import { background } from "~shared/cosmology/background";
import { DomainError } from "~shared/errors/DomainError";
import { formatQuotable } from "~shared/identifiers/recordNumber";
import {
  DERIVED_NAMES,
  FitProblem,
  maximumLikelihood,
  runTask,
  tanhFamily,
} from "~shared/inference";
import { CompiledTable } from "~shared/likelihood/compile";
import { rowChanges, type ComparedRow } from "~shared/table/rowChanges";
import { tableSpecOf, type SettledTable } from "~shared/table/settleTable";

import { TableChanges, TableRowChange } from "./recipe.type";
import { follow, settleRecords, surroundingsFor } from "./settle.service";
import type { SnapshotConstraint } from "./snapshot";
import type { SavedTable } from "./table.entity";
import { findVersion } from "./table.view";
import { TableVersionRow, type TableVersion } from "./tableVersion.entity";

/**
 * What the newest release would make of a table that pins one, or the records of now of a table over the latest.
 * The table itself never changes by it.
 *
 * @returns Null while its source can't be read.
 */
export async function tableChanges(
  manager: EntityManager,
  viewer: ViewerIdentity | null,
  table: SavedTable,
): Promise<TableChanges | null> {
  const version = await findVersion(manager, table, null);
  if (!version) return null;
  const { recipe } = version;
  const [newest] = recipe.release === null ? [] : await findReleases(manager);
  const release = newest?.number ?? recipe.release;
  const now = await follow(manager, viewer, { ...recipe, release });
  if (now instanceof Refusal) return null;
  const saved = await savedRecords(manager, version);
  const then = settleRecords(
    await surroundingsFor(manager, viewer, recipe.release),
    saved,
    recipe.choices,
  );
  const [best, bestThen] = [bestTanh(now.settled), bestTanh(then)];
  return Object.assign(new TableChanges(), {
    release,
    rows: rowChanges(compared(saved, then), compared(now.candidates.records, now.settled)).map(
      (change) => Object.assign(new TableRowChange(), change),
    ),
    open: now.settled.open,
    midpoint: best?.midpoint ?? null,
    midpointThen: bestThen?.midpoint ?? null,
    opticalDepth: best?.opticalDepth ?? null,
    opticalDepthThen: bestThen?.opticalDepth ?? null,
  });
}

async function savedRecords(
  manager: EntityManager,
  { slug, version }: TableVersion,
): Promise<SnapshotConstraint[]> {
  const rows = await manager.find(TableVersionRow, {
    where: { slug, version },
    order: { position: "ASC" },
  });
  return rows.map(({ record }) => JSON.parse(record) as SnapshotConstraint);
}

function compared(records: readonly SnapshotConstraint[], { rows }: SettledTable): ComparedRow[] {
  return records.map((record, index) => ({
    number: record.number,
    revision: formatQuotable(record.id, record.ordinal),
    state: record.state,
    included: rows[index]?.included ?? false,
    reason: rows[index]?.reason ?? null,
  }));
}

/** Midpoint and optical depth of the tanh history that fits the rows best; null where none can be named. */
function bestTanh(settled: SettledTable): { midpoint: number; opticalDepth: number } | null {
  const spec = tableSpecOf(settled);
  if (spec.rows.length < 2) return null;
  try {
    const problem = new FitProblem(new CompiledTable(spec), tanhFamily(), background());
    const { theta, degenerate } = runTask(maximumLikelihood(problem));
    if (degenerate) return null;
    const derived = new Float64Array(DERIVED_NAMES.length);
    problem.derived(theta, derived);
    const [opticalDepth = NaN, , midpoint = NaN] = derived;
    return Number.isFinite(opticalDepth) && Number.isFinite(midpoint)
      ? { midpoint, opticalDepth }
      : null;
  } catch (error) {
    if (error instanceof DomainError) return null;
    throw error;
  }
}
