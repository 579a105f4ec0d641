import { useDeferredValue, useMemo } from "react";
import { type ChartHistory, HistoryChart, type HistoryChartProps } from "@/charts/HistoryChart";
import { FigureSheet } from "./FigureSheet";
import { ModelPanel } from "./ModelPanel";
import { useLive } from "./ModelsProvider";
import { PointPanel } from "./PointPanel";
import { QuantityStrip, type StripGroup } from "./QuantityStrip";
import { ReadoutBlock, ReadoutTable, ScoreNote } from "./Readouts";
import type { HistoryRow } from "@/charts/rows";

export type StillChart = Omit<HistoryChartProps, "histories">;

function useHistories(): readonly (ChartHistory | null)[] {
  const { overlays } = useLive();
  return useMemo(
    () =>
      overlays.map((overlay) =>
        overlay === null ? null : { id: overlay.id, history: overlay.history },
      ),
    [overlays],
  );
}

export function LiveChart(chart: StillChart) {
  return <HistoryChart {...chart} histories={useHistories()} />;
}

export function LiveReadouts({ wide }: { wide: boolean }) {
  const { visible } = useLive();
  if (visible.length === 0) return null;
  return wide ? <ReadoutTable overlays={visible} /> : <ReadoutBlock overlays={visible} />;
}

export function LiveScoreNote({ rows }: { rows: readonly HistoryRow[] }) {
  return <ScoreNote overlays={useLive().visible} rows={rows} />;
}

/** May lag behind a fast slider: the curve and its readouts come first. */
export function LiveStrip(props: {
  groups: readonly StripGroup[];
  selected: string | null;
  onSelect: (number: string) => void;
}) {
  const overlays = useDeferredValue(useLive().visible);
  return <QuantityStrip {...props} overlays={overlays} />;
}

export function LiveModelPanel({ trailing }: { trailing?: React.ReactNode }) {
  return <ModelPanel state={useLive().state} trailing={trailing} />;
}

export function LivePointPanel({ row, onClose }: { row: HistoryRow; onClose: () => void }) {
  const overlays = useDeferredValue(useLive().visible);
  return <PointPanel row={row} overlays={overlays} onClose={onClose} />;
}

export function LiveFigureSheet({
  chart,
  ...rest
}: {
  visible: boolean;
  onClose: () => void;
  chart: StillChart;
  rows: readonly HistoryRow[];
  source: string;
  demonstration: boolean;
}) {
  const { visible: overlays } = useLive();
  const histories = useHistories();
  return <FigureSheet {...rest} overlays={overlays} chart={{ ...chart, histories }} />;
}
