import { View } from "react-native";

import { Card } from "@/components/Card";
import { Body, Caption, Dense, Label } from "@/components/Text";
import { dateTime } from "@/components/when";
import type { ErrorReportEntryPartsFragment } from "~graphql/generated/graphql";
import { outcomeWords, type ReportOutcome, type ReportState } from "~shared/review/errorReport";

/** Where a report stands, in words. */
export function standing(report: {
  state: ReportState;
  outcome?: ReportOutcome | null;
  correctedBy?: string | null;
}): string {
  if (report.state === "open") return "Waits for an answer";
  if (report.state === "answered" || !report.outcome) return "Answered";
  return outcomeWords(report.outcome, report.correctedBy ?? null);
}

/** What was written, as it was typed: line ends stay, long words break. */
export function Written({ children }: { children: string }) {
  return (
    <Body style={{ whiteSpace: "pre-line", overflowWrap: "anywhere" } as never}>{children}</Body>
  );
}

/** The report itself and everything written since, oldest first. */
export function Trail({
  text,
  reportedAt,
  entries,
  reporter,
}: {
  text: string;
  reportedAt: string;
  entries: readonly ErrorReportEntryPartsFragment[];
  /** How whoever reported it is called on this page. */
  reporter: string;
}) {
  return (
    <View role="list" aria-label="Report and answers" style={{ gap: 12 }}>
      <Entry by={reporter} at={reportedAt} text={text} />
      {entries.map((entry) => (
        <Entry key={entry.id} by={entry.by ?? reporter} at={entry.at} text={entry.text} />
      ))}
    </View>
  );
}

function Entry({ by, at, text }: { by: string; at: string; text: string }) {
  return (
    <View role="listitem">
      <Card style={{ gap: 8 }}>
        <View style={{ flexDirection: "row", flexWrap: "wrap", columnGap: 12 }}>
          <Label>{by}</Label>
          <Caption>{dateTime(at)}</Caption>
        </View>
        <Written>{text}</Written>
      </Card>
    </View>
  );
}

/** The record a report is about, in a line. */
export function About({
  quotable,
  citation,
}: {
  quotable: string;
  citation?: { shortName: string; title?: string } | null;
}) {
  return (
    <View style={{ gap: 2 }}>
      <Dense style={{ fontWeight: "600" }}>{`${quotable}, ${citation?.shortName ?? ""}`}</Dense>
      {citation?.title ? <Dense muted>{citation.title}</Dense> : null}
    </View>
  );
}
