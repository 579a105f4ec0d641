import { useApolloClient } from "@apollo/client/react";
import { StyleSheet, View } from "react-native";
import { useConnectionLost } from "@/apollo/connection";
import { Button } from "@/components/Button";
import Icon from "@/components/Icon";
import { Dense } from "@/components/Text";
import { useColors } from "@/theme/ThemeProvider";
import { space } from "@/theme/tokens";

/** Stands under the head while the server can't be reached; goes when it answers again. */
export function ConnectionBar() {
  const colors = useColors();
  const lost = useConnectionLost();
  const client = useApolloClient();
  if (!lost) return null;
  return (
    <View role="alert" style={[styles.bar, { backgroundColor: colors.emberTint }]}>
      <Icon name="cloud-off-outline" size={20} color={colors.emberText} />
      <Dense style={styles.text}>
        No connection to the server. What you see may be old; what you typed is kept.
      </Dense>
      <Button
        label="Try again"
        kind="text"
        icon="refresh"
        onPress={() => {
          void client.refetchQueries({ include: "active" });
        }}
      />
    </View>
  );
}

const styles = StyleSheet.create({
  bar: {
    flexDirection: "row",
    alignItems: "center",
    flexWrap: "wrap",
    gap: space.xs,
    paddingHorizontal: space.m,
    paddingVertical: space.xxs,
  },
  text: { flex: 1, minWidth: 200 },
});
