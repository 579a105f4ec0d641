import { useMutation, useQuery } from "@apollo/client/react";
import { useLocalSearchParams } from "expo-router";
import { useState } from "react";
import { View } from "react-native";

import { userMessage } from "@/apollo/userMessage";
import { Button } from "@/components/Button";
import { Confirm } from "@/components/Confirm";
import { DefinitionList } from "@/components/DefinitionList";
import { DeskPage } from "@/components/DeskPage";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { Field } from "@/components/Field";
import { Notice } from "@/components/Notice";
import { Dense, Mono, Section } from "@/components/Text";
import { dateTime } from "@/components/when";
import {
  AuthorCheckByIdDocument,
  type AuthorCheckOutcomeFragment,
  type AuthorCheckWholeFragment,
  CloseAuthorCheckDocument,
  RevokeAuthorCheckDocument,
} from "~graphql/generated/graphql";
import { CLOSING_TEXT } from "~shared/review/authorCheck";

import { Lines, standingWords } from "./parts";

/** One check at the desk: whom it went to, what came back, and what the editors did about it. */
export function AuthorCheckScreen() {
  const { id } = useLocalSearchParams<{ id: string }>();
  return (
    <DeskPage title="Author check" here={`/desk/author-checks/${id}`} role="editor">
      <Loaded id={id} />
    </DeskPage>
  );
}

function Loaded({ id }: { id: string }) {
  const { data, loading, error, refetch } = useQuery(AuthorCheckByIdDocument, {
    variables: { id },
    fetchPolicy: "cache-and-network",
  });
  if (loading && !data) return <Loading label="Fetching the check" />;
  if (error && !data) return <Failed error={error} onRetry={() => void refetch()} />;
  return data?.authorCheck ? (
    <Whole key={id} check={data.authorCheck} />
  ) : (
    <Empty
      icon="help-circle-outline"
      title="No such check"
      text="It may be about a record that you have yet to read yourself: then it opens once your reading is stored."
      action={<Button kind="filled" label="To the author checks" href="/desk/author-checks" />}
    />
  );
}

function Whole({ check }: { check: AuthorCheckWholeFragment }) {
  return (
    <View style={{ gap: 24 }}>
      <View style={{ gap: 8 }}>
        <View style={{ flexDirection: "row", flexWrap: "wrap", alignItems: "center", gap: 12 }}>
          <Mono style={{ fontSize: 15 }}>{check.quotable}</Mono>
          <Dense>{standingWords(check)}</Dense>
        </View>
        {check.citation ? (
          <View>
            <Dense style={{ fontWeight: "600" }}>{check.citation.shortName}</Dense>
            <Dense muted>{check.citation.title}</Dense>
          </View>
        ) : null}
        <View style={{ flexDirection: "row", marginLeft: -12 }}>
          <Button kind="text" label={`See ${check.number}`} href={`/constraints/${check.number}`} />
        </View>
        <DefinitionList
          items={[
            { term: "Asked", value: check.authorName ?? "An author; the name is forgotten" },
            ...(check.authorEmail ? [{ term: "At", value: check.authorEmail }] : []),
            { term: "By", value: `${check.sentBy}, ${dateTime(check.sentAt)}` },
            {
              term: check.expired ? "Link ran out" : "Link works until",
              value: dateTime(check.expiresAt),
            },
            ...(check.endedAt ? [{ term: "Ended", value: dateTime(check.endedAt) }] : []),
          ]}
        />
      </View>
      <Lines lines={check.lines} author="The author" />
      {check.barredBecause ? <Notice grade="note">{check.barredBecause}</Notice> : null}
      {!check.barredBecause && check.state === "answered" ? <Close check={check} /> : null}
      {!check.barredBecause && check.state === "sent" ? <Revoke check={check} /> : null}
    </View>
  );
}

function useSend() {
  const [problem, setProblem] = useState<string | null>(null);
  const [busy, setBusy] = useState(false);
  const run = async (send: () => Promise<AuthorCheckOutcomeFragment | null | undefined>) => {
    setProblem(null);
    setBusy(true);
    try {
      const outcome = await send();
      if (outcome?.__typename !== "AuthorCheck") {
        setProblem(outcome?.message ?? "The server gave no answer. Try again.");
      }
    } catch (error) {
      setProblem(userMessage(error));
    } finally {
      setBusy(false);
    }
  };
  return { problem, busy, run };
}

function Close({ check: { id, version, verdict } }: { check: AuthorCheckWholeFragment }) {
  const [text, setText] = useState("");
  const sending = useSend();
  const [close] = useMutation(CloseAuthorCheckDocument);
  const needed = verdict === "comments";
  return (
    <View style={{ gap: 12 }}>
      <Section>{needed ? "What was done" : "Close it"}</Section>
      <Dense muted>
        {needed
          ? "Your words go to the author by mail. If the comments are right, the record changes by a new revision, which is read again like any other."
          : "The author can correct the answer until it is closed."}
      </Dense>
      <Field
        name="closing"
        label={needed ? "To the author" : "To the author, or leave it empty"}
        multiline
        rows={3}
        value={text}
        onChangeText={setText}
        maxLength={CLOSING_TEXT.longest}
      />
      {sending.problem ? <Notice grade="error">{sending.problem}</Notice> : null}
      <Button
        kind="filled"
        icon="check-all"
        label="Close the check"
        busy={sending.busy}
        disabledBecause={needed && text.trim() === "" ? "Say what was done first." : undefined}
        onPress={() =>
          void sending.run(
            async () =>
              (await close({ variables: { id, version, text: text.trim() || null } })).data
                ?.closeAuthorCheck,
          )
        }
      />
    </View>
  );
}

function Revoke({ check: { id, version } }: { check: AuthorCheckWholeFragment }) {
  const [asking, setAsking] = useState(false);
  const sending = useSend();
  const [revoke] = useMutation(RevokeAuthorCheckDocument);
  return (
    <View style={{ gap: 12 }}>
      {sending.problem ? <Notice grade="error">{sending.problem}</Notice> : null}
      <Button
        kind="return"
        icon="undo"
        label="Take the link back"
        busy={sending.busy}
        onPress={() => setAsking(true)}
      />
      <Confirm
        visible={asking}
        title="Take the link back?"
        text="It opens nothing then. The author gets no mail about it."
        confirmLabel="Take it back"
        onConfirm={() => {
          setAsking(false);
          void sending.run(
            async () => (await revoke({ variables: { id, version } })).data?.revokeAuthorCheck,
          );
        }}
        onCancel={() => setAsking(false)}
      />
    </View>
  );
}
