import type { Citation } from "~server/citation/citation.entity";
import type { ApprovedRow } from "~server/constraint/constraint.query";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";
import type { RecordState } from "~shared/review/states";
import type { ConstraintFields } from "~shared/statement/fields";

/** A record as it stood when the table was saved, with its citation in full. */
export interface SnapshotConstraint {
  id: number;
  number: string;
  ordinal: number;
  state: RecordState;
  /** Number of the record in its place, if there is one. */
  supersededBy: string | null;
  approvedAt: string;
  submittedBy: string;
  readBy: string;
  fields: ConstraintFields;
  citation: Omit<Citation, "createdById" | "createdAt">;
}

export function snapshotConstraint(
  { constraint, revision, citation }: ApprovedRow,
  names: { submittedBy: string; readBy: string },
  supersededBy: string | null = null,
): SnapshotConstraint {
  const { createdById: _by, createdAt: _at, ...kept } = citation;
  return {
    id: constraint.id,
    number: formatRecordNumber(constraint.id),
    ordinal: revision.ordinal,
    state: constraint.state,
    supersededBy,
    approvedAt: (revision.decidedAt ?? revision.updatedAt).toISOString(),
    ...names,
    fields: revision.fields,
    citation: kept,
  };
}
