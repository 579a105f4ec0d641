import { StyleSheet, View } from "react-native";

import { Dense } from "@/components/Text";
import { space } from "@/theme/tokens";
import type { CorrelationPartsFragment, MixturePartsFragment } from "~graphql/generated/graphql";

/** Rows that enter together: mixtures of alternatives, and correlated sets. */
export function Groups({
  mixtures,
  sets,
}: {
  mixtures: readonly MixturePartsFragment[];
  sets: readonly CorrelationPartsFragment[];
}) {
  if (mixtures.length === 0 && sets.length === 0) return null;
  return (
    <View role="list" aria-label="Rows that enter together" style={styles.all}>
      {mixtures.map(({ label, members, standardDeviation }) => (
        <View key={`${label} ${members[0]}`} role="listitem">
          <Dense>
            {`${members.join(", ")} enter as one equal mixture (${label}), each with weight 1/${members.length}${
              standardDeviation === null || standardDeviation === undefined
                ? ""
                : `; standard deviation ${standardDeviation.toFixed(3)}`
            }.`}
          </Dense>
        </View>
      ))}
      {sets.map(({ id, label, members, whole }) => (
        <View key={id} role="listitem">
          <Dense>
            {`${members.join(", ")} enter with their correlation matrix (${label}, ${id})${
              whole ? "" : ", the exact marginal of the part kept"
            }.`}
          </Dense>
        </View>
      ))}
    </View>
  );
}

const styles = StyleSheet.create({ all: { gap: space.xs } });
