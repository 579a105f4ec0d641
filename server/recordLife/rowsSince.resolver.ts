import { In, type EntityManager } from "typeorm";
import { Ctx, FieldResolver, Resolver, Root } from "type-graphql";

import type { RequestContext } from "~server/common/context";
import { Revision } from "~server/constraint/revision.entity";
import { recordsReadBlind } from "~server/review/blindness";
import { FittingTable } from "~server/table/table.type";
import { formatQuotable, formatRecordNumber } from "~shared/identifiers/recordNumber";

import { noticeType } from "./life.query";
import { RowSinceType } from "./life.type";
import { openNotices } from "./notices";

/** A row of a saved table, as far as its record may have changed since. */
interface SavedRow {
  id: number;
  ordinal: number;
}

/** Rows that a table takes in. Read from what was saved; nothing here writes to it. */
async function savedRows(manager: EntityManager, table: FittingTable): Promise<SavedRow[]> {
  const { saved, shown } = table;
  const rows: { id: number; ordinal: number }[] = await manager.query(
    `SELECT entry.constraintId AS id, JSON_VALUE(entry.record, '$.ordinal') AS ordinal
       FROM fitting_table_row entry
      WHERE entry.slug = ? AND entry.version = ? AND entry.included = 1 ORDER BY entry.constraintId`,
    [saved.slug, shown?.version ?? saved.version],
  );
  return rows.map(({ id, ordinal }) => ({ id: Number(id), ordinal: Number(ordinal) }));
}

@Resolver(() => FittingTable)
export class RowsSinceResolver {
  @FieldResolver(() => [RowSinceType], {
    description:
      "Rows in whose records were superseded, withdrawn, given an erratum or corrected since the table took them. The table itself never changes by it.",
  })
  async rowsSince(
    @Ctx() ctx: RequestContext,
    @Root() table: FittingTable,
  ): Promise<RowSinceType[]> {
    const { manager } = ctx.database;
    const blind = await recordsReadBlind(manager, ctx.viewer, new Date());
    const rows = (await savedRows(manager, table)).filter(({ id }) => !blind.has(id));
    if (rows.length === 0) return [];
    const ids = rows.map(({ id }) => id);
    const notices = (await openNotices(manager, ids)).filter(({ at }) => at > table.lastEvent.at);
    const inUse = await manager
      .createQueryBuilder(Revision, "revision")
      .innerJoinAndSelect(
        "revision.constraint",
        "record",
        "record.approvedRevisionId = revision.id",
      )
      .where({ constraintId: In(ids) })
      .getMany();
    const current = new Map(inUse.map((revision) => [revision.constraintId, revision]));
    const changed = rows.flatMap(({ id, ordinal }) => {
      const revision = current.get(id);
      const own = notices.filter(({ constraintId }) => constraintId === id);
      const newer = revision && revision.ordinal > ordinal ? revision : null;
      if (!revision || (own.length === 0 && !newer)) return [];
      return [{ id, state: revision.constraint.state, own, newer }];
    });
    return Promise.all(
      changed.map(async ({ id, state, own, newer }) =>
        Object.assign(new RowSinceType(), {
          number: formatRecordNumber(id),
          state,
          notices: await Promise.all(own.map((notice) => noticeType(ctx, notice))),
          newerRevision: newer && formatQuotable(id, newer.ordinal),
        }),
      ),
    );
  }
}
