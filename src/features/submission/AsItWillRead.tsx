import { View } from "react-native";

import { PointPreview } from "@/charts/PointPreview";
import { NotationText } from "@/components/NotationText";
import { Caption, Dense } from "@/components/Text";
import type { ConstraintFields } from "~shared/statement/fields";
import { notationAsPrinted } from "~shared/statement/notation";

import { redshiftLine } from "./redshiftLine";

/** The statement as the record will show it, and its point in the chart, while it is typed. */
export function AsItWillRead({
  fields,
  direction,
}: {
  fields: ConstraintFields;
  direction: "row" | "column";
}) {
  const line = redshiftLine(fields);
  return (
    <View
      role="region"
      aria-label="As it will read"
      style={{
        flexDirection: direction,
        gap: direction === "row" ? 12 : 24,
        alignItems: direction === "row" ? "center" : "stretch",
      }}
    >
      <View style={{ flex: direction === "row" ? 1 : undefined, minWidth: 0, gap: 4 }}>
        <Caption>As it will read</Caption>
        {fields.quantity && fields.kind ? (
          <NotationText notation={notationAsPrinted(fields)} size="stated" />
        ) : (
          <Dense muted>Choose quantity and statement</Dense>
        )}
        {line ? <Dense>{line}</Dense> : null}
      </View>
      {direction === "row" ? (
        <PointPreview fields={fields} />
      ) : (
        <PointPreview fields={fields} width={304} height={188} />
      )}
    </View>
  );
}
