import { useMutation, useQuery } from "@apollo/client/react";
import { useRouter } from "expo-router";
import { useState } from "react";
import { StyleSheet, View } from "react-native";

import { userMessage } from "@/apollo/userMessage";
import { Button, IconButton } from "@/components/Button";
import { Choice } from "@/components/Choice";
import { Confirm } from "@/components/Confirm";
import { Notice } from "@/components/Notice";
import { Segments } from "@/components/Segments";
import { Sheet } from "@/components/Sheet";
import { Caption, Dense, Label } from "@/components/Text";
import { space } from "@/theme/tokens";
import {
  MergeNamedDataDocument,
  NamedDataNamesDocument,
  RelateNamedDataDocument,
  UnrelateNamedDataDocument,
  type DataLinkPartsFragment,
  type NamedDataPartsFragment,
} from "~graphql/generated/graphql";

type Step = "subsetOf" | "contains" | "overlaps" | "same";

const STEPS: readonly { value: Step; label: string }[] = [
  { value: "subsetOf", label: "Part of" },
  { value: "contains", label: "Contains" },
  { value: "overlaps", label: "Overlaps" },
  { value: "same", label: "Same as" },
];

const ABOUT: Record<Step, string> = {
  subsetOf: "A constraint from this shares data with every constraint from the larger one.",
  contains: "A constraint from this shares data with every constraint from the part.",
  overlaps: "The two share some of their data without one being a part of the other.",
  same: "The two are one: this entry's names become other names of the chosen one.",
};

type Outcome = { __typename: string; message?: string } | null | undefined;

/** States relations of an entry, takes them back, and merges it into another one. */
export function DataRelateSheet({
  visible,
  entry,
  onClose,
  onChanged,
}: {
  visible: boolean;
  entry: NamedDataPartsFragment;
  onClose: () => void;
  onChanged: () => void;
}) {
  const router = useRouter();
  const [step, setStep] = useState<Step>("subsetOf");
  const [other, setOther] = useState<string | null>(null);
  const [asking, setAsking] = useState(false);
  const [problem, setProblem] = useState<string | null>(null);
  const { data, error } = useQuery(NamedDataNamesDocument, { skip: !visible });
  const [relate, relating] = useMutation(RelateNamedDataDocument);
  const [unrelate, unrelating] = useMutation(UnrelateNamedDataDocument);
  const [merge, merging] = useMutation(MergeNamedDataDocument);
  const busy = relating.loading || unrelating.loading || merging.loading;
  const { slug, version } = entry;
  const options = (data?.namedDataList ?? [])
    .filter((one) => one.slug !== slug)
    .map((one) => ({ value: one.slug, label: one.name }));
  const chosen = options.find(({ value }) => value === other)?.label ?? "";

  async function run(work: () => Promise<Outcome>, done: () => void) {
    setProblem(null);
    try {
      const result = await work();
      if (result?.__typename === "NamedData") done();
      else setProblem(result?.message ?? "The server gave no answer. Try again.");
    } catch (failure) {
      setProblem(userMessage(failure));
    }
  }

  function state() {
    if (other === null) return;
    if (step === "same") {
      setAsking(true);
      return;
    }
    const variables =
      step === "contains"
        ? { slug: other, relation: "subsetOf" as const, other: slug }
        : { slug, relation: step, other };
    void run(
      async () => (await relate({ variables })).data?.relateNamedData,
      () => {
        setOther(null);
        onChanged();
      },
    );
  }

  function takeBack(link: DataLinkPartsFragment) {
    void run(
      async () =>
        (await unrelate({ variables: { slug, other: link.slug } })).data?.unrelateNamedData,
      onChanged,
    );
  }

  function mergeNow() {
    setAsking(false);
    const into = other ?? "";
    void run(
      async () => (await merge({ variables: { slug, version, into } })).data?.mergeNamedData,
      () => router.replace(`/data/${into}`),
    );
  }

  return (
    <Sheet
      visible={visible}
      title={`Relations of ${entry.name}`}
      onClose={onClose}
      footer={
        <Button
          label={step === "same" ? "Merge into it" : "State this relation"}
          kind="filled"
          busy={busy}
          disabledBecause={other === null ? "Choose the other entry first." : undefined}
          onPress={state}
        />
      }
    >
      <Standing title="Part of" links={entry.subsetOf} onTakeBack={takeBack} />
      <Standing title="Contains" links={entry.contains} onTakeBack={takeBack} />
      <Standing title="Overlaps with" links={entry.overlaps} onTakeBack={takeBack} />
      <Label>Add</Label>
      <Segments
        label="Relation"
        value={step}
        options={STEPS}
        onChange={(value) => setStep(value as Step)}
      />
      <Dense muted>{ABOUT[step]}</Dense>
      <Choice
        label="Other entry"
        value={other}
        placeholder="Choose an entry"
        options={options}
        onChange={setOther}
      />
      {error ? <Notice grade="error">{userMessage(error)}</Notice> : null}
      {problem ? <Notice grade="error">{problem}</Notice> : null}
      <Confirm
        visible={asking}
        title={`Merge into ${chosen}?`}
        text={`${entry.name} becomes another name of ${chosen}, with its relations, and its address leads there. It can be taken back by taking that name out again.`}
        confirmLabel="Merge"
        onConfirm={mergeNow}
        onCancel={() => setAsking(false)}
      />
    </Sheet>
  );
}

function Standing({
  title,
  links,
  onTakeBack,
}: {
  title: string;
  links: readonly DataLinkPartsFragment[];
  onTakeBack: (link: DataLinkPartsFragment) => void;
}) {
  if (links.length === 0) return null;
  return (
    <View>
      <Caption muted>{title}</Caption>
      {links.map((link) => (
        <View key={link.slug} style={styles.row}>
          <Dense style={styles.grow}>{link.name}</Dense>
          <IconButton
            icon="close"
            label={`Take back: ${title.toLowerCase()} ${link.name}`}
            onPress={() => onTakeBack(link)}
          />
        </View>
      ))}
    </View>
  );
}

const styles = StyleSheet.create({
  row: { flexDirection: "row", alignItems: "center", gap: space.s },
  grow: { flex: 1, minWidth: 0 },
});
