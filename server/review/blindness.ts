import { Brackets, type EntityManager, type SelectQueryBuilder, type ObjectLiteral } from "typeorm";

import { hasRole, type ViewerIdentity } from "~server/common/context";
import type { Revision } from "~server/constraint/revision.entity";
import { formatRecordNumber, parseRecordNumber } from "~shared/identifiers/recordNumber";
import type { Finding } from "~shared/statement/rules";

import { Reading } from "./reading.entity";

/**
 * Who may see what of a record: the one place that says so. Everything that sends a record's
 * content anywhere (resolvers, lists, downloads, findings, tables) asks here.
 *
 * 1. An approved revision is public, to nobody in particular too.
 * 2. An unapproved revision is open to its owner, and to an editor who has stored a reading of it.
 * 3. While some revision of the record is submitted or in review and an editor has not stored a
 *    reading of it, that editor sees no unapproved revision of the record: not even an earlier
 *    one that they have read.
 * 4. While an editor holds the claim on a revision and has not stored the reading, that editor
 *    doesn't see the record's approved revision either, nor a file that contains it. Before the
 *    claim they do: it is public, and an editor may sign out.
 * 5. No role widens this. A maintainer sees no number that another person wouldn't.
 */

/** Unread work on a record that stands between an editor and its earlier revisions. */
const PENDING = ["submitted", "inReview"] as const;

/**
 * Whether a person sees the content of a revision, with its findings, answers, comments and readings.
 *
 * @param viewer - The person, or null for nobody.
 * @param revision - With its record loaded (`constraint.ownerId`).
 */
export async function seesRevision(
  manager: EntityManager,
  viewer: ViewerIdentity | null,
  revision: Revision,
  now: Date,
): Promise<boolean> {
  if (viewer?.id === revision.constraint.ownerId) return true;
  if (revision.state === "approved") {
    return !(await isReadingBlind(manager, viewer, revision.constraintId, now));
  }
  if (!viewer || !hasRole(viewer, "editor")) return false;
  if (!(await hasRead(manager, viewer.id, revision.id))) return false;
  return !(await hasUnread(manager, viewer.id, revision.constraintId));
}

/**
 * Which of these revisions a person sees, by the rules of `seesRevision`, in three queries for a
 * whole list.
 *
 * @param revisions - With their records loaded (`constraint.ownerId`).
 * @returns Their ids.
 */
export async function seenAmong(
  manager: EntityManager,
  viewer: ViewerIdentity | null,
  revisions: readonly Revision[],
  now: Date,
): Promise<Set<string>> {
  const blind = await recordsReadBlind(manager, viewer, now);
  const open = (revision: Revision): boolean =>
    revision.constraint.ownerId === viewer?.id ||
    (revision.state === "approved" && !blind.has(revision.constraintId));
  const seen = new Set(revisions.filter(open).map(({ id }) => id));
  const others = revisions.filter(({ id, state }) => !seen.has(id) && state !== "approved");
  if (others.length === 0 || !viewer || !hasRole(viewer, "editor")) return seen;
  const read: { id: string }[] = await manager.query(
    "SELECT revisionId AS id FROM reading WHERE editorId = ? AND revisionId IN (?)",
    [viewer.id, others.map(({ id }) => id)],
  );
  const unread: { id: number }[] = await manager.query(
    `SELECT DISTINCT pending.constraintId AS id FROM revision pending
      WHERE pending.constraintId IN (?) AND pending.state IN ('submitted', 'inReview')
        AND NOT EXISTS (SELECT 1 FROM reading r WHERE r.revisionId = pending.id AND r.editorId = ?)`,
    [others.map(({ constraintId }) => constraintId), viewer.id],
  );
  const readIds = new Set(read.map(({ id }) => id));
  const withUnread = new Set(unread.map(({ id }) => Number(id)));
  for (const { id, constraintId } of others) {
    if (readIds.has(id) && !withUnread.has(constraintId)) seen.add(id);
  }
  return seen;
}

