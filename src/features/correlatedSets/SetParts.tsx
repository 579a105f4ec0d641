import { useQuery } from "@apollo/client/react";
import { useState } from "react";
import { StyleSheet, View } from "react-native";

import { HeatMap } from "@/charts/HeatMap";
import { Button, IconButton } from "@/components/Button";
import { Card } from "@/components/Card";
import { Choice } from "@/components/Choice";
import { memberLabel } from "@/components/correlatedSet/SetMatrix";
import Icon from "@/components/Icon";
import { Caption, Dense, Mono, Section } from "@/components/Text";
import { useColors } from "@/theme/ThemeProvider";
import { space } from "@/theme/tokens";
import { SetCandidatesDocument } from "~graphql/generated/graphql";
import { entryAt, type SetContent } from "~shared/correlatedSet/content";
import { correlations } from "~shared/correlatedSet/matrix";

type Labels = readonly { number: string; words: string }[];

/** The records in the order of the matrix's rows; up, down, out. */
export function MemberList({
  labels,
  errors,
  onMove,
  onDrop,
}: {
  labels: Labels;
  errors: readonly string[];
  onMove: (from: number, to: number) => void;
  onDrop: (at: number) => void;
}) {
  const colors = useColors();
  return (
    <View style={styles.stack}>
      <Section>Records, in the order of the matrix</Section>
      <Card>
        <View role="list">
          {labels.map(({ number, words }, at) => (
            <View key={number} role="listitem" style={styles.member}>
              <Mono style={styles.place}>{at + 1}</Mono>
              <Dense style={styles.grow}>{words}</Dense>
              {at > 0 ? (
                <IconButton
                  icon="arrow-up"
                  label={`Move ${number} up`}
                  onPress={() => onMove(at, at - 1)}
                />
              ) : null}
              {at < labels.length - 1 ? (
                <IconButton
                  icon="arrow-down"
                  label={`Move ${number} down`}
                  onPress={() => onMove(at, at + 1)}
                />
              ) : null}
              <IconButton icon="close" label={`Take ${number} out`} onPress={() => onDrop(at)} />
            </View>
          ))}
          {labels.length === 0 ? <Dense muted>No record yet.</Dense> : null}
        </View>
      </Card>
      {errors.map((error) => (
        <View key={error} style={styles.error}>
          <Icon name="close-circle-outline" size={16} color={colors.emberText} />
          <Caption style={{ color: colors.emberText, flex: 1 }}>{error}</Caption>
        </View>
      ))}
    </View>
  );
}

/** Another record of the same paper for the set. */
export function AddMembers({
  citationId,
  members,
  onAdd,
}: {
  citationId: string;
  members: readonly string[];
  onAdd: (number: string) => void;
}) {
  const [open, setOpen] = useState(false);
  const { data } = useQuery(SetCandidatesDocument, { variables: { citationId }, skip: !open });
  const free = (data?.setCandidates ?? []).filter(
    ({ number, cannotJoin }) => !cannotJoin && !members.includes(number),
  );
  if (!open) {
    return (
      <View style={styles.line}>
        <Button
          kind="text"
          icon="plus"
          label="Another record of the paper"
          onPress={() => setOpen(true)}
        />
      </View>
    );
  }
  if (data && free.length === 0) {
    return <Caption>No other two-sided value of this paper is approved or your own.</Caption>;
  }
  return (
    <Choice
      label="Another record of the paper"
      value={null}
      options={free.map((member) => ({
        value: member.number,
        label: `${member.number}, ${memberLabel(member)}`,
      }))}
      onChange={(number) => {
        if (number) onAdd(number);
      }}
    />
  );
}

/** The whole matrix as it will be drawn, once every entry is a number. */
export function MatrixPreview({ draft, labels }: { draft: SetContent; labels: Labels }) {
  const rho = correlations(draft, draft.members.length);
  if (rho === null || draft.members.length < 2) return null;
  return (
    <View style={styles.stack}>
      <Caption>As it will be drawn</Caption>
      <HeatMap
        caption="The matrix as it will be drawn"
        labels={labels.map(({ words }, at) => ({ short: String(at + 1), words }))}
        rho={rho}
        texts={labels.map((_row, i) => labels.map((_column, j) => entryAt(draft.triangle, i, j)))}
      />
    </View>
  );
}

const styles = StyleSheet.create({
  stack: { gap: space.xs },
  line: { flexDirection: "row", flexWrap: "wrap", gap: space.xs },
  member: { flexDirection: "row", alignItems: "center", gap: space.xxs },
  place: { fontSize: 14, width: 24 },
  grow: { flex: 1, minWidth: 0 },
  error: { flexDirection: "row", gap: 6, alignItems: "flex-start" },
});
