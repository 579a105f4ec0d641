import { useState } from "react";
import { StyleSheet, View } from "react-native";
import { HistoryLine } from "@/charts/HistoryLine";
import { Button } from "@/components/Button";
import { DataTable } from "@/components/DataTable";
import { Press } from "@/components/Press";
import { Sheet } from "@/components/Sheet";
import { Caption, Dense, Label, Mono, SymbolText } from "@/components/Text";
import { useColors } from "@/theme/ThemeProvider";
import { fonts, radius, space, target } from "@/theme/tokens";
import type { HistoryRow } from "@/charts/rows";
import { MODEL_KINDS } from "./models";
import { shownNumber } from "./readouts";
import type { Overlay } from "./useOverlays";

interface Column {
  key: string;
  title: React.ReactNode;
  words: string;
  text: (overlay: Overlay) => string;
}

const COLUMNS: readonly Column[] = [
  {
    key: "depth",
    title: "Optical depth",
    words: "Optical depth",
    text: ({ readout }) => shownNumber(readout.opticalDepth, 4),
  },
  {
    key: "early",
    title: (
      <>
        of it, <SymbolText muted>z</SymbolText> 15 to 30
      </>
    ),
    words: "of it, z 15 to 30",
    text: ({ readout }) => shownNumber(readout.earlyDepth, 4),
  },
  {
    key: "midpoint",
    title: "Midpoint",
    words: "Midpoint",
    text: ({ readout }) => shownNumber(readout.midpoint, 2),
  },
  {
    key: "age",
    title: "Age there (Myr)",
    words: "Age there (Myr)",
    text: ({ readout }) => shownNumber(readout.ageMyr, 0),
  },
  {
    key: "duration",
    title: "Duration",
    words: "Duration",
    text: ({ readout }) => shownNumber(readout.duration, 2),
  },
  {
    key: "durationMyr",
    title: "Duration (Myr)",
    words: "Duration (Myr)",
    text: ({ readout }) => shownNumber(readout.durationMyr, 0),
  },
  {
    key: "score",
    title: (
      <>
        −2 ln <SymbolText muted>L</SymbolText>
      </>
    ),
    words: "−2 ln L",
    text: ({ score }) => (score.scored === 0 ? "no row" : shownNumber(score.minus2LnL, 1)),
  },
];

/** Numbers of the histories over the wide chart: a row each. */
export function ReadoutTable({ overlays }: { overlays: readonly Overlay[] }) {
  const colors = useColors();
  const cell = { padding: "6px 4px", borderTop: `1px solid ${colors.hairline}` } as const;
  return (
    <table
      style={{
        width: "100%",
        borderCollapse: "collapse",
        fontFamily: fonts.sans,
        fontSize: 14,
        color: colors.ink,
      }}
    >
      <caption className="fogline-hidden">Readouts of the model histories</caption>
      <thead>
        <tr>
          <th scope="col" style={{ textAlign: "left", padding: 4, fontWeight: 400 }}>
            <Dense muted>History</Dense>
          </th>
          {COLUMNS.map((column) => (
            <th
              key={column.key}
              scope="col"
              style={{ textAlign: "right", padding: 4, fontWeight: 400, whiteSpace: "nowrap" }}
            >
              <Dense muted>{column.title}</Dense>
            </th>
          ))}
        </tr>
      </thead>
      <tbody>
        {overlays.map((overlay) => (
          <tr key={overlay.id} style={{ height: 40 }}>
            <th scope="row" style={{ ...cell, textAlign: "left" }}>
              <View style={styles.name}>
                <HistoryLine look={overlay.look} />
                <Label>{overlay.name}</Label>
              </View>
            </th>
            {COLUMNS.map((column) => (
              <td key={column.key} style={{ ...cell, textAlign: "right" }}>
                <Mono style={styles.readout}>{column.text(overlay)}</Mono>
              </td>
            ))}
          </tr>
        ))}
      </tbody>
    </table>
  );
}

