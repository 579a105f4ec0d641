import { In } from "typeorm";

import type { RequestContext } from "~server/common/context";
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

/** Other approved records that name the same sightline, field or sample, by record. */
export const sharingData = perRequest((ctx: RequestContext) =>
  batched<number, RecordLink[]>(async (ids) => {
    const pairs: { own: number; other: number; via: string }[] = await ctx.database.manager
      .createQueryBuilder(RevisionData, "own")
      .innerJoin("constraint_record", "ownRecord", "ownRecord.approvedRevisionId = own.revisionId")
      .innerJoin(RevisionData, "other", "other.comparable = own.comparable")
      .innerJoin(
        "constraint_record",
        "otherRecord",
        "otherRecord.approvedRevisionId = other.revisionId AND otherRecord.id <> ownRecord.id",
      )
      .select("ownRecord.id", "own")
      .addSelect("otherRecord.id", "other")
      .addSelect("own.name", "via")
      .where("ownRecord.id IN (:...ids)", { ids: [...ids] })
      .orderBy("otherRecord.id")
      .addOrderBy("own.id")
      .getRawMany();
    const shortNames = await shortNamesOf(
      ctx,
      pairs.map((pair) => Number(pair.other)),
    );
    return grouped(ids, pairs, (pair) => {
      // What the viewer may not see at this moment is not in the map.
      const shortName = shortNames.get(Number(pair.other));
      return shortName === undefined ? null : link(Number(pair.other), shortName, pair.via);
    });
  }),
);

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

async function shortNamesOf(
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
