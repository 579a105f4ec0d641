import { StyleSheet, View } from "react-native";
import Svg, { Line, Path, Text as SvgText } from "react-native-svg";
import { areaPath, linePath } from "~shared/chart/paths";
import { linearScale } from "~shared/chart/scales";
import { linearTicks, roundStep } from "~shared/chart/ticks";
import { Caption, SymbolText } from "@/components/Text";
import { useColors } from "@/theme/ThemeProvider";
import { fonts, space } from "@/theme/tokens";
import { HISTORY_LOOKS, historyLine } from "./looks";
import { useMeasuredWidth } from "./useMeasuredWidth";

export interface LikelihoodLine {
  /** Where the density is given; [n], in the quantity's unit. */
  x: readonly number[];
  /** Density at each x; [n], any scale, drawn over its own peak. */
  density: readonly number[];
  label: string;
  /** Lines are told apart by their dash as well as by their colour; the first is the main one. */
  look?: "main" | "other";
}

/**
 * Likelihood of one statement over its quantity. Fills the width it gets unless told one.
 *
 * @param symbol - Set under the axis; null where the heading says it already.
 * @param marks - Values of model histories, drawn as vertical lines in the order of their looks.
 */
export function LikelihoodCurve({
  lines,
  symbol = "x_HI",
  words: title = "Likelihood",
  marks = [],
  width: fixedWidth,
  height = 168,
  domain,
  hue,
  legend = lines.length > 1,
}: {
  lines: readonly LikelihoodLine[];
  symbol?: string | null;
  /** What the drawing is heard as, before its lines. */
  words?: string;
  marks?: readonly { x: number; label: string }[];
  width?: number;
  height?: number;
  domain?: readonly [number, number];
  hue?: string;
  legend?: boolean;
}) {
  const colors = useColors();
  const { width, onLayout } = useMeasuredWidth(fixedWidth);
  const main = hue ?? colors.primary;
  const span = domain ?? spanOf(lines);
  const words = `${title}: ${lines.map((line) => `${line.label}, ${peakWords(line)}`).join("; ")}${marks.length > 0 ? `. Models: ${marks.map(({ label, x }) => `${label} ${x.toPrecision(3)}`).join(", ")}` : ""}`;
  return (
    <View onLayout={onLayout} style={styles.all}>
      {width === null ? (
        <View style={{ height }} />
      ) : (
        <View role="img" aria-label={words}>
          <Drawing
            lines={lines}
            marks={marks}
            width={width}
            height={height}
            span={span}
            main={main}
          />
        </View>
      )}
      {symbol === null ? null : (
        <SymbolText style={[styles.symbol, { color: colors.ink }]}>{symbol}</SymbolText>
      )}
      {legend ? (
        <View style={styles.legend}>
          {lines.map((line, index) => (
            <View key={line.label} style={styles.legendItem}>
              <Svg width={28} height={6} aria-hidden>
                <Line x1={0} x2={28} y1={3} y2={3} {...lineLook(line, index, main, colors.ember)} />
              </Svg>
              <Caption>{line.label}</Caption>
            </View>
          ))}
        </View>
      ) : null}
    </View>
  );
}

function Drawing({
  lines,
  marks,
  width,
  height,
  span,
  main,
}: {
  lines: readonly LikelihoodLine[];
  marks: readonly { x: number; label: string }[];
  width: number;
  height: number;
  span: readonly [number, number];
  main: string;
}) {
  const colors = useColors();
  const floor = height - 26;
  const horizontal = linearScale(span, [16, width - 16]);
  const vertical = linearScale([0, 1.04], [floor, 4]);
  const { step, digits } = roundStep(span[1] - span[0]);
  const ticks = linearTicks(span, step, step / 2);
  return (
    <Svg width={width} height={height} viewBox={`0 0 ${width} ${height}`} aria-hidden>
      {[...lines.keys()].reverse().map((index) => {
        const line = lines[index];
        if (!line) return null;
        const peak = Math.max(...line.density);
        const heights = line.density.map((value) => (peak > 0 ? value / peak : 0));
        const isMain = (line.look ?? (index === 0 ? "main" : "other")) === "main";
        return [
          isMain ? (
            <Path
              key={`${line.label}-area`}
              d={areaPath(line.x, heights, horizontal, vertical, floor)}
              fill={main}
              fillOpacity={0.14}
            />
          ) : null,
          <Path
            key={line.label}
            d={linePath(line.x, heights, horizontal, vertical)}
            fill="none"
            strokeLinejoin="round"
            {...lineLook(line, index, main, colors.ember)}
          />,
        ];
      })}
      {marks.map((mark, index) => {
        const look = HISTORY_LOOKS[index % HISTORY_LOOKS.length] ?? "first";
        const at = horizontal.at(mark.x);
        if (at < 8 || at > width - 8) return null;
        return (
          <Line key={mark.label} x1={at} x2={at} y1={4} y2={floor} {...historyLine(look, colors)} />
        );
      })}
      <Line x1={16} x2={width - 16} y1={floor} y2={floor} stroke={colors.ink} strokeWidth={1} />
      {ticks.map((tick) => (
        <Line
          key={tick.value}
          x1={horizontal.at(tick.value)}
          x2={horizontal.at(tick.value)}
          y1={floor}
          y2={floor - (tick.major ? 6 : 3)}
          stroke={colors.ink}
          strokeWidth={1}
        />
      ))}
      {ticks
        .filter((tick) => tick.major)
        .map((tick) => (
          <SvgText
            key={tick.value}
            x={horizontal.at(tick.value)}
            y={floor + 16}
            textAnchor="middle"
            fontFamily={fonts.mono}
            fontSize={12.5}
            fill={colors.ink}
          >
            {tick.value.toFixed(digits).replace("-", "−")}
          </SvgText>
        ))}
    </Svg>
  );
}

function lineLook(line: LikelihoodLine, index: number, main: string, other: string) {
  return (line.look ?? (index === 0 ? "main" : "other")) === "main"
    ? { stroke: main, strokeWidth: 2, strokeDasharray: undefined }
    : { stroke: other, strokeWidth: 1.75, strokeDasharray: "6 4" };
}

function spanOf(lines: readonly LikelihoodLine[]): readonly [number, number] {
  const ends = lines.flatMap((line) => [line.x[0], line.x[line.x.length - 1]]);
  const known = ends.filter((end): end is number => end !== undefined && Number.isFinite(end));
  const low = Math.min(...known);
  const high = Math.max(...known);
  return high > low ? [low, high] : [0, 1];
}

function peakWords(line: LikelihoodLine): string {
  let best = 0;
  line.density.forEach((value, index) => {
    if (value > (line.density[best] ?? 0)) best = index;
  });
  return `highest at ${(line.x[best] ?? 0).toPrecision(3)}`;
}

const styles = StyleSheet.create({
  all: { alignSelf: "stretch" },
  symbol: { textAlign: "center", fontSize: 15, lineHeight: 22 },
  legend: { flexDirection: "row", flexWrap: "wrap", gap: space.m, paddingTop: space.xxs },
  legendItem: { flexDirection: "row", alignItems: "center", gap: space.xs },
});
