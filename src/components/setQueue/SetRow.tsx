import type { ReactNode } from "react";
import { View } from "react-native";

import Icon from "@/components/Icon";
import { Press } from "@/components/Press";
import { useColors } from "@/theme/ThemeProvider";
import { space, target } from "@/theme/tokens";

/** A row that leads to a set; heard as what it shows. */
export function SetRow({
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
      <Press href={href} style={{ minHeight: target + 20, justifyContent: "center" }}>
        <View
          style={{
            flexDirection: "row",
            alignItems: "center",
            gap: space.s,
            paddingHorizontal: space.m,
            paddingVertical: space.s,
          }}
        >
          <View style={{ flex: 1, minWidth: 0, gap: space.xxs }}>{children}</View>
          <Icon name="chevron-right" color={colors.muted} />
        </View>
      </Press>
    </View>
  );
}
