import { useId } from "react";
import { View } from "react-native";
import Svg, { ClipPath, Defs, G, Line, Path, Rect, Text as SvgText, TSpan } from "react-native-svg";

import { FAMILY_MARKS } from "@/theme/families";
import { type Colors, fonts, schemes, type SchemeName } from "@/theme/tokens";
import { areaPath, linePath } from "~shared/chart/paths";
import { posteriorRows, type RowPlace, rowsSpan } from "~shared/chart/posteriorRows";
import { linearScale, type Scale } from "~shared/chart/scales";
import { linearTicks, roundStep } from "~shared/chart/ticks";
import { fixed, quantityWords, withErrors } from "~shared/fit/quantityWords";
import type { DensityCurve, QuantitySummary } from "~shared/fit/request";
import { FAMILY_NAMES, type MethodFamily } from "~shared/methods/vocabulary";

import { MarkShape } from "./MarkShape";
import { SvgSymbol } from "./svgSymbol";

export interface PosteriorRow {
  part: MethodFamily | "all";
  /** How many rows of the table it holds. */
  count: number;
  summary: QuantitySummary;
  density: DensityCurve;
}

export interface PosteriorRowsProps {
  width: number;
  scheme: SchemeName;
  /** The quantity, by its name in a fit. */
  name: string;
  rows: readonly PosteriorRow[];
  /** The prior's own, drawn dashed in the row of all together. */
  prior: DensityCurve | null;
}

const SIDE = 12;
const BELOW = 46;

export const partName = (part: MethodFamily | "all"): string =>
  part === "all" ? "All together" : FAMILY_NAMES[part];

/**
 * Posterior of one quantity by data set: a row for each part of the table and one for all together,
 * over one axis. The band behind them is the 68.27 % interval of all together.
 */
export function PosteriorRows(props: PosteriorRowsProps) {
  const words = props.rows
    .map(({ part, summary: { median, interval68 } }) => {
      const { value, plus, minus } = withErrors(median, interval68);
      return `${partName(part)} ${value}, plus ${plus}, minus ${minus}`;
    })
    .join("; ");
  return (
    <View role="img" aria-label={`${quantityWords(props.name).words} by data set. ${words}.`}>
      <PosteriorRowsDrawing {...props} />
    </View>
  );
}

/** The drawing alone: also what a downloaded figure shows. */
export function PosteriorRowsDrawing({ width, scheme, name, rows, prior }: PosteriorRowsProps) {
  const colors = schemes[scheme];
  const id = useId().replaceAll(":", "");
  const { rows: places, bottom } = posteriorRows(rows.length);
  const span = rowsSpan(
    rows.map(({ summary, density }) => ({ interval68: summary.interval68, density })),
  );
  const left = SIDE;
  const right = width - SIDE;
  const horizontal = linearScale(span, [left, right]);
  const { step, digits } = roundStep(span[1] - span[0], width < 420 ? 4 : 6);
  const ticks = linearTicks(span, step, step / 5);
  const all = rows.find(({ part }) => part === "all");
  const height = bottom + BELOW;
  return (
    <Svg width={width} height={height} viewBox={`0 0 ${width} ${height}`} aria-hidden>
      <Defs>
        <ClipPath id={`${id}-box`}>
          <Rect x={left} y={0} width={right - left} height={bottom} />
        </ClipPath>
      </Defs>
      <G clipPath={`url(#${id}-box)`}>
        {all ? (
          <Rect
            x={horizontal.at(all.summary.interval68[0])}
            y={0}
            width={
              horizontal.at(all.summary.interval68[1]) - horizontal.at(all.summary.interval68[0])
            }
            height={bottom}
            fill={colors.petrolTint}
          />
        ) : null}
        {rows.map((row, index) => (
          <Curve
            key={row.part}
            row={row}
            place={places[index]!}
            horizontal={horizontal}
            prior={row.part === "all" ? prior : null}
            scheme={scheme}
            colors={colors}
          />
        ))}
      </G>
      {rows.map((row, index) => (
        <Words
          key={row.part}
          row={row}
          place={places[index]!}
          left={left}
          right={right}
          colors={colors}
          scheme={scheme}
        />
      ))}
      <Rect
        x={left + 0.5}
        y={0.5}
        width={right - left - 1}
        height={bottom - 1}
        fill="none"
        stroke={colors.ink}
        strokeWidth={1}
      />
      {ticks.map(({ value, position, major }) => (
        <Line
          key={value}
          x1={horizontal.at(position)}
          x2={horizontal.at(position)}
          y1={bottom}
          y2={bottom - (major ? 7 : 4)}
          stroke={colors.ink}
          strokeWidth={1}
        />
      ))}
      {ticks
        .filter(({ major }) => major)
        .map(({ value, position }) => (
          <SvgText
            key={value}
            x={Math.min(right - 10, Math.max(left + 10, horizontal.at(position)))}
            y={bottom + 17}
            textAnchor="middle"
            fontFamily={fonts.mono}
            fontSize={12.5}
            fill={colors.ink}
          >
            {fixed(value, digits)}
          </SvgText>
        ))}
      <SvgText
        x={0.5 * (left + right)}
        y={bottom + 38}
        textAnchor="middle"
        fontFamily={fonts.serif}
        fontSize={15}
        fill={colors.ink}
      >
        {quantityWords(name).words} <SvgSymbol symbol={quantityWords(name).symbol} size={15} />
      </SvgText>
    </Svg>
  );
}

