import { useMutation, useQuery } from "@apollo/client/react";
import { useEffect, useState } from "react";
import { View } from "react-native";

import { userMessage } from "@/apollo/userMessage";
import { useSession } from "@/apollo/useSession";
import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { Confirm } from "@/components/Confirm";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { Field } from "@/components/Field";
import { Notice } from "@/components/Notice";
import { Body, Caption, Dense } from "@/components/Text";
import { dateTime } from "@/components/when";
import { useColors } from "@/theme/ThemeProvider";
import {
  GrantRoleDocument,
  PeopleDocument,
  type PersonPartsFragment,
  RevokeRoleDocument,
} from "~graphql/generated/graphql";
import { type Role, ROLES } from "~shared/review/states";

import { MaintainerPage } from "./Gate";

const SEARCH_DELAY_MS = 300;

export function PeopleScreen() {
  return (
    <MaintainerPage title="People" subtitle="Roles of the registry" here="/desk/people">
      <People />
    </MaintainerPage>
  );
}

interface Asked {
  person: PersonPartsFragment;
  role: Role;
  grant: boolean;
}

function People() {
  const [typed, setTyped] = useState("");
  const [text, setText] = useState("");
  useEffect(() => {
    const timer = setTimeout(() => setText(typed.trim()), SEARCH_DELAY_MS);
    return () => clearTimeout(timer);
  }, [typed]);
  const { data, previousData, loading, error, refetch } = useQuery(PeopleDocument, {
    variables: { text: text === "" ? null : text },
    fetchPolicy: "cache-and-network",
  });
  const { viewer, refetch: refetchSession } = useSession();
  const [grant, granting] = useMutation(GrantRoleDocument);
  const [revoke, revoking] = useMutation(RevokeRoleDocument);
  const [asked, setAsked] = useState<Asked | null>(null);
  const [outcome, setOutcome] = useState<{ good: boolean; text: string } | null>(null);
  const people = (data ?? previousData)?.people;

  const change = async ({ person, role, grant: giving }: Asked) => {
    setAsked(null);
    setOutcome(null);
    try {
      const variables = { personId: person.id, role };
      const result = giving
        ? (await grant({ variables })).data?.grantRole
        : (await revoke({ variables })).data?.revokeRole;
      if (result?.__typename === "Person") {
        const word = giving ? `is ${article(role)} now` : `is no ${role} any more`;
        setOutcome({ good: true, text: `${person.nameOnPapers} ${word}.` });
        if (person.id === viewer?.id) await refetchSession();
      } else {
        setOutcome({
          good: false,
          text: result?.message ?? "The server gave no answer. Try again.",
        });
      }
    } catch (failure) {
      setOutcome({ good: false, text: userMessage(failure) });
    }
  };

  return (
    <View style={{ gap: 16, maxWidth: 860 }}>
      <Field
        name="search"
        label="Search by name or address"
        value={typed}
        onChangeText={setTyped}
        inputMode="search"
        autoComplete="off"
      />
      {outcome ? <Notice grade={outcome.good ? "done" : "error"}>{outcome.text}</Notice> : null}
      {loading && !people ? <Loading label="Fetching people" /> : null}
      {error && !people ? <Failed error={error} onRetry={() => void refetch()} /> : null}
      {people && people.length === 0 ? (
        <Empty
          icon="account-group-outline"
          title="Nobody has this name or address"
          text="Search for a part of it, or clear the search."
          action={<Button kind="tonal" label="Clear the search" onPress={() => setTyped("")} />}
        />
      ) : null}
      {people && people.length > 0 ? (
        <Card flush>
          <View role="list" aria-label="People">
            {people.map((person, index) => (
              <PersonRow
                key={person.id}
                person={person}
                first={index === 0}
                busy={granting.loading || revoking.loading}
                onAsk={(role, giving) => setAsked({ person, role, grant: giving })}
              />
            ))}
          </View>
        </Card>
      ) : null}
      <Confirm
        visible={asked !== null}
        title={asked ? question(asked) : ""}
        text={asked ? consequence(asked) : ""}
        confirmLabel={asked?.grant ? "Grant the role" : "Revoke the role"}
        onConfirm={() => asked && void change(asked)}
        onCancel={() => setAsked(null)}
      />
    </View>
  );
}

function article(role: Role): string {
  return role === "editor" ? "an editor" : `a ${role}`;
}

function question({ person, role, grant }: Asked): string {
  return grant
    ? `Make ${person.nameOnPapers} ${article(role)}?`
    : `Take the ${role} role from ${person.nameOnPapers}?`;
}

const MAY: Record<Role, string> = {
  contributor: "A contributor submits constraints and imports files.",
  editor: "An editor reads submissions again and decides them, never their own.",
  maintainer: "A maintainer grants roles, this one too.",
};

function consequence({ role, grant }: Asked): string {
  return grant ? MAY[role] : "What was done in this role stays on record. It can be granted again.";
}

function PersonRow({
  person,
  first,
  busy,
  onAsk,
}: {
  person: PersonPartsFragment;
  first: boolean;
  busy: boolean;
  onAsk: (role: Role, grant: boolean) => void;
}) {
  const colors = useColors();
  return (
    <View
      role="listitem"
      style={{ padding: 16, gap: 8, borderTopWidth: first ? 0 : 1, borderColor: colors.hairline }}
    >
      <View>
        <Body style={{ fontWeight: "600" }}>{person.nameOnPapers}</Body>
        <Dense muted>{person.email}</Dense>
        <Caption>
          {person.confirmed
            ? `Registered ${dateTime(person.registeredAt)}`
            : "Address not confirmed yet: no role can be granted"}
        </Caption>
      </View>
      <View style={{ flexDirection: "row", flexWrap: "wrap", gap: 8 }}>
        {ROLES.map((role) => {
          const has = person.roles.includes(role);
          return (
            <Button
              key={role}
              kind={has ? "tonal" : "outline"}
              icon={has ? "check" : "plus"}
              label={role.charAt(0).toUpperCase() + role.slice(1)}
              accessibilityLabel={
                has
                  ? `Revoke the ${role} role of ${person.nameOnPapers}`
                  : `Grant ${person.nameOnPapers} the ${role} role`
              }
              busy={busy}
              onPress={() => onAsk(role, !has)}
            />
          );
        })}
      </View>
    </View>
  );
}
