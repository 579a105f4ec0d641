import { View } from "react-native";

import { DataTable } from "@/components/DataTable";
import { Caption, Dense, Section } from "@/components/Text";
import { useLayoutClass } from "@/layout/useLayoutClass";
import type { FieldName } from "~shared/statement/fields";
import { FIELD_NAMES } from "~shared/statement/words";

interface Change {
  field: string;
  before?: string | null;
  after?: string | null;
}

/** Differences to the revision before, field by field. */
export function ChangesSince({ changes }: { changes: readonly Change[] }) {
  const phone = useLayoutClass() === "compact";
  if (changes.length === 0) return null;
  const name = (field: string) => FIELD_NAMES[field as FieldName] ?? field;
  return (
    <View style={{ gap: 12 }}>
      <Section>What changed since the last revision</Section>
      {phone ? (
        changes.map(({ field, before, after }) => (
          <View key={field} style={{ gap: 2 }}>
            <Caption>{name(field)}</Caption>
            <Dense>{`${before || "open"}, now ${after || "open"}`}</Dense>
          </View>
        ))
      ) : (
        <DataTable
          caption="What changed since the last revision"
          columns={[
            { key: "field", title: "Field" },
            { key: "before", title: "Before" },
            { key: "after", title: "Now" },
          ]}
          rows={changes.map(({ field, before, after }) => ({
            field: name(field),
            before: before || "open",
            after: after || "open",
          }))}
          rowKey={({ field }) => field}
        />
      )}
    </View>
  );
}
