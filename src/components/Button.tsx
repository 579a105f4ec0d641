import { useId } from "react";
import { ActivityIndicator } from "react-native-paper";
import { StyleSheet, View } from "react-native";
import Icon, { type IconName } from "./Icon";
import { Press } from "./Press";
import { Caption, Label } from "./Text";
import { useColors } from "@/theme/ThemeProvider";
import { type Colors, radius, space, target } from "@/theme/tokens";

export type ButtonKind = "filled" | "tonal" | "outline" | "return" | "text";

function paint(kind: ButtonKind, colors: Colors) {
  switch (kind) {
    case "filled":
      return { back: colors.primary, text: colors.onPrimary, border: colors.primary };
    case "tonal":
      return { back: colors.petrolTint, text: colors.primary, border: colors.petrolTint };
    case "outline":
      return { back: colors.surface, text: colors.primary, border: colors.outline };
    case "return":
      return { back: colors.surface, text: colors.emberText, border: colors.ember };
    case "text":
      return { back: "transparent", text: colors.primary, border: "transparent" };
  }
}

/**
 * An action. Filled once per view; tonal proposes; ember outline returns.
 * A disabled one says why beside it (`disabledBecause`).
 */
export function Button({
  label,
  kind = "outline",
  icon,
  onPress,
  href,
  disabledBecause,
  busy = false,
  accessibilityLabel,
}: {
  label: string;
  kind?: ButtonKind;
  icon?: IconName;
  onPress?: () => void;
  href?: string;
  disabledBecause?: string;
  busy?: boolean;
  accessibilityLabel?: string;
}) {
  const colors = useColors();
  const reasonId = useId();
  const disabled = disabledBecause !== undefined && disabledBecause !== "";
  const look = paint(kind, colors);
  const back = disabled && kind !== "text" ? colors.sunken : look.back;
  const text = disabled ? colors.muted : look.text;
  const border = disabled && kind !== "text" ? colors.hairline : look.border;
  return (
    <View style={styles.row}>
      <Press
        href={disabled ? undefined : href}
        onPress={onPress}
        disabled={disabled || busy}
        label={accessibilityLabel}
        attributes={{
          "aria-busy": busy || undefined,
          "aria-describedby": disabled ? reasonId : undefined,
        }}
        style={[
          styles.button,
          kind === "text" && styles.textOnly,
          { backgroundColor: back, borderColor: border },
        ]}
      >
        <View style={styles.content}>
          {busy ? (
            <ActivityIndicator size={18} color={text} accessibilityLabel="working" />
          ) : icon ? (
            <Icon name={icon} size={20} color={text} />
          ) : null}
          <Label style={[styles.label, { color: text }]}>{label}</Label>
        </View>
      </Press>
      {disabled ? (
        <Caption nativeID={reasonId} style={[styles.reason, { color: colors.emberText }]}>
          {disabledBecause}
        </Caption>
      ) : null}
    </View>
  );
}

/** An icon alone, 44 by 44, with its name for those who can't see it. */
export function IconButton({
  icon,
  label,
  onPress,
  href,
  pressed,
  expanded,
  small = false,
}: {
  icon: IconName;
  label: string;
  onPress?: () => void;
  href?: string;
  pressed?: boolean;
  expanded?: boolean;
  small?: boolean;
}) {
  const colors = useColors();
  return (
    <Press
      href={href}
      onPress={onPress}
      label={label}
      attributes={{ "aria-pressed": pressed, "aria-expanded": expanded }}
      style={styles.icon}
    >
      <Icon name={icon} size={small ? 20 : 24} color={colors.ink} />
    </Press>
  );
}

const styles = StyleSheet.create({
  // A label that names a paper or a person can be longer than a small phone is wide.
  row: {
    flexDirection: "row",
    alignItems: "center",
    flexWrap: "wrap",
    gap: space.xs,
    maxWidth: "100%",
  },
  button: {
    maxWidth: "100%",
    minHeight: target,
    minWidth: target,
    borderRadius: radius.pill,
    borderWidth: 1,
    justifyContent: "center",
    paddingHorizontal: space.l,
    paddingVertical: space.xs,
  },
  textOnly: { paddingHorizontal: space.s },
  content: { flexDirection: "row", alignItems: "center", justifyContent: "center", gap: space.xs },
  label: { fontSize: 15, flexShrink: 1 },
  reason: { flexShrink: 1 },
  icon: {
    width: target,
    height: target,
    borderRadius: radius.pill,
    alignItems: "center",
    justifyContent: "center",
  },
});
