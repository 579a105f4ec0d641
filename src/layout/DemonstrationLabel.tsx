import { StyleSheet, View } from "react-native";
import Icon from "@/components/Icon";
import { Label } from "@/components/Text";
import { useColors } from "@/theme/ThemeProvider";
import { radius, space } from "@/theme/tokens";

/** Says that the data are invented: a strip across a phone, a label on wider screens. */
export function DemonstrationLabel({ strip }: { strip: boolean }) {
  const colors = useColors();
  return (
    <View
      style={[styles.label, strip && styles.strip, { backgroundColor: colors.emberTint }]}
      role="note"
    >
      <Icon name="flask-outline" size={18} color={colors.emberText} />
      <Label style={{ color: colors.emberText }}>Invented demonstration data</Label>
    </View>
  );
}

const styles = StyleSheet.create({
  label: {
    flexDirection: "row",
    alignItems: "center",
    gap: space.xs,
    minHeight: 32,
    paddingHorizontal: space.s,
    borderRadius: radius.field,
  },
  strip: { borderRadius: 0, minHeight: 28, paddingHorizontal: space.m },
});
