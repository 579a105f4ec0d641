import { View } from "react-native";

import { Press } from "@/components/Press";
import { Dense } from "@/components/Text";
import { useColors } from "@/theme/ThemeProvider";
import { target } from "@/theme/tokens";

interface Credit {
  name: string;
  personId?: string | null;
}

/** Who entered a revision and who read it again, with the way to their pages. */
export function RevisionCredits({ enteredBy, readBy }: { enteredBy: Credit; readBy: Credit }) {
  return (
    <View style={{ flexDirection: "row", flexWrap: "wrap", alignItems: "center", columnGap: 16 }}>
      <Name before="Entered by" credit={enteredBy} />
      <Name before="Read by" credit={readBy} />
    </View>
  );
}

function Name({ before, credit: { name, personId } }: { before: string; credit: Credit }) {
  const colors = useColors();
  return (
    <View style={{ flexDirection: "row", alignItems: "center", columnGap: 6, minHeight: target }}>
      <Dense muted>{before}</Dense>
      {personId ? (
        <Press
          href={`/people/${personId}`}
          style={{ minHeight: target, minWidth: target, justifyContent: "center" }}
        >
          <Dense style={{ color: colors.primary, fontWeight: "600" }}>{name}</Dense>
        </Press>
      ) : (
        <Dense>{name}</Dense>
      )}
    </View>
  );
}
