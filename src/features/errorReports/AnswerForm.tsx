import { useMutation } from "@apollo/client/react";
import { useState } from "react";
import { View } from "react-native";

import { userMessage } from "@/apollo/userMessage";
import { Button } from "@/components/Button";
import { Choice } from "@/components/Choice";
import { Confirm } from "@/components/Confirm";
import { Field } from "@/components/Field";
import { Notice } from "@/components/Notice";
import { Section } from "@/components/Text";
import {
  AnswerErrorReportDocument,
  CloseErrorReportDocument,
  type ErrorReportWholeFragment,
} from "~graphql/generated/graphql";
import {
  MESSAGE_LENGTH,
  outcomeWords,
  REPORT_OUTCOMES,
  type ReportOutcome,
} from "~shared/review/errorReport";

interface Told {
  good: boolean;
  message: string;
  field: string | null;
}

/** The next word to the reporter: an answer or a question, or the decision that closes the report. */
export function AnswerForm({ report }: { report: ErrorReportWholeFragment }) {
  const [text, setText] = useState("");
  const [outcome, setOutcome] = useState<ReportOutcome | null>(null);
  const [correctedBy, setCorrectedBy] = useState("");
  const [asking, setAsking] = useState(false);
  const [told, setTold] = useState<Told | null>(null);
  const [answer, answering] = useMutation(AnswerErrorReportDocument);
  const [close, closing] = useMutation(CloseErrorReportDocument);
  const at = (field: string) => (told && !told.good && told.field === field ? told.message : null);
  const general = told && (told.good || !["text", "correctedBy"].includes(told.field ?? ""));
  const closed = report.state === "closed";

  async function send(
    run: () => Promise<
      { __typename: string; message?: string; field?: string | null } | null | undefined
    >,
    done: string,
  ) {
    setTold(null);
    try {
      const result = await run();
      if (result?.__typename === "ErrorReport") {
        setTold({ good: true, message: done, field: null });
        setText("");
        setCorrectedBy("");
        setOutcome(null);
      } else {
        const message = result?.message ?? "The server gave no answer. Try again.";
        setTold({ good: false, message, field: result?.field ?? null });
      }
    } catch (error) {
      setTold({ good: false, message: userMessage(error), field: null });
    }
  }
  const { id, version } = report;
  const sendAnswer = () =>
    send(
      async () => (await answer({ variables: { id, version, text } })).data?.answerErrorReport,
      report.mailed ? "The answer is on its way." : "The answer stands on the reporter's page.",
    );
  const sendDecision = () => {
    setAsking(false);
    if (outcome === null) return;
    const input = {
      id,
      version,
      outcome,
      text: text.trim() === "" ? null : text,
      correctedBy: outcome === "corrected" ? correctedBy : null,
    };
    void send(
      async () => (await close({ variables: { input } })).data?.closeErrorReport,
      "The report is closed.",
    );
  };

  return (
    <View style={{ gap: 16 }}>
      <Section>{closed ? "Change the outcome" : "Answer"}</Section>
      <Field
        name="text"
        label={closed ? "A word to the reporter" : "Answer or question"}
        multiline
        value={text}
        onChangeText={setText}
        maxLength={MESSAGE_LENGTH.longest}
        error={at("text")}
        hint="The reporter reads it with your name, and may reply once."
      />
      {closed ? null : (
        <Button
          kind="tonal"
          icon="send-outline"
          label="Send the answer"
          busy={answering.loading}
          onPress={() => void sendAnswer()}
        />
      )}
      <Choice
        label="What became of it"
        value={outcome}
        options={REPORT_OUTCOMES.map((value) => ({
          value,
          label: outcomeWords(value, null),
        }))}
        onChange={(value) => setOutcome(value as ReportOutcome | null)}
      />
      {outcome === "corrected" ? (
        <Field
          name="correctedBy"
          label="Corrected by revision"
          value={correctedBy}
          onChangeText={setCorrectedBy}
          error={at("correctedBy")}
          hint={`For example ${report.number}.2: approved, and newer than the reported one.`}
          autoComplete="off"
          maxLength={30}
        />
      ) : null}
      <Button
        kind="filled"
        label={closed ? "Change the outcome" : "Close the report"}
        busy={closing.loading}
        disabledBecause={outcome === null ? "Choose what became of it." : undefined}
        onPress={() => setAsking(true)}
      />
      {general ? <Notice grade={told.good ? "done" : "error"}>{told.message}</Notice> : null}
      <Confirm
        visible={asking}
        title={closed ? "Change the outcome?" : "Close the report?"}
        text={
          outcome === null
            ? ""
            : `The reporter reads: ${outcomeWords(outcome, outcome === "corrected" ? correctedBy.trim() : null)}. The record says that the report is answered.`
        }
        confirmLabel={closed ? "Change it" : "Close it"}
        onConfirm={sendDecision}
        onCancel={() => setAsking(false)}
      />
    </View>
  );
}
