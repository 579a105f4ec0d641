import { StyleSheet, View } from "react-native";

import Icon from "@/components/Icon";
import { Label } from "@/components/Text";
import { useColors } from "@/theme/ThemeProvider";
import { radius } from "@/theme/tokens";

/** A decision's number: filled while it waits, a tick once it is taken. */
export function DecisionNumber({ number, open }: { number: number; open: boolean }) {
  const colors = useColors();
  return (
    <View
      style={[styles.disc, { backgroundColor: open ? colors.ember : colors.petrolTint }]}
      aria-label={`Decision ${number}, ${open ? "open" : "taken"}`}
      role="img"
    >
      {open ? (
        <Label style={{ color: colors.surface }}>{String(number)}</Label>
      ) : (
        <Icon name="check" size={18} color={colors.primary} />
      )}
    </View>
  );
}

const styles = StyleSheet.create({
  disc: {
    width: 28,
    height: 28,
    borderRadius: radius.pill,
    alignItems: "center",
    justifyContent: "center",
    flexShrink: 0,
  },
});
