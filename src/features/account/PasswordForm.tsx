import { useMutation } from "@apollo/client/react";
import { useState } from "react";
import { View } from "react-native";

import { Button } from "@/components/Button";
import { Field } from "@/components/Field";
import { Notice } from "@/components/Notice";
import { Section } from "@/components/Text";
import { ChangePasswordDocument } from "~graphql/generated/graphql";

import { Form } from "./AccountForm";
import { useOutcome } from "./useOutcome";

/** Another password; every other session ends with the old one. */
export function PasswordForm() {
  const [current, setCurrent] = useState("");
  const [next, setNext] = useState("");
  const [change] = useMutation(ChangePasswordDocument);
  const outcome = useOutcome<{ __typename: "Done"; message: string }>(["current", "next"]);
  const send = async () => {
    const done = await outcome.run(
      async () => (await change({ variables: { current, next } })).data?.changePassword as never,
    );
    if (!done) return;
    setCurrent("");
    setNext("");
  };
  return (
    <View style={{ gap: 16 }}>
      <Section>Password</Section>
      <Form
        label="Change the password"
        onSubmit={() => void send()}
        problem={outcome.problem}
        problemField={outcome.problemField}
      >
        <Field
          name="current"
          label="Present password"
          secure
          value={current}
          onChangeText={setCurrent}
          autoComplete="current-password"
          error={outcome.at("current")}
        />
        <Field
          name="next"
          label="New password"
          secure
          value={next}
          onChangeText={setNext}
          autoComplete="new-password"
          hint="At least 12 characters; a few words do well."
          error={outcome.at("next")}
          onSubmit={() => void send()}
        />
        <Button
          kind="tonal"
          label="Change the password"
          busy={outcome.busy}
          onPress={() => void send()}
        />
        {outcome.good ? <Notice grade="done">{outcome.good.message}</Notice> : null}
      </Form>
    </View>
  );
}
