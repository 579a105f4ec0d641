import { useMutation } from "@apollo/client/react";
import { useRouter } from "expo-router";
import { useState } from "react";
import { View } from "react-native";

import { userMessage } from "@/apollo/userMessage";
import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { CitationLine } from "@/components/CitationLine";
import { Confirm } from "@/components/Confirm";
import { DefinitionList } from "@/components/DefinitionList";
import { EvidenceFiles } from "@/components/evidence/EvidenceFiles";
import { Notice } from "@/components/Notice";
import { NotationText } from "@/components/NotationText";
import { plainFields } from "@/components/statement/plainFields";
import { METHOD_FIELDS, PRINTED_FIELDS } from "@/components/statement/printedFields";
import { StatusPill } from "@/components/StatusPill";
import { Dense, Section } from "@/components/Text";
import { dateTime } from "@/components/when";
import { Screen } from "@/layout/Screen";
import { DiscardDraftDocument, type SubmissionPartsFragment } from "~graphql/generated/graphql";
import type { FieldName } from "~shared/statement/fields";
import { notationAsPrinted } from "~shared/statement/notation";
import { FIELD_NAMES, fieldText } from "~shared/statement/words";

import { DESK, submissionLink } from "./links";
import { redshiftLine } from "./redshiftLine";
import { Trail } from "./Trail";
import { useStartDraft } from "./useStartDraft";

/** A revision that is no draft any more, as its contributor sees it. */
export function SubmissionView({ submission }: { submission: SubmissionPartsFragment }) {
  const start = useStartDraft();
  const fields = plainFields(submission.fields);
  const { state, citation, number, ordinal } = submission;
  const rows = (names: readonly FieldName[]) =>
    names
      .map((name) => ({ term: FIELD_NAMES[name], value: fieldText(name, fields) }))
      .filter(({ value }) => value !== "");

  return (
    <Screen
      title={number}
      subtitle={`Revision ${ordinal}${citation ? `, ${citation.shortName}` : ""}`}
      back={DESK}
    >
      <View style={{ gap: 24, maxWidth: 760 }}>
        <StatusPill state={state} />
        <StateNotice
          submission={submission}
          busy={start.busy}
          onAnswer={() => void start.answering(submission.id)}
        />
        {start.refusal ? <Notice grade="error">{start.refusal}</Notice> : null}
        <View style={{ flexDirection: "row", flexWrap: "wrap", gap: 12 }}>
          <Button
            kind="tonal"
            icon="plus"
            label="Add another from this paper"
            busy={start.busy}
            onPress={() => void start.ofSubmission(submission.id)}
          />
          <Button kind="outline" label="To the desk" href={DESK} />
          {state === "submitted" ? <TakeBack submission={submission} /> : null}
        </View>
        <Trail submission={submission} />
        <View style={{ gap: 12 }}>
          <Section>As printed</Section>
          <Card style={{ gap: 12 }}>
            <NotationText notation={notationAsPrinted(fields)} size="stated" />
            <Dense>{redshiftLine(fields)}</Dense>
            {citation ? <CitationLine citation={citation} /> : null}
          </Card>
          <DefinitionList items={rows(PRINTED_FIELDS)} />
        </View>
        <View style={{ gap: 12 }}>
          <Section>Where it comes from</Section>
          <DefinitionList items={rows(METHOD_FIELDS)} />
        </View>
        <EvidenceFiles number={`${number}.${ordinal}`} level={2} />
      </View>
    </Screen>
  );
}

/** What no editor has claimed yet can still be taken back. */
function TakeBack({ submission }: { submission: SubmissionPartsFragment }) {
  const router = useRouter();
  const [asking, setAsking] = useState(false);
  const [refusal, setRefusal] = useState<string | null>(null);
  const [discard, { loading }] = useMutation(DiscardDraftDocument);
  const { id, version } = submission;
  const take = async () => {
    setAsking(false);
    try {
      const { data } = await discard({ variables: { id, version } });
      if (data?.discardDraft.__typename === "Done") router.replace(DESK);
      else setRefusal(data?.discardDraft.message ?? "The server gave no answer. Try again.");
    } catch (error) {
      setRefusal(userMessage(error));
    }
  };
  return (
    <>
      <Button kind="return" label="Take it back" busy={loading} onPress={() => setAsking(true)} />
      {refusal ? <Notice grade="error">{refusal}</Notice> : null}
      <Confirm
        visible={asking}
        title="Take this submission back?"
        text="It leaves the queue and is discarded. What you typed is gone then."
        confirmLabel="Take it back"
        onConfirm={() => void take()}
        onCancel={() => setAsking(false)}
      />
    </>
  );
}

function StateNotice({
  submission,
  busy,
  onAnswer,
}: {
  submission: SubmissionPartsFragment;
  busy: boolean;
  onAnswer: () => void;
}) {
  const { state, number, decisionNote, answeredBy, submittedAt } = submission;
  switch (state) {
    case "submitted":
      return (
        <Notice grade="done" title={`${number} is submitted`}>
          {`It waits in the queue for an editor who reads the paper again. You get a mail when it is decided.${submittedAt ? ` Submitted on ${dateTime(submittedAt)}.` : ""}`}
        </Notice>
      );
    case "inReview":
      return (
        <Notice grade="note" title="An editor is reading the paper again">
          You get a mail when it is decided.
        </Notice>
      );
    case "returned":
      return (
        <Notice
          grade="mustAnswer"
          title="Returned with comments"
          action={
            answeredBy ? (
              <Button
                kind="filled"
                label="Go to your answer"
                href={String(submissionLink(answeredBy))}
              />
            ) : (
              <Button
                kind="filled"
                label="Answer with a new revision"
                busy={busy}
                onPress={onAnswer}
              />
            )
          }
        >
          {decisionNote
            ? `“${decisionNote}”`
            : "The comments stand below; each one is answered at its field."}
        </Notice>
      );
    case "approved":
      return (
        <Notice
          grade="done"
          title={`${number} is approved`}
          action={
            <View style={{ flexDirection: "row", flexWrap: "wrap", flexShrink: 1, gap: 8 }}>
              <Button kind="outline" label="See the record" href={`/constraints/${number}`} />
              {answeredBy ? (
                <Button
                  kind="outline"
                  label="Go to the newer revision"
                  href={String(submissionLink(answeredBy))}
                />
              ) : (
                <Button
                  kind="outline"
                  label="Correct it in a new revision"
                  busy={busy}
                  onPress={onAnswer}
                />
              )}
            </View>
          }
        >
          {decisionNote ? `“${decisionNote}”` : "It is in the chart and in the lists."}
        </Notice>
      );
    case "discarded":
      return <Notice grade="note">This draft was discarded.</Notice>;
    case "draft":
      return null;
  }
}
