import { useId } from "react";
import { View } from "react-native";
import Svg, { ClipPath, Defs, G, Line, Path, Rect, Text as SvgText } from "react-native-svg";

import { type Colors, fonts, schemes, type SchemeName } from "@/theme/tokens";
import { contourPath } from "~shared/chart/contours";
import { cornerLayout, cornerSpan, jointOf, scaledToArea } from "~shared/chart/corner";
import type { Box } from "~shared/chart/marks";
import { areaPath, cutCurve, linePath } from "~shared/chart/paths";
import { linearScale, type Scale } from "~shared/chart/scales";
import { linearTicks, roundStep, type Tick } from "~shared/chart/ticks";
import { fixed, quantityWords } from "~shared/fit/quantityWords";
import type { DensityCurve, JointDensity, QuantitySummary } from "~shared/fit/request";

import { SvgSymbol } from "./svgSymbol";

export interface CornerPlotProps {
  width: number;
  scheme: SchemeName;
  /** Quantities in their order from the left, at least one. */
  names: readonly string[];
  quantities: readonly QuantitySummary[];
  densities: readonly DensityCurve[];
  priorDensities: readonly DensityCurve[];
  joint: readonly JointDensity[];
  /** The history that fits best, by quantity; drawn as a small cross. */
  best: Readonly<Record<string, number | null>>;
}

interface Axis {
  name: string;
  summary: QuantitySummary;
  posterior: DensityCurve;
  prior: DensityCurve | null;
  span: readonly [number, number];
  ticks: readonly Tick[];
  digits: number;
}

function axisOf(name: string, props: CornerPlotProps, side: number): Axis | null {
  const summary = props.quantities.find((one) => one.name === name);
  const posterior = props.densities.find((one) => one.name === name);
  if (!summary || !posterior) return null;
  const prior = props.priorDensities.find((one) => one.name === name);
  const span = cornerSpan(summary.interval95, posterior.x);
  const { step, digits } = roundStep(span[1] - span[0], side < 110 ? 2 : side < 150 ? 3 : 4);
  return {
    name,
    summary,
    posterior,
    prior: prior ? scaledToArea(prior, posterior) : null,
    span,
    ticks: linearTicks(span, step, step / (side < 110 ? 2 : 5)),
    digits,
  };
}

/**
 * Posterior of several quantities: each alone on the diagonal, with its prior dashed, and two and two
 * below it as the regions that hold 68.27 and 95.45 % of the probability.
 */
export function CornerPlot(props: CornerPlotProps) {
  const words = props.names
    .flatMap((name) => {
      const one = props.quantities.find((quantity) => quantity.name === name);
      return one
        ? [
            `${quantityWords(name).words}: median ${one.median.toPrecision(3)}, 68.27 % from ${one.interval68[0].toPrecision(3)} to ${one.interval68[1].toPrecision(3)}`,
          ]
        : [];
    })
    .join("; ");
  return (
    <View role="img" aria-label={`Corner plot. ${words}. The table of quantities has the numbers.`}>
      <CornerDrawing {...props} />
    </View>
  );
}

/** The drawing alone: also what a downloaded figure shows. */
export function CornerDrawing(props: CornerPlotProps) {
  const { width, scheme, names, joint, best } = props;
  const colors = schemes[scheme];
  const id = useId().replaceAll(":", "");
  const layout = cornerLayout(width, names.length);
  const axes = names.map((name) => axisOf(name, props, layout.side));
  return (
    <Svg width={width} height={layout.height} viewBox={`0 0 ${width} ${layout.height}`} aria-hidden>
      {axes.map((up, row) =>
        axes.slice(0, row + 1).map((across, column) => {
          if (!across || !up) return null;
          const box = layout.cell(column, row);
          const key = `${column}-${row}`;
          const horizontal = linearScale(across.span, [box.left, box.right]);
          const onDiagonal = column === row;
          const vertical = onDiagonal
            ? linearScale([0, 1.12], [box.bottom, box.top])
            : linearScale(up.span, [box.bottom, box.top]);
          const together = onDiagonal ? null : jointOf(joint, across.name, up.name);
          return (
            <G key={key}>
              <Defs>
                <ClipPath id={`${id}-${key}`}>
                  <Rect x={box.left} y={box.top} width={layout.side} height={layout.side} />
                </ClipPath>
              </Defs>
              <Rect
                x={box.left}
                y={box.top}
                width={layout.side}
                height={layout.side}
                fill={colors.surface}
              />
              <G clipPath={`url(#${id}-${key})`}>
                {onDiagonal ? (
                  <Alone
                    axis={across}
                    horizontal={horizontal}
                    vertical={vertical}
                    box={box}
                    colors={colors}
                  />
                ) : together ? (
                  <Together
                    joint={together}
                    horizontal={horizontal}
                    vertical={vertical}
                    colors={colors}
                  />
                ) : null}
                {onDiagonal ? null : (
                  <Cross
                    x={horizontal.at(best[across.name] ?? NaN)}
                    y={vertical.at(best[up.name] ?? NaN)}
                    colors={colors}
                  />
                )}
              </G>
              <Rect
                x={box.left + 0.5}
                y={box.top + 0.5}
                width={layout.side - 1}
                height={layout.side - 1}
                fill="none"
                stroke={colors.ink}
                strokeWidth={1}
              />
              <Ticks
                axis={across}
                scale={horizontal}
                box={box}
                labelled={row === axes.length - 1}
                along="x"
                colors={colors}
              />
              {onDiagonal ? null : (
                <Ticks
                  axis={up}
                  scale={vertical}
                  box={box}
                  labelled={column === 0}
                  along="y"
                  colors={colors}
                />
              )}
            </G>
          );
        }),
      )}
    </Svg>
  );
}

