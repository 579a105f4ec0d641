import { useRef, useState } from "react";
import { StyleSheet, View } from "react-native";
import { download, embeddedFaces, pngOf } from "@/charts/figureFile";
import { type HistoryChartProps, HistoryDrawing } from "@/charts/HistoryChart";
import { Button } from "@/components/Button";
import { Notice } from "@/components/Notice";
import { Sheet } from "@/components/Sheet";
import { Dense } from "@/components/Text";
import { space } from "@/theme/tokens";
import { FIGURE, figureSvg } from "./exportFigure";
import type { HistoryRow } from "@/charts/rows";
import type { Overlay } from "./useOverlays";

/** The chart as a file: the same drawing at its own size, light, with legend and citations. */
export function FigureSheet({
  visible,
  onClose,
  chart,
  rows,
  overlays,
  source,
  demonstration,
}: {
  visible: boolean;
  onClose: () => void;
  chart: HistoryChartProps;
  rows: readonly HistoryRow[];
  overlays: readonly Overlay[];
  source: string;
  demonstration: boolean;
}) {
  const drawing = useRef<HTMLDivElement>(null);
  const [busy, setBusy] = useState<"svg" | "png" | null>(null);
  const [problem, setProblem] = useState<string | null>(null);

  async function make(kind: "svg" | "png") {
    const svg = drawing.current?.querySelector("svg");
    if (!svg) return;
    setBusy(kind);
    setProblem(null);
    try {
      const text = figureSvg({
        drawing: new XMLSerializer().serializeToString(svg),
        rows,
        overlays,
        source,
        demonstration,
        faces: await embeddedFaces(),
      });
      const blob = kind === "svg" ? new Blob([text], { type: "image/svg+xml" }) : await pngOf(text);
      download(blob, `fogline-history.${kind}`);
    } catch (error) {
      setProblem(error instanceof Error ? error.message : "The figure could not be made.");
    } finally {
      setBusy(null);
    }
  }

  return (
    <Sheet visible={visible} title="Download the figure" onClose={onClose}>
      <Dense>
        The chart as it stands, with its legend, the model histories and the citation keys of all
        papers shown. Their BibTeX entries are in the list’s .bib file on Constraints.
      </Dense>
      <View style={styles.actions}>
        <Button
          label="SVG"
          kind="filled"
          icon="tray-arrow-down"
          accessibilityLabel="Download as SVG"
          busy={busy === "svg"}
          onPress={() => void make("svg")}
        />
        <Button
          label="PNG"
          kind="tonal"
          icon="tray-arrow-down"
          accessibilityLabel="Download as PNG"
          busy={busy === "png"}
          onPress={() => void make("png")}
        />
      </View>
      {problem ? <Notice grade="error">{problem}</Notice> : null}
      <div ref={drawing} hidden aria-hidden>
        <HistoryDrawing
          {...chart}
          width={FIGURE.width}
          height={FIGURE.height}
          scheme="light"
          phone={false}
          ground={undefined}
          selectedId={null}
        />
      </div>
    </Sheet>
  );
}

const styles = StyleSheet.create({
  actions: { flexDirection: "row", gap: space.s, flexWrap: "wrap" },
});
