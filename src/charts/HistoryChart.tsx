import { memo, type ReactNode, useEffect, useId, useMemo, useRef, useState } from "react";
import { View } from "react-native";
import Svg, { Circle, G, Line, Path, Rect, Text as SvgText, TSpan } from "react-native-svg";
import {
  type Box,
  type Mark,
  markOf,
  type MarkSizes,
  nearestMark,
  PHONE_SIZES,
  WIDE_SIZES,
} from "~shared/chart/marks";
import { areaPath, bandPath, fogStops, linePath, spread } from "~shared/chart/paths";
import type { PlanePoint } from "~shared/chart/points";
import { type Interval, linearScale, logScale, type Scale } from "~shared/chart/scales";
import { derivedTicks, linearTicks, logTicks, type Tick } from "~shared/chart/ticks";
import { frequencyOf21cmMHz } from "~shared/cosmology/line21cm";
import type { History } from "~shared/history/history";
import type { MethodFamily } from "~shared/methods/vocabulary";
import { FAMILY_MARKS } from "@/theme/families";
import { type Colors, fonts, schemes, type SchemeName } from "@/theme/tokens";
import { HISTORY_LOOKS, historyLine } from "./looks";
import { MarkShape } from "./MarkShape";

export interface ChartPoint {
  id: string;
  family: MethodFamily;
  /** What is heard when the point is reached by keyboard. */
  label: string;
  plane: PlanePoint;
}

export interface ChartHistory {
  id: string;
  history: History;
}

/** Quantiles of x(z) over redshifts, [n] each: what a posterior leaves open. */
export interface ChartBand {
  z: readonly number[];
  low95: readonly number[];
  low68: readonly number[];
  high68: readonly number[];
  high95: readonly number[];
}

export interface HistoryChartProps {
  width: number;
  height: number;
  scheme: SchemeName;
  phone: boolean;
  points: readonly ChartPoint[];
  /** Up to three, in the order of their lines; the first carries the fog. Null keeps a place free. */
  histories: readonly (ChartHistory | null)[];
  /** Drawn between the fog and the histories. */
  band?: ChartBand | null;
  domain: Interval;
  upperAxis: "age" | "frequency";
  /** Cosmic age in Gyr at a redshift. */
  ageOf: (z: number) => number;
  logarithmic: boolean;
  selectedId?: string | null;
  onSelect?: (id: string | null) => void;
  /** What the chart stands on, which is also the halo of its markers; the surface unless said. */
  ground?: string;
}

const TOUCH_REACH = 44;
/** Ends of the lower edge of a logarithmic axis, which follows the points in between. */
const LOWEST_FRACTIONS = [1e-4, 1e-2] as const;

/** The decade below the smallest fraction drawn. */
function lowestFraction(points: readonly ChartPoint[]): number {
  const ends = points.flatMap(({ plane }) => [plane.x, plane.xEnds?.[0] ?? plane.x]);
  const least = Math.min(1, ...ends.filter((end) => end > 0));
  const decade = 10 ** Math.floor(Math.log10(least));
  return Math.min(LOWEST_FRACTIONS[1], Math.max(LOWEST_FRACTIONS[0], decade));
}

interface Frame {
  box: Box;
  z: Scale;
  x: Scale;
  sizes: MarkSizes;
}

function useFrame({
  width,
  height,
  phone,
  domain,
  logarithmic,
  points,
}: Pick<
  HistoryChartProps,
  "width" | "height" | "phone" | "domain" | "logarithmic" | "points"
>): Frame {
  const lowest = logarithmic ? lowestFraction(points) : null;
  return useMemo(() => {
    const box: Box = phone
      ? { left: 52, right: width - 12, top: 44, bottom: height - 46 }
      : { left: 64, right: width - 20, top: 56, bottom: height - 54 };
    return {
      box,
      z: linearScale(domain, [box.left, box.right]),
      x:
        lowest !== null
          ? logScale([lowest, 1.12], [box.bottom, box.top])
          : linearScale([-0.03, 1.03], [box.bottom, box.top]),
      sizes: phone ? PHONE_SIZES : WIDE_SIZES,
    };
  }, [width, height, phone, domain, lowest]);
}

