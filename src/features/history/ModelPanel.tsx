import { memo, type ReactNode, useState } from "react";
import { StyleSheet, View } from "react-native";
import { HistoryLine } from "@/charts/HistoryLine";
import { HISTORY_LOOKS, historyLine } from "@/charts/looks";
import { Button, IconButton } from "@/components/Button";
import { Divider } from "@/components/Card";
import { Slider } from "@/components/Slider";
import { Caption, Dense, Label, Mono, Section, SymbolText } from "@/components/Text";
import { useColors } from "@/theme/ThemeProvider";
import { space, target } from "@/theme/tokens";
import { MAX_MODELS, type Model, MODEL_KINDS, modelNames } from "./models";
import type { Models } from "./useModels";

/** Up to three model histories with their live sliders. */
export function ModelPanel({ state, trailing }: { state: Models; trailing?: ReactNode }) {
  const { models, add } = state;
  const names = modelNames(models);
  const full = models.length >= MAX_MODELS;
  const [adding, setAdding] = useState(false);
  return (
    <View style={styles.all}>
      <View style={styles.headline}>
        <Section style={styles.heading}>Model histories</Section>
        {full ? null : (
          <Button
            label="Add"
            kind="text"
            icon="plus"
            accessibilityLabel="Add a history"
            onPress={() => setAdding(!adding)}
          />
        )}
        {trailing}
      </View>
      {full || !adding ? null : (
        <View style={styles.add}>
          {(["tanh", "powerLaw"] as const).map((kind) => (
            <Button
              key={kind}
              label={kind === "tanh" ? "A tanh" : "A power law"}
              kind="tonal"
              onPress={() => {
                add(kind);
                setAdding(false);
              }}
            />
          ))}
        </View>
      )}
      {models.length === 0 ? (
        <Dense muted>No history is drawn. Add one to lay it over the constraints.</Dense>
      ) : null}
      {models.map((model, index) => (
        <View key={model.id} style={styles.model}>
          {index > 0 ? <Divider /> : null}
          <ModelSliders
            model={model}
            name={names[index] ?? ""}
            index={index}
            change={state.change}
            toggle={state.toggle}
            remove={state.remove}
          />
        </View>
      ))}
      {full ? (
        <Caption>Three histories fit into the chart. Remove one to add another.</Caption>
      ) : null}
    </View>
  );
}

const ModelSliders = memo(function ModelSliders({
  model,
  name,
  index,
  change,
  toggle,
  remove,
}: {
  model: Model;
  name: string;
  index: number;
  change: Models["change"];
  toggle: Models["toggle"];
  remove: Models["remove"];
}) {
  const colors = useColors();
  const look = HISTORY_LOOKS[index] ?? "third";
  const { parameters } = MODEL_KINDS[model.kind];
  return (
    <View role="group" aria-label={`History ${name}`}>
      <View style={styles.head}>
        <HistoryLine look={look} />
        <View style={styles.name}>
          <Label>{name}</Label>
          {index === 0 && model.visible ? <Caption>carries the fog</Caption> : null}
          {model.kind === "powerLaw" && index > 0 ? (
            <Caption>
              <SymbolText muted>z_early</SymbolText> <Mono muted>20</Mono>
            </Caption>
          ) : null}
        </View>
        <IconButton
          icon={model.visible ? "eye-outline" : "eye-off-outline"}
          label={model.visible ? `Hide ${name}` : `Show ${name}`}
          onPress={() => toggle(model.id)}
        />
        <IconButton icon="close" label={`Remove ${name}`} onPress={() => remove(model.id)} small />
      </View>
      {model.visible
        ? parameters.map((parameter) => (
            <Slider
              key={parameter.key}
              label={parameter.name}
              symbol={parameter.symbol}
              context={name}
              value={model.values[parameter.key] ?? parameter.start}
              min={parameter.min}
              max={parameter.max}
              step={parameter.step}
              digits={parameter.digits}
              tone={historyLine(look, colors).stroke}
              onChange={(value) => change(model.id, parameter.key, value)}
            />
          ))
        : null}
    </View>
  );
});

const styles = StyleSheet.create({
  all: { gap: space.xxs },
  headline: {
    flexDirection: "row",
    alignItems: "center",
    minHeight: target,
  },
  heading: { flex: 1 },
  model: { gap: space.xxs },
  head: { flexDirection: "row", alignItems: "center", minHeight: target },
  name: {
    flex: 1,
    flexDirection: "row",
    flexWrap: "wrap",
    alignItems: "baseline",
    columnGap: space.s,
    paddingLeft: space.s,
  },
  add: { flexDirection: "row", flexWrap: "wrap", gap: space.xs, paddingBottom: space.xs },
});
