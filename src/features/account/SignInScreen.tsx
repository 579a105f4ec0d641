import { useApolloClient, useMutation } from "@apollo/client/react";
import { useLocalSearchParams, useRouter } from "expo-router";
import { useState } from "react";
import { View } from "react-native";

import { useSession } from "@/apollo/useSession";
import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { Field } from "@/components/Field";
import { Notice } from "@/components/Notice";
import { Block, Body, Caption, Dense, Mono } from "@/components/Text";
import { SignInDocument, type ViewerPartsFragment } from "~graphql/generated/graphql";

import { AccountPage, Form } from "./AccountForm";
import { returnAddress, withNext } from "./links";
import { ResendConfirmation } from "./ResendConfirmation";
import { useOutcome } from "./useOutcome";

type Viewer = { __typename: "Viewer" } & ViewerPartsFragment;

export function SignInScreen() {
  const router = useRouter();
  const client = useApolloClient();
  const { next } = useLocalSearchParams<{ next?: string }>();
  const { viewer, demonstration } = useSession();
  const [email, setEmail] = useState("");
  const [password, setPassword] = useState("");
  const [code, setCode] = useState<string | null>(null);
  const [signIn] = useMutation(SignInDocument);
  const outcome = useOutcome<Viewer>(["email", "password"]);

  const send = async () => {
    setCode(null);
    const signedIn = await outcome.run(async () => {
      const { data } = await signIn({ variables: { email, password } });
      if (data?.signIn.__typename === "Refusal") setCode(data.signIn.code);
      return data?.signIn as Viewer | undefined;
    });
    if (!signedIn) return;
    // What the browser holds was fetched as somebody else.
    await client.resetStore().catch(() => undefined);
    router.replace(returnAddress(next));
  };

  if (viewer && !outcome.good) {
    return (
      <AccountPage title="Sign in">
        <Notice
          grade="note"
          title={`You are signed in as ${viewer.nameOnPapers}`}
          action={<Button kind="tonal" label="Go on" href={String(returnAddress(next))} />}
        >
          To use another account, sign out first.
        </Notice>
      </AccountPage>
    );
  }
  return (
    <AccountPage title="Sign in">
      <Form
        label="Sign in"
        onSubmit={() => void send()}
        problem={outcome.problem}
        problemField={outcome.problemField}
      >
        <Field
          name="email"
          label="Mail address"
          value={email}
          onChangeText={setEmail}
          autoComplete="username"
          inputMode="email"
          error={outcome.at("email")}
          onSubmit={() => void send()}
        />
        <Field
          name="password"
          label="Password"
          secure
          value={password}
          onChangeText={setPassword}
          autoComplete="current-password"
          error={outcome.at("password")}
          onSubmit={() => void send()}
        />
        <Button kind="filled" label="Sign in" busy={outcome.busy} onPress={() => void send()} />
      </Form>
      {code && /CONFIRM/i.test(code) ? <ResendConfirmation email={email} /> : null}
      <View style={{ gap: 4, alignItems: "flex-start" }}>
        <Button kind="text" label="Register" href={withNext("/account/register", next)} />
        <Button kind="text" label="I forgot my password" href="/account/reset" />
      </View>
      {demonstration ? (
        <DemonstrationAccounts
          onUse={(address) => {
            setEmail(address);
            setPassword(DEMONSTRATION_PASSWORD);
          }}
        />
      ) : null}
    </AccountPage>
  );
}

const DEMONSTRATION_PASSWORD = "lifting-fog-2026";
const DEMONSTRATION_ACCOUNTS = [
  { role: "Contributor", email: "contributor@fogline.example" },
  { role: "Second contributor", email: "second-contributor@fogline.example" },
  { role: "Editor", email: "editor@fogline.example" },
  { role: "Second editor", email: "second-editor@fogline.example" },
  { role: "Maintainer", email: "maintainer@fogline.example" },
  { role: "Reader", email: "reader@fogline.example" },
];

/** The invented accounts of a demonstration registry; they open nothing real. */
function DemonstrationAccounts({ onUse }: { onUse: (email: string) => void }) {
  return (
    <Card style={{ gap: 8 }}>
      <Block level={2}>Demonstration accounts</Block>
      <Dense muted>
        Invented people, one or two for each role. They all have the password{" "}
        <Mono>{DEMONSTRATION_PASSWORD}</Mono>.
      </Dense>
      {DEMONSTRATION_ACCOUNTS.map(({ role, email }) => (
        <View
          key={email}
          style={{
            flexDirection: "row",
            alignItems: "center",
            justifyContent: "space-between",
            gap: 8,
          }}
        >
          <View style={{ flex: 1, minWidth: 0 }}>
            <Body>{role}</Body>
            <Caption style={{ overflow: "hidden" }}>{email}</Caption>
          </View>
          <Button
            kind="text"
            label="Fill in"
            accessibilityLabel={`Fill in the ${role.toLowerCase()}'s account`}
            onPress={() => onUse(email)}
          />
        </View>
      ))}
    </Card>
  );
}
