import { View } from "react-native";

import { useSession } from "@/apollo/useSession";
import { Button } from "@/components/Button";
import { Divider } from "@/components/Card";
import { DefinitionList } from "@/components/DefinitionList";
import { Empty } from "@/components/feedback/Empty";
import { Loading } from "@/components/feedback/Loading";
import { Segments } from "@/components/Segments";
import { Section } from "@/components/Text";
import { Screen } from "@/layout/Screen";
import { type ThemeChoice, useTheme } from "@/theme/ThemeProvider";
import type { Role } from "~shared/review/states";

import { ApiTokens } from "./ApiTokens";
import { AddressForm } from "./AddressForm";
import { DeleteAccount } from "./DeleteAccount";
import { PasswordForm } from "./PasswordForm";
import { ProfileForm } from "./ProfileForm";
import { Sessions } from "./Sessions";

const ROLE_WORDS: Record<Role, string> = {
  contributor: "Contributor",
  editor: "Editor",
  maintainer: "Maintainer",
};

/** The own account: who one is on papers, address, password, API tokens, sessions, the look, the way out. */
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
            <ProfileForm viewer={viewer} />
            <Divider />
            <AddressForm present={viewer.email} />
            <Divider />
            <PasswordForm />
            <Divider />
            <ApiTokens />
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
            <Sessions />
            <Divider />
            <DeleteAccount nameOnPapers={viewer.nameOnPapers} />
          </>
        ) : null}
      </View>
    </Screen>
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
