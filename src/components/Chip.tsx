import type { ReactNode } from "react";
import { StyleSheet, View } from "react-native";
import { useColors } from "@/theme/ThemeProvider";
import { radius, space, target } from "@/theme/tokens";
import Icon, { type IconName } from "./Icon";
import { Press } from "./Press";
import { Label } from "./Text";

/** A filter that is on or off: 32 high inside a row of 44. */
export function Chip({
  label,
  selected = false,
  onPress,
  icon,
  onRemove,
  glyph,
  count,
  expanded,
}: {
  label: string;
  selected?: boolean;
  onPress?: () => void;
  icon?: IconName;
  /** Shows a cross before the label; pressing the chip removes it. */
  onRemove?: () => void;
  glyph?: ReactNode;
  count?: number;
  /** For a chip that opens something: draws the arrow and says its state. */
  expanded?: boolean;
}) {
  const colors = useColors();
  const on = selected || onRemove !== undefined;
  return (
    <Press
      onPress={onRemove ?? onPress}
      label={onRemove ? `Remove ${label}` : undefined}
      attributes={{
        "aria-pressed": onRemove || expanded !== undefined ? undefined : selected,
        "aria-expanded": expanded,
      }}
      style={styles.target}
    >
      <View
        style={[
          styles.chip,
          {
            backgroundColor: on ? colors.petrolTint : colors.surface,
            borderColor: on ? colors.petrolTint : colors.outline,
          },
        ]}
      >
        {onRemove ? <Icon name="close" size={18} color={colors.ink} /> : null}
        {icon ? <Icon name={icon} size={18} color={colors.ink} /> : null}
        {glyph}
        <Label numberOfLines={2} style={styles.label}>
          {label}
        </Label>
        {count === undefined ? null : (
          <Label muted style={styles.count}>
            {count}
          </Label>
        )}
        {expanded === undefined ? null : (
          <Icon name={expanded ? "menu-up" : "menu-down"} size={18} color={colors.ink} />
        )}
      </View>
    </Press>
  );
}

const styles = StyleSheet.create({
  target: {
    minHeight: target,
    maxWidth: "100%",
    justifyContent: "center",
    borderRadius: radius.chip,
  },
  chip: {
    minHeight: 32,
    borderRadius: radius.chip,
    borderWidth: 1,
    flexDirection: "row",
    alignItems: "center",
    gap: space.xs,
    paddingHorizontal: space.s,
  },
  label: { flexShrink: 1 },
  count: { fontWeight: "400" },
});
