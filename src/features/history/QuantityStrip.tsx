import { memo } from "react";
import { StyleSheet, View } from "react-native";
import Svg, { G, Line, Path, Rect, Text as SvgText } from "react-native-svg";
import { historyLine } from "@/charts/looks";
import { MarkShape } from "@/charts/MarkShape";
import { useMeasuredWidth } from "@/charts/useMeasuredWidth";
import { Card } from "@/components/Card";
import { NotationText } from "@/components/NotationText";
import { Press } from "@/components/Press";
import { Block, Caption, Dense, Label } from "@/components/Text";
import { FAMILY_MARKS } from "@/theme/families";
import { useColors, useTheme } from "@/theme/ThemeProvider";
import { fonts, radius, schemes, space } from "@/theme/tokens";
import { drawnCurve, limitDirection, statementSpan } from "~shared/chart/points";
import { linearScale, type Scale } from "~shared/chart/scales";
import { linearTicks } from "~shared/chart/ticks";
import { notationAsUsed } from "~shared/statement/notation";
import { shownNumber } from "./readouts";
import type { HistoryRow } from "@/charts/rows";
import type { Overlay } from "./useOverlays";

const LINE = 60;
const AXIS = 24;
/** How far a curve rises over its base. */
const CURVE = 24;
/** Width of a figure in the axis labels. */
const DIGIT = 7.5;

export interface StripGroup {
  key: string;
  title: string;
  /** Decimals of the models' values. */
  digits: number;
  rows: HistoryRow[];
}

/** Optical depths by their range, durations by their fractions and unit: one axis each. */
export function stripGroups(rows: readonly HistoryRow[]): StripGroup[] {
  const groups = new Map<string, StripGroup>();
  for (const row of rows) {
    const title = groupTitle(row);
    if (title === null || row.used === null || statementSpan(row.used) === null) continue;
    const group = groups.get(title) ?? { key: title, title, digits: digitsOf(row), rows: [] };
    group.rows.push(row);
    groups.set(title, group);
  }
  return [...groups.values()];
}

function digitsOf({ used }: HistoryRow): number {
  if (used?.quantity === "duration") return used.durationUnit === "myr" ? 0 : 2;
  return 4;
}

function groupTitle({ used }: HistoryRow): string | null {
  if (used === null) return null;
  switch (used.quantity) {
    case "opticalDepth":
      return "Optical depth, total";
    case "opticalDepthRange":
      return `Optical depth, z ${used.rangeLow} to ${used.rangeHigh}`;
    case "duration":
      return `Duration, ${used.fractionFrom} to ${used.fractionTo}${used.durationUnit === "myr" ? " (Myr)" : ""}`;
    default:
      return null;
  }
}

/** Records that have no place in the plane, each beside the models' values. */
export const QuantityStrip = memo(function QuantityStrip({
  groups,
  overlays,
  selected,
  onSelect,
}: {
  groups: readonly StripGroup[];
  overlays: readonly Overlay[];
  selected: string | null;
  onSelect: (number: string) => void;
}) {
  if (groups.length === 0) return null;
  return (
    <Card style={styles.card}>
      <Block level={2}>Optical depths and durations</Block>
      {groups.map((group) => (
        <GroupView
          key={group.key}
          group={group}
          overlays={overlays}
          selected={selected}
          onSelect={onSelect}
        />
      ))}
      {groups.some((group) => group.title.startsWith("Optical")) ? (
        <Caption>
          An optical depth came from a history family with helium and weighting assumed. The models’
          values use the volume average and leave out residual electrons.
        </Caption>
      ) : null}
    </Card>
  );
});

function GroupView({
  group,
  overlays,
  selected,
  onSelect,
}: {
  group: StripGroup;
  overlays: readonly Overlay[];
  selected: string | null;
  onSelect: (number: string) => void;
}) {
  const { width, onLayout } = useMeasuredWidth();
  // All rows of a group ask a history for the same number.
  const models = overlays.flatMap((overlay) => {
    const values = group.rows.map(({ number }) => overlay.score.at(number)?.model ?? null);
    const value = values.find((answer) => answer !== null);
    return value === null || value === undefined ? [] : [{ overlay, value }];
  });
  const edges = group.rows.flatMap(({ used }) => {
    const span = used && statementSpan(used);
    return span ? [span.centre, ...(span.ends ?? [])] : [];
  });
  const all = [...edges, ...models.map(({ value }) => value)];
  const low = Math.max(0, Math.min(...all));
  const high = Math.max(...all);
  const pad = Math.max(0.12 * (high - low), 0.02 * high, 1e-6);
  const domain = [Math.max(0, low - pad), high + pad] as const;
  const height = LINE * group.rows.length + AXIS;
  return (
    <View style={styles.group}>
      <Label>{group.title}</Label>
      <View style={styles.columns}>
        <StripNames rows={group.rows} selected={selected} onSelect={onSelect} />
        <View style={styles.drawing} onLayout={onLayout}>
          {width === null ? null : (
            <Svg width={width} height={height} viewBox={`0 0 ${width} ${height}`} aria-hidden>
              <StripDrawing
                group={group}
                models={models}
                scale={linearScale(domain, [22, width - 22])}
                domain={domain}
                height={height}
                width={width}
              />
            </Svg>
          )}
        </View>
      </View>
      <Caption>
        {models.length === 0
          ? overlays.length === 0
            ? "No model history is drawn."
            : "The model histories have no value here."
          : models
              .map(({ overlay, value }) => `${overlay.name} ${shownNumber(value, group.digits)}`)
              .join(", ")}
      </Caption>
    </View>
  );
}

