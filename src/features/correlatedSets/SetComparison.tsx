import { useState } from "react";
import { StyleSheet, View } from "react-native";

import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { Field } from "@/components/Field";
import { SetMatrix } from "@/components/correlatedSet/SetMatrix";
import { Caption, Dense, Label, Mono, Section } from "@/components/Text";
import { useColors } from "@/theme/ThemeProvider";
import { radius, space } from "@/theme/tokens";
import type { SetReviewPartsFragment } from "~graphql/generated/graphql";

type Entry = SetReviewPartsFragment["comparison"][number];

function place({ row, column }: Entry): string {
  return row === null || row === undefined || column === null || column === undefined
    ? "Kind of matrix"
    : `Row ${row + 1}, column ${column + 1}`;
}

/** The two readings side by side: equal ones in a sentence, differing ones each with its way out. */
export function SetComparison({
  review,
  busy,
  onCorrect,
}: {
  review: SetReviewPartsFragment;
  busy: boolean;
  onCorrect: (entry: {
    row: number | null;
    column: number | null;
    text: string;
    why: string;
  }) => Promise<boolean>;
}) {
  const { comparison, set } = review;
  if (!set) return null;
  const differing = comparison.filter(({ agrees }) => !agrees);
  const corrected = comparison.filter(({ earlier }) => earlier.length > 0);
  return (
    <View style={styles.stack}>
      <Section>Comparison</Section>
      <Dense>
        {differing.length === 0
          ? `Your reading agrees in all ${comparison.length - 1} entries and in the kind of matrix.`
          : `Your reading differs at ${differing.length} of ${comparison.length} places. Read them again in the paper.`}
      </Dense>
      {differing.map((entry) => (
        <Differing key={place(entry)} entry={entry} busy={busy} onCorrect={onCorrect} />
      ))}
      {corrected.map((entry) => (
        <Caption key={`earlier ${place(entry)}`}>
          {`${place(entry)}: first read as ${entry.earlier.join(", then ")}.`}
        </Caption>
      ))}
      <Card style={styles.stack}>
        <Label>{set.label ?? set.number}</Label>
        <SetMatrix set={set} />
        {set.note ? <Dense muted>{set.note}</Dense> : null}
      </Card>
    </View>
  );
}

function Differing({
  entry,
  busy,
  onCorrect,
}: {
  entry: Entry;
  busy: boolean;
  onCorrect: Parameters<typeof SetComparison>[0]["onCorrect"];
}) {
  const colors = useColors();
  const [open, setOpen] = useState(false);
  const [text, setText] = useState("");
  const [why, setWhy] = useState("");
  const isKind = entry.row === null || entry.row === undefined;
  return (
    <View style={[styles.differing, { backgroundColor: colors.emberTint }]}>
      <Label>{place(entry)}</Label>
      <View style={styles.line}>
        <Dense>you read </Dense>
        <Mono>{entry.reading.replace(/^-/, "−")}</Mono>
        <Dense>, submitted is </Dense>
        <Mono>{entry.submitted.replace(/^-/, "−")}</Mono>
      </View>
      {open ? (
        <View style={styles.stack}>
          {isKind ? null : (
            <Field label="Read again" numeric value={text} onChangeText={setText} maxLength={40} />
          )}
          <Field label="Why you read it differently now" value={why} onChangeText={setWhy} />
          <View style={styles.line}>
            <Button
              kind="tonal"
              label={isKind ? `Take ${entry.submitted.toLowerCase()}` : "Store it"}
              busy={busy}
              disabledBecause={
                why.trim() === ""
                  ? "Say why."
                  : !isKind && text.trim() === ""
                    ? "Type it."
                    : undefined
              }
              onPress={() =>
                void onCorrect({
                  row: entry.row ?? null,
                  column: entry.column ?? null,
                  text: isKind
                    ? entry.submitted.startsWith("Covariance")
                      ? "covariance"
                      : "correlation"
                    : text,
                  why,
                })
              }
            />
            <Button kind="text" label="Cancel" onPress={() => setOpen(false)} />
          </View>
        </View>
      ) : (
        <View style={styles.line}>
          <Button kind="outline" label="I misread it" onPress={() => setOpen(true)} />
          <Caption>Else return the set below.</Caption>
        </View>
      )}
    </View>
  );
}

const styles = StyleSheet.create({
  stack: { gap: space.s },
  line: { flexDirection: "row", flexWrap: "wrap", alignItems: "center", gap: space.xxs },
  differing: { borderRadius: radius.chip, padding: space.s, gap: space.xs },
});
