import { View } from "react-native";

import { Marker } from "@/components/Marker";
import { Press } from "@/components/Press";
import { Block, Caption, Dense } from "@/components/Text";
import { useMethodTags } from "@/components/useMethodTags";
import { useColors } from "@/theme/ThemeProvider";
import { space, target } from "@/theme/tokens";
import { currentTags, FAMILY_NAMES } from "~shared/methods/vocabulary";

/** Methods of a record; each leads to what it means. */
export function MethodsPart({ tags }: { tags: readonly string[] }) {
  const colors = useColors();
  const current = currentTags(tags);
  const methods = useMethodTags().filter(({ tag }) => current.includes(tag));
  return (
    <View>
      <Block>{methods.length === 1 ? "Method" : "Methods"}</Block>
      {methods.map(({ tag, name, family, neverIndependent }) => (
        <Press
          key={tag}
          href={`/methods?method=${tag}`}
          style={{ minHeight: target, justifyContent: "center", paddingVertical: space.xxs }}
        >
          <View style={{ flexDirection: "row", alignItems: "center", gap: space.xs }}>
            <Marker family={family} size={14} />
            <View style={{ flexShrink: 1 }}>
              <Dense style={{ color: colors.primary, fontWeight: "600" }}>{name}</Dense>
              <Caption muted>
                {FAMILY_NAMES[family]}
                {neverIndependent ? ", never independent" : ""}
              </Caption>
            </View>
          </View>
        </Press>
      ))}
    </View>
  );
}