/** The records' names and numbers, which no slider changes. */
const StripNames = memo(function StripNames({
  rows,
  selected,
  onSelect,
}: {
  rows: readonly HistoryRow[];
  selected: string | null;
  onSelect: (number: string) => void;
}) {
  const colors = useColors();
  return (
    <View style={styles.names}>
      {rows.map((row) => (
        <Press
          key={row.number}
          onPress={() => onSelect(row.number)}
          attributes={{ "aria-pressed": selected === row.number }}
          style={[styles.name, selected === row.number && { backgroundColor: colors.petrolTint }]}
        >
          <View>
            <Dense muted numberOfLines={2} style={styles.source}>
              {row.citation.shortName}
            </Dense>
            {row.used ? <NotationText notation={notationAsUsed(row.used)} /> : null}
          </View>
        </Press>
      ))}
    </View>
  );
});

function StripDrawing({
  group,
  models,
  scale,
  domain,
  width,
  height,
}: {
  group: StripGroup;
  models: readonly { overlay: Overlay; value: number }[];
  scale: Scale;
  domain: readonly [number, number];
  width: number;
  height: number;
}) {
  const { scheme } = useTheme();
  const colors = schemes[scheme];
  const floor = height - AXIS;
  const raw = (domain[1] - domain[0]) / 4;
  const power = 10 ** Math.floor(Math.log10(raw));
  const step = ([1, 2, 5, 10].find((factor) => factor * power >= raw) ?? 10) * power;
  const digits = Math.max(0, Math.ceil(-Math.log10(step) - 1e-9));
  const ticks = linearTicks(domain, step, step);
  // Long labels on a narrow strip stand at every other tick, or fewer.
  const labelWidth = domain[1].toFixed(digits).length * DIGIT + 10;
  const every = Math.ceil(labelWidth / Math.abs(scale.at(step) - scale.at(0)));
  return (
    <G>
      {models.map(({ overlay, value }) => (
        <Line
          key={overlay.id}
          x1={scale.at(value)}
          x2={scale.at(value)}
          y1={2}
          y2={floor}
          {...historyLine(overlay.look, colors)}
        />
      ))}
      {group.rows.map((row, index) => {
        const used = row.used;
        const span = used && statementSpan(used);
        if (!used || !span) return null;
        const look = FAMILY_MARKS[row.family];
        const hue = look[scheme];
        const y = LINE * (index + 0.5);
        const limit = limitDirection(used.kind);
        const x = scale.at(span.centre);
        const curve = drawnCurve(used);
        const dash = used.level === null && curve === null ? "3 2.5" : undefined;
        const tip = limit === null ? x : Math.min(width - 4, Math.max(4, x + limit * 34));
        return (
          <G key={row.number}>
            {curve ? (
              <Path
                d={`M${scale.at(curve.at[0]!)} ${y}${curve.at.map((at, i) => `L${scale.at(at)} ${y - CURVE * curve.height[i]!}`).join("")}L${scale.at(curve.at[curve.at.length - 1]!)} ${y}Z`}
                fill={hue}
                fillOpacity={0.2}
                stroke={hue}
                strokeWidth={1.25}
                strokeLinejoin="round"
              />
            ) : span.ends && used.kind === "band" ? (
              <Rect
                x={scale.at(span.ends[0])}
                y={y - 4.5}
                width={scale.at(span.ends[1]) - scale.at(span.ends[0])}
                height={9}
                fill={hue}
                fillOpacity={0.2}
                stroke={hue}
                strokeWidth={1.25}
              />
            ) : span.ends ? (
              <Line
                x1={scale.at(span.ends[0])}
                x2={scale.at(span.ends[1])}
                y1={y}
                y2={y}
                stroke={hue}
                strokeWidth={1.25}
                strokeDasharray={dash}
              />
            ) : null}
            {limit === null ? null : (
              <G>
                <Line x1={x} x2={tip} y1={y} y2={y} stroke={hue} strokeWidth={1.25} />
                <Path
                  d={`M${tip - 8 * limit} ${y - 4}L${tip - 8 * limit} ${y + 4}L${tip} ${y}Z`}
                  fill={hue}
                />
              </G>
            )}
            <MarkShape
              shape={look.shape}
              hue={hue}
              surface={colors.surface}
              radius={5.4}
              hollow={limit !== null || used.kind === "band"}
              x={x}
              y={y}
            />
          </G>
        );
      })}
      <Line x1={4} x2={width - 4} y1={floor} y2={floor} stroke={colors.ink} strokeWidth={1} />
      {ticks.map((tick) => (
        <G key={tick.value}>
          <Line
            x1={scale.at(tick.value)}
            x2={scale.at(tick.value)}
            y1={floor}
            y2={floor - 5}
            stroke={colors.ink}
            strokeWidth={1}
          />
          {Math.round(tick.value / step) % every === 0 ? (
            <SvgText
              x={scale.at(tick.value)}
              y={floor + 16}
              textAnchor="middle"
              fontFamily={fonts.mono}
              fontSize={12.5}
              fill={colors.ink}
            >
              {tick.value.toFixed(digits)}
            </SvgText>
          ) : null}
        </G>
      ))}
    </G>
  );
}

const styles = StyleSheet.create({
  card: { gap: space.m },
  group: { gap: space.xxs },
  columns: { flexDirection: "row", gap: space.s },
  names: { width: 184, flexShrink: 1 },
  name: {
    height: LINE,
    justifyContent: "center",
    borderRadius: radius.chip,
    paddingHorizontal: space.xs,
    marginLeft: -space.xs,
  },
  source: { lineHeight: 17 },
  drawing: { flex: 1, minWidth: 120 },
});
