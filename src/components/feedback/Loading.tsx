import { StyleSheet, View } from "react-native";
import { useColors } from "@/theme/ThemeProvider";
import { radius, space } from "@/theme/tokens";
import Icon from "../Icon";
import { Dense } from "../Text";

/** Skeleton rows in the shape of what is coming, with the words of what is fetched. */
export function Loading({ label, rows = 4 }: { label: string; rows?: number }) {
  const colors = useColors();
  const bar = { backgroundColor: colors.hairline };
  return (
    <View role="status" aria-busy style={styles.all}>
      <View style={styles.head}>
        <Icon name="timer-sand" size={20} color={colors.muted} />
        <Dense muted>{label}</Dense>
      </View>
      {Array.from({ length: rows }, (_unused, index) => (
        <View key={index} style={styles.row} aria-hidden>
          <View style={[styles.square, bar]} />
          <View style={styles.lines}>
            <View style={[styles.line, bar, { width: "78%" }]} />
            <View style={[styles.line, bar, { width: "46%" }]} />
          </View>
          <View style={[styles.end, bar]} />
        </View>
      ))}
    </View>
  );
}

const styles = StyleSheet.create({
  all: { gap: space.l, padding: space.m },
  head: { flexDirection: "row", gap: space.xs, alignItems: "center" },
  row: { flexDirection: "row", gap: space.s, alignItems: "center" },
  square: { width: 20, height: 20, borderRadius: radius.field },
  lines: { flex: 1, gap: space.xs },
  line: { height: 10, borderRadius: 5 },
  end: { width: 48, height: 12, borderRadius: 6 },
});
