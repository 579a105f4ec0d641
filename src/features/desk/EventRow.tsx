import { useState } from "react";
import { StyleSheet, View } from "react-native";

import { Button, IconButton } from "@/components/Button";
import { DefinitionList } from "@/components/DefinitionList";
import { Caption, Dense, Mono } from "@/components/Text";
import { useColors } from "@/theme/ThemeProvider";
import { space } from "@/theme/tokens";
import type { EventLogQuery } from "~graphql/generated/graphql";
import { eventName } from "~shared/event/words";

export type LoggedEvent = EventLogQuery["eventLog"]["events"][number];

/** One event in a sentence; what chains it to the one before is shown on demand. */
export function EventRow({
  event,
  first,
  onAbout,
}: {
  event: LoggedEvent;
  first: boolean;
  /** Narrows the log to this subject; left out where it is that already. */
  onAbout?: (subject: string) => void;
}) {
  const colors = useColors();
  const [open, setOpen] = useState(false);
  return (
    <View
      role="listitem"
      style={[styles.row, { borderTopWidth: first ? 0 : 1, borderColor: colors.hairline }]}
    >
      <View style={styles.line}>
        <View style={styles.said}>
          <Dense>{event.sentence}</Dense>
          <Caption>{`${utcTime(event.at)} · event ${event.sequence} · ${eventName(event.kind)}`}</Caption>
        </View>
        <IconButton
          icon={open ? "chevron-up" : "chevron-down"}
          label={`Digest of event ${event.sequence}`}
          expanded={open}
          onPress={() => setOpen(!open)}
        />
      </View>
      {open ? (
        <View style={styles.more}>
          <DefinitionList
            items={[
              { term: "Digest", value: <Digest text={event.digest} /> },
              { term: "The one before", value: <Digest text={event.previousDigest} /> },
              { term: "About", value: event.subject },
            ]}
          />
          {onAbout ? (
            <View style={styles.actions}>
              <Button
                kind="text"
                icon="filter-variant"
                label={`All about ${event.subject}`}
                onPress={() => onAbout(event.subject)}
              />
            </View>
          ) : null}
        </View>
      ) : null}
    </View>
  );
}

function Digest({ text }: { text: string }) {
  return (
    <Dense style={styles.digest}>
      <Mono>{text}</Mono>
    </Dense>
  );
}

/** "16:00:07": the log is read in one time zone by everybody. */
export function utcTime(iso: string): string {
  return new Date(iso).toISOString().slice(11, 19);
}

/** "21 March 2026", in UTC. */
export function utcDay(iso: string): string {
  return new Date(iso).toLocaleDateString("en-GB", {
    day: "numeric",
    month: "long",
    year: "numeric",
    timeZone: "UTC",
  });
}

const styles = StyleSheet.create({
  row: { paddingLeft: space.m, paddingRight: space.xxs, paddingVertical: space.xs, gap: space.xs },
  line: { flexDirection: "row", alignItems: "center", gap: space.xs, minHeight: 44 },
  said: { flex: 1, minWidth: 0, gap: 2 },
  more: { gap: space.xs, paddingBottom: space.xs, paddingRight: space.s },
  digest: { overflowWrap: "anywhere" } as object,
  actions: { flexDirection: "row", marginLeft: -space.s },
});
