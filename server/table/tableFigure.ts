import { REGISTRY } from "~server/download/header";
import { figureSvg } from "~shared/chart/tableFigure";
import { familiesOf } from "~shared/methods/vocabulary";

import { inWordsOf } from "./surroundings";
import type { TableSource } from "./tableContent";

/** The figure of a table's rows in, with legend and sources. */
export function tableFigure(name: string, source: TableSource): string {
  const { records, settled, demonstration, address } = source;
  return figureSvg({
    title: name,
    rows: records.flatMap((record, index) => {
      const row = settled.rows[index];
      if (!row?.included || row.used === null) return [];
      return [
        {
          used: row.used,
          family: inWordsOf(source, () => familiesOf(record.fields.methodTags))[0] ?? "other",
          levelStated: record.fields.level !== "notStated",
          source: record.citation.shortName,
        },
      ];
    }),
    notes: [
      ...(demonstration ? ["Invented demonstration data."] : []),
      `${REGISTRY}, ${source.recipe.release === null ? `approved records up to event ${source.lastEvent.sequence}` : `release ${source.recipe.release}`}. ${address}`,
    ],
  });
}
