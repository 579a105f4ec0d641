import { useMutation } from "@apollo/client/react";
import { useState } from "react";
import { View } from "react-native";

import { Button } from "@/components/Button";
import { RadioRows } from "@/components/CheckRow";
import { Confirm } from "@/components/Confirm";
import { Field } from "@/components/Field";
import { Dense, Label, Section } from "@/components/Text";
import { DeleteAccountDocument } from "~graphql/generated/graphql";
import { FORMER_MEMBER, type CreditAfterwards } from "~shared/review/formerMember";

import { Form } from "./AccountForm";
import { useLeave } from "./useLeave";
import { useOutcome } from "./useOutcome";

/** Ends the account. What was brought to the registry stays, credited or not. */
export function DeleteAccount({ nameOnPapers }: { nameOnPapers: string }) {
  const leave = useLeave();
  const [credit, setCredit] = useState<CreditAfterwards>("named");
  const [password, setPassword] = useState("");
  const [asking, setAsking] = useState(false);
  const [deleteAccount] = useMutation(DeleteAccountDocument);
  const outcome = useOutcome<{ __typename: "Done"; message: string }>(["password"]);
  const send = async () => {
    setAsking(false);
    const done = await outcome.run(
      async () =>
        (await deleteAccount({ variables: { password, credit } })).data?.deleteAccount as never,
    );
    if (done) await leave();
  };
  return (
    <View style={{ gap: 16 }}>
      <Section>Delete the account</Section>
      <Dense muted>
        Your address, password, further names, imported files and links are removed, drafts are
        discarded, claims go back to the queue. Records, readings and saved tables stay: others rely
        on them.
      </Dense>
      <Form
        label="Delete the account"
        onSubmit={() => setAsking(true)}
        problem={outcome.problem}
        problemField={outcome.problemField}
      >
        <Label>What you brought is credited to</Label>
        <RadioRows
          label="What you brought is credited to"
          value={credit}
          options={[
            { value: "named", label: `${nameOnPapers}, as now`, hint: "Your public page stays." },
            {
              value: "anonymous",
              label: `“${FORMER_MEMBER}”`,
              hint: "Name and ORCID are removed too. Files of tables that were saved before keep the name: their bytes never change.",
            },
          ]}
          onChange={(value) => setCredit(value as CreditAfterwards)}
        />
        <Field
          name="password"
          label="Your password"
          secure
          value={password}
          onChangeText={setPassword}
          autoComplete="current-password"
          error={outcome.at("password")}
          onSubmit={() => setAsking(true)}
        />
        <Button
          kind="return"
          icon="delete-outline"
          label="Delete the account"
          busy={outcome.busy}
          onPress={() => setAsking(true)}
        />
      </Form>
      <Confirm
        visible={asking}
        title="Delete your account?"
        text="It can't be brought back. You can register again with the same address, as another account."
        confirmLabel="Delete it"
        onConfirm={() => void send()}
        onCancel={() => setAsking(false)}
      />
    </View>
  );
}
