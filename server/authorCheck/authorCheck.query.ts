import { In, type EntityManager } from "typeorm";

import { User } from "~server/account/user.entity";
import { hasRole, type RequestContext, type ViewerIdentity } from "~server/common/context";
import { batched, perRequest } from "~server/constraint/batch";
import { escapeLike } from "~server/constraint/constraint.query";
import type { Revision } from "~server/constraint/revision.entity";
import { seenAmong } from "~server/review/blindness";
import { parseRecordNumber } from "~shared/identifiers/recordNumber";

import { AuthorCheck, AuthorCheckEntry } from "./authorCheck.entity";

/** Checks listed at once; who looks for an older one searches for it. */
const MOST_LISTED = 200;

const WHOLE = { constraint: true, revision: { citation: true, constraint: true } } as const;

export function loadCheck(
  manager: EntityManager,
  by: { id: string } | { tokenHash: string },
): Promise<AuthorCheck | null> {
  return manager.findOne(AuthorCheck, { where: by, relations: WHOLE });
}

/** The answer trail, oldest first. */
export function entriesOf(manager: EntityManager, checkId: string): Promise<AuthorCheckEntry[]> {
  return manager.find(AuthorCheckEntry, { where: { checkId }, order: { id: "ASC" } });
}

/** Whether this editor may see a check now: the revision that it is about must be open to them. */
export async function seesCheck(
  manager: EntityManager,
  viewer: ViewerIdentity | null,
  check: AuthorCheck,
  now: Date,
): Promise<boolean> {
  if (!hasRole(viewer, "editor")) return false;
  return (await seenAmong(manager, viewer, [check.revision], now)).has(check.revisionId);
}

/**
 * Checks for the desk: comments that wait first, the oldest of them on top; then the others, newest
 * first. None about a revision that the editor has yet to read.
 *
 * @param text - Words of the paper or the author, or the record's number.
 */
export async function findChecks(ctx: RequestContext, text: string): Promise<AuthorCheck[]> {
  const { manager } = ctx.database;
  const query = manager
    .createQueryBuilder(AuthorCheck, "check")
    .innerJoinAndSelect("check.constraint", "record")
    .innerJoinAndSelect("check.revision", "revision")
    .innerJoinAndSelect("revision.constraint", "of")
    .leftJoinAndSelect("revision.citation", "citation")
    .addSelect("NOT (check.state = 'answered' AND check.verdict = 'comments')", "settled")
    .addSelect(
      "IF(check.state = 'answered' AND check.verdict = 'comments', check.answeredAt, NULL)",
      "waiting_since",
    )
    .orderBy("settled", "ASC")
    .addOrderBy("waiting_since", "ASC")
    .addOrderBy("check.sentAt", "DESC")
    .addOrderBy("check.id", "ASC")
    .limit(MOST_LISTED);
  const number = parseRecordNumber(text);
  if (number !== null) query.andWhere("check.constraintId = :number", { number });
  else {
    const words = text.trim().split(/\s+/).filter(Boolean).slice(0, 12);
    words.forEach((word, index) => {
      query.andWhere(
        `CONCAT_WS(' ', check.authorName, citation.shortName, citation.title, citation.key) LIKE :word${index} ESCAPE '!'`,
        { [`word${index}`]: `%${escapeLike(word.slice(0, 100))}%` },
      );
    });
  }
  const found = await query.getMany();
  const seen = await seenAmong(
    manager,
    ctx.viewer,
    found.map(({ revision }) => revision),
    new Date(),
  );
  return found.filter(({ revisionId }) => seen.has(revisionId));
}

/** Answered checks of approved revisions, by record: what the public learns of them. */
export const publicChecks = perRequest((ctx: RequestContext) =>
  batched<number, AuthorCheck[]>(async (ids) => {
    const checks = await ctx.database.manager.find(AuthorCheck, {
      where: {
        constraintId: In([...ids]),
        state: In(["answered", "closed"]),
        revision: { state: "approved" },
      },
      relations: { revision: true },
      order: { answeredAt: "ASC" },
    });
    const groups = new Map<number, AuthorCheck[]>(ids.map((id) => [id, []]));
    for (const check of checks) groups.get(check.constraintId)?.push(check);
    return groups;
  }),
);

/** The editor's name, for a page that says who asked. */
export async function editorName(manager: EntityManager, id: string): Promise<string> {
  return (await manager.findOneBy(User, { id }))?.nameOnPapers ?? "An editor";
}

/** Whether a newer revision of the record is in use. */
export async function isOutdated(manager: EntityManager, revision: Revision): Promise<boolean> {
  const { approvedRevisionId } = revision.constraint;
  if (approvedRevisionId === null || approvedRevisionId === revision.id) return false;
  const [row]: { ordinal: number }[] = await manager.query(
    "SELECT ordinal FROM revision WHERE id = ?",
    [approvedRevisionId],
  );
  return row !== undefined && Number(row.ordinal) > revision.ordinal;
}
