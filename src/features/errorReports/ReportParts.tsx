import { View } from "react-native";

import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { StatusPill } from "@/components/StatusPill";
import { Body, Caption, Dense, Label, Mono } from "@/components/Text";
import { dateTime } from "@/components/when";
import type { ErrorReportEntryPartsFragment } from "~graphql/generated/graphql";
import { outcomeWords, type ReportOutcome, type ReportState } from "~shared/review/errorReport";

/** What became of a closed report; null while it is open or merely answered, as its pill says. */
export function standing(report: {
  state: ReportState;
  outcome?: ReportOutcome | null;
  correctedBy?: string | null;
}): string | null {
  return report.outcome ? outcomeWords(report.outcome, report.correctedBy ?? null) : null;
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

/** The record a report is about, where the report stands, and the way to the record. */
export function About({
  report,
}: {
  report: {
    number: string;
    quotable: string;
    citation?: { shortName: string; title: string } | null;
    state: ReportState;
    outcome?: ReportOutcome | null;
    correctedBy?: string | null;
  };
}) {
  const { number, quotable, citation } = report;
  return (
    <View style={{ gap: 4 }}>
      <View style={{ flexDirection: "row", flexWrap: "wrap", alignItems: "center", gap: 12 }}>
        <Mono style={{ fontSize: 15 }}>{quotable}</Mono>
        <View>
          <StatusPill state={report.state} />
        </View>
        {standing(report) ? <Dense>{standing(report)}</Dense> : null}
      </View>
      {citation ? (
        <View>
          <Dense style={{ fontWeight: "600" }}>{citation.shortName}</Dense>
          <Dense muted>{citation.title}</Dense>
        </View>
      ) : null}
      <View style={{ marginLeft: -12 }}>
        <Button kind="text" label={`See ${number}`} href={`/constraints/${number}`} />
      </View>
    </View>
  );
}
