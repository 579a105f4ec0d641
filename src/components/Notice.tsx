import type { ReactNode } from "react";
import { StyleSheet, Text as NativeText, View } from "react-native";
import { useColors } from "@/theme/ThemeProvider";
import { radius, space } from "@/theme/tokens";
import Icon, { type IconName } from "./Icon";
import { Dense, Label } from "./Text";

export type NoticeGrade = "error" | "mustAnswer" | "note" | "caution" | "done";

const ICONS: Record<NoticeGrade, IconName> = {
  error: "close-circle-outline",
  mustAnswer: "alert-outline",
  note: "information-outline",
  caution: "alert-outline",
  done: "check-circle",
};

/** A sentence that matters, graded; the grade is in icon and frame, never in colour alone. */
export function Notice({
  grade,
  title,
  children,
  action,
}: {
  grade: NoticeGrade;
  title?: string;
  children?: ReactNode;
  action?: ReactNode;
}) {
  const colors = useColors();
  const warm = grade === "mustAnswer" || grade === "caution";
  const back = warm ? colors.emberTint : grade === "done" ? colors.petrolTint : colors.surface;
  const border =
    grade === "error" ? colors.ember : warm || grade === "done" ? back : colors.hairline;
  const tone =
    grade === "error" || warm ? colors.emberText : grade === "done" ? colors.primary : colors.muted;
  return (
    <View
      role={grade === "error" ? "alert" : grade === "done" ? "status" : "note"}
      style={[styles.box, { backgroundColor: back, borderColor: border }]}
    >
      <View style={styles.icon}>
        <Icon name={ICONS[grade]} size={20} color={tone} />
      </View>
      <View style={styles.content}>
        {title ? <Label>{title}</Label> : null}
        {typeof children === "string" ? <Dense>{children}</Dense> : children}
        {action ? <View style={styles.action}>{action}</View> : null}
      </View>
    </View>
  );
}

/** Bold inside a notice. */
export function Strong({ children }: { children: ReactNode }) {
  return <NativeText style={styles.strong}>{children}</NativeText>;
}

const styles = StyleSheet.create({
  box: {
    borderRadius: radius.chip,
    borderWidth: 1,
    padding: space.s,
    flexDirection: "row",
    gap: space.s,
  },
  icon: { paddingTop: 1 },
  content: { flex: 1, gap: 2, minWidth: 0 },
  action: { paddingTop: space.xs, flexDirection: "row", flexWrap: "wrap", gap: space.xs },
  strong: { fontWeight: "600" },
});