/** The same on a phone: one history at a time, the others a touch away. */
export function ReadoutBlock({ overlays }: { overlays: readonly Overlay[] }) {
  const colors = useColors();
  const [chosen, setChosen] = useState<string | null>(null);
  const active = overlays.find(({ id }) => id === chosen) ?? overlays[0];
  if (!active) return null;
  return (
    <View style={styles.block}>
      <View style={styles.tabs} role="group" aria-label="History read out">
        {overlays.map((overlay) => {
          const on = overlay.id === active.id;
          return (
            <Press
              key={overlay.id}
              onPress={() => setChosen(overlay.id)}
              attributes={{ "aria-pressed": on }}
              style={[styles.tab, on && { backgroundColor: colors.petrolTint }]}
            >
              <View style={styles.tabContent}>
                <HistoryLine look={overlay.look} width={30} />
                <View>
                  <Label muted={!on}>{overlay.name}</Label>
                  <Caption>
                    {MODEL_KINDS[overlay.model.kind].parameters.map((parameter, index) => (
                      <Caption key={parameter.key}>
                        {index > 0 ? ", " : ""}
                        <SymbolText muted>{parameter.symbol}</SymbolText>{" "}
                        <Mono muted>
                          {(overlay.model.values[parameter.key] ?? 0).toFixed(parameter.digits)}
                        </Mono>
                      </Caption>
                    ))}
                  </Caption>
                </View>
              </View>
            </Press>
          );
        })}
      </View>
      <dl
        style={{
          display: "grid",
          gridTemplateColumns: "repeat(4, minmax(0, auto))",
          gap: "12px 8px",
          margin: 0,
        }}
      >
        {[0, 2, 4, 6, 1, 3, 5].map((at) => {
          const column = COLUMNS[at];
          if (!column) return null;
          return (
            <div key={column.key}>
              <dt>
                <Caption>{column.title}</Caption>
              </dt>
              <dd style={{ margin: 0 }}>
                <Mono style={styles.readout}>{column.text(active)}</Mono>
              </dd>
            </div>
          );
        })}
      </dl>
    </View>
  );
}

/** What is not taken as independent: rows with a printed matrix. */
function setWords({ score: { sets } }: Overlay): string {
  if (sets.length === 0) return "";
  const rows = sets.reduce((sum, { members }) => sum + members.length, 0);
  return sets.length === 1
    ? `, but for ${rows} rows of ${sets[0]?.id ?? "a correlated set"} with their matrix`
    : `, but for ${rows} rows of ${sets.length} correlated sets with their matrices`;
}

/** How many rows the scores rest on, and on touch which are left out and why. */
export function ScoreNote({
  overlays,
  rows,
}: {
  overlays: readonly Overlay[];
  rows: readonly HistoryRow[];
}) {
  const [open, setOpen] = useState(false);
  const first = overlays[0];
  if (!first) return null;
  const left = new Map<string, string>();
  for (const { score, name } of overlays) {
    for (const { id, reason } of score.reasons) {
      if (!left.has(id))
        left.set(
          id,
          overlays.every(({ score: other }) => other.reasons.some((r) => r.id === id))
            ? reason
            : `${name}: ${reason}`,
        );
    }
  }
  const scored = first.score.scored;
  return (
    <View style={styles.note}>
      <Caption style={styles.noteText}>
        −2 ln <SymbolText muted>L</SymbolText> over {scored} of {rows.length} rows shown, with
        default decisions and taken as independent{setWords(first)}. Duration from{" "}
        <SymbolText muted>x_HI</SymbolText> 0.75 to 0.25.
      </Caption>
      {left.size > 0 ? (
        <Button
          label={left.size === 1 ? "1 row left out: why" : `${left.size} rows left out: why`}
          kind="text"
          onPress={() => setOpen(true)}
        />
      ) : null}
      <Sheet visible={open} title="Rows left out of −2 ln L" onClose={() => setOpen(false)}>
        <Dense muted>
          They stay in the chart. A fitting table settles such choices one by one and records them.
        </Dense>
        <DataTable
          caption="Rows left out and why"
          columns={[
            { key: "number", title: "Record" },
            { key: "source", title: "Source" },
            { key: "reason", title: "Why" },
          ]}
          rows={[...left].map(([id, reason]) => ({
            number: id,
            source: rows.find((row) => row.number === id)?.citation.shortName ?? "",
            reason,
          }))}
          rowKey={(row) => row.number}
        />
      </Sheet>
    </View>
  );
}

const styles = StyleSheet.create({
  name: { flexDirection: "row", alignItems: "center", gap: space.s },
  readout: { fontSize: 18, lineHeight: 24, fontWeight: "500" },
  block: { gap: space.s },
  tabs: { flexDirection: "row", flexWrap: "wrap", gap: space.xxs, marginHorizontal: -space.xs },
  tab: { borderRadius: radius.chip, minHeight: target, justifyContent: "center" },
  tabContent: {
    flexDirection: "row",
    alignItems: "center",
    gap: space.xs,
    paddingHorizontal: space.xs,
    paddingVertical: space.xxs,
  },
  note: { flexDirection: "row", alignItems: "center", flexWrap: "wrap", columnGap: space.xs },
  noteText: { flexShrink: 1 },
});
