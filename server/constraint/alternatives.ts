import type { EntityManager } from "typeorm";

import { refuse, type Refusal } from "~server/common/outcomes";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";

import type { Revision } from "./revision.entity";

/**
 * Why a preferred alternative can't come into use, or null: another record of its group is the
 * preferred one. Two can have been submitted side by side, before either was approved.
 */
export async function refuseSecondPreferred(
  manager: EntityManager,
  revision: Revision,
): Promise<Refusal | null> {
  if (revision.alternativesKey === null || revision.fields.alternativesPreferred !== true) {
    return null;
  }
  const [other]: { id: number }[] = await manager.query(
    `SELECT record.id AS id FROM constraint_record record
       JOIN revision other ON other.id = record.approvedRevisionId
      WHERE other.alternativesKey = ? AND record.id <> ? AND record.state <> 'withdrawn'
        AND JSON_CONTAINS(other.fields, 'true', '$.alternativesPreferred')
      ORDER BY record.id LIMIT 1`,
    [revision.alternativesKey, revision.constraintId],
  );
  if (!other) return null;
  return refuse(
    "preferredTwice",
    `${formatRecordNumber(Number(other.id))} is the preferred answer of this group: its authors prefer one at most. Return this one, or have that one revised first.`,
    "alternativesPreferred",
  );
}
