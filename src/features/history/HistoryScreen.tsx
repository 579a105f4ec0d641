import { useCallback, useEffect, useMemo, useRef, useState } from "react";
import { useQuery } from "@apollo/client/react";
import { StyleSheet, useWindowDimensions, View } from "react-native";
import { filterInput } from "@/apollo/filterInput";
import { useSession } from "@/apollo/useSession";
import { useMeasuredWidth } from "@/charts/useMeasuredWidth";
import { Button, IconButton } from "@/components/Button";
import { Card, Divider } from "@/components/Card";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { useAddressFilter } from "@/components/filter/useAddressFilter";
import Icon from "@/components/Icon";
import { Caption, Dense } from "@/components/Text";
import { BottomPanel } from "@/layout/BottomPanel";
import { Screen } from "@/layout/Screen";
import { useLayoutClass } from "@/layout/useLayoutClass";
import { useTheme } from "@/theme/ThemeProvider";
import { space } from "@/theme/tokens";
import { HistoryConstraintsDocument, UsedSetsDocument } from "~graphql/generated/graphql";
import { background as backgroundOf } from "~shared/cosmology/background";
import type { CanonicalFilter } from "~shared/filter/filter";
import type { MethodFamily } from "~shared/methods/vocabulary";
import { FamilyLegend } from "./FamilyLegend";
import { FilterBar } from "./FilterBar";
import { HowDrawn } from "./HowDrawn";
import {
  LiveChart,
  LiveFigureSheet,
  LiveModelPanel,
  LivePointPanel,
  LiveReadouts,
  LiveScoreNote,
  LiveStrip,
  type StillChart,
} from "./Live";
import { ModelsProvider } from "./ModelsProvider";
import { PointTable } from "./PointTable";
import { stripGroups } from "./QuantityStrip";
import { chartPoints, historyRow } from "@/charts/rows";
import { decideByDefault, NO_SURROUNDINGS } from "./scoring";
import { useView } from "./useView";

const PLANCK = backgroundOf();
const ageOf = (z: number) => PLANCK.age(z);
const USUAL_DOMAIN = [5, 11] as const;

/** The axis is the usual one unless the filter asks for other redshifts. */
export function domainOf(
  filter: Pick<CanonicalFilter, "zFrom" | "zTo">,
): readonly [number, number] {
  const low = filter.zFrom === undefined ? USUAL_DOMAIN[0] : Math.floor(filter.zFrom);
  const high = filter.zTo === undefined ? USUAL_DOMAIN[1] : Math.ceil(filter.zTo);
  if (high - low >= 1) return [low, high];
  return filter.zFrom === undefined ? [Math.max(0, high - 6), high] : [low, low + 6];
}

