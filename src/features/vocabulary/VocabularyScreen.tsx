import { useQuery } from "@apollo/client/react";
import { useState } from "react";
import { StyleSheet, View } from "react-native";

import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { DeskPage } from "@/components/DeskPage";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { Notice } from "@/components/Notice";
import { Caption, Dense, Mono, Section } from "@/components/Text";
import { useColors } from "@/theme/ThemeProvider";
import { space } from "@/theme/tokens";
import { MethodVocabularyDocument } from "~graphql/generated/graphql";
import { FAMILY_NAMES } from "~shared/methods/vocabulary";

import { byFamily, constraintWords, FamilyHead, type KeptMethod } from "./families";
import { MethodSheet } from "./MethodSheet";
import { RetireSheet } from "./RetireSheet";

/** The maintainer's page of the method vocabulary. */
export function VocabularyScreen() {
  return (
    <DeskPage
      title="Method vocabulary"
      subtitle="The words by which methods are named, filtered and cautioned about"
      here="/desk/vocabulary"
      role="maintainer"
    >
      <Vocabulary />
    </DeskPage>
  );
}

type Task = { kind: "add" } | { kind: "edit" | "retire"; method: KeptMethod };

function Vocabulary() {
  const { data, loading, error, refetch } = useQuery(MethodVocabularyDocument, {
    fetchPolicy: "cache-and-network",
  });
  const [task, setTask] = useState<Task | null>(null);
  // A sheet that is closed keeps what was typed until another one is opened.
  const [open, setOpen] = useState(false);
  const [done, setDone] = useState<string | null>(null);
  const methods = data?.methodVocabulary;
  if (!methods) {
    return error ? (
      <Failed error={error} onRetry={() => void refetch()} />
    ) : loading ? (
      <Loading label="Fetching the vocabulary" rows={6} />
    ) : null;
  }
  const retired = methods.filter(({ retiredInto }) => retiredInto !== null);
  const nameOf = (tag: string | null) => methods.find((one) => one.tag === tag)?.name ?? "";
  const start = (next: Task) => {
    setTask(next);
    setOpen(true);
    setDone(null);
  };
  const finish = (words: string) => {
    setTask(null);
    setOpen(false);
    setDone(words);
    void refetch();
  };
  return (
    <View style={styles.all}>
      {done ? <Notice grade="done">{done}</Notice> : null}
      <View style={styles.buttons}>
        <Button
          kind="filled"
          icon="plus"
          label="Add a method"
          onPress={() => start({ kind: "add" })}
        />
        <Button kind="text" icon="open-in-new" label="As readers see it" href="/methods" />
      </View>
      {methods.length === 0 ? (
        <Card>
          <Empty
            title="No method yet"
            text="Add the first one: records name their methods by it."
          />
        </Card>
      ) : null}
      {byFamily(methods).map(({ family, members }) => (
        <View key={family} style={styles.family}>
          <FamilyHead family={family} />
          <Card flush>
            <View role="list" aria-label={FAMILY_NAMES[family]}>
              {members.map((method, index) => (
                <Row
                  key={method.tag}
                  method={method}
                  first={index === 0}
                  onEdit={() => start({ kind: "edit", method })}
                  onRetire={() => start({ kind: "retire", method })}
                />
              ))}
            </View>
          </Card>
        </View>
      ))}
      {retired.length > 0 ? (
        <View style={styles.family}>
          <Section>Retired</Section>
          <Card flush>
            <View role="list" aria-label="Retired">
              {retired.map((method, index) => (
                <Retired
                  key={method.tag}
                  method={method}
                  first={index === 0}
                  next={nameOf(method.retiredInto)}
                />
              ))}
            </View>
          </Card>
        </View>
      ) : null}
      {task && task.kind !== "retire" ? (
        <MethodSheet
          key={task.kind === "edit" ? `${task.method.tag} ${task.method.version}` : "new"}
          visible={open}
          method={task.kind === "edit" ? task.method : null}
          methods={methods}
          onClose={() => setOpen(false)}
          onDone={finish}
        />
      ) : null}
      {task?.kind === "retire" ? (
        <RetireSheet
          key={task.method.tag}
          visible={open}
          method={task.method}
          methods={methods}
          onClose={() => setOpen(false)}
          onDone={finish}
        />
      ) : null}
    </View>
  );
}

function Row({
  method,
  first,
  onEdit,
  onRetire,
}: {
  method: KeptMethod;
  first: boolean;
  onEdit: () => void;
  onRetire: () => void;
}) {
  const colors = useColors();
  const { tag, name, definition, caution, neverIndependent, constraintCount } = method;
  return (
    <View
      role="listitem"
      style={[styles.row, { borderTopWidth: first ? 0 : 1, borderColor: colors.hairline }]}
    >
      <View style={styles.words}>
        <Dense style={styles.name}>{name}</Dense>
        <Dense>{definition}</Dense>
        <Dense muted>Caution: {caution}</Dense>
        <Caption>
          <Mono style={styles.tag}>{tag}</Mono>
          {`, ${constraintWords(constraintCount)}${neverIndependent ? ", never independent" : ""}`}
        </Caption>
      </View>
      <View style={styles.buttons}>
        <Button kind="outline" label="Edit" accessibilityLabel={`Edit ${name}`} onPress={onEdit} />
        <Button
          kind="text"
          label="Retire"
          accessibilityLabel={`Retire ${name}`}
          onPress={onRetire}
        />
      </View>
    </View>
  );
}

function Retired({ method, first, next }: { method: KeptMethod; first: boolean; next: string }) {
  const colors = useColors();
  return (
    <View
      role="listitem"
      style={[styles.row, { borderTopWidth: first ? 0 : 1, borderColor: colors.hairline }]}
    >
      <View style={styles.words}>
        <Dense style={styles.name}>{method.name}</Dense>
        <Dense muted>A word for {next} now: its records are shown and found there.</Dense>
        <Caption>
          <Mono style={styles.tag}>{method.tag}</Mono>
        </Caption>
      </View>
    </View>
  );
}

const styles = StyleSheet.create({
  all: { gap: space.l },
  buttons: { flexDirection: "row", flexWrap: "wrap", gap: space.xs, alignItems: "center" },
  family: { gap: space.xs },
  row: {
    flexDirection: "row",
    flexWrap: "wrap",
    alignItems: "flex-start",
    gap: space.s,
    padding: space.m,
  },
  words: { flexGrow: 1, flexShrink: 1, flexBasis: 260, minWidth: 0, gap: space.xxs },
  name: { fontWeight: "600" },
  tag: { fontSize: 13 },
});
