import { useQuery } from "@apollo/client/react";
import { View } from "react-native";

import { Card } from "@/components/Card";
import { Failed } from "@/components/feedback/Failed";
import { ListRow } from "@/components/ListRow";
import { StatusPill } from "@/components/StatusPill";
import { Block, Caption, Dense, Mono } from "@/components/Text";
import { dateTime } from "@/components/when";
import { useColors } from "@/theme/ThemeProvider";
import { MySetsDocument } from "~graphql/generated/graphql";

/** A contributor's correlated sets at the desk; nothing where there are none. */
export function MySets() {
  const colors = useColors();
  const { data, error, refetch } = useQuery(MySetsDocument, { fetchPolicy: "cache-and-network" });
  if (error && !data) {
    return (
      <Failed
        title="Your correlated sets did not arrive"
        error={error}
        onRetry={() => void refetch()}
      />
    );
  }
  const sets = data?.mySets ?? [];
  if (sets.length === 0) return null;
  return (
    <View style={{ gap: 8 }}>
      <Block>{`Correlated sets, ${sets.length}`}</Block>
      <Card flush>
        <View role="list" aria-label="Your correlated sets">
          {sets.map((set, index) => (
            <ListRow
              key={set.number}
              first={index === 0}
              href={
                set.state === "draft" || set.state === "returned"
                  ? `/desk/sets/${set.number}`
                  : `/sets/${set.number}`
              }
            >
              <View
                style={{ flexDirection: "row", flexWrap: "wrap", alignItems: "center", gap: 8 }}
              >
                <Mono style={{ fontSize: 14 }}>{set.number}</Mono>
                <StatusPill state={set.state} />
                <Dense muted>{dateTime(set.updatedAt)}</Dense>
              </View>
              <Dense style={{ fontWeight: "600" }}>{set.label ?? "Without a label yet"}</Dense>
              <Dense muted>
                {`${set.citation.shortName}: ${set.members.map(({ number }) => number).join(", ")}`}
              </Dense>
              {set.state === "returned" && set.decisionNote ? (
                <Caption style={{ color: colors.emberText }}>{`“${set.decisionNote}”`}</Caption>
              ) : null}
            </ListRow>
          ))}
        </View>
      </Card>
    </View>
  );
}
