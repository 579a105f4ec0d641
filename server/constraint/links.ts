import type { EntityManager } from "typeorm";

import { refuse, type Refusal } from "~server/common/outcomes";
import type { ViewerIdentity } from "~server/common/context";
import { recordsReadBlind } from "~server/review/blindness";
import {
  chainWords,
  findCircle,
  LINK_RELATIONS,
  RECORD_RELATIONS,
  type LinkRelation,
  type RecordEdge,
} from "~shared/dependence/relation";
import { formatRecordNumber, parseRecordNumber } from "~shared/identifiers/recordNumber";
import {
  CONDITION_KINDS,
  type ConditionKind,
  type ConstraintFields,
} from "~shared/statement/fields";
import { FIELD_NAMES } from "~shared/statement/words";

import { RevisionLink } from "./revisionLink.entity";

type Link = Pick<RevisionLink, "relation" | "targetId" | "kind">;

/** What a content names: other records, and kinds of data it is conditioned on. Each once. */
export function linksIn(fields: ConstraintFields): Link[] {
  const links = new Map<string, Link>();
  for (const relation of LINK_RELATIONS) {
    for (const word of fields[relation] ?? []) {
      const kind = CONDITION_KINDS.find((one) => one === word) ?? null;
      const targetId = parseRecordNumber(word);
      if (relation === "conditionedOn" && kind !== null) {
        links.set(`${relation} ${kind}`, { relation, targetId: null, kind });
      } else if (targetId !== null) {
        links.set(`${relation} ${targetId}`, { relation, targetId, kind: null });
      }
    }
  }
  return [...links.values()];
}

/** Rewrites the links of a revision. Those to records that don't exist have been refused before. */
export async function writeLinks(
  manager: EntityManager,
  revisionId: string,
  fields: ConstraintFields,
): Promise<void> {
  await manager.delete(RevisionLink, { revisionId });
  for (const link of linksIn(fields)) await manager.insert(RevisionLink, { revisionId, ...link });
}

/**
 * Lets one transaction at a time look for circles and add a link or a notice, until it ends. Taken
 * after the lock of a revision and before those of records, which go by ascending number.
 */
export async function passRelationGate(manager: EntityManager): Promise<void> {
  await manager.query(
    "INSERT INTO relation_gate (id, passes) VALUES (1, 1) ON DUPLICATE KEY UPDATE passes = passes + 1",
  );
}

/** Links between records by the revisions in use and by notices that hold; of one's own, those under way too. */
export async function recordEdges(
  manager: EntityManager,
  ownerId: string | null = null,
): Promise<RecordEdge[]> {
  const rows: { from: number; relation: LinkRelation; to: number }[] = await manager.query(
    `SELECT record.id AS \`from\`, link.relation AS relation, link.targetId AS \`to\`
       FROM revision_link link
       JOIN revision ON revision.id = link.revisionId
       JOIN constraint_record record ON record.id = revision.constraintId
      WHERE link.targetId IS NOT NULL
        AND (record.approvedRevisionId = revision.id
          OR (record.ownerId = ? AND revision.state IN ('submitted', 'inReview')))
      UNION
     SELECT notice.replacedById, 'supersedes', notice.constraintId FROM record_notice notice
      WHERE notice.replacedById IS NOT NULL AND notice.endedAt IS NULL`,
    [ownerId],
  );
  return rows.map(({ from, relation, to }) => ({ from: Number(from), relation, to: Number(to) }));
}

/**
 * Why a record can't name what it names, or null: every number must be that of another record, and no
 * circle may close.
 *
 * @param when - At submission a record named may be one's own that is not approved yet; once the
 *   naming one comes into use, every record named must be in use, too.
 */
export async function refuseLinks(
  manager: EntityManager,
  viewer: ViewerIdentity,
  record: { id: number; fields: ConstraintFields },
  when: "submission" | "approval",
  now: Date,
): Promise<Refusal | null> {
  const { id, fields } = record;
  for (const relation of RECORD_RELATIONS) {
    const strange = (fields[relation] ?? []).find((word) => parseRecordNumber(word) === null);
    if (strange !== undefined) {
      const words = `${FIELD_NAMES[relation]}: “${strange.slice(0, 40)}” is no record number. Write it as FL-0042.`;
      return refuse("relation", words, relation);
    }
  }
  const links = linksIn(fields).filter(({ targetId }) => targetId !== null);
  if (links.length === 0) return null;
  const self = links.find(({ targetId }) => targetId === id);
  if (self) return refuse("relation", "A record has no relation to itself.", self.relation);
  const missing = await refuseMissing(manager, viewer, links, when);
  if (missing) return missing;

  const edges = await recordEdges(manager, when === "submission" ? viewer.id : null);
  const own = links.map(({ relation, targetId }) => ({ relation, to: targetId ?? 0 }));
  return refuseCircle(manager, viewer, findCircle(id, own, edges), now);
}

async function refuseMissing(
  manager: EntityManager,
  viewer: ViewerIdentity,
  links: readonly Link[],
  when: "submission" | "approval",
): Promise<Refusal | null> {
  const numbers = [...new Set(links.map(({ targetId }) => targetId))];
  const found: { id: number; ownerId: string; inUse: number }[] = await manager.query(
    `SELECT id, ownerId, approvedRevisionId IS NOT NULL AS inUse FROM constraint_record
      WHERE id IN (${numbers.map(() => "?").join(", ")})`,
    numbers,
  );
  const known = new Map(found.map((row) => [Number(row.id), row]));
  for (const { relation, targetId } of links) {
    const row = known.get(targetId ?? 0);
    const number = formatRecordNumber(targetId ?? 1);
    if (row && Number(row.inUse) === 1) continue;
    if (row && row.ownerId === viewer.id && when === "submission") continue;
    return when === "submission"
      ? refuse("relation", `${number} is no approved record.`, relation)
      : refuse(
          "relation",
          `It names ${number}, which is not approved yet: decide that one first.`,
          relation,
        );
  }
  return null;
}

/** A circle in words; a record that the person is reading blind is not named. */
export async function refuseCircle(
  manager: EntityManager,
  viewer: ViewerIdentity,
  circle: readonly RecordEdge[] | null,
  now: Date,
): Promise<Refusal | null> {
  const [first] = circle ?? [];
  if (!circle || !first) return null;
  const blind = await recordsReadBlind(manager, viewer, now);
  const field = first.relation;
  if (circle.some(({ from }) => blind.has(from))) {
    const words = "This would close a circle through a record that you are reading yourself.";
    return refuse("circle", `${words} Store that reading first.`, field);
  }
  return refuse(
    "circle",
    `This would close a circle: ${chainWords(circle, formatRecordNumber)}.`,
    field,
  );
}

/** Conditions of records in use, by record: numbers and kinds of data. */
export async function conditionsInUse(
  manager: EntityManager,
): Promise<Map<number, (number | ConditionKind)[]>> {
  const rows: { id: number; targetId: number | null; kind: ConditionKind | null }[] =
    await manager.query(
      `SELECT record.id AS id, link.targetId AS targetId, link.kind AS kind
         FROM revision_link link
         JOIN constraint_record record ON record.approvedRevisionId = link.revisionId
        WHERE link.relation = 'conditionedOn' ORDER BY link.id`,
    );
  const found = new Map<number, (number | ConditionKind)[]>();
  for (const { id, targetId, kind } of rows) {
    const condition = kind ?? Number(targetId);
    found.set(Number(id), [...(found.get(Number(id)) ?? []), condition]);
  }
  return found;
}
