import type { ReactNode } from "react";
import { View } from "react-native";

import Icon from "./Icon";
import { Press } from "./Press";
import { useColors } from "@/theme/ThemeProvider";

/** A row of a list that leads somewhere; heard as what it shows. */
export function ListRow({
  href,
  first,
  children,
}: {
  href: string;
  first: boolean;
  children: ReactNode;
}) {
  const colors = useColors();
  return (
    <View role="listitem" style={{ borderTopWidth: first ? 0 : 1, borderColor: colors.hairline }}>
      <Press href={href} style={{ minHeight: 64, justifyContent: "center" }}>
        <View
          style={{
            flexDirection: "row",
            alignItems: "center",
            gap: 12,
            paddingHorizontal: 16,
            paddingVertical: 12,
          }}
        >
          <View style={{ flex: 1, minWidth: 0, gap: 4 }}>{children}</View>
          <Icon name="chevron-right" color={colors.muted} />
        </View>
      </Press>
    </View>
  );
}
