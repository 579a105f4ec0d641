import { useMutation, useQuery } from "@apollo/client/react";
import { useState } from "react";
import { View } from "react-native";

import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { Confirm } from "@/components/Confirm";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { Notice } from "@/components/Notice";
import { Dense, Section } from "@/components/Text";
import {
  type ApiTokenPartsFragment,
  ApiTokensDocument,
  RevokeApiTokenDocument,
} from "~graphql/generated/graphql";
import { MOST_TOKENS } from "~shared/review/tokenScopes";

import { ApiTokenRow } from "./ApiTokenRow";
import { MakeApiToken } from "./MakeApiToken";
import { TokenSecret } from "./TokenSecret";
import { useOutcome } from "./useOutcome";

/** Keys by which programs act for this person: made, shown once, listed, revoked. */
export function ApiTokens() {
  const { data, error, refetch } = useQuery(ApiTokensDocument, {
    fetchPolicy: "cache-and-network",
  });
  const [making, setMaking] = useState(false);
  const [made, setMade] = useState<{ name: string; secret: string } | null>(null);
  return (
    <View style={{ gap: 16 }}>
      <Section>API tokens</Section>
      <Dense muted>
        With a token a program of yours acts for you: it reads what you read, and saves tables or
        runs fits if you let it. No token does desk work or changes your account.
      </Dense>
      {made ? <TokenSecret {...made} onDone={() => setMade(null)} /> : null}
      {data ? (
        <>
          <TokenList tokens={data.apiTokens} changed={refetch} />
          {making ? (
            <MakeApiToken
              onMade={(name, secret) => {
                setMaking(false);
                setMade({ name, secret });
                // A list that did not arrive anew comes with the next visit.
                void refetch().catch(() => undefined);
              }}
              onCancel={() => setMaking(false)}
            />
          ) : (
            <Button
              kind="tonal"
              icon="key-outline"
              label="Make a token"
              disabledBecause={
                live(data.apiTokens) >= MOST_TOKENS
                  ? `You have ${MOST_TOKENS} tokens. Revoke one first.`
                  : undefined
              }
              onPress={() => {
                setMade(null);
                setMaking(true);
              }}
            />
          )}
        </>
      ) : error ? (
        <Failed error={error} onRetry={() => void refetch().catch(() => undefined)} />
      ) : (
        <Loading label="Fetching your tokens" rows={2} />
      )}
    </View>
  );
}

const isLive = ({ state }: ApiTokenPartsFragment): boolean => state === "active";
const live = (tokens: readonly ApiTokenPartsFragment[]): number => tokens.filter(isLive).length;

function TokenList({
  tokens,
  changed,
}: {
  tokens: readonly ApiTokenPartsFragment[];
  changed: () => Promise<unknown>;
}) {
  const [asked, setAsked] = useState<ApiTokenPartsFragment | null>(null);
  const [withEnded, setWithEnded] = useState(false);
  const [revoke] = useMutation(RevokeApiTokenDocument);
  const outcome = useOutcome<{ __typename: "Done"; message: string }>([]);
  const send = async (id: string) => {
    setAsked(null);
    await outcome.run(
      async () => (await revoke({ variables: { id } })).data?.revokeApiToken as never,
    );
    await changed().catch(() => undefined);
  };
  const ended = tokens.filter((token) => !isLive(token));
  const shown = [...tokens.filter(isLive), ...(withEnded ? ended : [])];
  return (
    <>
      {shown.length > 0 ? (
        <Card flush>
          <View role="list" aria-label="API tokens">
            {shown.map((token, index) => (
              <ApiTokenRow
                key={token.id}
                token={token}
                first={index === 0}
                busy={outcome.busy}
                onRevoke={() => setAsked(token)}
              />
            ))}
          </View>
        </Card>
      ) : (
        <Dense>
          {ended.length > 0 ? "No token of yours works now." : "You have no token yet."}
        </Dense>
      )}
      {ended.length > 0 ? (
        <Button
          kind="text"
          label={
            withEnded
              ? "Leave out what has ended"
              : `Show ${ended.length === 1 ? "one token that has" : `${ended.length} tokens that have`} ended`
          }
          onPress={() => setWithEnded(!withEnded)}
        />
      ) : null}
      {outcome.good ? <Notice grade="done">{outcome.good.message}</Notice> : null}
      {outcome.problem ? <Notice grade="error">{outcome.problem}</Notice> : null}
      <Confirm
        visible={asked !== null}
        title="Revoke this token?"
        text={`Whatever uses “${asked?.name ?? ""}” is refused from now on. A revoked token can't be brought back.`}
        confirmLabel="Revoke it"
        onConfirm={() => {
          if (asked) void send(asked.id);
        }}
        onCancel={() => setAsked(null)}
      />
    </>
  );
}
