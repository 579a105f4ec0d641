import { useQuery } from "@apollo/client/react";
import { StyleSheet, View } from "react-native";

import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { Block, Caption } from "@/components/Text";
import { space } from "@/theme/tokens";
import { EventLogDocument } from "~graphql/generated/graphql";

import { EventRow, type LoggedEvent, utcDay } from "./EventRow";
import { MaintainerPage } from "./Gate";
import { LogFilterForm } from "./LogFilterForm";
import { type LogFilter, useLogFilter } from "./useLogFilter";

/** Desk, Event log: what happened in the registry, newest first, for maintainers. */
export function EventLogScreen() {
  return (
    <MaintainerPage
      title="Event log"
      subtitle="Every change of state, times in UTC"
      here="/desk/log"
    >
      <EventLog />
    </MaintainerPage>
  );
}

function EventLog() {
  const kept = useLogFilter();
  const { filter, before, query } = kept;
  const { data, previousData, loading, error, refetch } = useQuery(EventLogDocument, {
    variables: { filter, before },
    fetchPolicy: "network-only",
  });
  const page = (data ?? previousData)?.eventLog;
  const narrowed = Object.keys(filter).length > 0;
  return (
    <View style={styles.page}>
      <LogFilterForm kept={kept} />
      {loading && !page ? <Loading label="Fetching events" /> : null}
      {error && !page ? <Failed error={error} onRetry={() => void refetch()} /> : null}
      {page ? (
        <>
          <View style={styles.head}>
            <Caption>{`${page.total} ${page.total === 1 ? "event" : "events"}${narrowed ? " of this filter" : ""}`}</Caption>
            <View style={styles.actions}>
              {narrowed ? (
                <Button kind="text" icon="filter-off-outline" label="Clear" onPress={kept.clear} />
              ) : null}
              <Button label="CSV" icon="tray-arrow-down" href={`/api/log.csv${query}`} />
              <Button label="JSONL" icon="tray-arrow-down" href={`/api/log.jsonl${query}`} />
            </View>
          </View>
          {page.events.length === 0 ? (
            <Empty
              title={narrowed ? "No event is like this" : "Nothing has happened yet"}
              text={
                narrowed
                  ? "Ask for less: a part of a name, a record without its revision, more days."
                  : "Each submission, reading and decision will stand here."
              }
              action={
                narrowed ? (
                  <Button kind="tonal" label="Clear the filter" onPress={kept.clear} />
                ) : undefined
              }
            />
          ) : (
            <Days events={page.events} about={filter.about} onAbout={kept.set} />
          )}
          <View style={styles.pages} role="navigation" aria-label="Pages of the log">
            {before === null ? null : (
              <Button icon="arrow-up" label="Newest events" onPress={() => kept.goBefore(null)} />
            )}
            {page.next === null || page.next === undefined ? null : (
              <Button
                icon="arrow-down"
                label="Older events"
                busy={loading}
                onPress={() => kept.goBefore(page.next ?? null)}
              />
            )}
          </View>
        </>
      ) : null}
    </View>
  );
}

/** The events of a page under the days on which they happened. */
function Days({
  events,
  about,
  onAbout,
}: {
  events: readonly LoggedEvent[];
  about: string | undefined;
  onAbout: (changes: LogFilter) => void;
}) {
  const days: { day: string; events: LoggedEvent[] }[] = [];
  for (const event of events) {
    const day = utcDay(event.at);
    const last = days.at(-1);
    if (last?.day === day) last.events.push(event);
    else days.push({ day, events: [event] });
  }
  return days.map(({ day, events: ofDay }) => (
    <View key={`${day} ${ofDay[0]?.sequence}`} style={styles.day}>
      <Block level={2}>{day}</Block>
      <Card flush>
        <View role="list" aria-label={`Events of ${day}`}>
          {ofDay.map((event, index) => (
            <EventRow
              key={event.sequence}
              event={event}
              first={index === 0}
              onAbout={
                event.subject === about ? undefined : (subject) => onAbout({ about: subject })
              }
            />
          ))}
        </View>
      </Card>
    </View>
  ));
}

const styles = StyleSheet.create({
  page: { gap: space.m, maxWidth: 860 },
  head: {
    flexDirection: "row",
    flexWrap: "wrap",
    alignItems: "center",
    justifyContent: "space-between",
    gap: space.xs,
  },
  actions: {
    flexDirection: "row",
    flexWrap: "wrap",
    flexShrink: 1,
    alignItems: "center",
    gap: space.xs,
  },
  day: { gap: space.xs },
  pages: { flexDirection: "row", flexWrap: "wrap", gap: space.s },
});
