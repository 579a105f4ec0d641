import { useState } from "react";
import { View } from "react-native";

import { Card } from "@/components/Card";
import { Chip } from "@/components/Chip";
import { DataTable } from "@/components/DataTable";
import Icon from "@/components/Icon";
import { NotationText } from "@/components/NotationText";
import { plainFields } from "@/components/statement/plainFields";
import { Caption, Dense, Label, Mono } from "@/components/Text";
import { useLayoutClass } from "@/layout/useLayoutClass";
import { useColors } from "@/theme/ThemeProvider";
import type { FieldName } from "~shared/statement/fields";
import { notationAsPrinted } from "~shared/statement/notation";
import { FIELD_NAMES } from "~shared/statement/words";

import type { Preview } from "./useImport";

type Row = Preview["rows"][number];
type Outcome = "good" | "refused" | "alreadyHere";

function outcomeOf({ outcome }: Row): Outcome {
  if (/refus/i.test(outcome)) return "refused";
  return /already/i.test(outcome) ? "alreadyHere" : "good";
}

const OUTCOMES: Record<
  Outcome,
  { word: string; icon: "check" | "close-circle-outline" | "equal" }
> = {
  good: { word: "becomes a draft", icon: "check" },
  refused: { word: "refused", icon: "close-circle-outline" },
  alreadyHere: { word: "already here", icon: "equal" },
};

/** Every row of the list with what will become of it. */
export function PreviewStep({ preview }: { preview: Preview }) {
  const phone = useLayoutClass() === "compact";
  const [only, setOnly] = useState<Outcome | null>(null);
  const rows = preview.rows.filter((row) => only === null || outcomeOf(row) === only);
  const counts: [Outcome, string, number][] = [
    ["good", "Good", preview.good],
    ["refused", "Refused", preview.refused],
    ["alreadyHere", "Already here", preview.alreadyHere],
  ];
  return (
    <View style={{ gap: 16 }}>
      <View
        role="group"
        aria-label="Show rows"
        style={{ flexDirection: "row", flexWrap: "wrap", gap: 8 }}
      >
        {counts.map(([outcome, word, count]) => (
          <Chip
            key={outcome}
            label={word}
            count={count}
            selected={only === outcome}
            onPress={() => setOnly(only === outcome ? null : outcome)}
          />
        ))}
      </View>
      {phone ? (
        <View role="list" aria-label="Rows of the file" style={{ gap: 12 }}>
          {rows.map((row) => (
            <View key={row.line} role="listitem">
              <Card style={{ gap: 8 }}>
                <View style={{ flexDirection: "row", justifyContent: "space-between", gap: 8 }}>
                  <Label>{row.citationShortName ?? (row.key || "No key")}</Label>
                  <Caption>{`line ${row.line}`}</Caption>
                </View>
                <OutcomeWord row={row} />
                <Statement row={row} />
                <About row={row} />
              </Card>
            </View>
          ))}
        </View>
      ) : (
        <Card flush>
          <DataTable
            caption="Rows of the file"
            columns={[
              { key: "line", title: "Line", numeric: true },
              { key: "paper", title: "Paper" },
              { key: "statement", title: "As printed" },
              { key: "outcome", title: "Outcome" },
              { key: "about", title: "Reasons and open fields" },
            ]}
            rows={rows.map((row) => ({
              line: <Mono>{row.line}</Mono>,
              paper: <Dense>{row.citationShortName ?? (row.key || "No key")}</Dense>,
              statement: <Statement row={row} />,
              outcome: <OutcomeWord row={row} />,
              about: <About row={row} />,
              key: row.line,
            }))}
            rowKey={({ key }) => String(key)}
          />
        </Card>
      )}
    </View>
  );
}

function OutcomeWord({ row }: { row: Row }) {
  const colors = useColors();
  const outcome = outcomeOf(row);
  const { word, icon } = OUTCOMES[outcome];
  const color = outcome === "refused" ? colors.emberText : colors.primary;
  return (
    <View style={{ flexDirection: "row", alignItems: "center", gap: 6 }}>
      <Icon name={icon} size={18} color={color} />
      <Label style={{ color }}>{word}</Label>
    </View>
  );
}

function Statement({ row }: { row: Row }) {
  if (!row.fields) return <Dense muted>can&apos;t be read</Dense>;
  const fields = plainFields(row.fields);
  return (
    <View style={{ flexDirection: "row", flexWrap: "wrap", alignItems: "center", gap: 8 }}>
      <NotationText notation={notationAsPrinted(fields)} size="row" symbol tail />
      {fields.z ? <Dense muted>{`z = ${fields.z}`}</Dense> : null}
    </View>
  );
}

function About({ row }: { row: Row }) {
  const open = row.openFields.map((name) => lower(FIELD_NAMES[name as FieldName] ?? name));
  return (
    <View style={{ gap: 4 }}>
      {row.refusals.map((refusal, index) => (
        <Dense key={index}>
          {`${refusal.file}, line ${refusal.line}${refusal.column ? `, column ${refusal.column}` : ""}: ${refusal.reason}`}
        </Dense>
      ))}
      {outcomeOf(row) === "good" && open.length > 0 ? (
        <Caption>{`Stays open: ${open.join(", ")}`}</Caption>
      ) : null}
    </View>
  );
}

function lower(text: string): string {
  return text.charAt(0).toLowerCase() + text.slice(1);
}
