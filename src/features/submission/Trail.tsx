import { useQuery } from "@apollo/client/react";
import type { ReactNode } from "react";
import { View } from "react-native";

import { Card } from "@/components/Card";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { Thread } from "@/components/review/Thread";
import { StatusPill } from "@/components/StatusPill";
import { Block, Caption, Dense, Label, Section } from "@/components/Text";
import { dateTime } from "@/components/when";
import { useColors } from "@/theme/ThemeProvider";
import {
  SubmissionTrailDocument,
  type SubmissionPartsFragment,
  type TrailRoundPartsFragment,
} from "~graphql/generated/graphql";
import type { FieldName } from "~shared/statement/fields";
import { FIELD_NAMES } from "~shared/statement/words";

const nameOf = (field: string): string => FIELD_NAMES[field as FieldName] ?? "The paper";

/** What was sent, asked, answered, changed and decided over all rounds of a record, latest round first. */
export function Trail({ submission }: { submission: SubmissionPartsFragment }) {
  const { data, loading, error, refetch } = useQuery(SubmissionTrailDocument, {
    variables: { id: submission.id },
    fetchPolicy: "cache-and-network",
  });
  const rounds = data?.submission?.trail ?? [];
  return (
    <View style={{ gap: 12 }}>
      <Section>How it went</Section>
      {loading && !data ? <Loading label="Fetching the trail" /> : null}
      {error && !data ? <Failed error={error} onRetry={() => void refetch()} /> : null}
      {[...rounds].reverse().map((round) => (
        <RoundCard
          key={round.id}
          number={submission.number}
          round={round}
          next={rounds.find(({ ordinal }) => ordinal > round.ordinal) ?? null}
        />
      ))}
    </View>
  );
}

function RoundCard({
  number,
  round,
  next,
}: {
  number: string;
  round: TrailRoundPartsFragment;
  /** The round that answers this one. */
  next: TrailRoundPartsFragment | null;
}) {
  const waits = next?.state === "submitted" || next?.state === "inReview";
  return (
    <Card style={{ gap: 12 }}>
      <View style={{ flexDirection: "row", flexWrap: "wrap", alignItems: "center", gap: 8 }}>
        <Block>{`${number}.${round.ordinal}`}</Block>
        <StatusPill state={round.state} />
      </View>
      <Step
        what={
          round.submittedAt
            ? `${round.enteredBy} entered and sent it`
            : `${round.enteredBy} began it`
        }
        at={round.submittedAt ?? round.begunAt}
      >
        {round.changes.map(({ field, before, after }) => (
          <Dense
            key={field}
          >{`${nameOf(field)}: was ${before || "open"}, now ${after || "open"}`}</Dense>
        ))}
        {round.answers.map(({ message, answer, accepted }) => (
          <View key={message}>
            <Dense muted>{message}</Dense>
            <Dense>{`“${answer}”${accepted ? ", accepted" : ""}`}</Dense>
          </View>
        ))}
      </Step>
      {round.readBy && round.readAt ? (
        <Step what={`${round.readBy} read the paper again`} at={round.readAt} />
      ) : null}
      {round.readBy && round.decidedAt ? (
        <Step
          what={`${round.readBy} ${round.state === "approved" ? "approved it" : "returned it"}`}
          at={round.decidedAt}
        >
          {round.decisionNote ? <Dense>{`“${round.decisionNote}”`}</Dense> : null}
          {round.comments.map((comment) => {
            const turn = comment.messages.some(({ mine }) => !mine);
            return (
              <View key={comment.id} style={{ gap: 4 }}>
                <Label>{nameOf(comment.field)}</Label>
                <Dense>{comment.text}</Dense>
                <Dense muted>
                  {comment.answer ? `Answer: ${comment.answer}` : "Not answered yet"}
                </Dense>
                <Thread comment={comment} mayWrite={waits && turn} />
              </View>
            );
          })}
        </Step>
      ) : null}
      {round.state === "submitted" ? <Dense muted>It waits for an editor.</Dense> : null}
      {round.state === "inReview" ? (
        <Dense muted>An editor is reading the paper again.</Dense>
      ) : null}
      {round.state === "discarded" ? <Dense muted>It was put aside.</Dense> : null}
    </Card>
  );
}

function Step({ what, at, children }: { what: string; at: string; children?: ReactNode }) {
  const colors = useColors();
  return (
    <View style={{ borderLeftWidth: 2, borderColor: colors.hairline, paddingLeft: 12, gap: 4 }}>
      <View
        style={{ flexDirection: "row", flexWrap: "wrap", alignItems: "baseline", columnGap: 8 }}
      >
        <Dense style={{ fontWeight: "600" }}>{what}</Dense>
        <Caption>{dateTime(at)}</Caption>
      </View>
      {children}
    </View>
  );
}