function Curve({
  row: { part, summary, density },
  place,
  horizontal,
  prior,
  scheme,
  colors,
}: {
  row: PosteriorRow;
  place: RowPlace;
  horizontal: Scale;
  prior: DensityCurve | null;
  scheme: SchemeName;
  colors: Colors;
}) {
  const vertical = linearScale([0, 1.05], [place.floor, place.top]);
  const hue = part === "all" ? colors.primary : FAMILY_MARKS[part][scheme];
  const middle = horizontal.at(summary.median);
  return (
    <G>
      <Path
        d={areaPath(density.x, density.density, horizontal, vertical, place.floor)}
        fill={hue}
        fillOpacity={0.2}
      />
      <Path
        d={linePath(density.x, density.density, horizontal, vertical)}
        fill="none"
        stroke={hue}
        strokeWidth={part === "all" ? 2.5 : 1.75}
        strokeLinejoin="round"
      />
      {prior ? (
        <Path
          d={linePath(prior.x, prior.density, horizontal, vertical)}
          fill="none"
          stroke={colors.ink}
          strokeWidth={1.25}
          strokeDasharray="5 3.5"
        />
      ) : null}
      <Line
        x1={horizontal.range[0]}
        x2={horizontal.range[1]}
        y1={place.floor}
        y2={place.floor}
        stroke={colors.hairline}
        strokeWidth={1}
      />
      <Line
        x1={horizontal.at(summary.interval68[0])}
        x2={horizontal.at(summary.interval68[1])}
        y1={place.floor}
        y2={place.floor}
        stroke={hue}
        strokeWidth={2.5}
      />
      {part === "all" ? (
        <Line
          x1={middle}
          x2={middle}
          y1={place.floor - 6}
          y2={place.floor + 6}
          stroke={hue}
          strokeWidth={2.5}
        />
      ) : (
        <MarkShape
          shape={FAMILY_MARKS[part].shape}
          hue={hue}
          surface={colors.surface}
          radius={4.8}
          hollow={false}
          x={middle}
          y={place.floor}
        />
      )}
    </G>
  );
}

function Words({
  row: { part, count, summary },
  place,
  left,
  right,
  colors,
  scheme,
}: {
  row: PosteriorRow;
  place: RowPlace;
  left: number;
  right: number;
  colors: Colors;
  scheme: SchemeName;
}) {
  const { value, plus, minus } = withErrors(summary.median, summary.interval68);
  const small = { fontSize: 12, fontFamily: fonts.mono } as const;
  const start = part === "all" ? left + 8 : left + 26;
  // On a small phone the table has the numbers.
  const roomForNumbers = right - left >= 320;
  return (
    <G>
      {part === "all" ? null : (
        <MarkShape
          shape={FAMILY_MARKS[part].shape}
          hue={FAMILY_MARKS[part][scheme]}
          surface={colors.surface}
          radius={5.5}
          hollow={false}
          x={left + 15}
          y={place.label - 4.5}
        />
      )}
      <SvgText x={start} y={place.label} fontFamily={fonts.sans} fontSize={14} fill={colors.ink}>
        <TSpan fontWeight="600">{partName(part)}</TSpan>
        <TSpan fill={colors.ink}>{` · ${count}`}</TSpan>
      </SvgText>
      {roomForNumbers ? (
        <SvgText
          x={right - 8}
          y={place.label}
          textAnchor="end"
          fontFamily={fonts.mono}
          fontSize={13.5}
          fill={colors.ink}
        >
          {value}
          {plus === minus ? (
            <TSpan>{`±${plus}`}</TSpan>
          ) : (
            <>
              <TSpan dx={3} dy={-4} {...small}>{`+${plus}`}</TSpan>
              <TSpan dx={3} dy={8} {...small}>{`−${minus}`}</TSpan>
            </>
          )}
        </SvgText>
      ) : null}
    </G>
  );
}
