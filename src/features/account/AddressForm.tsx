import { useMutation } from "@apollo/client/react";
import { useState } from "react";
import { View } from "react-native";

import { Button } from "@/components/Button";
import { Field } from "@/components/Field";
import { Notice } from "@/components/Notice";
import { Dense, Section } from "@/components/Text";
import { RequestAddressChangeDocument } from "~graphql/generated/graphql";

import { Form } from "./AccountForm";
import { useOutcome } from "./useOutcome";

/** Asks for another mail address: it is confirmed from there, and the present one may object. */
export function AddressForm({ present }: { present: string }) {
  const [email, setEmail] = useState("");
  const [password, setPassword] = useState("");
  const [request] = useMutation(RequestAddressChangeDocument);
  const outcome = useOutcome<{ __typename: "Done"; message: string }>(["email", "password"]);
  const send = async () => {
    const done = await outcome.run(
      async () =>
        (await request({ variables: { email, password } })).data?.requestAddressChange as never,
    );
    if (!done) return;
    setEmail("");
    setPassword("");
  };
  return (
    <View style={{ gap: 16 }}>
      <Section>Mail address</Section>
      <Dense muted>
        {`${present} gets a notice with a way to object. The change is made once the new address is confirmed from there.`}
      </Dense>
      <Form
        label="Change the address"
        onSubmit={() => void send()}
        problem={outcome.problem}
        problemField={outcome.problemField}
      >
        <Field
          name="email"
          label="New mail address"
          value={email}
          onChangeText={setEmail}
          autoComplete="email"
          inputMode="email"
          maxLength={254}
          error={outcome.at("email")}
        />
        <Field
          name="password"
          label="Your password"
          secure
          value={password}
          onChangeText={setPassword}
          autoComplete="current-password"
          error={outcome.at("password")}
          onSubmit={() => void send()}
        />
        <Button
          kind="tonal"
          label="Change the address"
          busy={outcome.busy}
          onPress={() => void send()}
        />
        {outcome.good ? <Notice grade="done">{outcome.good.message}</Notice> : null}
      </Form>
    </View>
  );
}