/** The drawing alone, without anything to touch: also what a downloaded figure shows. */
export function HistoryDrawing(props: HistoryChartProps & { legend?: ReactNode }) {
  const { width, height, scheme, phone, points, histories, domain, upperAxis, ageOf } = props;
  const colors = schemes[scheme];
  const frame = useFrame(props);
  const marks = useMarks(points, frame);
  return (
    <Svg width={width} height={height} viewBox={`0 0 ${width} ${height}`} aria-hidden>
      <Rect
        x={frame.box.left}
        y={frame.box.top}
        width={frame.box.right - frame.box.left}
        height={frame.box.bottom - frame.box.top}
        fill={props.ground ?? colors.surface}
      />
      <Curves
        frame={frame}
        histories={histories}
        band={props.band ?? null}
        domain={domain}
        colors={colors}
        scheme={scheme}
      />
      <Marks
        points={points}
        marks={marks}
        frame={frame}
        scheme={scheme}
        ground={props.ground ?? colors.surface}
        selectedId={props.selectedId ?? null}
      />
      <Axes
        frame={frame}
        domain={domain}
        upperAxis={upperAxis}
        ageOf={ageOf}
        logarithmic={props.logarithmic}
        phone={phone}
        colors={colors}
        height={height}
      />
      {props.legend}
    </Svg>
  );
}

function useMarks(points: readonly ChartPoint[], frame: Frame): (Mark | null)[] {
  return useMemo(
    () => points.map(({ plane }) => markOf(plane, frame.z, frame.x, frame.box, frame.sizes)),
    [points, frame],
  );
}

/**
 * The compiled history: x_HI against redshift, constraints and model histories.
 *
 * A touch picks the nearest point. By keyboard the points are one stop: the arrow keys walk
 * through them by redshift, Enter opens one, Escape leaves it.
 */
export function HistoryChart(props: HistoryChartProps) {
  const { width, height, points, selectedId = null, onSelect } = props;
  const frame = useFrame(props);
  const marks = useMarks(points, frame);
  const [current, setCurrent] = useState<string | null>(null);
  const area = useRef<HTMLDivElement>(null);

  const order = useMemo(
    () =>
      points
        .map((point, index) => ({ point, mark: marks[index] ?? null }))
        .filter((entry): entry is { point: ChartPoint; mark: Mark } => entry.mark !== null)
        .sort((a, b) => a.mark.x - b.mark.x || a.mark.y - b.mark.y),
    [points, marks],
  );
  const stop = order.some(({ point }) => point.id === current)
    ? current
    : (order.find(({ point }) => point.id === selectedId)?.point.id ?? order[0]?.point.id ?? null);

  // Closing a point's panel takes the focus with it: it comes back to where it was opened from.
  const before = useRef(selectedId);
  useEffect(() => {
    const closed = before.current;
    before.current = selectedId;
    if (closed === null || selectedId !== null || document.activeElement !== document.body) return;
    stopOf(area.current, closed)?.focus({ preventScroll: true });
  }, [selectedId]);

  function pick(event: { clientX: number; clientY: number }) {
    const bounds = area.current?.getBoundingClientRect();
    if (!bounds) return;
    // The chart may be shown scaled; marks are in its own units.
    const scale = bounds.width > 0 ? width / bounds.width : 1;
    const index = nearestMark(
      marks,
      (event.clientX - bounds.left) * scale,
      (event.clientY - bounds.top) * scale,
      TOUCH_REACH,
    );
    onSelect?.(index === null ? null : (points[index]?.id ?? null));
  }

  function walk(event: React.KeyboardEvent) {
    const index = order.findIndex(({ point }) => point.id === stop);
    const last = order.length - 1;
    const next: Record<string, number> = {
      ArrowRight: Math.min(last, index + 1),
      ArrowDown: Math.min(last, index + 1),
      ArrowLeft: Math.max(0, index - 1),
      ArrowUp: Math.max(0, index - 1),
      Home: 0,
      End: last,
    };
    if (event.key === "Escape" && selectedId !== null) {
      onSelect?.(null);
      return;
    }
    const target = next[event.key];
    if (target === undefined) return;
    event.preventDefault();
    const id = order[target]?.point.id;
    if (id === undefined) return;
    setCurrent(id);
    stopOf(area.current, id)?.focus();
  }

  return (
    <View style={{ width, height }}>
      <div
        ref={area}
        onClick={pick}
        onKeyDown={walk}
        role="group"
        aria-label={`Chart of neutral fraction against redshift with ${order.length} constraints. Arrow keys walk through them, Enter opens one.`}
        style={{ position: "absolute", inset: 0, cursor: "crosshair", touchAction: "manipulation" }}
      >
        <HistoryDrawing {...props} />
        <PointStops
          order={order}
          stop={stop}
          selectedId={selectedId}
          onFocus={setCurrent}
          onSelect={onSelect}
        />
      </div>
    </View>
  );
}

