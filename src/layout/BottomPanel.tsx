import type { ReactNode } from "react";
import { createPortal } from "react-dom";
import { ScrollView, StyleSheet, View } from "react-native";
import { web } from "@/components/web";
import { Ground } from "@/theme/Ground";
import { useColors } from "@/theme/ThemeProvider";
import { radius, space } from "@/theme/tokens";

/**
 * A panel over the lower part of a phone's screen that leaves what is above it in sight and in
 * use: not modal. What it holds brings its own way to close it.
 */
export function BottomPanel({
  label,
  height,
  children,
}: {
  label: string;
  /** Share of the window's height, 0–1. */
  height: number;
  children: ReactNode;
}) {
  const colors = useColors();
  // Outside the page's stacking order, so that it covers the bottom bar too.
  return createPortal(
    <View
      role="complementary"
      aria-label={label}
      style={[styles.panel, { backgroundColor: colors.surface, maxHeight: `${height * 100}%` }]}
    >
      <View style={[styles.grip, { backgroundColor: colors.outline }]} />
      <ScrollView style={styles.scroll} contentContainerStyle={styles.content}>
        <Ground on="surface">{children}</Ground>
      </ScrollView>
    </View>,
    document.body,
  );
}

const styles = StyleSheet.create({
  panel: {
    ...web({ position: "fixed", zIndex: 5 }),
    left: 0,
    right: 0,
    bottom: 0,
    borderTopLeftRadius: radius.sheet,
    borderTopRightRadius: radius.sheet,
    ...web({ boxShadow: "0 -2px 24px rgba(16, 24, 29, 0.16)" }),
  },
  grip: { width: 32, height: 4, borderRadius: 2, alignSelf: "center", marginTop: space.xs },
  scroll: { flexShrink: 1 },
  content: { padding: space.m, paddingTop: space.s, gap: space.s },
});
