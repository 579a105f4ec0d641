import { useMutation, useQuery } from "@apollo/client/react";
import { useLocalSearchParams } from "expo-router";
import { useState } from "react";
import { StyleSheet, View } from "react-native";

import { userMessage } from "@/apollo/userMessage";
import { useSession } from "@/apollo/useSession";
import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { CitationLine } from "@/components/CitationLine";
import { memberLabel, SetMatrix } from "@/components/correlatedSet/SetMatrix";
import { DefinitionList } from "@/components/DefinitionList";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { Field } from "@/components/Field";
import { NotationText } from "@/components/NotationText";
import { Notice } from "@/components/Notice";
import { Press } from "@/components/Press";
import { Sheet } from "@/components/Sheet";
import { plainFields } from "@/components/statement/plainFields";
import { StatusPill } from "@/components/StatusPill";
import { Block, Body, Caption, Dense, Label, Mono, Section } from "@/components/Text";
import { dateTime } from "@/components/when";
import { Screen } from "@/layout/Screen";
import { useColors } from "@/theme/ThemeProvider";
import { space, target } from "@/theme/tokens";
import {
  type CorrelatedSetPartsFragment,
  CorrelatedSetByNumberDocument,
  WithdrawSetDocument,
} from "~graphql/generated/graphql";
import { notationAsPrinted } from "~shared/statement/notation";

/** One correlated set: its records, its matrix, where it is printed and how it is used. */
export function SetScreen() {
  const { number } = useLocalSearchParams<{ number: string }>();
  const { data, loading, error, refetch } = useQuery(CorrelatedSetByNumberDocument, {
    variables: { number },
    fetchPolicy: "cache-and-network",
  });
  const set = data?.correlatedSet;
  return (
    <Screen title="Correlated set" documentTitle={number} back="/constraints">
      {set ? (
        <Whole set={set} onChanged={() => void refetch()} />
      ) : error ? (
        <Failed error={error} onRetry={() => void refetch()} />
      ) : loading ? (
        <Loading label={`Fetching ${number}`} rows={5} />
      ) : (
        <Empty
          title={`No set ${number}`}
          text="No approved set has this number. It may still be a draft, or be in review."
          action={<Button label="All constraints" kind="tonal" href="/constraints" />}
        />
      )}
    </Screen>
  );
}

function Whole({ set, onChanged }: { set: CorrelatedSetPartsFragment; onChanged: () => void }) {
  const { hasRole } = useSession();
  const [withdrawing, setWithdrawing] = useState(false);
  return (
    <View style={styles.all}>
      <View style={styles.line}>
        <Mono style={styles.number}>{set.number}</Mono>
        <StatusPill state={set.state} />
        {set.decidedAt && set.state === "approved" ? (
          <Caption>{`approved ${dateTime(set.decidedAt)}`}</Caption>
        ) : null}
      </View>
      <View style={styles.stack}>
        <Section>{set.label ?? "Without a label yet"}</Section>
        <CitationLine citation={set.citation} />
      </View>
      <Banners set={set} />
      <Card style={styles.card}>
        <Block>Matrix</Block>
        <SetMatrix set={set} />
      </Card>
      <View style={styles.stack}>
        <Block>Records</Block>
        <Card flush>
          <Members set={set} />
        </Card>
      </View>
      <View style={styles.stack}>
        <Block>How it is used</Block>
        <Body>
          All of these records enter a likelihood together, or none: with the residuals t in sigma,
          each over the error on its own side, χ² = tᵀ ρ⁻¹ t. Where a filter keeps a part of them,
          the part enters by its exact marginal: the rows and columns of the others are dropped
          before the inverse is taken.
        </Body>
        <Caption>
          The two-piece form is used for each of them, also where the paper quotes a median.
        </Caption>
      </View>
      <View style={styles.stack}>
        <Block>Provenance</Block>
        <DefinitionList
          items={[
            {
              term: "Place",
              value: [set.place, set.page ? `page ${set.page}` : ""].filter(Boolean).join(", "),
            },
            ...(set.note ? [{ term: "Note", value: set.note }] : []),
            { term: "Submitted by", value: set.submittedBy },
            ...(set.readBy ? [{ term: "Second reading", value: set.readBy }] : []),
            ...(set.follows
              ? [
                  {
                    term: "Follows",
                    value: (
                      <View style={styles.link}>
                        <Button kind="text" label={set.follows} href={`/sets/${set.follows}`} />
                      </View>
                    ),
                  },
                ]
              : []),
          ]}
        />
      </View>
      <View style={styles.line}>
        {set.mine ? (
          <Button kind="outline" label="To my work on it" href={`/desk/sets/${set.number}`} />
        ) : null}
        {set.state === "approved" && hasRole("maintainer") ? (
          <Button kind="return" label="Withdraw it" onPress={() => setWithdrawing(true)} />
        ) : null}
      </View>
      <Withdraw
        set={set}
        visible={withdrawing}
        onClose={() => setWithdrawing(false)}
        onDone={() => {
          setWithdrawing(false);
          onChanged();
        }}
      />
    </View>
  );
}