function stopOf(area: HTMLElement | null, id: string): HTMLElement | undefined {
  const stops = Array.from(area?.querySelectorAll<HTMLElement>("[data-point]") ?? []);
  return stops.find((stop) => stop.dataset.point === id);
}

/** A button per point, for keyboard and screen reader. */
const PointStops = memo(function PointStops({
  order,
  stop,
  selectedId,
  onFocus,
  onSelect,
}: {
  order: readonly { point: ChartPoint; mark: Mark }[];
  stop: string | null;
  selectedId: string | null;
  onFocus: (id: string) => void;
  onSelect: ((id: string | null) => void) | undefined;
}) {
  return order.map(({ point, mark }) => (
    <button
      key={point.id}
      type="button"
      data-point={point.id}
      className="fogline-focusable"
      tabIndex={point.id === stop ? 0 : -1}
      aria-label={point.label}
      aria-pressed={point.id === selectedId}
      onFocus={() => onFocus(point.id)}
      onClick={(event) => {
        event.stopPropagation();
        onSelect?.(point.id);
      }}
      style={{
        position: "absolute",
        left: mark.x - 12,
        top: mark.y - 12,
        width: 24,
        height: 24,
        padding: 0,
        border: 0,
        borderRadius: 12,
        background: "transparent",
        // Crowded markers: the pointer goes through to the chart, which finds the nearest.
        pointerEvents: "none",
      }}
    />
  ));
});