function Alone({
  axis: { posterior, prior, summary },
  horizontal,
  vertical,
  box,
  colors,
}: {
  axis: Axis;
  horizontal: Scale;
  vertical: Scale;
  box: Box;
  colors: Colors;
}) {
  const shade = (interval: readonly [number, number], opacity: number) => {
    const { xs, ys } = cutCurve(posterior.x, posterior.density, interval);
    return (
      <Path
        d={areaPath(xs, ys, horizontal, vertical, box.bottom)}
        fill={colors.primary}
        fillOpacity={opacity}
      />
    );
  };
  return (
    <G>
      {shade(summary.interval95, 0.16)}
      {shade(summary.interval68, 0.24)}
      {prior ? (
        <Path
          d={linePath(prior.x, prior.density, horizontal, vertical)}
          fill="none"
          stroke={colors.ink}
          strokeWidth={1.25}
          strokeDasharray="5 3.5"
        />
      ) : null}
      <Path
        d={linePath(posterior.x, posterior.density, horizontal, vertical)}
        fill="none"
        stroke={colors.primary}
        strokeWidth={2}
        strokeLinejoin="round"
      />
    </G>
  );
}

function Together({
  joint,
  horizontal,
  vertical,
  colors,
}: {
  joint: JointDensity;
  horizontal: Scale;
  vertical: Scale;
  colors: Colors;
}) {
  const line = { stroke: colors.primary, strokeWidth: 1.25, strokeLinejoin: "round" } as const;
  return (
    <G fillRule="evenodd">
      <Path
        d={contourPath(joint, joint.level95, horizontal, vertical)}
        fill={colors.primary}
        fillOpacity={0.16}
        {...line}
      />
      <Path
        d={contourPath(joint, joint.level68, horizontal, vertical)}
        fill={colors.primary}
        fillOpacity={0.32}
        {...line}
      />
    </G>
  );
}

function Cross({ x, y, colors }: { x: number; y: number; colors: Colors }) {
  if (!Number.isFinite(x) || !Number.isFinite(y)) return null;
  return (
    <Path
      d={`M${x - 5} ${y}H${x + 5}M${x} ${y - 5}V${y + 5}`}
      stroke={colors.ember}
      strokeWidth={2}
      fill="none"
    />
  );
}

function Ticks({
  axis,
  scale,
  box,
  labelled,
  along,
  colors,
}: {
  axis: Axis;
  scale: Scale;
  box: Box;
  labelled: boolean;
  along: "x" | "y";
  colors: Colors;
}) {
  const line = { stroke: colors.ink, strokeWidth: 1 };
  const text = { fontFamily: fonts.mono, fontSize: 12, fill: colors.ink };
  const size = 14.5;
  const title = { fontFamily: fonts.serif, fontSize: size, fill: colors.ink };
  const middle = along === "x" ? 0.5 * (box.left + box.right) : 0.5 * (box.top + box.bottom);
  const { symbol } = quantityWords(axis.name);
  return (
    <G>
      {axis.ticks.map(({ position, major, value }) => {
        const at = scale.at(position);
        const long = major ? 6 : 3;
        return along === "x" ? (
          <Line key={value} x1={at} x2={at} y1={box.bottom} y2={box.bottom - long} {...line} />
        ) : (
          <Line key={value} x1={box.left} x2={box.left + long} y1={at} y2={at} {...line} />
        );
      })}
      {labelled
        ? axis.ticks
            .filter(({ major }) => major)
            .map(({ position, value }) =>
              along === "x" ? (
                <SvgText
                  key={value}
                  x={within(scale.at(position), box.left + 8, box.right - 8)}
                  y={box.bottom + 16}
                  textAnchor="middle"
                  {...text}
                >
                  {fixed(value, axis.digits)}
                </SvgText>
              ) : (
                <SvgText
                  key={value}
                  x={box.left - 6}
                  y={within(scale.at(position), box.top + 5, box.bottom - 5) + 4}
                  textAnchor="end"
                  {...text}
                >
                  {fixed(value, axis.digits)}
                </SvgText>
              ),
            )
        : null}
      {!labelled ? null : along === "x" ? (
        <SvgText x={middle} y={box.bottom + 35} textAnchor="middle" {...title}>
          <SvgSymbol symbol={symbol} size={size} />
        </SvgText>
      ) : (
        <SvgText transform={`translate(12 ${middle}) rotate(-90)`} textAnchor="middle" {...title}>
          <SvgSymbol symbol={symbol} size={size} />
        </SvgText>
      )}
    </G>
  );
}

const within = (value: number, low: number, high: number) => Math.min(high, Math.max(low, value));
