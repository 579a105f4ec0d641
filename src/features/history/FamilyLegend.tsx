import { memo } from "react";
import { StyleSheet, View } from "react-native";
import { Button } from "@/components/Button";
import { Marker } from "@/components/Marker";
import { Press } from "@/components/Press";
import { Dense, Section } from "@/components/Text";
import { useColors } from "@/theme/ThemeProvider";
import { radius, space, target } from "@/theme/tokens";
import { FAMILY_NAMES, METHOD_FAMILIES, type MethodFamily } from "~shared/methods/vocabulary";

/** The legend, which is the filter: a press shows that family alone, more presses add others. */
export const FamilyLegend = memo(function FamilyLegend({
  counts,
  chosen,
  onToggle,
  onAll,
}: {
  counts: Readonly<Partial<Record<MethodFamily, number>>>;
  chosen: readonly MethodFamily[];
  onToggle: (family: MethodFamily) => void;
  onAll: () => void;
}) {
  const colors = useColors();
  return (
    <View>
      <View style={styles.head}>
        <Section>Method families</Section>
        {chosen.length > 0 ? <Button label="All" kind="text" onPress={onAll} /> : null}
      </View>
      <View style={styles.grid} role="group" aria-label="Method families">
        {METHOD_FAMILIES.map((family) => {
          const on = chosen.includes(family);
          const quiet = chosen.length > 0 && !on;
          return (
            <View key={family} style={styles.cell}>
              <Press
                onPress={() => onToggle(family)}
                label={`${FAMILY_NAMES[family]}, ${counts[family] ?? 0}`}
                attributes={{ "aria-pressed": on }}
                style={[styles.item, on && { backgroundColor: colors.petrolTint }]}
              >
                <View style={styles.content}>
                  {quiet ? (
                    <View style={styles.out}>
                      <Marker family={family} size={20} />
                    </View>
                  ) : (
                    <Marker family={family} size={20} />
                  )}
                  <Dense style={[styles.word, on && styles.on]} muted={quiet}>
                    {FAMILY_NAMES[family]} <Dense muted>{counts[family] ?? 0}</Dense>
                  </Dense>
                </View>
              </Press>
            </View>
          );
        })}
      </View>
    </View>
  );
});

const styles = StyleSheet.create({
  head: {
    flexDirection: "row",
    justifyContent: "space-between",
    alignItems: "center",
    minHeight: target,
  },
  grid: { flexDirection: "row", flexWrap: "wrap", marginHorizontal: -space.xs },
  cell: { width: "50%" },
  item: { borderRadius: radius.chip, minHeight: target, justifyContent: "center" },
  content: {
    flexDirection: "row",
    alignItems: "center",
    gap: space.s,
    paddingHorizontal: space.xs,
    paddingVertical: 2,
  },
  out: { opacity: 0.45 },
  word: { flex: 1, lineHeight: 18 },
  on: { fontWeight: "600" },
});
