import { useMutation } from "@apollo/client/react";
import { useLocalSearchParams } from "expo-router";
import { useState } from "react";

import { Button } from "@/components/Button";
import { Field } from "@/components/Field";
import { Notice } from "@/components/Notice";
import { Body } from "@/components/Text";
import { ConfirmEmailDocument } from "~graphql/generated/graphql";

import { AccountPage, Form } from "./AccountForm";
import { ResendConfirmation } from "./ResendConfirmation";
import { useOutcome } from "./useOutcome";

/**
 * Confirms a mail address. The press is on purpose: programs that look into mails follow links,
 * and a link that acts by itself would be used up before the person comes.
 */
export function ConfirmScreen() {
  const { token } = useLocalSearchParams<{ token?: string }>();
  const [email, setEmail] = useState("");
  const [confirm] = useMutation(ConfirmEmailDocument);
  const outcome = useOutcome<{ __typename: "Done"; message: string }>([]);

  if (outcome.good) {
    return (
      <AccountPage title="Address confirmed">
        <Notice
          grade="done"
          title={outcome.good.message}
          action={<Button kind="filled" label="Sign in" href="/account/sign-in" />}
        />
      </AccountPage>
    );
  }
  return (
    <AccountPage title="Confirm your address">
      {token ? (
        <>
          <Body>One press confirms that this mail address is yours.</Body>
          <Button
            kind="filled"
            label="Confirm my address"
            busy={outcome.busy}
            onPress={() =>
              void outcome.run(
                async () => (await confirm({ variables: { token } })).data?.confirmEmail as never,
              )
            }
          />
        </>
      ) : (
        <Notice grade="error" title="The address is not whole">
          Open the link from the mail again; it ends with a long token.
        </Notice>
      )}
      {outcome.problem ? <Notice grade="error">{outcome.problem}</Notice> : null}
      {outcome.problem || !token ? (
        <Form label="Send the mail again" onSubmit={() => undefined}>
          <Field
            name="email"
            label="Mail address"
            value={email}
            onChangeText={setEmail}
            autoComplete="email"
            inputMode="email"
          />
          <ResendConfirmation email={email} />
        </Form>
      ) : null}
    </AccountPage>
  );
}
