import { useState } from "react";
import { StyleSheet, View } from "react-native";

import { Button } from "@/components/Button";
import { RadioRows } from "@/components/CheckRow";
import { Field } from "@/components/Field";
import { Caption, Dense, Label, Section } from "@/components/Text";
import { useColors } from "@/theme/ThemeProvider";
import { space } from "@/theme/tokens";
import type { DecisionPartsFragment } from "~graphql/generated/graphql";
import { DECISION_WORDS, REASON_LONGEST } from "~shared/table/decision";

import { DecisionNumber } from "./DecisionNumber";
import type { DecisionChoice } from "./useTableDraft";

interface Props {
  decisions: readonly DecisionPartsFragment[];
  choices: Readonly<Record<string, DecisionChoice>>;
  onDecide: (id: string, choice: DecisionChoice | null) => void;
  onTakeProposals: () => void;
}

/** What the literature leaves open: nothing is preselected, each proposal is tagged and says why. */
export function Decisions({ decisions, choices, onDecide, onTakeProposals }: Props) {
  const [showTaken, setShowTaken] = useState(false);
  const open = decisions.filter(({ taken }) => taken === null);
  const taken = decisions.filter((decision) => decision.taken !== null);
  // An override is never proposed, so every open proposal can be taken in one tap.
  return (
    <View style={styles.all}>
      <View style={styles.head}>
        <Section>Decisions</Section>
        <Label>{open.length === 0 ? "None open" : `${open.length} open`}</Label>
      </View>
      {decisions.length === 0 ? <Dense muted>These rows leave nothing open.</Dense> : null}
      {decisions.map((decision, index) =>
        decision.taken === null || showTaken ? (
          <OneDecision
            key={decision.id}
            number={index + 1}
            decision={decision}
            choice={choices[decision.id] ?? null}
            onDecide={(choice) => onDecide(decision.id, choice)}
          />
        ) : null,
      )}
      <View style={styles.buttons}>
        {open.length > 0 ? (
          <Button
            label={
              open.length === 1 ? "Take it as proposed" : `Take all ${open.length} as proposed`
            }
            kind="tonal"
            icon="check-all"
            onPress={onTakeProposals}
          />
        ) : null}
        {taken.length > 0 ? (
          <Button
            label={showTaken ? "Hide those taken" : `Show ${taken.length} taken`}
            kind="text"
            icon={showTaken ? "chevron-up" : "chevron-down"}
            onPress={() => setShowTaken((before) => !before)}
          />
        ) : null}
      </View>
    </View>
  );
}

function OneDecision({
  number,
  decision,
  choice,
  onDecide,
}: {
  number: number;
  decision: DecisionPartsFragment;
  choice: DecisionChoice | null;
  onDecide: (choice: DecisionChoice | null) => void;
}) {
  const colors = useColors();
  const { options, proposed, because, taken, words, kind } = decision;
  const chosen = options.find(({ code }) => code === choice?.option) ?? null;
  const needsReason = chosen !== null && (chosen.override || chosen.code !== proposed);
  return (
    <View
      role="group"
      aria-label={`Decision ${number}, ${DECISION_WORDS[kind]}`}
      style={[styles.decision, { borderColor: colors.hairline }]}
    >
      <View style={styles.title}>
        <DecisionNumber number={number} open={taken === null} />
        <Label>{DECISION_WORDS[kind]}</Label>
      </View>
      <View style={styles.body}>
        <Dense>{words}</Dense>
        <RadioRows
          label={DECISION_WORDS[kind]}
          value={chosen?.code ?? null}
          options={options.map((option) => ({
            value: option.code,
            label: option.words,
            ...(option.code === proposed ? { tag: "proposed", hint: `Proposed: ${because}.` } : {}),
          }))}
          onChange={(code) =>
            onDecide({
              option: code,
              byDefault: code === proposed,
              reason: choice?.reason ?? "",
            })
          }
        />
        {needsReason ? (
          <Field
            label="Why, in a few words"
            value={choice?.reason ?? ""}
            onChangeText={(reason) => onDecide({ option: chosen.code, byDefault: false, reason })}
            maxLength={REASON_LONGEST}
            hint={taken === null ? "Every download carries it." : undefined}
          />
        ) : null}
        {taken !== null ? (
          <View style={styles.taken}>
            <Caption muted>{decision.byDefault ? "Taken as proposed." : "Taken by you."}</Caption>
            <Button label="Open it again" kind="text" icon="undo" onPress={() => onDecide(null)} />
          </View>
        ) : null}
      </View>
    </View>
  );
}

const styles = StyleSheet.create({
  all: { gap: space.m },
  head: { flexDirection: "row", alignItems: "baseline", justifyContent: "space-between" },
  decision: { borderTopWidth: 1, paddingTop: space.m, gap: space.xs },
  title: { flexDirection: "row", alignItems: "center", gap: space.s },
  body: { gap: space.xs, paddingLeft: 40 },
  taken: { flexDirection: "row", alignItems: "center", flexWrap: "wrap", gap: space.xs },
  buttons: { flexDirection: "row", flexWrap: "wrap", gap: space.s },
});
