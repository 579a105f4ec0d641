import { useQuery } from "@apollo/client/react";
import { View } from "react-native";

import { Card } from "@/components/Card";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { ListRow } from "@/components/ListRow";
import { StatusPill } from "@/components/StatusPill";
import { Block, Caption, Dense, Mono, Section } from "@/components/Text";
import { dateTime, waitingTime } from "@/components/when";
import { useColors } from "@/theme/ThemeProvider";
import { type QueueItemPartsFragment, ReviewQueueDocument } from "~graphql/generated/graphql";

/** An editor's work: what one has claimed, then what waits, oldest first. */
export function Queue() {
  const { data, loading, error, refetch } = useQuery(ReviewQueueDocument, {
    fetchPolicy: "cache-and-network",
  });
  const all = data?.queue ?? [];
  const mine = all.filter(({ claimedByMe }) => claimedByMe);
  const waiting = all
    .filter(({ claimedByMe }) => !claimedByMe)
    .sort((a, b) => a.submittedAt.localeCompare(b.submittedAt));
  return (
    <View style={{ gap: 16 }}>
      <Section>Queue</Section>
      {loading && !data ? <Loading label="Fetching the queue" /> : null}
      {error && !data ? <Failed error={error} onRetry={() => void refetch()} /> : null}
      {data && all.length === 0 ? (
        <Card>
          <Empty
            icon="check-all"
            title="Nothing waits"
            text="Every submission is decided. A mail tells you when the next one comes."
          />
        </Card>
      ) : null}
      <Group title="Claimed by me" rows={mine} />
      <Group title="Waiting, oldest first" rows={waiting} />
    </View>
  );
}

function Group({ title, rows }: { title: string; rows: readonly QueueItemPartsFragment[] }) {
  if (rows.length === 0) return null;
  return (
    <View style={{ gap: 8 }}>
      <Block>{`${title}, ${rows.length}`}</Block>
      <Card flush>
        <View role="list" aria-label={title}>
          {rows.map((item, index) => (
            <Row key={item.id} item={item} first={index === 0} />
          ))}
        </View>
      </Card>
    </View>
  );
}

function Row({ item, first }: { item: QueueItemPartsFragment; first: boolean }) {
  const colors = useColors();
  const { citation, place, page } = item;
  const where = [place, page ? `page ${page}` : null].filter(Boolean).join(", ");
  return (
    <ListRow href={`/desk/review/${item.id}`} first={first}>
      <View style={{ flexDirection: "row", flexWrap: "wrap", alignItems: "center", gap: 8 }}>
        <Mono style={{ fontSize: 14 }}>
          {item.ordinal > 1 ? `${item.number}.${item.ordinal}` : item.number}
        </Mono>
        <StatusPill state={item.state} />
        <Dense muted>{standing(item)}</Dense>
      </View>
      <Dense style={{ fontWeight: "600" }}>{citation.shortName}</Dense>
      <Dense muted numberOfLines={2}>
        {citation.title}
      </Dense>
      {where ? <Caption>{where}</Caption> : null}
      {item.barredBecause ? (
        <Caption style={{ color: colors.emberText }}>{item.barredBecause}</Caption>
      ) : null}
    </ListRow>
  );
}

function standing(item: QueueItemPartsFragment): string {
  if (item.claimedByMe && item.claimedUntil) return `yours until ${dateTime(item.claimedUntil)}`;
  if (item.claimedUntil) return "another editor is reading it";
  return `waits ${waitingTime(item.submittedAt)}`;
}
