import { View } from "react-native";

import { Press } from "@/components/Press";
import { Block, Caption, Dense } from "@/components/Text";
import { useColors } from "@/theme/ThemeProvider";
import { space, target } from "@/theme/tokens";
import type { ConstraintByNumberQuery } from "~graphql/generated/graphql";
import { DATA_KIND_WORDS } from "~shared/dependence/namedData";

type RecordData = NonNullable<ConstraintByNumberQuery["constraint"]>;

/** Named data of a record as it spells them; each leads to what the registry knows of it. */
export function DataUsedPart({ record }: { record: Pick<RecordData, "fields" | "dataEntries"> }) {
  const colors = useColors();
  const { dataUsed, dataKnown } = record.fields;
  return (
    <View>
      <Block>Data used</Block>
      {dataUsed.map((name) => {
        const entry = record.dataEntries.find(({ spelled }) => spelled === name)?.entry;
        if (!entry) return <Dense key={name}>{name}</Dense>;
        const other = entry.name === name ? "" : `, here ${entry.name}`;
        return (
          <Press
            key={name}
            href={`/data/${entry.slug}`}
            style={{ minHeight: target, justifyContent: "center", paddingVertical: space.xxs }}
          >
            <View>
              <Dense style={{ color: colors.primary, fontWeight: "600" }}>{name}</Dense>
              <Caption muted>
                {DATA_KIND_WORDS[entry.kind]}
                {other}
              </Caption>
            </View>
          </Press>
        );
      })}
      {dataUsed.length === 0 ? (
        <Dense muted>{dataKnown === false ? "The paper does not say." : "None named."}</Dense>
      ) : null}
    </View>
  );
}
