import { In, type EntityManager } from "typeorm";

import type { ViewerIdentity } from "~server/common/context";
import { alternativesFindings } from "~shared/statement/alternatives";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";
import type { ConstraintFields } from "~shared/statement/fields";
import {
  fieldFindings,
  registryFindings,
  sentAlready,
  sortFindings,
  type Finding,
} from "~shared/statement/rules";

import { approvedFor, approvedRow, type ApprovedRow } from "./constraint.query";
import { Revision } from "./revision.entity";

/** The newest are enough to meet a copy. */
const MOST_OWN = 500;

/**
 * The approved records that findings compare with, as far as this person may see them: a
 * near-duplicate's number in a warning would otherwise give away a record being read blind.
 */
export async function neighbours(
  manager: EntityManager,
  viewer: ViewerIdentity | null,
): Promise<ApprovedRow[]> {
  return (await approvedFor(manager, viewer).getMany()).map(approvedRow);
}

/** What this person has sent themselves and nobody has decided yet, with its paper. */
export async function ownSubmissions(
  manager: EntityManager,
  viewer: ViewerIdentity,
): Promise<Revision[]> {
  return manager.find(Revision, {
    where: { state: In(["submitted", "inReview"]), constraint: { ownerId: viewer.id } },
    relations: { constraint: true, citation: true },
    order: { constraintId: "DESC" },
    take: MOST_OWN,
  });
}

/** What a contributor is told while writing: everything there is to say, and what they have sent already. */
export function draftFindings(
  fields: ConstraintFields,
  citationId: string | null,
  own: number | null,
  among: readonly ApprovedRow[],
  sent: readonly Revision[],
): Finding[] {
  const others = sent
    .filter(({ constraintId }) => constraintId !== own)
    .map((revision) => ({
      number: formatRecordNumber(revision.constraintId),
      sameCitation: revision.citation !== null && revision.citation.id === citationId,
      fields: revision.fields,
    }));
  return sortFindings([
    ...allFindings(fields, citationId, own, among),
    ...sentAlready(fields, others),
  ]);
}

/**
 * Everything to say about content: the rules of one statement, then those over the registry.
 *
 * @param own - Number of the record itself, which is no neighbour of its own; null when it has none yet.
 */
export function allFindings(
  fields: ConstraintFields,
  citationId: string | null,
  own: number | null,
  among: readonly ApprovedRow[],
): Finding[] {
  const others = among
    .filter((row) => row.constraint.id !== own)
    .map((row) => ({
      number: formatRecordNumber(row.constraint.id),
      sameCitation: row.citation.id === citationId,
      fields: row.revision.fields,
    }));
  return sortFindings([
    ...fieldFindings(fields, { citation: citationId !== null }),
    ...registryFindings(fields, others),
    ...alternativesFindings(fields, others),
  ]);
}