/** The compiled history beside model histories. */
export function HistoryScreen() {
  const layout = useLayoutClass();
  const phone = layout === "compact";
  const wide = layout === "wide";
  const { scheme, colors } = useTheme();
  const window = useWindowDimensions();
  const session = useSession();
  const address = useAddressFilter();
  const view = useView();
  const { width, onLayout } = useMeasuredWidth();
  const [figureOpen, setFigureOpen] = useState(false);
  const [slidersOpen, setSlidersOpen] = useState(false);
  const [tableOpen, setTableOpen] = useState(false);

  // Families are filtered here, so that the legend can count what each of them would show.
  const families = address.filter.families;
  const asked = useMemo(
    () =>
      // Superseded records stand on the chart only when they are asked for.
      filterInput({
        ...address.filter,
        families: undefined,
        states: address.filter.states ?? ["current"],
      }),
    [address.filter],
  );
  const { data, previousData, loading, error, refetch } = useQuery(HistoryConstraintsDocument, {
    variables: { filter: asked },
  });
  const answer = data ?? previousData;
  const page = answer?.constraints;
  const fetched = useMemo(() => (page?.constraints ?? []).map(historyRow), [page]);
  const rows = useMemo(
    () => (families ? fetched.filter((row) => families.includes(row.family)) : fetched),
    [fetched, families],
  );
  const counts = useMemo(() => {
    const tally: Partial<Record<MethodFamily, number>> = {};
    for (const { family } of fetched) tally[family] = (tally[family] ?? 0) + 1;
    return tally;
  }, [fetched]);

  const { zFrom, zTo } = address.filter;
  const domain = useMemo(() => domainOf({ zFrom, zTo }), [zFrom, zTo]);
  const points = useMemo(() => chartPoints(rows), [rows]);
  const groups = useMemo(() => stripGroups(rows), [rows]);
  const inside = points.filter(({ plane }) => plane.z >= domain[0] && plane.z <= domain[1]);
  const outside = points.length - inside.length;
  const inStrip = groups.reduce((sum, group) => sum + group.rows.length, 0);
  const shownRows = useMemo(() => {
    const drawn = new Set([
      ...points
        .filter(({ plane }) => plane.z >= domain[0] && plane.z <= domain[1])
        .map(({ id }) => id),
      ...groups.flatMap((group) => group.rows.map(({ number }) => number)),
    ]);
    return rows.filter((row) => drawn.has(row.number));
  }, [rows, points, groups, domain]);

  const { data: setData } = useQuery(UsedSetsDocument);
  const sets = useMemo(
    () =>
      (setData?.correlatedSets ?? []).flatMap(({ number, usedRho, members }) =>
        usedRho
          ? [{ id: number, members: members.map((member) => member.number), rho: usedRho }]
          : [],
      ),
    [setData],
  );
  const around = answer?.tableSurroundings;
  const decided = useMemo(
    () => decideByDefault(shownRows, { ...(around ?? NO_SURROUNDINGS), sets }),
    [shownRows, around, sets],
  );
  const selected = rows.find((row) => row.number === view.point) ?? null;

  const { filter, setFilter } = address;
  const toggleFamily = useCallback(
    (family: MethodFamily) => {
      const chosen = filter.families ?? [];
      setFilter({
        ...filter,
        families: chosen.includes(family)
          ? chosen.filter((other) => other !== family)
          : [...chosen, family],
      });
    },
    [filter, setFilter],
  );
  const allFamilies = useCallback(
    () => setFilter({ ...filter, families: [] }),
    [filter, setFilter],
  );

  const panelOpen = phone && (selected !== null || slidersOpen);
  // The chart stays in sight above the panel, wherever the page was scrolled to.
  const chartArea = useRef<View>(null);
  useEffect(() => {
    if (!panelOpen) return;
    (chartArea.current as unknown as HTMLElement | null)?.scrollIntoView?.({ block: "start" });
  }, [panelOpen, view.point]);
  const chartWidth = width === null ? null : width - (phone ? 0 : 2);
  const chart: StillChart = {
    width: chartWidth ?? 0,
    height: chartHeight(layout, window.height, panelOpen),
    scheme,
    phone,
    ...(phone ? { ground: colors.paper } : {}),
    points,
    domain,
    upperAxis: view.upperAxis,
    ageOf,
    logarithmic: view.logarithmic,
    selectedId: selected?.number ?? null,
    onSelect: view.setPoint,
  };

  const lastEvent = page?.lastEvent;
  const total = page?.registryTotal ?? 0;
  const drawn = inside.length + inStrip;
  const source = lastEvent ? `To event ${lastEvent.sequence}, ${dayOf(lastEvent.at)}` : null;
  const subtitle = page
    ? [phone ? null : source, `${drawn} of ${total} constraints shown`].filter(Boolean).join(" · ")
    : undefined;

  return (
    <ModelsProvider decided={decided} background={PLANCK}>
      <Screen
        title="History"
        subtitle={subtitle}
        actions={
          <IconButton
            icon="tray-arrow-down"
            label="Download the figure"
            onPress={() => setFigureOpen(true)}
          />
        }
        aside={
          wide ? (
            <Inspector
              point={
                selected ? (
                  <LivePointPanel row={selected} onClose={() => view.setPoint(null)} />
                ) : null
              }
            >
              <LiveModelPanel />
              <Divider />
              <FamilyLegend
                counts={counts}
                chosen={families ?? []}
                onToggle={toggleFamily}
                onAll={allFamilies}
              />
              <Divider />
              <HowDrawn />
            </Inspector>
          ) : null
        }
      >
        {panelOpen ? null : (
          <FilterBar
            filter={filter}
            setFilter={setFilter}
            view={view}
            counts={counts}
            onToggleFamily={toggleFamily}
            phone={phone}
            wide={wide}
          />
        )}
        <View
          style={[
            phone
              ? styles.chartPhone
              : [styles.chart, { backgroundColor: colors.surface, borderColor: colors.hairline }],
          ]}
          onLayout={onLayout}
          ref={chartArea}
        >
          {page === undefined && error ? (
            <Failed
              title="The constraints did not arrive"
              error={error}
              onRetry={() => void refetch()}
            />
          ) : page === undefined ? (
            <View style={{ minHeight: chart.height }}>
              <Loading label="Fetching the constraints" rows={5} />
            </View>
          ) : chartWidth === null ? (
            <View style={{ height: chart.height }} />
          ) : (
            <LiveChart {...chart} />
          )}
        </View>
        {page !== undefined && drawn === 0 && !loading ? (
          <Card>
            {total === 0 ? (
              <Empty
                icon="chart-bell-curve-cumulative"
                title="No approved constraint yet"
                text="The chart fills as editors approve submissions. Model histories can be moved already."
                action={<Button label="Submit a constraint" kind="tonal" href="/desk" />}
              />
            ) : (
              <Empty
                title="No row matches"
                text={`${total} constraints are in the registry. Widen the redshift or clear the families.`}
                action={
                  <Button label="Clear the filter" kind="tonal" onPress={() => setFilter({})} />
                }
              />
            )}
          </Card>
        ) : null}
        {wide ? (
          <LiveReadouts wide />
        ) : (
          <Card style={phone ? styles.flush : undefined}>
            <LiveReadouts wide={false} />
            <View style={styles.adjust}>
              <Button
                label="Model histories"
                kind="outline"
                icon="tune-vertical"
                onPress={() => {
                  view.setPoint(null);
                  setSlidersOpen(true);
                }}
              />
            </View>
          </Card>
        )}
        <View>
          <LiveScoreNote rows={shownRows} />
          {outside > 0 ? (
            <View style={styles.outside}>
              <Caption>
                {outside === 1 ? "One constraint lies" : `${outside} constraints lie`} outside
                redshift {domain[0]} to {domain[1]}.
              </Caption>
              <Button
                label="Widen the axis"
                kind="text"
                onPress={() => {
                  const zs = points.map(({ plane }) => plane.z);
                  setFilter({
                    ...filter,
                    zFrom: Math.min(domain[0], Math.floor(Math.min(...zs))),
                    zTo: Math.max(domain[1], Math.ceil(Math.max(...zs))),
                  });
                }}
              />
            </View>
          ) : null}
        </View>
        <Cautions complete={lastEvent ? dayOf(lastEvent.at) : null} />
        <LiveStrip groups={groups} selected={view.point} onSelect={view.setPoint} />
        {!wide && !phone ? (
          <Card>
            <FamilyLegend
              counts={counts}
              chosen={families ?? []}
              onToggle={toggleFamily}
              onAll={allFamilies}
            />
            <HowDrawn />
          </Card>
        ) : null}
        {phone ? <HowDrawn /> : null}
        {shownRows.length > 0 ? (
          <View>
            <Button
              label={tableOpen ? "Hide the table" : "Show the points as a table"}
              kind="text"
              icon="table"
              onPress={() => setTableOpen(!tableOpen)}
            />
            {tableOpen ? <PointTable rows={shownRows} onOpen={view.setPoint} /> : null}
          </View>
        ) : null}

        {!wide && selected ? (
          <BottomPanel label="Point" height={0.6}>
            <LivePointPanel row={selected} onClose={() => view.setPoint(null)} />
          </BottomPanel>
        ) : !wide && slidersOpen ? (
          <BottomPanel label="Model histories" height={0.52}>
            <LiveModelPanel
              trailing={
                <IconButton
                  icon="close"
                  label="Close the sliders"
                  onPress={() => setSlidersOpen(false)}
                />
              }
            />
          </BottomPanel>
        ) : null}
        <LiveFigureSheet
          visible={figureOpen}
          onClose={() => setFigureOpen(false)}
          chart={chart}
          rows={shownRows}
          source={
            source ? `Fogline registry, ${source.charAt(0).toLowerCase()}${source.slice(1)}.` : ""
          }
          demonstration={session.demonstration}
        />
      </Screen>
    </ModelsProvider>
  );
}

