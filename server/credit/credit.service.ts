import { In, type SelectQueryBuilder } from "typeorm";

import { User } from "~server/account/user.entity";
import type { RequestContext } from "~server/common/context";
import { batched, perRequest } from "~server/constraint/batch";
import { approved, approvedRow } from "~server/constraint/constraint.query";
import { constraintType } from "~server/constraint/constraint.type";
import type { Revision } from "~server/constraint/revision.entity";
import { FORMER_MEMBER } from "~shared/review/formerMember";

import { Credit, PersonCredit } from "./credit.type";

/** Rows of one list that are handed out; the total says how many there are. */
const MOST_LISTED = 500;

/** Whoever deleted the account and wants no credit has no page. */
function isAnonymous(person: Pick<User, "formerAt" | "nameOnPapers">): boolean {
  return person.formerAt !== null && person.nameOnPapers === FORMER_MEMBER;
}

/** Name of a person with the way to the page that credits them; people are looked up together. */
export const creditOf = perRequest((ctx: RequestContext) => {
  const load = batched<string, Credit>(async (ids) => {
    const people = await ctx.database.manager.find(User, {
      select: { id: true, nameOnPapers: true, formerAt: true },
      where: { id: In([...ids]) },
    });
    return new Map(
      people.map((person) => [
        person.id,
        Object.assign(new Credit(), {
          name: person.nameOnPapers,
          personId: isAnonymous(person) ? null : person.id,
        }),
      ]),
    );
  });
  const nobody = Object.assign(new Credit(), { name: FORMER_MEMBER, personId: null });
  return async (id: string | null): Promise<Credit> =>
    (id === null ? undefined : await load(id)) ?? nobody;
});

/**
 * What a person brought to the registry; null for who has brought nothing that is approved, and
 * for an anonymous former member, so that the page tells nobody who has an account. Lists and
 * counts come from the query of approved records, which leaves out what the viewer reads blind.
 */
export async function personCredit(ctx: RequestContext, id: string): Promise<PersonCredit | null> {
  const person = await ctx.database.manager.findOneBy(User, { id });
  if (!person || isAnonymous(person)) return null;
  const enteredBy = () => approved(ctx).andWhere("record.ownerId = :id", { id });
  const readBy = () =>
    approved(ctx).andWhere(
      `EXISTS (SELECT 1 FROM revision done WHERE done.constraintId = record.id
        AND done.state = 'approved' AND done.decidedById = :id)`,
      { id },
    );
  const [entered, read] = await Promise.all([listed(enteredBy()), listed(readBy())]);
  const since = await firstApproval(ctx, id, [...entered.rows, ...read.rows]);
  if (since === null) return null;
  return Object.assign(new PersonCredit(), {
    id: person.id,
    nameOnPapers: person.nameOnPapers,
    orcid: person.orcid,
    since,
    former: person.formerAt !== null,
    enteredTotal: entered.total,
    entered: entered.rows.map(approvedRow).map(constraintType),
    readTotal: read.total,
    read: read.rows.map(approvedRow).map(constraintType),
  });
}

async function listed(
  query: SelectQueryBuilder<Revision>,
): Promise<{ rows: Revision[]; total: number }> {
  const [rows, total] = await query
    .orderBy("revision.decidedAt", "DESC")
    .addOrderBy("record.id", "DESC")
    .take(MOST_LISTED)
    .getManyAndCount();
  return { rows, total };
}

/** The first approval among these records that the person entered or read. */
async function firstApproval(
  ctx: RequestContext,
  id: string,
  rows: readonly Revision[],
): Promise<Date | null> {
  if (rows.length === 0) return null;
  const [row]: { since: Date | null }[] = await ctx.database.manager.query(
    `SELECT MIN(done.decidedAt) AS since FROM revision done
       JOIN constraint_record record ON record.id = done.constraintId
      WHERE done.state = 'approved' AND done.constraintId IN (?)
        AND (record.ownerId = ? OR done.decidedById = ?)`,
    [rows.map(({ constraintId }) => constraintId), id, id],
  );
  return row?.since ? new Date(row.since) : null;
}
