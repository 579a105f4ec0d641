import { useMutation } from "@apollo/client/react";
import { useLocalSearchParams } from "expo-router";
import { useState } from "react";
import { View } from "react-native";

import { Button } from "@/components/Button";
import { Field } from "@/components/Field";
import { Notice } from "@/components/Notice";
import { Body } from "@/components/Text";
import { RequestPasswordResetDocument, ResetPasswordDocument } from "~graphql/generated/graphql";

import { AccountPage, Form } from "./AccountForm";
import { useOutcome } from "./useOutcome";

type Done = { __typename: "Done"; message: string };

/** A forgotten password: asks for the mail, and with the mail's token sets a new one. */
export function ResetScreen() {
  const { token } = useLocalSearchParams<{ token?: string }>();
  return token ? <SetPassword token={token} /> : <RequestMail />;
}

function RequestMail() {
  const [email, setEmail] = useState("");
  const [request] = useMutation(RequestPasswordResetDocument);
  const outcome = useOutcome<Done>(["email"]);
  const send = () =>
    outcome.run(
      async () => (await request({ variables: { email } })).data?.requestPasswordReset as never,
    );
  return (
    <AccountPage title="A new password">
      {outcome.good ? (
        <Notice grade="done" title="Look for the mail">
          {outcome.good.message}
        </Notice>
      ) : (
        <Form
          label="Ask for a new password"
          onSubmit={() => void send()}
          problem={outcome.problem}
          problemField={outcome.problemField}
        >
          <Body>A mail with a link goes to your address. The link sets a new password.</Body>
          <Field
            name="email"
            label="Mail address"
            value={email}
            onChangeText={setEmail}
            autoComplete="email"
            inputMode="email"
            error={outcome.at("email")}
            onSubmit={() => void send()}
          />
          <Button
            kind="filled"
            label="Send the mail"
            busy={outcome.busy}
            onPress={() => void send()}
          />
        </Form>
      )}
      <View style={{ alignItems: "flex-start" }}>
        <Button kind="text" label="Back to sign in" href="/account/sign-in" />
      </View>
    </AccountPage>
  );
}

function SetPassword({ token }: { token: string }) {
  const [next, setNext] = useState("");
  const [reset] = useMutation(ResetPasswordDocument);
  const outcome = useOutcome<Done>(["next"]);
  const send = () =>
    outcome.run(
      async () => (await reset({ variables: { token, next } })).data?.resetPassword as never,
    );
  if (outcome.good) {
    return (
      <AccountPage title="A new password">
        <Notice
          grade="done"
          title={outcome.good.message}
          action={<Button kind="filled" label="Sign in" href="/account/sign-in" />}
        />
      </AccountPage>
    );
  }
  return (
    <AccountPage title="A new password">
      <Form
        label="Set a new password"
        onSubmit={() => void send()}
        problem={outcome.problem}
        problemField={outcome.problemField}
      >
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
          kind="filled"
          label="Set the password"
          busy={outcome.busy}
          onPress={() => void send()}
        />
      </Form>
      {outcome.problem ? (
        <View style={{ alignItems: "flex-start" }}>
          <Button kind="text" label="Ask for a new mail" href="/account/reset" />
        </View>
      ) : null}
    </AccountPage>
  );
}