function Inspector({ point, children }: { point: React.ReactNode; children: React.ReactNode }) {
  return (
    <View style={styles.inspector}>
      {point}
      {point ? <Divider /> : null}
      {children}
    </View>
  );
}

function Cautions({ complete }: { complete: string | null }) {
  const { colors } = useTheme();
  return (
    <View style={styles.cautions} role="note">
      <Icon name="information-outline" size={20} color={colors.muted} />
      <Dense muted style={styles.cautionWords}>
        Points may share data; error bars mix levels; arrows are not walls. Optical depth uses the
        volume average and leaves out residual electrons; a tanh can’t show a long early tail.
        Inclusion is no endorsement{complete ? `; complete up to ${complete}` : ""}.
      </Dense>
    </View>
  );
}

function chartHeight(
  layout: "compact" | "medium" | "wide",
  windowHeight: number,
  panelOpen: boolean,
): number {
  if (layout === "compact") return panelOpen ? Math.max(230, windowHeight * 0.4 - 104) : 420;
  return Math.min(640, Math.max(380, windowHeight - 350));
}

function dayOf(iso: string): string {
  return new Date(iso).toLocaleDateString("en-GB", {
    day: "numeric",
    month: "long",
    year: "numeric",
    timeZone: "UTC",
  });
}

const styles = StyleSheet.create({
  chart: { borderWidth: 1, borderRadius: 12, overflow: "hidden" },
  chartPhone: { marginHorizontal: -space.m },
  outside: { flexDirection: "row", alignItems: "center", flexWrap: "wrap" },
  flush: { borderRadius: 0, marginHorizontal: -space.m, borderLeftWidth: 0, borderRightWidth: 0 },
  adjust: { flexDirection: "row", paddingTop: space.s },
  inspector: { padding: space.l, paddingTop: space.m, gap: space.m },
  cautions: { flexDirection: "row", gap: space.xs, alignItems: "flex-start" },
  cautionWords: { flex: 1 },
});
