import type { ReactNode } from "react";
import { type StyleProp, StyleSheet, View, type ViewStyle } from "react-native";
import { Divider as PaperDivider } from "react-native-paper";
import { Ground } from "@/theme/Ground";
import { useColors } from "@/theme/ThemeProvider";
import { radius, space } from "@/theme/tokens";

/** A surface with a hairline and no shadow. */
export function Card({
  children,
  style,
  flush = false,
}: {
  children: ReactNode;
  style?: StyleProp<ViewStyle>;
  /** No padding: for lists that draw their own. */
  flush?: boolean;
}) {
  const colors = useColors();
  return (
    <View
      style={[
        styles.card,
        !flush && styles.padded,
        { backgroundColor: colors.surface, borderColor: colors.hairline },
        style,
      ]}
    >
      <Ground on="surface">{children}</Ground>
    </View>
  );
}

export function Divider() {
  const colors = useColors();
  return <PaperDivider style={{ backgroundColor: colors.hairline, height: 1 }} />;
}

const styles = StyleSheet.create({
  card: { borderRadius: radius.card, borderWidth: 1, overflow: "hidden" },
  padded: { padding: space.m },
});
