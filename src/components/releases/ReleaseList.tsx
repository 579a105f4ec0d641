import { useQuery } from "@apollo/client/react";
import { View } from "react-native";

import { Card } from "@/components/Card";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { ListRow } from "@/components/ListRow";
import { Caption, Dense, Label, Mono } from "@/components/Text";
import { dateTime } from "@/components/when";
import { ReleaseListDocument } from "~graphql/generated/graphql";

/** All releases, newest first. */
export function ReleaseList() {
  const { data, error, loading, refetch } = useQuery(ReleaseListDocument, {
    fetchPolicy: "cache-and-network",
  });
  const releases = data?.releases;
  if (error && !releases) return <Failed error={error} onRetry={() => void refetch()} />;
  if (!releases) return loading ? <Loading label="Fetching the releases" rows={2} /> : null;
  return (
    <Card flush>
      {releases.length === 0 ? (
        <Empty
          icon="table"
          title="No release yet"
          text="A maintainer cuts the first one; until then tables draw from the latest approved records."
        />
      ) : (
        <View role="list" aria-label="Releases">
          {releases.map(({ number, cutAt, records, notes, digest }, index) => (
            <ListRow key={number} href={`/releases/${number}`} first={index === 0}>
              <Label>{`Release ${number}`}</Label>
              <Dense muted numberOfLines={2}>
                {notes}
              </Dense>
              <Caption muted>
                {`${records} records · ${dateTime(cutAt)} · digest `}
                <Mono>{digest.slice(0, 12)}</Mono>
              </Caption>
            </ListRow>
          ))}
        </View>
      )}
    </Card>
  );
}
