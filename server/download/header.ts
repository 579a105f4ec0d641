import type { RequestContext } from "~server/common/context";
import type { ApprovedRow } from "~server/constraint/constraint.query";
import { isDemonstration } from "~server/database/settings";
import { lastEvent } from "~server/event/eventLog";
import { filterWords } from "~shared/filter/describe";
import type { ConstraintFilter } from "~shared/filter/filter";
import { demonstrationWords, type ExportHeader, type ExportRow } from "~shared/formats/exportRow";
import { formatQuotable, formatRecordNumber } from "~shared/identifiers/recordNumber";

export const REGISTRY = "Fogline";

/** What a list says of itself; it reads no clock, so an unchanged registry gives the same bytes. */
export async function listHeader(
  ctx: RequestContext,
  filter: ConstraintFilter,
): Promise<ExportHeader> {
  const { manager } = ctx.database;
  const last = await lastEvent(manager);
  return {
    registry: REGISTRY,
    demonstration: await isDemonstration(manager),
    lastEvent: last && { ...last, at: last.at.toISOString() },
    filter: filterWords(filter),
    licence: ctx.config.licence,
  };
}

export function exportRow({ constraint, revision, citation }: ApprovedRow): ExportRow {
  const { key, shortName, year, doi, arxiv, bibcode } = citation;
  return {
    number: formatRecordNumber(constraint.id),
    quotable: formatQuotable(constraint.id, revision.ordinal),
    state: constraint.state,
    fields: revision.fields,
    citation: { key, shortName, year, doi, arxiv, bibcode },
  };
}

/** Lines at the head of a bibliography. */
export function bibliographyLines(header: ExportHeader, what: string): string[] {
  const demonstration = demonstrationWords(header.demonstration);
  return [
    `${header.registry}: ${what}`,
    ...(demonstration ? [demonstration] : []),
    `Data licence: ${header.licence}. The papers are their authors': cite them.`,
  ];
}
