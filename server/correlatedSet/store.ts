import type { EntityManager } from "typeorm";

import type { ViewerIdentity } from "~server/common/context";
import { approvedFor, approvedRow } from "~server/constraint/constraint.query";
import { Revision } from "~server/constraint/revision.entity";
import { NEXT_SET_STATES, type SetContent, type SetState } from "~shared/correlatedSet/content";
import type { SetMember } from "~shared/correlatedSet/members";
import {
  formatQuotable,
  formatRecordNumber,
  parseRecordNumber,
} from "~shared/identifiers/recordNumber";
import { parseSetNumber } from "~shared/identifiers/setNumber";

import { CorrelatedSet } from "./correlatedSet.entity";

/** A set by its number with its paper, or null. */
export async function loadSet(
  manager: EntityManager,
  number: string,
): Promise<CorrelatedSet | null> {
  const id = parseSetNumber(number);
  return id === null ? null : loadSetById(manager, id);
}

export async function loadSetById(
  manager: EntityManager,
  id: number,
): Promise<CorrelatedSet | null> {
  return manager.findOne(CorrelatedSet, { where: { id }, relations: { citation: true } });
}

export async function reloadSet(manager: EntityManager, id: number): Promise<CorrelatedSet> {
  const set = await loadSetById(manager, id);
  if (!set) throw new Error(`set ${id} is gone`);
  return set;
}

type Written = Partial<Omit<CorrelatedSet, "id" | "version" | "owner" | "citation">>;

/**
 * Writes to a set only if it is still at this version and in one of these states.
 *
 * @returns Whether this writer won.
 */
export async function updateSetAt(
  manager: EntityManager,
  id: number,
  version: number,
  states: readonly SetState[],
  set: Written,
): Promise<boolean> {
  const { state } = set;
  const forbidden =
    state && states.find((from) => from !== state && !NEXT_SET_STATES[from].includes(state));
  if (forbidden) throw new Error(`no set moves from ${forbidden} to ${state}`);
  const result = await manager
    .createQueryBuilder()
    .update(CorrelatedSet)
    .set({ ...set, version: version + 1 } as never)
    .where("id = :id AND version = :version AND state IN (:...states)", { id, version, states })
    .execute();
  return result.affected === 1;
}

/** What the paper prints, out of a stored set. */
export function contentOfSet(set: CorrelatedSet): SetContent {
  const { label, members, matrixKind, triangle, place, page, note } = set;
  return { label, members, matrixKind, triangle, place, page, note };
}

/** A record that a person may put in a set, or read in one. */
export interface FoundMember extends SetMember {
  /** FL-0042.3 */
  readonly quotable: string;
  /** Whether a revision of it is approved; else it is the person's own submission. */
  readonly approved: boolean;
}

/**
 * Records by number, as far as this person may see them at this moment: approved ones, and
 * submissions of their own that have no approved revision yet.
 */
export async function membersFor(
  manager: EntityManager,
  viewer: ViewerIdentity | null,
  numbers: readonly string[],
): Promise<FoundMember[]> {
  const ids = numbers.flatMap((number) => parseRecordNumber(number) ?? []);
  if (ids.length === 0) return [];
  const approved = await approvedFor(manager, viewer)
    .andWhere("record.id IN (:...ids)", { ids })
    .getMany();
  const own = await ownSubmissions(manager, viewer, { ids });
  return [...approved.map(approvedMember), ...own];
}

/** Every record of a paper that this person may put in a set. */
export async function membersOfPaper(
  manager: EntityManager,
  viewer: ViewerIdentity,
  citationId: string,
): Promise<FoundMember[]> {
  const approved = await approvedFor(manager, viewer)
    .andWhere("revision.citationId = :citationId", { citationId })
    .orderBy("record.id")
    .getMany();
  const own = await ownSubmissions(manager, viewer, { citationId });
  return [...approved.map(approvedMember), ...own];
}

function approvedMember(revision: Revision): FoundMember {
  const { constraint, citation } = approvedRow(revision);
  return {
    number: formatRecordNumber(constraint.id),
    quotable: formatQuotable(constraint.id, revision.ordinal),
    citation: citation.id,
    fields: revision.fields,
    approved: true,
  };
}

async function ownSubmissions(
  manager: EntityManager,
  viewer: ViewerIdentity | null,
  which: { ids: readonly number[] } | { citationId: string },
): Promise<FoundMember[]> {
  if (!viewer) return [];
  const query = manager
    .createQueryBuilder(Revision, "revision")
    .innerJoinAndSelect("revision.constraint", "record")
    .where("record.ownerId = :owner AND record.approvedRevisionId IS NULL", { owner: viewer.id })
    .andWhere("revision.state IN ('submitted', 'inReview')");
  if ("ids" in which) query.andWhere("record.id IN (:...ids)", { ids: which.ids });
  else query.andWhere("revision.citationId = :citationId", { citationId: which.citationId });
  const revisions = await query.orderBy("record.id").getMany();
  return revisions.map((revision) => ({
    number: formatRecordNumber(revision.constraintId),
    quotable: formatQuotable(revision.constraintId, revision.ordinal),
    citation: revision.citationId,
    fields: revision.fields,
    approved: false,
  }));
}

/** Puts those who change sets of the same records in a line, in the order of the records. */
export async function lockMembers(
  manager: EntityManager,
  members: readonly string[],
): Promise<void> {
  const ids = members.flatMap((number) => parseRecordNumber(number) ?? []).sort((a, b) => a - b);
  if (ids.length === 0) return;
  await manager.query(
    `SELECT id FROM constraint_record WHERE id IN (${ids.map(() => "?").join(", ")}) ORDER BY id FOR UPDATE`,
    ids,
  );
}

/**
 * Another set, waiting or approved, that holds one of these records: a record has its place in one
 * matrix only, or its error would count twice.
 */
export async function setWithMember(
  manager: EntityManager,
  set: Pick<CorrelatedSet, "chainId" | "citationId" | "members">,
  states: readonly SetState[],
): Promise<{ other: CorrelatedSet; member: string } | null> {
  const others = await manager
    .createQueryBuilder(CorrelatedSet, "other")
    .where("other.citationId = :citationId AND other.chainId <> :chainId", {
      citationId: set.citationId,
      chainId: set.chainId,
    })
    .andWhere("other.state IN (:...states)", { states })
    .orderBy("other.id")
    .getMany();
  for (const other of others) {
    const member = set.members.find((number) => other.members.includes(number));
    if (member !== undefined) return { other, member };
  }
  return null;
}
