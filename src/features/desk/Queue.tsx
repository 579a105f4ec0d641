import { useQuery } from "@apollo/client/react";
import { View } from "react-native";

import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { Dense, Section } from "@/components/Text";
import { ReviewQueueDocument } from "~graphql/generated/graphql";

import { counted, isOverdue, partOf, searched } from "./queueFilter";
import { QueueRows } from "./QueueRows";

/** So many stand on the desk; the rest is a touch away. */
const SHOWN = 4;

/** An editor's work at a glance: what one has claimed, then the oldest that one could claim. */
export function Queue() {
  const { data, loading, error, refetch } = useQuery(ReviewQueueDocument, {
    fetchPolicy: "cache-and-network",
  });
  const all = searched(data?.queue ?? [], "");
  const mine = all.filter((item) => partOf(item) === "mine");
  const free = all.filter((item) => partOf(item) === "free");
  const counts = counted(all);
  const overdue = free.filter((item) => isOverdue(item, new Date())).length;
  const rest = [
    overdue > 0 ? `${overdue} overdue` : "",
    counts.others > 0 ? `${counts.others} with others` : "",
    counts.barred > 0 ? `${counts.barred} not for you` : "",
  ].filter(Boolean);
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
      {all.length > 0 && mine.length + free.length === 0 ? (
        <Dense muted>Nothing is free to claim now.</Dense>
      ) : null}
      <QueueRows title="Claimed by me" rows={mine} />
      <QueueRows title="Waiting, oldest first" rows={free.slice(0, SHOWN)} of={free.length} />
      {data && all.length > 0 ? (
        <View
          style={{ flexDirection: "row", flexWrap: "wrap", alignItems: "center", columnGap: 12 }}
        >
          <Button
            kind="outline"
            icon="format-list-bulleted"
            label={`The whole queue, ${all.length}`}
            href="/desk/queue"
          />
          {rest.length > 0 ? <Dense muted>{rest.join(", ")}</Dense> : null}
        </View>
      ) : null}
    </View>
  );
}
