import { StyleSheet, View } from "react-native";

import { Button } from "@/components/Button";
import { CheckRow } from "@/components/CheckRow";
import { Field } from "@/components/Field";
import { Marker } from "@/components/Marker";
import { NotationText } from "@/components/NotationText";
import { Caption, Dense, Mono } from "@/components/Text";
import { useColors } from "@/theme/ThemeProvider";
import { space } from "@/theme/tokens";
import { familyOf } from "~shared/methods/vocabulary";
import { notationAsPrinted, recordTitle } from "~shared/statement/notation";

import type { TableConstraint } from "./TableRows";
import type { RowChoice } from "./useTableDraft";

export interface BuiltRow {
  constraint: TableConstraint;
  included: boolean;
  reason: string;
  /** A person's choice rather than the proposal. */
  chosen: boolean;
  proposedIn: boolean;
  proposedReason: string | null;
  cautions: readonly string[];
}

/** One candidate: in or out, why, and what to know about it. */
export function BuilderRow({
  row,
  highlighted,
  onChoose,
}: {
  row: BuiltRow;
  highlighted: boolean;
  onChoose: (choice: RowChoice | null) => void;
}) {
  const colors = useColors();
  const { constraint, included, reason, proposedIn, proposedReason, cautions } = row;
  const { fields, citation, number } = constraint;
  const family = familyOf(fields.methodTags);
  const against = included !== proposedIn;
  return (
    <View style={[styles.row, highlighted && { backgroundColor: colors.petrolTint }]}>
      <View style={styles.line}>
        <View style={styles.grow}>
          <CheckRow
            label={`${citation.shortName}: ${recordTitle(fields)}`}
            checked={included}
            onChange={(next) =>
              onChoose(next === proposedIn ? null : { included: next, reason: "" })
            }
          />
        </View>
      </View>
      <View style={styles.facts}>
        {family ? <Marker family={family} hollow={fields.kind !== "twoSided"} size={16} /> : null}
        <NotationText notation={notationAsPrinted(fields)} symbol tail />
        <Caption muted>
          <Mono>{number}</Mono>
        </Caption>
      </View>
      {against ? (
        <View style={styles.indent}>
          {proposedReason ? <Caption muted>Proposed out: {proposedReason}.</Caption> : null}
          <Field
            label={included ? "Why it is in all the same" : "Why it is left out"}
            value={reason}
            onChangeText={(text) => onChoose({ included, reason: text })}
            maxLength={300}
          />
          <Button label="Take as proposed" kind="text" icon="undo" onPress={() => onChoose(null)} />
        </View>
      ) : included ? null : (
        <View style={styles.indent}>
          <Dense muted>Out, as proposed: {reason}.</Dense>
        </View>
      )}
      {cautions.map((caution) => (
        <View key={caution} style={styles.indent}>
          <Caption style={{ color: colors.emberText }}>{caution}.</Caption>
        </View>
      ))}
    </View>
  );
}

const styles = StyleSheet.create({
  row: { paddingHorizontal: space.m, paddingVertical: space.xs },
  line: { flexDirection: "row", alignItems: "center" },
  grow: { flex: 1, minWidth: 0 },
  facts: {
    flexDirection: "row",
    flexWrap: "wrap",
    alignItems: "center",
    gap: space.s,
    paddingLeft: 36,
  },
  indent: { paddingLeft: 36, paddingTop: space.xxs, gap: space.xs, alignItems: "stretch" },
});
