import { useMutation } from "@apollo/client/react";
import { useLocalSearchParams } from "expo-router";
import { useState } from "react";
import { View } from "react-native";

import { useSession } from "@/apollo/useSession";
import { Button } from "@/components/Button";
import { Field } from "@/components/Field";
import { Notice } from "@/components/Notice";
import { Dense } from "@/components/Text";
import { RegisterDocument } from "~graphql/generated/graphql";

import { AccountPage, Form } from "./AccountForm";
import { withNext } from "./links";
import { ResendConfirmation } from "./ResendConfirmation";
import { useOutcome } from "./useOutcome";

export function RegisterScreen() {
  const { next } = useLocalSearchParams<{ next?: string }>();
  const { demonstration } = useSession();
  const [email, setEmail] = useState("");
  const [nameOnPapers, setName] = useState("");
  const [password, setPassword] = useState("");
  const [register] = useMutation(RegisterDocument);
  const outcome = useOutcome<{ __typename: "Done"; message: string }>([
    "email",
    "nameOnPapers",
    "password",
  ]);
  const send = () =>
    outcome.run(
      async () =>
        (await register({ variables: { email, nameOnPapers, password } })).data?.register as never,
    );

  if (outcome.good) {
    return (
      <AccountPage title="Look for the mail">
        <Notice grade="done" title={`A mail went to ${email}`}>
          {outcome.good.message}
        </Notice>
        {demonstration ? (
          <Dense muted>
            In the demonstration no mail leaves this machine: a maintainer reads what was caught, on
            the desk.
          </Dense>
        ) : null}
        <ResendConfirmation email={email} />
      </AccountPage>
    );
  }
  return (
    <AccountPage title="Register">
      <Dense muted>
        Reading and downloading need no account. An account saves fitting tables and, with a role,
        submits and reviews constraints.
      </Dense>
      <Form
        label="Register"
        onSubmit={() => void send()}
        problem={outcome.problem}
        problemField={outcome.problemField}
      >
        <Field
          name="nameOnPapers"
          label="Name as on papers"
          value={nameOnPapers}
          onChangeText={setName}
          autoComplete="name"
          hint="It stands beside what you submit and read."
          error={outcome.at("nameOnPapers")}
        />
        <Field
          name="email"
          label="Mail address"
          value={email}
          onChangeText={setEmail}
          autoComplete="email"
          inputMode="email"
          error={outcome.at("email")}
        />
        <Field
          name="password"
          label="Password"
          secure
          value={password}
          onChangeText={setPassword}
          autoComplete="new-password"
          hint="At least 12 characters; a few words do well."
          error={outcome.at("password")}
          onSubmit={() => void send()}
        />
        <Button kind="filled" label="Register" busy={outcome.busy} onPress={() => void send()} />
      </Form>
      <View style={{ alignItems: "flex-start" }}>
        <Button kind="text" label="I have an account" href={withNext("/account/sign-in", next)} />
      </View>
    </AccountPage>
  );
}
