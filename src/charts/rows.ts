import type { ChartPoint } from "./HistoryChart";
import { plainFields } from "@/components/statement/plainFields";
import type { ListedPartsFragment } from "~graphql/generated/graphql";
import { type PlanePoint, planePoint } from "~shared/chart/points";
import { familyOf, type MethodFamily } from "~shared/methods/vocabulary";
import { type AsUsed, asUsed } from "~shared/statement/asUsed";
import type { ConstraintFields } from "~shared/statement/fields";
import { lineText, notationAsUsed, recordTitle } from "~shared/statement/notation";

export type HistoryConstraint = ListedPartsFragment;

/** One record of the page: as the API gives it and as chart and engine take it. */
export interface HistoryRow {
  number: string;
  quotable: string;
  state: HistoryConstraint["state"];
  citation: HistoryConstraint["citation"];
  fields: ConstraintFields;
  family: MethodFamily;
  used: AsUsed | null;
  plane: PlanePoint | null;
}

export function historyRow(constraint: HistoryConstraint): HistoryRow {
  const fields = plainFields(constraint.fields as Partial<ConstraintFields>);
  const used = asUsed(fields);
  return {
    number: constraint.number,
    quotable: constraint.quotable,
    state: constraint.state,
    citation: constraint.citation,
    fields,
    family: familyOf(fields.methodTags) ?? "other",
    used,
    plane: used === null ? null : planePoint(used),
  };
}

/** What is heard of a point: its title, its statement, whose it is. */
export function rowWords(row: HistoryRow): string {
  const statement =
    row.used === null
      ? ""
      : `, ${lineText(notationAsUsed(row.used)).replace("x_HI", "neutral fraction")}`;
  return `${recordTitle(row.fields)}${statement}, ${row.citation.shortName}`;
}

export function chartPoints(rows: readonly HistoryRow[]): ChartPoint[] {
  return rows.flatMap((row) =>
    row.plane === null
      ? []
      : [{ id: row.number, family: row.family, label: rowWords(row), plane: row.plane }],
  );
}
