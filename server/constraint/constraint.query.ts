import type { EntityManager, SelectQueryBuilder } from "typeorm";

import { Citation } from "~server/citation/citation.entity";
import type { RequestContext } from "~server/common/context";
import { withoutRecordsReadBlind } from "~server/review/blindness";
import { searchWords, type ConstraintFilter, type ConstraintSort } from "~shared/filter/filter";
import { currentTags } from "~shared/methods/vocabulary";

import { Constraint } from "./constraint.entity";
import { Revision } from "./revision.entity";

/** A record as the public sees it: the revision in use, and the paper it reads. */
export interface ApprovedRow {
  constraint: Constraint;
  revision: Revision;
  citation: Citation;
}

/** What a query needs of a request: whose eyes, which database. */
export interface Asking {
  database: Pick<RequestContext["database"], "manager">;
  viewer: RequestContext["viewer"];
}

/** Rows handed out at once through the API; downloads ask for more. */
export const MOST_ROWS = 500;

/**
 * Approved records that match a filter, as far as this viewer may see them (blindness.ts).
 *
 * @param limit - Null for all of them.
 */
export async function findApproved(
  ctx: Asking,
  filter: ConstraintFilter,
  sort: ConstraintSort = "redshift",
  offset = 0,
  limit: number | null = null,
): Promise<ApprovedRow[]> {
  const query = filtered(ctx, filter);
  order(query, sort);
  if (offset > 0 || limit !== null) query.offset(offset).limit(limit ?? Number.MAX_SAFE_INTEGER);
  return (await query.getMany()).map(approvedRow);
}

/** How many approved records match, over all pages. */
export async function countApproved(ctx: Asking, filter: ConstraintFilter): Promise<number> {
  return filtered(ctx, filter).getCount();
}

/**
 * One approved record by its number, withdrawn ones too, since a record stays readable at its address.
 * Null: unknown, not approved yet, or being read blind.
 */
export async function findRecordByNumber(ctx: Asking, number: number): Promise<ApprovedRow | null> {
  const query = inUse(ctx.database.manager, ctx.viewer).andWhere("record.id = :number", { number });
  const [row] = await query.getMany();
  return row ? approvedRow(row) : null;
}

/** One approved record by its number, or null: unknown, not approved yet, withdrawn, or being read blind. */
export async function findApprovedByNumber(
  ctx: Asking,
  number: number,
): Promise<ApprovedRow | null> {
  const [row] = await findApprovedByNumbers(ctx, [number]);
  return row ?? null;
}

export async function findApprovedByNumbers(
  ctx: Asking,
  numbers: readonly number[],
): Promise<ApprovedRow[]> {
  if (numbers.length === 0) return [];
  const query = approved(ctx).andWhere("record.id IN (:...numbers)", { numbers });
  return (await query.getMany()).map(approvedRow);
}

/** Revisions in use with record and citation, without withdrawn ones and those that the viewer is reading blind. */
export function approved(ctx: Asking): SelectQueryBuilder<Revision> {
  return approvedFor(ctx.database.manager, ctx.viewer);
}

export function approvedFor(
  manager: EntityManager,
  viewer: Asking["viewer"],
): SelectQueryBuilder<Revision> {
  return inUse(manager, viewer).andWhere("record.state <> 'withdrawn'");
}

/** The same with withdrawn ones. */
function inUse(manager: EntityManager, viewer: Asking["viewer"]): SelectQueryBuilder<Revision> {
  const query = manager
    .createQueryBuilder(Revision, "revision")
    .innerJoinAndSelect("revision.constraint", "record", "record.approvedRevisionId = revision.id")
    .innerJoinAndSelect("revision.citation", "citation")
    .where("1 = 1");
  return withoutRecordsReadBlind(query, "record", viewer, new Date());
}

export function approvedRow(revision: Revision): ApprovedRow {
  if (!revision.citation) throw new Error(`approved revision ${revision.id} has no citation`);
  return { constraint: revision.constraint, revision, citation: revision.citation };
}

function filtered(ctx: Asking, filter: ConstraintFilter): SelectQueryBuilder<Revision> {
  // Withdrawn ones are listed only when they are asked for by name.
  const { states } = filter;
  const query =
    states && states.length > 0
      ? inUse(ctx.database.manager, ctx.viewer).andWhere("record.state IN (:...states)", { states })
      : approved(ctx);
  anyWord(query, "revision.families", "family", filter.families);
  anyWord(query, "revision.tags", "tag", filter.tags && currentTags(filter.tags));
  oneOf(query, "revision.quantity", "quantities", filter.quantities);
  oneOf(query, "revision.kind", "kinds", filter.kinds);
  oneOf(query, "revision.weighting", "weightings", filter.weightings);
  oneOf(query, "revision.versionRead", "versions", filter.versions);
  const bounds = [
    ["revision.zUsed >= :zFrom", "zFrom"],
    ["revision.zUsed <= :zTo", "zTo"],
    ["revision.year >= :yearFrom", "yearFrom"],
    ["revision.year <= :yearTo", "yearTo"],
  ] as const;
  for (const [condition, name] of bounds) {
    const bound = filter[name];
    if (bound !== null && bound !== undefined) query.andWhere(condition, { [name]: bound });
  }
  searchWords(filter).forEach((word, index) => {
    query.andWhere(`revision.searchText LIKE :word${index} ESCAPE '!'`, {
      [`word${index}`]: `%${escapeLike(word)}%`,
    });
  });
  return query;
}

/** Makes %, _ and ! stand for themselves in a pattern with ESCAPE '!'. */
export function escapeLike(text: string): string {
  return text.replace(/[!%_]/g, "!$&");
}

function oneOf(
  query: SelectQueryBuilder<Revision>,
  column: string,
  name: string,
  words: readonly string[] | null | undefined,
): void {
  if (words && words.length > 0) query.andWhere(`${column} IN (:...${name})`, { [name]: words });
}

/** The column holds ",a,b,": one of the words must stand in it as a whole. */
function anyWord(
  query: SelectQueryBuilder<Revision>,
  column: string,
  name: string,
  words: readonly string[] | null | undefined,
): void {
  if (!words || words.length === 0) return;
  const parameters: Record<string, string> = {};
  const conditions = words.slice(0, 100).map((word, index) => {
    parameters[`${name}${index}`] = `%,${escapeLike(word)},%`;
    return `${column} LIKE :${name}${index} ESCAPE '!'`;
  });
  query.andWhere(`(${conditions.join(" OR ")})`, parameters);
}

function order(query: SelectQueryBuilder<Revision>, sort: ConstraintSort): void {
  // Quantities without a redshift stand last in either direction.
  const byRedshift = (direction: "ASC" | "DESC"): void => {
    query
      .addSelect("revision.zUsed IS NULL", "no_redshift")
      .orderBy("no_redshift", "ASC")
      .addOrderBy("revision.zUsed", direction);
  };
  if (sort === "redshift") byRedshift("ASC");
  else if (sort === "redshiftDescending") byRedshift("DESC");
  else if (sort === "newest") query.orderBy("revision.decidedAt", "DESC");
  else if (sort === "year") query.orderBy("revision.year", "DESC");
  query.addOrderBy("record.id", sort === "newest" ? "DESC" : "ASC");
}
