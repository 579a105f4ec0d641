import type { ReactNode } from "react";
import { StyleSheet, View } from "react-native";
import { useColors } from "@/theme/ThemeProvider";
import { space } from "@/theme/tokens";
import Icon, { type IconName } from "../Icon";
import { Block, Dense } from "../Text";

/** Nothing here: says why and names the next step. */
export function Empty({
  icon = "filter-off-outline",
  title,
  text,
  action,
  warm = false,
  level = 2,
}: {
  icon?: IconName;
  title: string;
  text: string;
  action?: ReactNode;
  warm?: boolean;
  /** Level of its heading: 1 where it is the whole page. */
  level?: 1 | 2;
}) {
  const colors = useColors();
  return (
    <View style={styles.all}>
      <Icon name={icon} size={32} color={warm ? colors.ember : colors.muted} />
      <Block level={level} style={styles.centre}>
        {title}
      </Block>
      <Dense muted style={[styles.centre, styles.text]}>
        {text}
      </Dense>
      {action ? <View style={styles.action}>{action}</View> : null}
    </View>
  );
}

const styles = StyleSheet.create({
  all: {
    alignItems: "center",
    gap: space.xs,
    paddingVertical: space.xl,
    paddingHorizontal: space.m,
  },
  centre: { textAlign: "center" },
  text: { maxWidth: 360 },
  action: { paddingTop: space.xs, alignItems: "center", gap: space.xs },
});