function Banners({ set }: { set: CorrelatedSetPartsFragment }) {
  return (
    <>
      {set.state === "withdrawn" ? (
        <Notice grade="caution" title="Withdrawn: not used any more">
          {set.withdrawnBecause ?? "No reason was given."}
        </Notice>
      ) : null}
      {set.state !== "approved" && set.state !== "withdrawn" ? (
        <Notice grade="note">
          Only you and the editors who have read it see this set. It is not in use.
        </Notice>
      ) : null}
      {set.changedMembers.length > 0 ? (
        <Notice grade="caution" title="Changed since">
          {`${set.changedMembers.join(", ")} ${set.changedMembers.length === 1 ? "has" : "have"} a later revision than the one this matrix was approved with. Compare the errors.`}
        </Notice>
      ) : null}
      {set.members.some(({ approved }) => !approved) && set.state === "approved" ? (
        <Notice grade="caution">
          One of its records is not in use any more: the set is left out until a new one stands.
        </Notice>
      ) : null}
    </>
  );
}

function Members({ set }: { set: CorrelatedSetPartsFragment }) {
  const colors = useColors();
  return (
    <View role="list">
      {set.members.map((member, at) => (
        <View
          key={member.number}
          role="listitem"
          style={{ borderTopWidth: at === 0 ? 0 : 1, borderColor: colors.hairline }}
        >
          <Press href={`/constraints/${member.number}`} style={styles.member}>
            <View style={styles.memberLine}>
              <Mono style={styles.place}>{at + 1}</Mono>
              <View style={styles.grow}>
                <Label>{memberLabel(member)}</Label>
                <Dense muted>{member.quotable ?? member.number}</Dense>
              </View>
              {member.fields ? (
                <NotationText
                  notation={notationAsPrinted(plainFields(member.fields))}
                  tail={false}
                />
              ) : null}
            </View>
          </Press>
        </View>
      ))}
    </View>
  );
}

function Withdraw({
  set,
  visible,
  onClose,
  onDone,
}: {
  set: CorrelatedSetPartsFragment;
  visible: boolean;
  onClose: () => void;
  onDone: () => void;
}) {
  const [withdraw, { loading }] = useMutation(WithdrawSetDocument);
  const [reason, setReason] = useState("");
  const [problem, setProblem] = useState<string | null>(null);
  const send = async () => {
    setProblem(null);
    try {
      const outcome = (
        await withdraw({ variables: { number: set.number, version: set.version, reason } })
      ).data?.withdrawSet;
      if (outcome?.__typename === "Done") onDone();
      else setProblem(outcome?.message ?? "The server gave no answer. Try again.");
    } catch (thrown) {
      setProblem(userMessage(thrown));
    }
  };
  return (
    <Sheet visible={visible} title={`Withdraw ${set.number}?`} onClose={onClose}>
      <Body>
        It is not used any more, and stays readable with your reason above it. Its records stand for
        themselves then.
      </Body>
      <Field label="Reason" value={reason} onChangeText={setReason} multiline rows={3} />
      {problem ? <Notice grade="error">{problem}</Notice> : null}
      <View style={styles.line}>
        <Button kind="outline" label="Cancel" onPress={onClose} />
        <Button
          kind="filled"
          label="Withdraw it"
          busy={loading}
          disabledBecause={reason.trim() === "" ? "Say why first." : undefined}
          onPress={() => void send()}
        />
      </View>
    </Sheet>
  );
}

const styles = StyleSheet.create({
  all: { gap: space.l, maxWidth: 860 },
  stack: { gap: space.xs },
  card: { gap: space.s },
  line: { flexDirection: "row", flexWrap: "wrap", alignItems: "center", gap: space.s },
  number: { fontSize: 15 },
  member: { minHeight: target + 12, justifyContent: "center" },
  memberLine: {
    flexDirection: "row",
    alignItems: "center",
    gap: space.s,
    paddingHorizontal: space.m,
    paddingVertical: space.xs,
  },
  place: { fontSize: 14, width: 24 },
  grow: { flex: 1, minWidth: 0 },
  // In line with the values above it, though 44 points high.
  link: { marginLeft: -space.s, marginTop: -space.s },
});
