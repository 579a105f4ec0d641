import { StyleSheet, View } from "react-native";

import { Button } from "@/components/Button";
import { Block, Caption, Dense } from "@/components/Text";
import { dateTime } from "@/components/when";
import { space } from "@/theme/tokens";
import type { LifePartsFragment } from "~graphql/generated/graphql";

import { happenedWords, noticeTitle } from "./life";

/** What happened to the record, by the event log, and notices that hold no more. */
export function HappenedPart({
  life,
  onChange,
}: {
  life: LifePartsFragment;
  /** Opens the maintainer's steps, for who may take them. */
  onChange?: () => void;
}) {
  const ended = life.notices.filter(({ endedAt }) => endedAt !== null);
  return (
    <View style={styles.all}>
      <Block>What happened to this record</Block>
      {life.happened.length === 0 ? <Dense muted>Nothing since its approval.</Dense> : null}
      <View role="list" aria-label="What happened to this record" style={styles.all}>
        {life.happened.map((event) => (
          <View key={event.sequence} role="listitem">
            <Dense>{happenedWords(event)}</Dense>
            <Caption muted>
              {dateTime(event.at)}, {event.by}
            </Caption>
          </View>
        ))}
      </View>
      {ended.map((notice) => (
        <View key={notice.id}>
          <Dense muted>
            Held before: {noticeTitle(notice)}. {notice.reason}
          </Dense>
          <Caption muted>
            {notice.endedAt ? `Until ${dateTime(notice.endedAt)}` : ""}
            {notice.endedBy ? `, ${notice.endedBy}` : ""}
            {notice.endedReason ? `: ${notice.endedReason}` : ""}
          </Caption>
        </View>
      ))}
      {onChange ? (
        <View style={styles.action}>
          <Button
            label="Erratum, supersede, withdraw"
            kind="outline"
            icon="pencil-outline"
            onPress={onChange}
          />
        </View>
      ) : null}
    </View>
  );
}

const styles = StyleSheet.create({
  all: { gap: space.xs },
  action: { flexDirection: "row", paddingTop: space.xxs },
});
