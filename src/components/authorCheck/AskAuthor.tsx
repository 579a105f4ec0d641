import { useMutation } from "@apollo/client/react";
import { useState } from "react";
import { View } from "react-native";

import { userMessage } from "@/apollo/userMessage";
import { Button } from "@/components/Button";
import { Field } from "@/components/Field";
import { Notice } from "@/components/Notice";
import { Sheet } from "@/components/Sheet";
import { Body } from "@/components/Text";
import { longDay } from "@/components/when";
import { SendAuthorCheckDocument } from "~graphql/generated/graphql";
import { CHECK_ADDRESS_KEPT_DAYS, CHECK_DAYS, CHECK_NAME } from "~shared/review/authorCheck";

/** An editor's way to ask an author of the paper whether a revision says what the paper says. */
export function AskAuthor({ quotable, onSent }: { quotable: string; onSent?: () => void }) {
  const [open, setOpen] = useState(false);
  const [name, setName] = useState("");
  const [email, setEmail] = useState("");
  const [refusal, setRefusal] = useState<{ message: string; field: string | null } | null>(null);
  const [sent, setSent] = useState<string | null>(null);
  const [send, { loading }] = useMutation(SendAuthorCheckDocument);
  const at = (field: string) => (refusal?.field === field ? refusal.message : null);
  const ask = async () => {
    setRefusal(null);
    try {
      const { data } = await send({ variables: { input: { quotable, name, email } } });
      const outcome = data?.sendAuthorCheck;
      if (outcome?.__typename === "AuthorCheck") {
        setSent(
          `${outcome.authorName ?? "The author"} gets a mail; the link works until ${longDay(outcome.expiresAt)}.`,
        );
        setName("");
        setEmail("");
        onSent?.();
      } else {
        setRefusal({
          message: outcome?.message ?? "The server gave no answer. Try again.",
          field: outcome?.field ?? null,
        });
      }
    } catch (error) {
      setRefusal({ message: userMessage(error), field: null });
    }
  };
  return (
    <>
      <View style={{ flexDirection: "row", marginLeft: -12 }}>
        <Button
          kind="text"
          icon="email-outline"
          label="Ask an author of the paper"
          onPress={() => {
            setSent(null);
            setRefusal(null);
            setOpen(true);
          }}
        />
      </View>
      <Sheet
        visible={open}
        title="Ask an author"
        onClose={() => setOpen(false)}
        footer={
          sent ? (
            <Button kind="filled" label="Done" onPress={() => setOpen(false)} />
          ) : (
            <Button
              kind="filled"
              icon="send-outline"
              label="Send the link"
              busy={loading}
              disabledBecause={
                name.trim() === "" || email.trim() === ""
                  ? "Give name and address first."
                  : undefined
              }
              onPress={() => void ask()}
            />
          )
        }
      >
        {sent ? (
          <Notice grade="done" title={`${quotable} is with the author`}>
            {sent}
          </Notice>
        ) : (
          <View style={{ gap: 16 }}>
            <Body>
              {`The author gets a link that shows ${quotable} and takes "correct" or comments, without an account, for ${CHECK_DAYS} days. The mail names you. Name and address are forgotten ${CHECK_ADDRESS_KEPT_DAYS} days after the check has ended.`}
            </Body>
            <Field
              name="author-name"
              label="Author's name"
              value={name}
              onChangeText={setName}
              maxLength={CHECK_NAME.longest}
              autoComplete="off"
              error={at("name")}
            />
            <Field
              name="author-email"
              label="Author's mail address"
              value={email}
              onChangeText={setEmail}
              inputMode="email"
              maxLength={254}
              autoComplete="off"
              error={at("email")}
            />
            {refusal && !["name", "email"].includes(refusal.field ?? "") ? (
              <Notice grade="error">{refusal.message}</Notice>
            ) : null}
          </View>
        )}
      </Sheet>
    </>
  );
}
