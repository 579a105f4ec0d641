import { useMutation } from "@apollo/client/react";
import { useState } from "react";

import { useSession } from "@/apollo/useSession";
import { userMessage } from "@/apollo/userMessage";
import { Button } from "@/components/Button";
import { Field } from "@/components/Field";
import { Notice } from "@/components/Notice";
import { Sheet } from "@/components/Sheet";
import { Dense } from "@/components/Text";
import { ReportErrorDocument } from "~graphql/generated/graphql";
import { ADDRESS_KEPT_DAYS, REPORT_LENGTH } from "~shared/review/errorReport";

/** Tells the editors what is wrong with a record. What was typed stays when the sheet is closed. */
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
  const { viewer } = useSession();
  // Null until it is touched: an account's own address is offered, and may be taken out.
  const [typedEmail, setEmail] = useState<string | null>(null);
  const email = typedEmail ?? viewer?.email ?? "";
  const [thanks, setThanks] = useState<{ message: string; token: string } | null>(null);
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
      if (result?.__typename === "ErrorReported") {
        setThanks(result);
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
        <Notice
          grade="done"
          title={thanks.message}
          action={<Button kind="outline" label="See the report" href={`/report/${thanks.token}`} />}
        >
          {email.trim() === ""
            ? "The answer will stand on a page of its own. Keep its address: only who has it can open it."
            : "The answer comes by mail, and stands on a page of its own."}
        </Notice>
      ) : (
        <>
          <Dense muted>
            It goes to the editors of this registry, who answer it. Say what the paper prints, and
            where. The record shows that there is a report, not what it says.
          </Dense>
          <Field
            label="What is wrong"
            name="text"
            value={text}
            onChangeText={setText}
            error={at("text")}
            multiline
            maxLength={REPORT_LENGTH.longest}
          />
          <Field
            label="Your mail address (optional)"
            name="email"
            value={email}
            onChangeText={setEmail}
            error={at("email")}
            hint={`Only for the answer: shown to nobody, and forgotten ${ADDRESS_KEPT_DAYS} days after it.`}
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