/** What a slider moves. Plain SVG elements: the wrapped ones cost more than the curve itself. */
const Curves = memo(function Curves({
  frame,
  histories,
  band,
  domain,
  colors,
  scheme,
}: {
  frame: Frame;
  histories: readonly (ChartHistory | null)[];
  band: ChartBand | null;
  domain: Interval;
  colors: Colors;
  scheme: SchemeName;
}) {
  const id = useId().replaceAll(":", "");
  const { box, z, x } = frame;
  const first = histories[0]?.history ?? null;
  const sampled = histories.map((entry) => {
    if (entry === null) return null;
    const { history } = entry;
    const from = Math.max(domain[0], history.covered?.[0] ?? -Infinity);
    const to = Math.min(domain[1], history.covered?.[1] ?? Infinity);
    if (!(to > from)) return null;
    const inner = history.breaks.filter((edge) => edge > from && edge < to);
    const zs = [...spread(from, to, 241), ...inner].sort((a, b) => a - b);
    return { id: entry.id, zs, xs: zs.map((at) => history.x(at)) };
  });
  const foggy = sampled[0];
  const mask = scheme === "light" ? ([0.32, 0.72, 1] as const) : ([0.5, 0.85, 1] as const);
  return (
    <g>
      <defs>
        <clipPath id={`${id}-box`}>
          <rect
            x={box.left}
            y={box.top}
            width={box.right - box.left}
            height={box.bottom - box.top}
          />
        </clipPath>
        {first ? (
          <linearGradient
            id={`${id}-fog`}
            gradientUnits="userSpaceOnUse"
            x1={box.left}
            y1={0}
            x2={box.right}
            y2={0}
          >
            {fogStops(domain[0], domain[1], first.x).map(({ offset, opacity }) => (
              <stop key={offset} offset={offset} stopColor={colors.fog} stopOpacity={opacity} />
            ))}
          </linearGradient>
        ) : null}
        <linearGradient
          id={`${id}-down`}
          gradientUnits="userSpaceOnUse"
          x1={0}
          y1={box.top}
          x2={0}
          y2={box.bottom}
        >
          <stop offset={0} stopColor="#fff" stopOpacity={mask[0]} />
          <stop offset={0.45} stopColor="#fff" stopOpacity={mask[1]} />
          <stop offset={1} stopColor="#fff" stopOpacity={mask[2]} />
        </linearGradient>
        <mask
          id={`${id}-mask`}
          maskUnits="userSpaceOnUse"
          x={box.left}
          y={box.top}
          width={box.right - box.left}
          height={box.bottom - box.top}
        >
          <rect
            x={box.left}
            y={box.top}
            width={box.right - box.left}
            height={box.bottom - box.top}
            fill={`url(#${id}-down)`}
          />
        </mask>
      </defs>
      <g clipPath={`url(#${id}-box)`}>
        {foggy ? (
          <g mask={`url(#${id}-mask)`}>
            <path
              d={areaPath(foggy.zs, foggy.xs, z, x, box.bottom)}
              fill={`url(#${id}-fog)`}
              opacity={scheme === "light" ? 0.8 : 1}
            />
          </g>
        ) : null}
        {band ? (
          <g fill={colors.primary} stroke={colors.primary} strokeWidth={0.75}>
            <path
              d={bandPath(band.z, band.low95, band.high95, z, x)}
              fillOpacity={0.16}
              strokeOpacity={0.35}
            />
            <path
              d={bandPath(band.z, band.low68, band.high68, z, x)}
              fillOpacity={0.24}
              strokeOpacity={0.5}
            />
          </g>
        ) : null}
        {[...sampled.keys()].reverse().map((index) => {
          const curve = sampled[index];
          const look = HISTORY_LOOKS[index];
          if (!curve || look === undefined) return null;
          return (
            <path
              key={curve.id}
              d={linePath(curve.zs, curve.xs, z, x)}
              fill="none"
              strokeLinejoin="round"
              {...historyLine(look, colors)}
            />
          );
        })}
      </g>
    </g>
  );
});

const Marks = memo(function Marks({
  points,
  marks,
  frame,
  scheme,
  ground,
  selectedId,
}: {
  points: readonly ChartPoint[];
  marks: readonly (Mark | null)[];
  frame: Frame;
  scheme: SchemeName;
  ground: string;
  selectedId: string | null;
}) {
  const colors = schemes[scheme];
  const chosen = points.findIndex((point) => point.id === selectedId);
  const chosenMark = chosen < 0 ? null : (marks[chosen] ?? null);
  const chosenPoint = points[chosen];
  const one = (index: number, part: "bars" | "marker", bar: number) => {
    const point = points[index];
    const mark = marks[index];
    if (!point || !mark) return null;
    const look = FAMILY_MARKS[point.family];
    return part === "bars" ? (
      <Bars key={point.id} mark={mark} hue={look[scheme]} width={bar} />
    ) : (
      <MarkShape
        key={point.id}
        shape={look.shape}
        hue={look[scheme]}
        surface={ground}
        radius={frame.sizes.radius}
        hollow={mark.hollow}
        x={mark.x}
        y={mark.y}
      />
    );
  };
  const others = points.map((_point, index) => index).filter((index) => index !== chosen);
  return (
    <G>
      <G opacity={chosenMark ? 0.42 : 1}>
        <G>{others.map((index) => one(index, "bars", 1.25))}</G>
        <G>{others.map((index) => one(index, "marker", 1.25))}</G>
      </G>
      {chosenMark && chosenPoint ? (
        <G>
          <Path
            d={`M${frame.box.left} ${chosenMark.y}L${chosenMark.x} ${chosenMark.y}L${chosenMark.x} ${frame.box.bottom}`}
            fill="none"
            stroke={colors.ember}
            strokeWidth={1.25}
            strokeDasharray="1.5 4"
          />
          <Circle
            cx={chosenMark.x}
            cy={chosenMark.y}
            r={frame.sizes.radius + 6.5}
            fill={ground}
            stroke={colors.ember}
            strokeWidth={2.5}
          />
          <G>{one(chosen, "bars", 2)}</G>
          <G>{one(chosen, "marker", 2)}</G>
        </G>
      ) : null}
    </G>
  );
});