/** Whether this editor has stored a reading of this revision. */
export async function hasRead(
  manager: EntityManager,
  editorId: string,
  revisionId: string,
): Promise<boolean> {
  return manager.existsBy(Reading, { editorId, revisionId });
}

/**
 * Whether a person sees the files kept with a revision: pages of the paper, tables, figures. They
 * are under the copyright of others, so the public never does; and they hold the numbers, those of
 * a newer revision too, so an editor does only when nothing of the record waits for their reading.
 *
 * @param revision - With its record loaded (`constraint.ownerId`).
 */
export async function seesEvidence(
  manager: EntityManager,
  viewer: ViewerIdentity | null,
  revision: Revision,
  now: Date,
): Promise<boolean> {
  if (!viewer) return false;
  if (viewer.id === revision.constraint.ownerId) return true;
  if (!(await seesRevision(manager, viewer, revision, now))) return false;
  // Nobody but a reader of it sees an unapproved one; `seesRevision` has asked for the reading.
  if (revision.state !== "approved") return true;
  const editor = hasRole(viewer, "editor");
  if (editor && (await hasUnread(manager, viewer.id, revision.constraintId))) return false;
  return (
    hasRole(viewer, "maintainer") || (editor && (await hasRead(manager, viewer.id, revision.id)))
  );
}

async function hasUnread(
  manager: EntityManager,
  editorId: string,
  constraintId: number,
): Promise<boolean> {
  return manager
    .createQueryBuilder()
    .select("pending.id")
    .from("revision", "pending")
    .where("pending.constraintId = :constraintId", { constraintId })
    .andWhere("pending.state IN (:...states)", { states: PENDING })
    .andWhere(
      "NOT EXISTS (SELECT 1 FROM reading r WHERE r.revisionId = pending.id AND r.editorId = :editorId)",
      { editorId },
    )
    .limit(1)
    .getRawOne()
    .then((row) => row !== undefined);
}

/** Records that this person is reading blind at this moment (rule 4). */
export async function recordsReadBlind(
  manager: EntityManager,
  viewer: ViewerIdentity | null,
  now: Date,
): Promise<Set<number>> {
  if (!viewer) return new Set();
  const rows: { id: number }[] = await manager.query(
    `SELECT held.constraintId AS id FROM revision held WHERE ${HELD_UNREAD}`,
    [viewer.id, now, viewer.id],
  );
  return new Set(rows.map((row) => Number(row.id)));
}

/** When a person who is reading a record blind at this moment will have to stop; null for who isn't. */
export async function readsBlindUntil(
  manager: EntityManager,
  personId: string,
  constraintId: number,
  now: Date,
): Promise<Date | null> {
  const [row]: { until: Date }[] = await manager.query(
    `SELECT held.claimedUntil AS until FROM revision held
      WHERE held.constraintId = ? AND ${HELD_UNREAD}`,
    [constraintId, personId, now, personId],
  );
  return row ? new Date(row.until) : null;
}

/** Whether this person is reading the record blind at this moment (rule 4). */
export async function isReadingBlind(
  manager: EntityManager,
  viewer: ViewerIdentity | null,
  constraintId: number,
  now: Date,
): Promise<boolean> {
  return (await recordsReadBlind(manager, viewer, now)).has(constraintId);
}

const HELD_UNREAD = `held.state = 'inReview' AND held.claimedById = ? AND held.claimedUntil > ?
  AND NOT EXISTS (SELECT 1 FROM reading r WHERE r.revisionId = held.id AND r.editorId = ?)`;

/**
 * Keeps out of a query of approved records those that the person is reading blind (rule 4), so
 * that neither a total nor an order nor a search tells anything about them.
 *
 * @param alias - Of the record (`constraint_record`) in the query.
 */
