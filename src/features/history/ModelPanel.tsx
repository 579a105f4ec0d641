import { memo } from "react";
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
export function ModelPanel({ state, heading = true }: { state: Models; heading?: boolean }) {
  const { models, add } = state;
  const names = modelNames(models);
  const full = models.length >= MAX_MODELS;
  return (
    <View style={styles.all}>
      {heading ? <Section style={styles.heading}>Model histories</Section> : null}
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
      ) : (
        <View style={styles.add}>
          <Button label="Add a tanh" kind="text" icon="plus" onPress={() => add("tanh")} />
          <Button label="Add a power law" kind="text" icon="plus" onPress={() => add("powerLaw")} />
        </View>
      )}
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
  heading: { minHeight: target, paddingTop: space.xs },
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
  add: { flexDirection: "row", flexWrap: "wrap", marginLeft: -space.s },
});
