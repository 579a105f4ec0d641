import { useMutation } from "@apollo/client/react";
import { useState } from "react";
import { View } from "react-native";

import { userMessage } from "@/apollo/userMessage";
import { Button } from "@/components/Button";
import { Confirm } from "@/components/Confirm";
import { Notice } from "@/components/Notice";
import { Dense, Section } from "@/components/Text";
import { SignOutDocument, SignOutEverywhereDocument } from "~graphql/generated/graphql";

import { useLeave } from "./useLeave";

/** The way out, here or on every device. */
export function Sessions() {
  const leave = useLeave();
  const [signOut, here] = useMutation(SignOutDocument);
  const [signOutEverywhere, everywhere] = useMutation(SignOutEverywhereDocument);
  const [asking, setAsking] = useState(false);
  const [problem, setProblem] = useState<string | null>(null);
  const send = async (run: () => Promise<unknown>) => {
    setAsking(false);
    setProblem(null);
    try {
      await run();
      await leave();
    } catch (error) {
      setProblem(userMessage(error));
    }
  };
  return (
    <View style={{ gap: 16 }}>
      <Section>Sessions</Section>
      <Dense muted>
        You stay signed in for two weeks after your last visit, on each device by itself.
      </Dense>
      <View style={{ flexDirection: "row", flexWrap: "wrap", gap: 12 }}>
        <Button
          kind="outline"
          icon="logout"
          label="Sign out"
          busy={here.loading}
          onPress={() => void send(() => signOut())}
        />
        <Button
          kind="outline"
          label="Sign out everywhere"
          busy={everywhere.loading}
          onPress={() => setAsking(true)}
        />
      </View>
      {problem ? <Notice grade="error">{problem}</Notice> : null}
      <Confirm
        visible={asking}
        title="Sign out everywhere?"
        text="Every session of your account ends at once, this one too. Your password stays as it is."
        confirmLabel="Sign out everywhere"
        onConfirm={() => void send(() => signOutEverywhere())}
        onCancel={() => setAsking(false)}
      />
    </View>
  );
}
