import type { Citation } from "~server/citation/citation.entity";
import type { ApprovedRow } from "~server/constraint/constraint.query";
import type { FileKind } from "~server/download/send";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";
import type { CanonicalFilter } from "~shared/filter/filter";
import type { RecordState } from "~shared/review/states";
import type { ConstraintFields } from "~shared/statement/fields";

/** What a saved table says of one record, in or out. */
export interface SnapshotRow {
  /** FL-0042 */
  number: string;
  included: boolean;
  /** Why it is out, or in against the proposal; null for a row that is in as proposed. */
  reason: string | null;
  /** Whether this is what the program proposed, rather than a person's own choice. */
  proposed: boolean;
}

/** A record as it stood when the table was saved, with its citation in full. */
export interface SnapshotConstraint {
  id: number;
  number: string;
  ordinal: number;
  state: RecordState;
  /** Number of the record in its place, if there is one. */
  supersededBy?: string | null; // missing in tables older than versions
  approvedAt: string;
  submittedBy: string;
  readBy: string;
  fields: ConstraintFields;
  citation: Omit<Citation, "createdById" | "createdAt">;
}

/**
 * Everything a saved table hands out. Rows and constraints are in the same order. The files are
 * kept as they were written, so that neither a setting nor a newer program changes a byte of them.
 */
export interface TableSnapshot {
  format: 1;
  filter: CanonicalFilter;
  filterWords: string;
  rows: SnapshotRow[];
  constraints: SnapshotConstraint[];
  files: Record<FileKind, string>;
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
