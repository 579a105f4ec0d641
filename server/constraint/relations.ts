import { In, type EntityManager } from "typeorm";

import type { RequestContext } from "~server/common/context";
import { keptDataOnce } from "~server/namedData/register";
import { comparableDataName } from "~shared/dependence/dataName";
import type { DataRegister } from "~shared/dependence/sharedData";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";

import { batched, perRequest } from "./batch";
import { approved, approvedRow } from "./constraint.query";
import { fieldChanges, PublicRevision, RecordLink } from "./constraint.type";
import { Revision, RevisionData } from "./revision.entity";

function link(number: number, shortName: string, via: string): RecordLink {
  return Object.assign(new RecordLink(), {
    number: formatRecordNumber(number),
    shortName,
    via,
  });
}

/**
 * Other approved records that stand on the same data, by record: by name or alias, as a part of one
 * another, or because the registry says that two things overlap. `via` says through which.
 */
export const sharingData = perRequest((ctx: RequestContext) =>
  batched<number, RecordLink[]>(async (ids) => {
    const { manager } = ctx.database;
    const { register } = await keptDataOnce(ctx);
    const own = await namesInUse(manager, { ids });
    const related = relatedNames(
      register,
      own.map(({ name }) => name),
    );
    const others = await namesInUse(manager, {
      comparables: [...related.values()].flatMap((ways) => [...ways.keys()]),
    });
    const users = new Map<string, number[]>();
    for (const { comparable, id } of others) {
      users.set(comparable, [...(users.get(comparable) ?? []), id]);
    }
    const shortNames = await shortNamesOf(
      ctx,
      others.map(({ id }) => id),
    );
    const links = new Map<number, Map<number, RecordLink>>(ids.map((id) => [id, new Map()]));
    for (const { id, name } of own) {
      for (const [comparable, via] of related.get(name) ?? []) {
        for (const other of users.get(comparable) ?? []) {
          const shortName = shortNames.get(other);
          const found = links.get(id);
          // What the viewer may not see at this moment has no short name.
          if (other === id || shortName === undefined || !found || found.has(other)) continue;
          found.set(other, link(other, shortName, via));
        }
      }
    }
    return new Map(
      [...links].map(([id, found]) => [
        id,
        [...found].sort(([a], [b]) => a - b).map(([, one]) => one),
      ]),
    );
  }),
);

/** For each name the comparable spellings that share data with it, with what they share. */
function relatedNames(
  register: DataRegister,
  names: readonly string[],
): Map<string, Map<string, string>> {
  const related = new Map<string, Map<string, string>>();
  for (const name of names) {
    if (related.has(name)) continue;
    const ways = new Map([[comparableDataName(name), name]]);
    related.set(name, ways);
    if (!register.thing(name)) continue;
    for (const other of register.things) {
      const via = register.shared(name, other.name);
      if (via === null) continue;
      for (const one of [other.name, ...other.aliases]) ways.set(comparableDataName(one), via);
    }
  }
  return related;
}

/** Names of data that revisions in use hold: of these records, or in these comparable spellings. */
async function namesInUse(
  manager: EntityManager,
  which: { ids?: readonly number[]; comparables?: readonly string[] },
): Promise<{ id: number; comparable: string; name: string }[]> {
  const query = manager
    .createQueryBuilder(RevisionData, "data")
    .innerJoin("constraint_record", "record", "record.approvedRevisionId = data.revisionId")
    .select("record.id", "id")
    .addSelect("data.comparable", "comparable")
    .addSelect("data.name", "name")
    .orderBy("data.id");
  if (which.ids) query.where("record.id IN (:...ids)", { ids: [...which.ids, 0] });
  else {
    const comparables = (which.comparables ?? []).map((one) => one.slice(0, 200));
    query.where("data.comparable IN (:...comparables)", { comparables: [...comparables, ""] });
  }
  const rows: { id: number; comparable: string; name: string }[] = await query.getRawMany();
  return rows.map(({ id, comparable, name }) => ({ id: Number(id), comparable, name }));
}

/** Members of the same alternatives group of the same paper, the record itself included. */
export const alternativesOf = perRequest((ctx: RequestContext) =>
  batched<number, RecordLink[]>(async (ids) => {
    const pairs: { own: number; other: number; via: string; preferred: string | null }[] =
      await ctx.database.manager
        .createQueryBuilder(Revision, "own")
        .innerJoin("constraint_record", "ownRecord", "ownRecord.approvedRevisionId = own.id")
        .innerJoin(Revision, "other", "other.alternativesKey = own.alternativesKey")
        .innerJoin("constraint_record", "otherRecord", "otherRecord.approvedRevisionId = other.id")
        .select("ownRecord.id", "own")
        .addSelect("otherRecord.id", "other")
        .addSelect("JSON_VALUE(own.fields, '$.alternativesGroup')", "via")
        .addSelect("JSON_VALUE(other.fields, '$.alternativesPreferred')", "preferred")
        .where("ownRecord.id IN (:...ids)", { ids: [...ids] })
        .orderBy("otherRecord.id")
        .getRawMany();
    const shortNames = await shortNamesOf(
      ctx,
      pairs.map((pair) => Number(pair.other)),
    );
    return grouped(ids, pairs, (pair) => {
      const shortName = shortNames.get(Number(pair.other));
      return shortName === undefined
        ? null
        : Object.assign(link(Number(pair.other), shortName, pair.via), {
            // MariaDB gives a JSON flag as 1 or as its word.
            preferred: pair.preferred === "1" || pair.preferred === "true",
          });
    });
  }),
);

/** Approved revisions of a record, oldest first, each with what it changed. */
export const approvedRevisions = perRequest((ctx: RequestContext) =>
  batched<number, PublicRevision[]>(async (ids) => {
    const revisions = await ctx.database.manager.find(Revision, {
      where: { constraintId: In([...ids]), state: "approved" },
      relations: { constraint: true },
      order: { constraintId: "ASC", ordinal: "ASC" },
    });
    const byRecord = new Map<number, PublicRevision[]>(ids.map((id) => [id, []]));
    let before: Revision | null = null;
    for (const revision of revisions) {
      const sameRecord: Revision | null =
        before?.constraintId === revision.constraintId ? before : null;
      byRecord.get(revision.constraintId)?.push(
        Object.assign(new PublicRevision(), {
          ordinal: revision.ordinal,
          state: revision.state,
          at: revision.decidedAt ?? revision.updatedAt,
          changes: sameRecord ? fieldChanges(sameRecord.fields, revision.fields) : [],
          enteredById: revision.constraint.ownerId,
          readById: revision.decidedById,
        }),
      );
      before = revision;
    }
    return byRecord;
  }),
);

/** Short names of approved records, as far as this viewer may see them at this moment. */
export async function shortNamesOf(
  ctx: RequestContext,
  numbers: readonly number[],
): Promise<Map<number, string>> {
  if (numbers.length === 0) return new Map();
  const rows = await approved(ctx)
    .andWhere("record.id IN (:...numbers)", { numbers: [...new Set(numbers)] })
    .getMany();
  return new Map(
    rows.map(approvedRow).map(({ constraint, citation }) => [constraint.id, citation.shortName]),
  );
}

function grouped<P extends { own: number }, T>(
  ids: readonly number[],
  pairs: readonly P[],
  make: (pair: P) => T | null,
): Map<number, T[]> {
  const groups = new Map<number, T[]>(ids.map((id) => [id, []]));
  for (const pair of pairs) {
    const made = make(pair);
    if (made !== null) groups.get(Number(pair.own))?.push(made);
  }
  return groups;
}
