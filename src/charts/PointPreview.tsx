import { StyleSheet, View } from "react-native";
import Svg, { Line, Path, Text as SvgText } from "react-native-svg";
import { markOf, PHONE_SIZES } from "~shared/chart/marks";
import { linePath, spread } from "~shared/chart/paths";
import { planePoint } from "~shared/chart/points";
import { linearScale } from "~shared/chart/scales";
import { linearTicks } from "~shared/chart/ticks";
import { tanhHistory } from "~shared/history/tanh";
import { familyOf } from "~shared/methods/vocabulary";
import { asUsed } from "~shared/statement/asUsed";
import type { ConstraintFields } from "~shared/statement/fields";
import { Caption } from "@/components/Text";
import { FAMILY_MARKS } from "@/theme/families";
import { useTheme } from "@/theme/ThemeProvider";
import { fonts, schemes } from "@/theme/tokens";
import { Bars } from "./HistoryChart";
import { MarkShape } from "./MarkShape";

/** Only a ground to see the point against; it says nothing about the universe. */
const GROUND = tanhHistory({ zRe: 7.4, deltaZ: 1 });

/** How a draft will stand in the chart, small, while its numbers are typed. */
export function PointPreview({
  fields,
  width = 150,
  height = 92,
}: {
  fields: ConstraintFields;
  width?: number;
  height?: number;
}) {
  const { scheme } = useTheme();
  const colors = schemes[scheme];
  const used = asUsed(fields);
  const plane = used === null ? null : planePoint(used);
  if (plane === null) {
    return (
      <View style={[styles.nothing, { width, height }]}>
        <Caption style={styles.centre}>The point appears here.</Caption>
      </View>
    );
  }
  const reach = plane.zEnds
    ? Math.max(plane.z - plane.zEnds[0], plane.zEnds[1] - plane.z, 0.5) + 0.7
    : 1.2;
  const domain = [plane.z - reach, plane.z + reach] as const;
  const box = { left: 8, right: width - 8, top: 4, bottom: height - 20 };
  const z = linearScale(domain, [box.left, box.right]);
  const x = linearScale([-0.05, 1.05], [box.bottom, box.top]);
  const mark = markOf(plane, z, x, box, { ...PHONE_SIZES, arrowLength: 22 });
  const look = FAMILY_MARKS[familyOf(fields.methodTags) ?? "other"];
  const zs = spread(domain[0], domain[1], 61);
  const ticks = linearTicks(domain, reach > 4 ? 2 : 1, reach > 4 ? 2 : 1);
  const outside = mark === null;
  return (
    <View
      role="img"
      aria-label={
        outside
          ? "The point lies outside the fractions from 0 to 1."
          : `The point as it will be drawn, at redshift ${plane.z} and neutral fraction ${Number(plane.x.toPrecision(4))}`
      }
    >
      <Svg width={width} height={height} viewBox={`0 0 ${width} ${height}`} aria-hidden>
        <Path
          d={linePath(
            zs,
            zs.map((at) => GROUND.x(Math.max(0, at))),
            z,
            x,
          )}
          fill="none"
          stroke={colors.outline}
          strokeWidth={1.5}
        />
        <Line
          x1={box.left}
          x2={box.right}
          y1={box.bottom}
          y2={box.bottom}
          stroke={colors.ink}
          strokeWidth={1}
        />
        {ticks.map((tick) => (
          <Line
            key={`t${tick.value}`}
            x1={z.at(tick.value)}
            x2={z.at(tick.value)}
            y1={box.bottom}
            y2={box.bottom - 5}
            stroke={colors.ink}
            strokeWidth={1}
          />
        ))}
        {ticks.map((tick) => (
          <SvgText
            key={`l${tick.value}`}
            x={z.at(tick.value)}
            y={height - 5}
            textAnchor="middle"
            fontFamily={fonts.mono}
            fontSize={12}
            fill={colors.ink}
          >
            {String(tick.value)}
          </SvgText>
        ))}
        {mark ? <Bars mark={mark} hue={look[scheme]} width={1.5} /> : null}
        {mark ? (
          <MarkShape
            shape={look.shape}
            hue={look[scheme]}
            surface={colors.surface}
            radius={5.4}
            hollow={mark.hollow}
            x={mark.x}
            y={mark.y}
          />
        ) : null}
      </Svg>
    </View>
  );
}

const styles = StyleSheet.create({
  nothing: { justifyContent: "center" },
  centre: { textAlign: "center" },
});
