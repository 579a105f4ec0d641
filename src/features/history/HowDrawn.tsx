import { memo } from "react";
import { StyleSheet, View } from "react-native";
import Svg, { Circle, Line, Path, Rect } from "react-native-svg";
import { Dense } from "@/components/Text";
import { useColors } from "@/theme/ThemeProvider";
import { space } from "@/theme/tokens";

const SIGNS = [
  { key: "value", words: "two-sided value" },
  { key: "upper", words: "upper limit" },
  { key: "lower", words: "lower limit" },
  { key: "bin", words: "redshift bin" },
  { key: "band", words: "band, no best value" },
  { key: "curve", words: "tabulated curve" },
  { key: "dashed", words: "level not stated" },
] as const;

/** How each kind of statement is drawn. */
export const HowDrawn = memo(function HowDrawn() {
  return (
    <View>
      <Dense muted>How a row is drawn</Dense>
      <View style={styles.grid}>
        {SIGNS.map(({ key, words }) => (
          <View key={key} style={styles.cell}>
            <Sign name={key} />
            <Dense muted style={styles.words}>
              {words}
            </Dense>
          </View>
        ))}
      </View>
    </View>
  );
});

function Sign({ name }: { name: (typeof SIGNS)[number]["key"] }) {
  const { muted, surface } = useColors();
  const line = { stroke: muted, strokeWidth: 1.5 };
  return (
    <Svg width={24} height={24} viewBox="-12 -12 24 24" aria-hidden>
      {name === "upper" ? (
        <>
          <Line x1={0} y1={-3} x2={0} y2={6} {...line} />
          <Path d="M-3.5 4.5H3.5L0 11Z" fill={muted} />
          <Circle cy={-6} r={3.6} fill={surface} {...line} />
        </>
      ) : name === "lower" ? (
        <>
          <Line x1={0} y1={3} x2={0} y2={-6} {...line} />
          <Path d="M-3.5 -4.5H3.5L0 -11Z" fill={muted} />
          <Circle cy={6} r={3.6} fill={surface} {...line} />
        </>
      ) : name === "band" ? (
        <>
          <Rect x={-4} y={-10} width={8} height={20} fill={muted} fillOpacity={0.2} {...line} />
          <Circle r={2.6} fill={surface} {...line} />
        </>
      ) : name === "curve" ? (
        <>
          <Path d="M-3 -10C-3 -4 7 -3 7 0S-3 4 -3 10Z" fill={muted} fillOpacity={0.2} {...line} />
          <Circle cx={-3} r={4} fill={muted} />
        </>
      ) : (
        <>
          <Line
            x1={0}
            y1={-10}
            x2={0}
            y2={10}
            {...line}
            strokeDasharray={name === "dashed" ? "3 2.5" : undefined}
          />
          {name === "bin" ? (
            <Path d="M-10 0H10M-10 -3.5V3.5M10 -3.5V3.5" fill="none" {...line} />
          ) : null}
          <Circle r={4} fill={muted} />
        </>
      )}
    </Svg>
  );
}

const styles = StyleSheet.create({
  grid: { flexDirection: "row", flexWrap: "wrap", paddingTop: space.xxs },
  cell: { width: "50%", flexDirection: "row", alignItems: "center", gap: space.s, minHeight: 30 },
  words: { flex: 1, lineHeight: 18 },
});
