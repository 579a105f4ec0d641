import { useQuery } from "@apollo/client/react";
import { View } from "react-native";

import { Card } from "@/components/Card";
import { Failed } from "@/components/feedback/Failed";
import { ListRow } from "@/components/ListRow";
import { StatusPill } from "@/components/StatusPill";
import { Block, Caption, Dense, Mono } from "@/components/Text";
import { dateTime, waitingTime } from "@/components/when";
import { useColors } from "@/theme/ThemeProvider";
import { SetQueueDocument, type SetQueueItemPartsFragment } from "~graphql/generated/graphql";

/** Matrices that wait for an editor, beside the queue of submissions; nothing where none waits. */
export function SetQueue() {
  const { data, error, refetch } = useQuery(SetQueueDocument, {
    fetchPolicy: "cache-and-network",
  });
  const sets = [...(data?.setQueue ?? [])].sort(
    (a, b) => Number(b.claimedByMe) - Number(a.claimedByMe),
  );
  if (error && !data) {
    return (
      <Failed
        title="The correlated sets did not arrive"
        error={error}
        onRetry={() => void refetch()}
      />
    );
  }
  if (sets.length === 0) return null;
  return (
    <View style={{ gap: 8 }}>
      <Block>{`Correlated sets, ${sets.length}`}</Block>
      <Card flush>
        <View role="list" aria-label="Correlated sets">
          {sets.map((set, index) => (
            <QueuedSet key={set.number} set={set} first={index === 0} />
          ))}
        </View>
      </Card>
    </View>
  );
}

function QueuedSet({ set, first }: { set: SetQueueItemPartsFragment; first: boolean }) {
  const colors = useColors();
  const where = [set.place, set.page ? `page ${set.page}` : null].filter(Boolean).join(", ");
  return (
    <ListRow href={`/desk/set-review/${set.number}`} first={first}>
      <View style={{ flexDirection: "row", flexWrap: "wrap", alignItems: "center", gap: 8 }}>
        <Mono style={{ fontSize: 14 }}>{set.number}</Mono>
        <StatusPill state={set.state} />
        <Dense muted>{standing(set)}</Dense>
      </View>
      <Dense style={{ fontWeight: "600" }}>{set.citation.shortName}</Dense>
      <Dense muted>{`Matrix of ${set.members.join(", ")}`}</Dense>
      {where ? <Caption>{where}</Caption> : null}
      {set.barredBecause ? (
        <Caption style={{ color: colors.emberText }}>{set.barredBecause}</Caption>
      ) : null}
    </ListRow>
  );
}

function standing(set: SetQueueItemPartsFragment): string {
  if (set.claimedByMe && set.claimedUntil) return `yours until ${dateTime(set.claimedUntil)}`;
  if (set.claimedUntil) return "another editor is reading it";
  return `waits ${waitingTime(set.submittedAt)}`;
}
