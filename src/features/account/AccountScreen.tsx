import { useApolloClient, useMutation } from "@apollo/client/react";
import { useRouter } from "expo-router";
import { useState } from "react";
import { View } from "react-native";

import { userMessage } from "@/apollo/userMessage";
import { useSession } from "@/apollo/useSession";
import { Button } from "@/components/Button";
import { Divider } from "@/components/Card";
import { DefinitionList } from "@/components/DefinitionList";
import { Empty } from "@/components/feedback/Empty";
import { Loading } from "@/components/feedback/Loading";
import { Field } from "@/components/Field";
import { Notice } from "@/components/Notice";
import { Segments } from "@/components/Segments";
import { Section } from "@/components/Text";
import { Screen } from "@/layout/Screen";
import { type ThemeChoice, useTheme } from "@/theme/ThemeProvider";
import {
  ChangePasswordDocument,
  SignOutDocument,
  UpdateProfileDocument,
  type ViewerPartsFragment,
} from "~graphql/generated/graphql";
import type { Role } from "~shared/review/states";

import { Form } from "./AccountForm";
import { useOutcome } from "./useOutcome";

const ROLE_WORDS: Record<Role, string> = {
  contributor: "Contributor",
  editor: "Editor",
  maintainer: "Maintainer",
};

/** The own account: who one is on papers, the password, the look, the way out. */
export function AccountScreen() {
  const { viewer, loading } = useSession();
  return (
    <Screen title="Account" subtitle={viewer?.nameOnPapers}>
      <View style={{ width: "100%", maxWidth: 560, gap: 32 }}>
        {loading ? (
          <Loading label="Fetching your account" />
        ) : viewer ? (
          <>
            <DefinitionList
              items={[
                { term: "Mail address", value: viewer.email },
                {
                  term: "Roles",
                  value: viewer.roles.length
                    ? viewer.roles.map((role) => ROLE_WORDS[role]).join(", ")
                    : "Theorist: fitting tables, no further role",
                },
              ]}
            />
            <Profile viewer={viewer} />
            <Divider />
            <Password />
          </>
        ) : (
          <Empty
            icon="account-circle-outline"
            title="Nobody is signed in"
            text="Reading and downloading need no account. An account saves fitting tables and, with a role, submits and reviews."
            action={
              <>
                <Button kind="filled" label="Sign in" href="/account/sign-in?next=%2Faccount" />
                <Button kind="text" label="Register" href="/account/register" />
              </>
            }
          />
        )}
        <Divider />
        <Look />
        {viewer ? (
          <>
            <Divider />
            <SignOut />
          </>
        ) : null}
      </View>
    </Screen>
  );
}

function Profile({ viewer }: { viewer: Omit<ViewerPartsFragment, "__typename"> }) {
  const [nameOnPapers, setName] = useState(viewer.nameOnPapers);
  const [orcid, setOrcid] = useState(viewer.orcid ?? "");
  const [update] = useMutation(UpdateProfileDocument);
  const outcome = useOutcome<{ __typename: "Viewer" }>(["nameOnPapers", "orcid"]);
  const send = () =>
    outcome.run(
      async () =>
        (await update({ variables: { nameOnPapers, orcid: orcid.trim() || null } })).data
          ?.updateProfile as never,
    );
  return (
    <View style={{ gap: 16 }}>
      <Section>Profile</Section>
      <Form
        label="Profile"
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
          name="orcid"
          label="ORCID"
          value={orcid}
          onChangeText={setOrcid}
          hint="Four groups of four digits, or leave it empty."
          error={outcome.at("orcid")}
          onSubmit={() => void send()}
        />
        <Button
          kind="tonal"
          label="Save the profile"
          busy={outcome.busy}
          onPress={() => void send()}
        />
        {outcome.good ? <Notice grade="done">The profile is saved.</Notice> : null}
      </Form>
    </View>
  );
}

function Password() {
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

function Look() {
  const { choice, choose } = useTheme();
  return (
    <View style={{ gap: 16 }}>
      <Section>Look</Section>
      <Segments
        label="Look"
        value={choice}
        options={[
          { value: "system", label: "As the system" },
          { value: "light", label: "Light" },
          { value: "dark", label: "Dark" },
        ]}
        onChange={(value) => choose(value as ThemeChoice)}
      />
    </View>
  );
}

function SignOut() {
  const router = useRouter();
  const client = useApolloClient();
  const [signOut, { loading }] = useMutation(SignOutDocument);
  const [problem, setProblem] = useState<string | null>(null);
  const send = async () => {
    setProblem(null);
    try {
      await signOut();
      // Nothing of this person's desk stays in the browser's memory.
      await client.resetStore().catch(() => undefined);
      router.replace("/");
    } catch (error) {
      setProblem(userMessage(error));
    }
  };
  return (
    <View style={{ gap: 12 }}>
      <Button
        kind="outline"
        icon="logout"
        label="Sign out"
        busy={loading}
        onPress={() => void send()}
      />
      {problem ? <Notice grade="error">{problem}</Notice> : null}
    </View>
  );
}
