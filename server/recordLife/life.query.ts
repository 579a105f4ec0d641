import { In } from "typeorm";

import type { RequestContext } from "~server/common/context";
import { batched, perRequest } from "~server/constraint/batch";
import { approved, approvedRow } from "~server/constraint/constraint.query";
import { conditionsInUse, recordEdges } from "~server/constraint/links";
import { nameOf } from "~server/constraint/names";
import { EventRecord } from "~server/event/event.entity";
import { recordsReadBlind } from "~server/review/blindness";
import { conditionChains, type ConditionChain } from "~shared/dependence/conditions";
import { formatRecordNumber, parseRecordNumber } from "~shared/identifiers/recordNumber";

import { RecordEventType, RecordNoticeType, RecordRelationType } from "./life.type";
import { RecordNotice } from "./recordNotice.entity";

/** Notices of a record, newest first, those that were taken back among them. */
export const noticesOf = perRequest((ctx: RequestContext) =>
  batched<number, RecordNotice[]>(async (ids) => {
    const notices = await ctx.database.manager.find(RecordNotice, {
      where: { constraintId: In([...ids]) },
      order: { at: "DESC", id: "DESC" },
    });
    const found = new Map<number, RecordNotice[]>(ids.map((id) => [id, []]));
    for (const notice of notices) found.get(notice.constraintId)?.push(notice);
    return found;
  }),
);

export async function noticeType(
  ctx: RequestContext,
  notice: RecordNotice,
): Promise<RecordNoticeType> {
  const { id, kind, reason, at, replacedById, endedAt, endedReason } = notice;
  return Object.assign(new RecordNoticeType(), {
    id: String(id),
    kind,
    reason,
    at,
    by: await nameOf(ctx)(notice.byId),
    replacedBy: replacedById === null ? null : formatRecordNumber(replacedById),
    endedAt,
    endedBy: notice.endedById === null ? null : await nameOf(ctx)(notice.endedById),
    endedReason,
  });
}

const edgesOnce = perRequest((ctx: RequestContext) => recordEdges(ctx.database.manager));
const conditionsOnce = perRequest((ctx: RequestContext) => conditionsInUse(ctx.database.manager));
const blindOnce = perRequest((ctx: RequestContext) =>
  recordsReadBlind(ctx.database.manager, ctx.viewer, new Date()),
);

/** Records that a record names and that name it, as far as this viewer may see them. */
export async function relationsOf(ctx: RequestContext, id: number): Promise<RecordRelationType[]> {
  const edges = (await edgesOnce(ctx)).filter(({ from, to }) => from === id || to === id);
  const known = await relatedRecords(ctx)([
    ...new Set(edges.map(({ from, to }) => (from === id ? to : from))),
  ]);
  return edges.flatMap(({ from, relation, to }) => {
    const other = known.get(from === id ? to : from);
    if (!other) return [];
    return [Object.assign(new RecordRelationType(), { relation, inverse: to === id, ...other })];
  });
}

type Related = Pick<RecordRelationType, "number" | "shortName" | "state">;

const relatedRecords =
  (ctx: RequestContext) =>
  async (ids: readonly number[]): Promise<Map<number, Related>> => {
    if (ids.length === 0) return new Map();
    const rows = await approved(ctx)
      .andWhere("record.id IN (:...ids)", { ids: [...ids] })
      .getMany();
    return new Map(
      rows.map(approvedRow).map(({ constraint, citation }) => [
        constraint.id,
        {
          number: formatRecordNumber(constraint.id),
          shortName: citation.shortName,
          state: constraint.state,
        },
      ]),
    );
  };

/** What a record is conditioned on, through others; what this viewer reads blind ends a chain. */
export async function chainsOf(ctx: RequestContext, id: number): Promise<ConditionChain[]> {
  const [conditions, blind] = await Promise.all([conditionsOnce(ctx), blindOnce(ctx)]);
  return conditionChains(formatRecordNumber(id), (number) => {
    const record = parseRecordNumber(number) ?? 0;
    return blind.has(record)
      ? undefined
      : (conditions.get(record) ?? []).map((one) =>
          typeof one === "number" ? formatRecordNumber(one) : one,
        );
  });
}

/** Events of a record that are nobody's secret: what became of what was approved. */
const PUBLIC_EVENTS = [
  "revision.approved",
  "record.erratum",
  "record.superseded",
  "record.withdrawn",
  "record.noticeLifted",
];

/** What happened to a record, newest first. */
export async function happenedTo(ctx: RequestContext, id: number): Promise<RecordEventType[]> {
  const number = formatRecordNumber(id);
  const events = await ctx.database.manager
    .createQueryBuilder(EventRecord, "event")
    .where("(event.subject = :number OR event.subject LIKE :revisions)", {
      number,
      revisions: `${number}.%`,
    })
    .andWhere("event.kind IN (:...kinds)", { kinds: PUBLIC_EVENTS })
    .orderBy("event.sequence", "DESC")
    .take(200)
    .getMany();
  return Promise.all(
    events.map(async ({ sequence, kind, at, actorId, subject, detail }) =>
      Object.assign(new RecordEventType(), {
        sequence,
        kind,
        at,
        by: await nameOf(ctx)(actorId),
        subject,
        replacedBy: typeof detail.replacedBy === "string" ? detail.replacedBy : null,
      }),
    ),
  );
}
