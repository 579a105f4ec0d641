import { compilableBibtex } from "~server/citation/export";
import type { FileKind } from "~server/download/send";
import { digestOf } from "~server/event/eventLog";
import {
  tableBibliographyLines,
  tableContent,
  tableCsv,
  tableJson,
  type TableFile,
  type TableFileRow,
  type TablePaper,
} from "~shared/formats/tableFiles";
import { formatQuotable } from "~shared/identifiers/recordNumber";
import { rowLikelihood } from "~shared/likelihood";
import { asUsed } from "~shared/statement/asUsed";

import type { SnapshotConstraint, SnapshotRow } from "./snapshot";

type Written = Omit<TableFile, "rows" | "papers"> & {
  rows: readonly SnapshotRow[];
  /** In the order of the rows. */
  constraints: readonly SnapshotConstraint[];
};

/** A table's three files and the digest that they quote. */
export function writeFiles({ rows, constraints, ...header }: Written): {
  digest: string;
  files: Record<FileKind, string>;
} {
  const file: TableFile = {
    ...header,
    rows: rows.map((row, index) => fileRow(row, constraints[index])),
    papers: papersOf(constraints),
  };
  const digest = digestOf(tableContent(file));
  const rowsIn = constraints.filter((_, index) => rows[index]?.included);
  return {
    digest,
    files: {
      csv: tableCsv(file, digest),
      json: tableJson(file, digest),
      bib: compilableBibtex(
        rowsIn.map(({ citation }) => citation),
        tableBibliographyLines(file, digest),
      ),
    },
  };
}

function fileRow(row: SnapshotRow, saved: SnapshotConstraint | undefined): TableFileRow {
  if (saved?.number !== row.number) throw new Error(`no record was copied for ${row.number}`);
  const { key, shortName, year, doi, arxiv, bibcode } = saved.citation;
  const { included, proposed, reason } = row;
  return {
    number: saved.number,
    quotable: formatQuotable(saved.id, saved.ordinal),
    state: saved.state,
    fields: saved.fields,
    citation: { key, shortName, year, doi, arxiv, bibcode },
    included,
    proposed,
    reason,
    ...likelihoodWords(saved),
  };
}

/** Name and formula of the likelihood form that a row has by default, or why it has none. */
function likelihoodWords({
  fields,
}: SnapshotConstraint): Pick<TableFileRow, "likelihoodForm" | "likelihoodFormula"> {
  const row = rowLikelihood(asUsed(fields));
  return "leftOut" in row
    ? { likelihoodForm: null, likelihoodFormula: row.leftOut }
    : { likelihoodForm: row.form, likelihoodFormula: row.formula };
}

function papersOf(constraints: readonly SnapshotConstraint[]): TablePaper[] {
  const papers = new Map(
    constraints.map(({ citation: { key, entryBibtex, csl } }) => [
      key,
      { key, bibtex: entryBibtex, csl },
    ]),
  );
  return [...papers.values()].sort((a, b) => (a.key < b.key ? -1 : 1));
}
