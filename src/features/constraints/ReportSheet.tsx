import { useMutation } from "@apollo/client/react";
import { useState } from "react";

import { userMessage } from "@/apollo/userMessage";
import { Button } from "@/components/Button";
import { Field } from "@/components/Field";
import { Notice } from "@/components/Notice";
import { Sheet } from "@/components/Sheet";
import { Dense } from "@/components/Text";
import { ReportErrorDocument } from "~graphql/generated/graphql";

const LONGEST = 2000;

/** Tells the maintainers what is wrong with a record. What was typed stays when the sheet is closed. */
export function ReportSheet({
  visible,
  onClose,
  number,
}: {
  visible: boolean;
  onClose: () => void;
  /** "FL-0042" */
  number: string;
}) {
  const [text, setText] = useState("");
  const [email, setEmail] = useState("");
  const [thanks, setThanks] = useState<string | null>(null);
  const [refusal, setRefusal] = useState<{ message: string; field: string | null } | null>(null);
  const [report, { loading }] = useMutation(ReportErrorDocument);
  const at = (field: string) => (refusal?.field === field ? refusal.message : undefined);
  const general = refusal && !["text", "email"].includes(refusal.field ?? "");

  async function send() {
    setRefusal(null);
    try {
      const variables = { number, text, email: email.trim() === "" ? null : email.trim() };
      const { data } = await report({ variables });
      const result = data?.reportError;
      if (result?.__typename === "Done") {
        setThanks(result.message);
        setText("");
      } else {
        setRefusal({
          message: result?.message ?? "The report was not sent. Try again.",
          field: result?.field ?? null,
        });
      }
    } catch (error) {
      setRefusal({ message: userMessage(error), field: null });
    }
  }
  function close() {
    setThanks(null);
    setRefusal(null);
    onClose();
  }

  return (
    <Sheet
      visible={visible}
      title={`Report an error in ${number}`}
      onClose={close}
      footer={
        thanks ? (
          <Button label="Close" kind="filled" onPress={close} />
        ) : (
          <Button
            label="Send the report"
            kind="filled"
            icon="send-outline"
            busy={loading}
            onPress={() => void send()}
          />
        )
      }
    >
      {thanks ? (
        <Notice grade="done">{thanks}</Notice>
      ) : (
        <>
          <Dense muted>
            It goes to the maintainers of this registry. Say what the paper prints, and where.
          </Dense>
          <Field
            label="What is wrong"
            name="text"
            value={text}
            onChangeText={setText}
            error={at("text")}
            multiline
            maxLength={LONGEST}
          />
          <Field
            label="Your mail address (optional)"
            name="email"
            value={email}
            onChangeText={setEmail}
            error={at("email")}
            hint="Only for an answer; it is kept nowhere else."
            inputMode="email"
            autoComplete="email"
            maxLength={254}
          />
          {general ? <Notice grade="error">{refusal.message}</Notice> : null}
        </>
      )}
    </Sheet>
  );
}
