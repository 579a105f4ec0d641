import type { EntityManager } from "typeorm";

import { formatQuotable } from "~shared/identifiers/recordNumber";
import type { FormName, RowOptions } from "~shared/likelihood";
import { familiesOf } from "~shared/methods/vocabulary";
import type { AsUsed } from "~shared/statement/asUsed";
import type { LikelihoodRow, TableLikelihood } from "~shared/table/tableLikelihood";

import type { SnapshotConstraint } from "./snapshot";
import { TableVersionRow, type TableVersion } from "./tableVersion.entity";

/** What a version kept of a row: the part of its content that its likelihood is made from. */
interface KeptContent {
  used: AsUsed | null;
  likelihood: {
    form: FormName;
    redshift: NonNullable<RowOptions["redshift"]>;
    level: number | null;
    smoothing: number | null;
    curve: RowOptions["curve"] | null;
  } | null;
}

/** The likelihood of a table's version, from what was kept when it was saved: never from today's registry. */
export async function likelihoodOf(
  manager: EntityManager,
  { slug, version, mixtures, sets }: Pick<TableVersion, "slug" | "version" | "mixtures" | "sets">,
): Promise<TableLikelihood> {
  const kept = await manager.find(TableVersionRow, {
    where: { slug, version, included: true },
    order: { position: "ASC" },
  });
  return {
    rows: kept.flatMap(likelihoodRow),
    mixtures: mixtures.map(({ label, members }) => ({ label, members })),
    sets: sets.map(({ id, label, members, rho }) => ({ id, label, members, rho })),
  };
}

function likelihoodRow(row: TableVersionRow): LikelihoodRow[] {
  const record = JSON.parse(row.record) as SnapshotConstraint;
  const { used, likelihood } = JSON.parse(row.content) as KeptContent;
  if (!used || !likelihood) return [];
  const { form, redshift, level, smoothing, curve } = likelihood;
  return [
    {
      number: record.number,
      quotable: formatQuotable(record.id, record.ordinal),
      label: record.citation.shortName,
      citationKey: row.citationKey,
      families: familiesOf(record.fields.methodTags),
      used,
      options: {
        form,
        redshift,
        // A row that is in was accepted with its weighting when the table was settled.
        acceptMassWeighted: true,
        ...(level === null ? {} : { level }),
        ...(smoothing === null ? {} : { smoothing }),
        ...(curve ? { curve } : {}),
      },
    },
  ];
}
