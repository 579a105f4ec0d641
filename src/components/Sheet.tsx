import type { ReactNode } from "react";
import { Modal, Pressable, ScrollView, StyleSheet, View } from "react-native";
import { Ground } from "@/theme/Ground";
import { useColors } from "@/theme/ThemeProvider";
import { radius, space, target } from "@/theme/tokens";
import { useLayoutClass } from "@/layout/useLayoutClass";
import { Button, IconButton } from "./Button";
import { Body, Section } from "./Text";
import { web } from "./web";

/** Rises from below on a phone, stands in the middle otherwise. Escape closes it. */
export function Sheet({
  visible,
  title,
  onClose,
  children,
  footer,
}: {
  visible: boolean;
  title: string;
  onClose: () => void;
  children: ReactNode;
  footer?: ReactNode;
}) {
  const colors = useColors();
  const phone = useLayoutClass() === "compact";
  return (
    <Modal
      visible={visible}
      transparent
      animationType="none"
      onRequestClose={onClose}
      {...web({ "aria-label": title })}
    >
      <View style={[styles.ground, phone ? styles.low : styles.middle]}>
        <Pressable
          onPress={onClose}
          style={[StyleSheet.absoluteFill, { backgroundColor: colors.scrim }]}
          {...web({ tabIndex: -1, "aria-hidden": true })}
        />
        <View
          style={[
            styles.sheet,
            phone ? styles.sheetLow : styles.sheetMiddle,
            { backgroundColor: colors.surface },
          ]}
        >
          {phone ? <View style={[styles.grip, { backgroundColor: colors.outline }]} /> : null}
          <View style={styles.head}>
            <Section style={styles.title}>{title}</Section>
            <IconButton icon="close" label="Close" onPress={onClose} />
          </View>
          <ScrollView style={styles.scroll} contentContainerStyle={styles.body}>
            <Ground on="surface">{children}</Ground>
          </ScrollView>
          {footer ? (
            <View style={[styles.footer, { borderColor: colors.hairline }]}>{footer}</View>
          ) : null}
        </View>
      </View>
    </Modal>
  );
}

/** Asks once before a dangerous step. */
export function Confirm({
  visible,
  title,
  text,
  confirmLabel,
  onConfirm,
  onCancel,
}: {
  visible: boolean;
  title: string;
  text: string;
  confirmLabel: string;
  onConfirm: () => void;
  onCancel: () => void;
}) {
  return (
    <Sheet visible={visible} title={title} onClose={onCancel}>
      <Body>{text}</Body>
      <View style={styles.actions}>
        <Button label="Cancel" kind="outline" onPress={onCancel} />
        <Button label={confirmLabel} kind="filled" onPress={onConfirm} />
      </View>
    </Sheet>
  );
}

const styles = StyleSheet.create({
  ground: { flex: 1 },
  low: { justifyContent: "flex-end" },
  middle: { justifyContent: "center", alignItems: "center", padding: space.l },
  sheet: { maxHeight: "88%", ...web({ boxShadow: "0 -2px 24px rgba(16, 24, 29, 0.18)" }) },
  sheetLow: { borderTopLeftRadius: radius.sheet, borderTopRightRadius: radius.sheet },
  sheetMiddle: { borderRadius: radius.sheet, width: "100%", maxWidth: 560 },
  grip: { width: 32, height: 4, borderRadius: 2, alignSelf: "center", marginTop: space.xs },
  head: {
    flexDirection: "row",
    alignItems: "center",
    paddingLeft: space.m,
    paddingRight: space.xs,
    paddingTop: space.xs,
    minHeight: target,
  },
  title: { flex: 1 },
  scroll: { flexGrow: 0, flexShrink: 1 },
  body: { padding: space.m, gap: space.m },
  footer: { borderTopWidth: 1, padding: space.m },
  actions: { flexDirection: "row", justifyContent: "flex-end", flexWrap: "wrap", gap: space.s },
});
