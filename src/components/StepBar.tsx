import { View } from "react-native";

import { useColors } from "@/theme/ThemeProvider";
import { target } from "@/theme/tokens";

import { Press } from "./Press";
import { Dense } from "./Text";

export interface Step {
  key: string;
  label: string;
  /** Why it can't be opened yet. */
  closed?: boolean;
}

/** Where one stands in a form of several steps; open steps are buttons. */
export function StepBar({
  label,
  steps,
  current,
  onGo,
}: {
  label: string;
  steps: readonly Step[];
  current: string;
  onGo?: (key: string) => void;
}) {
  const colors = useColors();
  const at = steps.findIndex(({ key }) => key === current);
  return (
    <View role="navigation" aria-label={label} style={{ flexDirection: "row", gap: 8 }}>
      {steps.map(({ key, label: word, closed }, index) => {
        const here = index === at;
        const content = (
          <>
            <View
              style={{
                height: 4,
                borderRadius: 2,
                backgroundColor: index <= at ? colors.primary : colors.hairline,
              }}
            />
            <Dense muted={!here} style={here ? { fontWeight: "600" } : undefined}>
              {`${index + 1} ${word}`}
            </Dense>
          </>
        );
        const style = { gap: 6, minHeight: target, justifyContent: "center" as const };
        return (
          <View key={key} style={{ flex: 1, minWidth: 0 }}>
            {onGo && !closed && !here ? (
              <Press onPress={() => onGo(key)} label={`Step ${index + 1}, ${word}`} style={style}>
                {content}
              </Press>
            ) : (
              <View aria-current={here ? "step" : undefined} {...{ style }}>
                {content}
              </View>
            )}
          </View>
        );
      })}
    </View>
  );
}
