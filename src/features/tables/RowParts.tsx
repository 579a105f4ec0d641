import { StyleSheet, View } from "react-native";

import { Marker } from "@/components/Marker";
import { Caption, Dense, Mono } from "@/components/Text";
import { space } from "@/theme/tokens";
import type { ListedPartsFragment } from "~graphql/generated/graphql";
import { familyOf } from "~shared/methods/vocabulary";
import type { ConstraintFields } from "~shared/statement/fields";
import { hasBestValue } from "~shared/statement/relevant";
import { QUANTITY_WORDS } from "~shared/statement/words";

export type TableConstraint = ListedPartsFragment;

const SHORT_ROLE: Partial<Record<string, string>> = {
  binAverage: "bin",
  uncertain: "uncertain",
  sampleRange: "sample",
};

/** The family's marker and the paper. */
export function Source({ constraint }: { constraint: TableConstraint }) {
  const { fields, citation } = constraint;
  const family = familyOf(fields.methodTags);
  return (
    <View style={styles.source}>
      <View style={styles.marker}>
        {family ? <Marker family={family} hollow={!hasBestValue(fields.kind)} size={18} /> : null}
      </View>
      <Dense style={styles.name}>{citation.shortName}</Dense>
    </View>
  );
}

/** "7.51", "6.5–6.7 bin", or the quantity where a row has no redshift. */
export function Where({ fields }: { fields: ConstraintFields }) {
  if (fields.quantity !== "neutralFraction" && fields.quantity !== null) {
    return <Dense>{QUANTITY_WORDS[fields.quantity]}</Dense>;
  }
  const range = fields.zLow && fields.zHigh ? `${fields.zLow}–${fields.zHigh}` : null;
  const role = SHORT_ROLE[fields.zRole ?? ""];
  const stated = fields.zRole === "binAverage" ? (range ?? fields.z) : (fields.z ?? range);
  return (
    <Dense>
      <Mono>{stated ?? "open"}</Mono>
      {role ? <Caption muted>{` ${role}`}</Caption> : null}
    </Dense>
  );
}

const styles = StyleSheet.create({
  source: { flexDirection: "row", alignItems: "center", gap: space.s, minWidth: 0 },
  marker: { width: 18, flexShrink: 0 },
  name: { flexShrink: 1 },
});
