import type { EntityManager } from "typeorm";

import { CorrelatedSet } from "~server/correlatedSet/correlatedSet.entity";
import { contentOfSet } from "~server/correlatedSet/store";
import { correlations, usedCorrelations } from "~shared/correlatedSet/matrix";
import type { TableSet, TableSurroundings } from "~shared/table/decision";
import { emptyFields } from "~shared/statement/fields";
import { formatSetNumber } from "~shared/identifiers/setNumber";

import type { SnapshotConstraint } from "./snapshot";

/** What the registry knows about these records beside their own content. */
export async function surroundingsOf(
  manager: EntityManager,
  records: readonly SnapshotConstraint[],
): Promise<TableSurroundings> {
  return {
    overlaps: [],
    conditions: new Map(),
    sets: await setsAmong(manager, records),
  };
}

/** Approved sets of which at least one record is among these. */
async function setsAmong(
  manager: EntityManager,
  records: readonly SnapshotConstraint[],
): Promise<TableSet[]> {
  const byNumber = new Map(records.map((record) => [record.number, record]));
  const sets = await manager.find(CorrelatedSet, {
    where: { state: "approved" },
    order: { id: "ASC" },
  });
  return sets.flatMap((set): TableSet[] => {
    if (!set.members.some((number) => byNumber.has(number))) return [];
    const rho = correlations(contentOfSet(set), set.members.length);
    if (!rho) return [];
    // How an absent member is turned does not matter: its row and column are dropped.
    const members = set.members.map((number) => byNumber.get(number) ?? { fields: emptyFields() });
    const number = formatSetNumber(set.id);
    return [
      {
        id: number,
        label: set.label ?? number,
        members: set.members,
        rho: usedCorrelations(rho, members),
      },
    ];
  });
}
