import { useQuery } from "@apollo/client/react";
import { View } from "react-native";

import { useSession } from "@/apollo/useSession";
import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { Block, Body, Caption } from "@/components/Text";
import { dateTime } from "@/components/when";
import { CaughtMailsDocument } from "~graphql/generated/graphql";

import { MaintainerPage } from "./Gate";

export function MailScreen() {
  const { demonstration } = useSession();
  return (
    <MaintainerPage title="Caught mail" here="/desk/mail">
      {demonstration ? (
        <Mails />
      ) : (
        <Empty
          icon="email-outline"
          title="Mails go out here"
          text="Only the demonstration catches its mails instead of sending them."
          action={<Button kind="filled" label="To the desk" href="/desk" />}
        />
      )}
    </MaintainerPage>
  );
}

const LINK = /(https?:\/\/\S+)/g;

function Mails() {
  const { data, loading, error, refetch } = useQuery(CaughtMailsDocument, {
    fetchPolicy: "network-only",
  });
  if (loading && !data) return <Loading label="Fetching mails" />;
  if (error && !data) return <Failed error={error} onRetry={() => void refetch()} />;
  const mails = data?.caughtMails ?? [];
  return (
    <View style={{ gap: 16, maxWidth: 760 }}>
      <View style={{ flexDirection: "row" }}>
        <Button kind="tonal" icon="refresh" label="Look again" onPress={() => void refetch()} />
      </View>
      {mails.length === 0 ? (
        <Empty
          icon="email-outline"
          title="No mail yet"
          text="Registering, submitting, returning and approving each send one."
        />
      ) : null}
      {mails.map((mail) => (
        <Card key={mail.id} style={{ gap: 8 }}>
          <View>
            <Block level={2}>{mail.subject}</Block>
            <Caption>{`To ${mail.to}, ${dateTime(mail.at)}`}</Caption>
          </View>
          {mail.text.split(/\n{2,}/).map((paragraph, index) => (
            <Body key={index} style={{ whiteSpace: "pre-line", overflowWrap: "anywhere" } as never}>
              {paragraph.split(LINK).map((part, at) =>
                part.startsWith("http") ? (
                  <a key={at} href={part} style={{ color: "inherit" }}>
                    {part}
                  </a>
                ) : (
                  part
                ),
              )}
            </Body>
          ))}
        </Card>
      ))}
    </View>
  );
}
