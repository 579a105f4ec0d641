import { View } from "react-native";

import { Card } from "@/components/Card";
import { ListRow } from "@/components/ListRow";
import { StatusPill } from "@/components/StatusPill";
import { Block, Caption, Dense, Mono } from "@/components/Text";
import { timeLeft, waitingTime } from "@/components/when";
import { useColors } from "@/theme/ThemeProvider";

import { isOverdue, type QueueItem } from "./queueFilter";

/** Submissions under a heading that counts them. */
export function QueueRows({
  title,
  rows,
  of = rows.length,
  level,
}: {
  title: string;
  rows: readonly QueueItem[];
  /** How many there are, where not all are shown. */
  of?: number;
  level?: 2;
}) {
  if (rows.length === 0) return null;
  return (
    <View style={{ gap: 8 }}>
      <Block
        level={level}
      >{`${title}, ${rows.length < of ? `${rows.length} of ${of}` : of}`}</Block>
      <Card flush>
        <View role="list" aria-label={title}>
          {rows.map((item, index) => (
            <QueueRow key={item.id} item={item} first={index === 0} />
          ))}
        </View>
      </Card>
    </View>
  );
}

export function QueueRow({ item, first }: { item: QueueItem; first: boolean }) {
  const colors = useColors();
  const { citation, place, page } = item;
  const where = [place, page ? `page ${page}` : null].filter(Boolean).join(", ");
  const overdue = isOverdue(item, new Date());
  return (
    <ListRow href={`/desk/review/${item.id}`} first={first}>
      <View style={{ flexDirection: "row", flexWrap: "wrap", alignItems: "center", gap: 8 }}>
        <Mono style={{ fontSize: 14 }}>
          {item.ordinal > 1 ? `${item.number}.${item.ordinal}` : item.number}
        </Mono>
        <StatusPill state={item.state} />
        <Dense
          muted={!overdue}
          style={overdue ? { color: colors.emberText, fontWeight: "600" } : undefined}
        >
          {standing(item, overdue)}
        </Dense>
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

function standing(item: QueueItem, overdue: boolean): string {
  if (item.claimedByMe && item.claimedUntil) return `yours, ${timeLeft(item.claimedUntil)} left`;
  if (item.claimedUntil) return "another editor is reading it";
  return `${overdue ? "overdue, " : ""}waits ${waitingTime(item.submittedAt)}`;
}