export function withoutRecordsReadBlind<T extends ObjectLiteral>(
  query: SelectQueryBuilder<T>,
  alias: string,
  viewer: ViewerIdentity | null,
  now: Date,
): SelectQueryBuilder<T> {
  if (!viewer) return query;
  return query.andWhere(
    new Brackets((where) =>
      where.where(
        `${alias}.id NOT IN (SELECT held.constraintId FROM revision held
          WHERE held.state = 'inReview' AND held.claimedById = :blindViewer
            AND held.claimedUntil > :blindNow
            AND NOT EXISTS (SELECT 1 FROM reading r
              WHERE r.revisionId = held.id AND r.editorId = :blindViewer))`,
        { blindViewer: viewer.id, blindNow: now },
      ),
    ),
  );
}

/**
 * A finding without its words when it speaks of a record that the viewer is reading blind: that a
 * record says nearly the same as one already read would tell its numbers.
 */
export function findingFor(finding: Finding, readBlind: ReadonlySet<number>): Finding {
  const speaksOf = [...readBlind].some((number) =>
    finding.message.includes(formatRecordNumber(number)),
  );
  return speaksOf
    ? {
        ...finding,
        message: "It concerns a record that you are reading yourself. Store that reading first.",
      }
    : finding;
}

/** What this file asks of a correlated set. */
interface SeenSet {
  id: number;
  chainId: number;
  ownerId: string;
  state: string;
  /** FL-0042 */
  members: readonly string[];
}

/** Whether this editor has stored a reading of this set. */
export async function hasReadSet(
  manager: EntityManager,
  editorId: string,
  setId: number,
): Promise<boolean> {
  const [row]: unknown[] = await manager.query(
    "SELECT 1 FROM set_reading WHERE setId = ? AND editorId = ? LIMIT 1",
    [setId, editorId],
  );
  return row !== undefined;
}

/**
 * Whether a person sees the matrix of a correlated set, with its findings, answers and comment. The
 * same rules, for sets that follow one another as for revisions of a record; and since a variance
 * is an error squared, a set shows nothing to who is reading one of its records blind.
 */
export async function seesSet(
  manager: EntityManager,
  viewer: ViewerIdentity | null,
  set: SeenSet,
  now: Date,
): Promise<boolean> {
  if (viewer?.id === set.ownerId) return true;
  const records = await recordsReadBlind(manager, viewer, now);
  if (set.members.some((number) => records.has(parseRecordNumber(number) ?? 0))) return false;
  if (set.state === "approved" || set.state === "withdrawn") {
    return !(await setsReadBlind(manager, viewer, now)).has(set.chainId);
  }
  if (!viewer || !hasRole(viewer, "editor")) return false;
  if (!(await hasReadSet(manager, viewer.id, set.id))) return false;
  const [unread]: unknown[] = await manager.query(
    `SELECT 1 FROM correlated_set pending
      WHERE pending.chainId = ? AND pending.state IN ('submitted', 'inReview')
        AND NOT EXISTS (SELECT 1 FROM set_reading r WHERE r.setId = pending.id AND r.editorId = ?)
      LIMIT 1`,
    [set.chainId, viewer.id],
  );
  return unread === undefined;
}

/** Chains of sets of which this person is reading one blind at this moment (rule 4). */
export async function setsReadBlind(
  manager: EntityManager,
  viewer: ViewerIdentity | null,
  now: Date,
): Promise<Set<number>> {
  if (!viewer) return new Set();
  const rows: { id: number }[] = await manager.query(
    `SELECT held.chainId AS id FROM correlated_set held
      WHERE held.state = 'inReview' AND held.claimedById = ? AND held.claimedUntil > ?
        AND NOT EXISTS (SELECT 1 FROM set_reading r WHERE r.setId = held.id AND r.editorId = ?)`,
    [viewer.id, now, viewer.id],
  );
  return new Set(rows.map((row) => Number(row.id)));
}
