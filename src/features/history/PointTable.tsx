import { Card } from "@/components/Card";
import { DataTable } from "@/components/DataTable";
import { Marker } from "@/components/Marker";
import { NotationText } from "@/components/NotationText";
import { Dense } from "@/components/Text";
import { FAMILY_NAMES } from "~shared/methods/vocabulary";
import { notationAsUsed } from "~shared/statement/notation";
import { levelPhrase } from "~shared/statement/words";
import type { HistoryRow } from "@/charts/rows";

/** The chart's points as a table, for those who read rather than look. */
export function PointTable({
  rows,
  onOpen,
}: {
  rows: readonly HistoryRow[];
  onOpen: (number: string) => void;
}) {
  return (
    <Card flush>
      <DataTable
        caption="Constraints shown in the chart, as used"
        columns={[
          { key: "record", title: "Record" },
          { key: "source", title: "Source" },
          { key: "method", title: "Method family" },
          { key: "z", title: "Redshift", numeric: true },
          { key: "statement", title: "As used" },
          { key: "level", title: "Level" },
        ]}
        rows={rows.map((row) => ({
          id: row.number,
          record: row.number,
          source: row.citation.shortName,
          method: (
            <span
              style={{
                display: "inline-flex",
                gap: 8,
                alignItems: "center",
                verticalAlign: "middle",
              }}
            >
              <Marker family={row.family} />
              <Dense>{FAMILY_NAMES[row.family]}</Dense>
            </span>
          ),
          z: row.fields.z ?? rangeText(row.fields.zLow, row.fields.zHigh),
          statement: row.used ? (
            <NotationText notation={notationAsUsed(row.used)} symbol tail={false} />
          ) : (
            ""
          ),
          level: levelPhrase(row.fields.level, row.fields.levelPercent),
        }))}
        rowKey={(row) => row.id}
        onRowPress={(row) => onOpen(row.id)}
      />
    </Card>
  );
}

function rangeText(low: string | null, high: string | null): string {
  return low === null || high === null ? "" : `${low}–${high}`;
}