/** Bars, band, half violin and arrow of one point. */
export function Bars({ mark, hue, width }: { mark: Mark; hue: string; width: number }) {
  const dash = mark.dashed ? "3 2.5" : undefined;
  return (
    <G>
      {mark.band ? (
        <Rect
          {...mark.band}
          fill={hue}
          fillOpacity={0.2}
          stroke={hue}
          strokeWidth={width}
          strokeDasharray={dash}
        />
      ) : null}
      {mark.violin ? (
        <Path
          d={`M${mark.violin.map(([px, py]) => `${px} ${py}`).join("L")}Z`}
          fill={hue}
          fillOpacity={0.2}
          stroke={hue}
          strokeWidth={width}
          strokeLinejoin="round"
        />
      ) : null}
      {mark.bars.map((bar, index) => (
        <Line key={index} {...bar} stroke={hue} strokeWidth={width} strokeDasharray={dash} />
      ))}
      {mark.ends.map((end, index) => (
        <Line key={index} {...end} stroke={hue} strokeWidth={width} />
      ))}
      {mark.arrow ? (
        <G>
          <Line {...mark.arrow.shaft} stroke={hue} strokeWidth={width} strokeDasharray={dash} />
          <Path d={`M${mark.arrow.head.map(([px, py]) => `${px} ${py}`).join("L")}Z`} fill={hue} />
        </G>
      ) : null}
    </G>
  );
}

function redshiftSteps(domain: Interval): [major: number, minor: number] {
  const span = Math.abs(domain[1] - domain[0]);
  if (span > 16) return [5, 1];
  if (span > 9) return [2, 0.5];
  if (span > 2.5) return [1, 0.2];
  return [0.5, 0.1];
}

