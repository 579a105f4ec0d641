import { IsNull, Not, type EntityManager } from "typeorm";

import type { RequestContext } from "~server/common/context";
import { batched, perRequest } from "~server/constraint/batch";
import { escapeLike } from "~server/constraint/constraint.query";
import { withoutRecordsReadBlind } from "~server/review/blindness";
import { parseRecordNumber } from "~shared/identifiers/recordNumber";
import type { ReportState } from "~shared/review/errorReport";

import { ErrorReport, ErrorReportMessage } from "./errorReport.entity";

/** Reports listed at once; who looks for an older one searches for it. */
const MOST_LISTED = 200;

/** A report with its record, the revision reported and its citation, or null. */
export function loadReport(manager: EntityManager, id: string): Promise<ErrorReport | null> {
  return manager.findOne(ErrorReport, {
    where: { id },
    relations: { constraint: true, revision: { citation: true } },
  });
}

/** The answer trail, oldest first. */
export function messagesOf(
  manager: EntityManager,
  reportId: string,
): Promise<ErrorReportMessage[]> {
  return manager.find(ErrorReportMessage, { where: { reportId }, order: { id: "ASC" } });
}

export function hasEditorsMessage(manager: EntityManager, reportId: string): Promise<boolean> {
  return manager.existsBy(ErrorReportMessage, { reportId, byId: Not(IsNull()) });
}

/**
 * Reports for the desk: open ones first, the oldest of them on top; then the others, newest
 * first. None about a record that the viewer is reading blind.
 *
 * @param text - Words that must stand in the report, or the record's number.
 */
export async function findReports(
  ctx: RequestContext,
  text: string,
  state: ReportState | null,
): Promise<ErrorReport[]> {
  const query = ctx.database.manager
    .createQueryBuilder(ErrorReport, "report")
    .innerJoinAndSelect("report.constraint", "record")
    .innerJoinAndSelect("report.revision", "revision")
    .leftJoinAndSelect("revision.citation", "citation")
    .addSelect("report.state <> 'open'", "settled")
    .addSelect("IF(report.state = 'open', report.createdAt, NULL)", "waiting_since")
    .orderBy("settled", "ASC")
    .addOrderBy("waiting_since", "ASC")
    .addOrderBy("report.createdAt", "DESC")
    .addOrderBy("report.id", "ASC")
    .limit(MOST_LISTED);
  if (state !== null) query.andWhere("report.state = :state", { state });
  const number = parseRecordNumber(text);
  if (number !== null) query.andWhere("report.constraintId = :number", { number });
  else {
    const words = text.trim().split(/\s+/).filter(Boolean).slice(0, 12);
    words.forEach((word, index) => {
      query.andWhere(
        `CONCAT_WS(' ', report.text, citation.shortName, citation.title, citation.key) LIKE :word${index} ESCAPE '!'`,
        { [`word${index}`]: `%${escapeLike(word.slice(0, 100))}%` },
      );
    });
  }
  return withoutRecordsReadBlind(query, "record", ctx.viewer, new Date()).getMany();
}

/** How many reports of a record wait and how many were answered, by record. */
export const reportCounts = perRequest((ctx: RequestContext) =>
  batched<number, { open: number; answered: number }>(async (ids) => {
    const rows: { id: number; open: string; answered: string }[] = await ctx.database.manager
      .createQueryBuilder(ErrorReport, "report")
      .select("report.constraintId", "id")
      .addSelect("SUM(report.state = 'open')", "open")
      .addSelect("SUM(report.state <> 'open')", "answered")
      .where("report.constraintId IN (:...ids)", { ids: [...ids] })
      .groupBy("report.constraintId")
      .getRawMany();
    return new Map(
      rows.map(({ id, open, answered }) => [
        Number(id),
        { open: Number(open), answered: Number(answered) },
      ]),
    );
  }),
);