const Axes = memo(function Axes({
  frame,
  domain,
  upperAxis,
  ageOf,
  logarithmic,
  phone,
  colors,
  height,
}: {
  frame: Frame;
  domain: Interval;
  upperAxis: "age" | "frequency";
  ageOf: (z: number) => number;
  logarithmic: boolean;
  phone: boolean;
  colors: Colors;
  height: number;
}) {
  const { box, z, x } = frame;
  const lower = linearTicks(domain, ...redshiftSteps(domain));
  const side: Tick[] = logarithmic ? logTicks([x.domain[0], 1]) : linearTicks([0, 1], 0.2, 0.05);
  const upper =
    upperAxis === "age" ? ageTicks(domain, ageOf) : derivedTicks(domain, frequencyOf21cmMHz, 20, 5);
  const labelled = upper.filter(
    (tick) => tick.major && (upperAxis !== "age" || !phone || isEvenTenth(tick.value)),
  );
  const line = { stroke: colors.ink, strokeWidth: 1 };
  const tickText = { fontFamily: fonts.mono, fontSize: 12.5, fill: colors.ink };
  const titleSize = phone ? 14 : 15.5;
  const titleText = { fontFamily: fonts.serif, fontSize: titleSize, fill: colors.ink };
  const long = (tick: Tick) => (tick.major ? 7 : 4);
  const middle = 0.5 * (box.left + box.right);
  return (
    <G>
      <Rect
        x={Math.round(box.left) + 0.5}
        y={Math.round(box.top) + 0.5}
        width={Math.round(box.right) - Math.round(box.left)}
        height={Math.round(box.bottom) - Math.round(box.top)}
        fill="none"
        {...line}
      />
      {lower.map((tick) => (
        <Line
          key={`l${tick.value}`}
          x1={z.at(tick.position)}
          x2={z.at(tick.position)}
          y1={box.bottom}
          y2={box.bottom - long(tick)}
          {...line}
        />
      ))}
      {upper.map((tick) => (
        <Line
          key={`u${tick.value}`}
          x1={z.at(tick.position)}
          x2={z.at(tick.position)}
          y1={box.top}
          y2={box.top + long(tick)}
          {...line}
        />
      ))}
      {side.map((tick) => (
        <G key={`s${tick.value}`}>
          <Line
            x1={box.left}
            x2={box.left + long(tick)}
            y1={x.at(tick.value)}
            y2={x.at(tick.value)}
            {...line}
          />
          <Line
            x1={box.right}
            x2={box.right - long(tick)}
            y1={x.at(tick.value)}
            y2={x.at(tick.value)}
            {...line}
          />
        </G>
      ))}
      {lower
        .filter((tick) => tick.major)
        .map((tick) => (
          <SvgText
            key={`lt${tick.value}`}
            x={z.at(tick.position)}
            y={box.bottom + 18}
            textAnchor="middle"
            {...tickText}
          >
            {String(tick.value)}
          </SvgText>
        ))}
      {labelled.map((tick) => (
        <SvgText
          key={`ut${tick.value}`}
          x={z.at(tick.position)}
          y={box.top - 7}
          textAnchor="middle"
          {...tickText}
        >
          {upperAxis === "age" ? tick.value.toFixed(1) : String(tick.value)}
        </SvgText>
      ))}
      {side
        .filter((tick) => tick.major)
        .map((tick) => (
          <SvgText
            key={`st${tick.value}`}
            x={box.left - 8}
            y={x.at(tick.value) + 4.5}
            textAnchor="end"
            {...tickText}
          >
            {logarithmic ? String(tick.value) : tick.value.toFixed(1)}
          </SvgText>
        ))}
      <SvgText x={middle} y={box.top - (phone ? 26 : 30)} textAnchor="middle" {...titleText}>
        {upperAxis === "age" ? "Cosmic age (Gyr)" : "Observed 21-cm frequency (MHz)"}
      </SvgText>
      <SvgText
        x={middle}
        y={Math.min(height - 8, box.bottom + (phone ? 38 : 42))}
        textAnchor="middle"
        {...titleText}
      >
        Redshift{" "}
        <TSpan fontStyle="italic" fontFamily={fonts.serif}>
          z
        </TSpan>
      </SvgText>
      <SvgText
        transform={`translate(${phone ? 15 : 18} ${0.5 * (box.top + box.bottom)}) rotate(-90)`}
        textAnchor="middle"
        {...titleText}
      >
        Neutral fraction{" "}
        <TSpan fontStyle="italic" fontFamily={fonts.serif}>
          x
        </TSpan>
        <TSpan fontSize={titleSize * 0.72} dy={3.5}>
          HI
        </TSpan>
      </SvgText>
    </G>
  );
});

/** Ages crowd at high redshift: steps of 0.1 Gyr while they are readable, else wider ones. */
function ageTicks(domain: Interval, ageOf: (z: number) => number): Tick[] {
  const span = Math.abs(ageOf(domain[0]) - ageOf(domain[1]));
  return span > 1.6
    ? derivedTicks(domain, ageOf, 0.5, 0.1)
    : derivedTicks(domain, ageOf, 0.1, 0.05);
}

function isEvenTenth(value: number): boolean {
  return Math.round(value * 10) % 2 === 1;
}
