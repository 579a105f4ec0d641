import { useMutation, useQuery } from "@apollo/client/react";
import { useLocalSearchParams } from "expo-router";
import { type ReactNode, useState } from "react";
import { StyleSheet, View } from "react-native";

import { userMessage } from "@/apollo/userMessage";
import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { CitationLine } from "@/components/CitationLine";
import { memberLabel } from "@/components/correlatedSet/SetMatrix";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { Notice } from "@/components/Notice";
import { Segments } from "@/components/Segments";
import { StepBar } from "@/components/StepBar";
import { Body, Caption, Dense, Label, Section } from "@/components/Text";
import { dateTime } from "@/components/when";
import { Screen } from "@/layout/Screen";
import { space } from "@/theme/tokens";
import {
  ApproveSetDocument,
  ClaimSetDocument,
  CorrectSetReadingDocument,
  ReleaseSetDocument,
  ReturnSetDocument,
  SetReviewByNumberDocument,
  type SetReviewOutcomeFragment,
  type SetReviewPartsFragment,
  StoreSetReadingDocument,
} from "~graphql/generated/graphql";
import { fitTriangle, type MatrixKind } from "~shared/correlatedSet/content";
import { setReadingMissing, tidySetReading } from "~shared/correlatedSet/reading";
import { CLAIM_HOURS } from "~shared/review/states";

import { RolePage } from "./Gate";
import { SetComparison } from "./SetComparison";
import { SetDecision } from "./SetDecision";
import { TriangleEntry } from "./TriangleEntry";
import { useSetReading } from "./useSetReading";

/** An editor's work on one matrix: claim, read again, compare, decide. */
export function SetReviewScreen() {
  const { number } = useLocalSearchParams<{ number: string }>();
  return (
    <RolePage
      title="Second reading"
      role="editor"
      here={`/desk/set-review/${number}`}
      because="Editors read matrices again"
    >
      {() => <Loaded key={number} number={number} />}
    </RolePage>
  );
}

function Loaded({ number }: { number: string }) {
  const { data, loading, error, refetch } = useQuery(SetReviewByNumberDocument, {
    variables: { number },
    // What may be seen changes with every step of this editor and of others.
    fetchPolicy: "network-only",
  });
  const review = data?.setReview;
  return (
    <Screen title="Second reading" documentTitle={number} subtitle={number} back="/desk">
      {review ? (
        <Work review={review} onReload={() => void refetch()} />
      ) : loading ? (
        <Loading label={`Fetching ${number}`} />
      ) : error ? (
        <Failed error={error} onRetry={() => void refetch()} />
      ) : (
        <Empty
          icon="help-circle-outline"
          title="No such set"
          text="It may have been decided or taken back meanwhile."
          action={<Button kind="filled" label="To the queue" href="/desk" />}
        />
      )}
    </Screen>
  );
}

function Work({ review, onReload }: { review: SetReviewPartsFragment; onReload: () => void }) {
  const { item } = review;
  const { number, version } = item;
  const reading = useSetReading(number, item.members.length);
  const [claim] = useMutation(ClaimSetDocument);
  const [store] = useMutation(StoreSetReadingDocument);
  const [correct] = useMutation(CorrectSetReadingDocument);
  const [approve] = useMutation(ApproveSetDocument);
  const [sendBack] = useMutation(ReturnSetDocument);
  const [release] = useMutation(ReleaseSetDocument);
  const [busy, setBusy] = useState(false);
  const [problem, setProblem] = useState<string | null>(null);
  const [ended, setEnded] = useState<string | null>(null);

  /** Sends a step; what it refuses is shown, what it changes is fetched again. */
  const run = async (
    send: () => Promise<SetReviewOutcomeFragment | undefined>,
  ): Promise<boolean> => {
    setBusy(true);
    setProblem(null);
    try {
      const outcome = await send();
      if (outcome?.__typename === "SetReview") {
        onReload();
        return true;
      }
      setProblem(outcome?.message ?? "The server gave no answer. Try again.");
    } catch (thrown) {
      setProblem(userMessage(thrown));
    } finally {
      setBusy(false);
    }
    return false;
  };
  const end = async (
    send: () => Promise<{ __typename: string; message: string } | undefined>,
  ): Promise<void> => {
    setBusy(true);
    setProblem(null);
    try {
      const outcome = await send();
      if (outcome?.__typename === "Done") {
        reading.forget();
        setEnded(outcome.message);
      } else setProblem(outcome?.message ?? "The server gave no answer. Try again.");
    } catch (thrown) {
      setProblem(userMessage(thrown));
    } finally {
      setBusy(false);
    }
  };

  if (ended !== null) {
    return (
      <View style={styles.narrow}>
        <Notice
          grade="done"
          title={ended}
          action={<Button kind="filled" label="To the queue" href="/desk" />}
        />
      </View>
    );
  }

  const trouble = problem ? (
    <Notice
      grade="error"
      action={
        <Button kind="tonal" icon="refresh" label="See how it stands now" onPress={onReload} />
      }
    >
      {problem}
    </Notice>
  ) : null;
  const holds = item.state === "inReview" && item.claimedByMe;
  let main: ReactNode;
  if (!holds && !review.readingStoredAt) {
    main = (
      <Claim
        review={review}
        busy={busy}
        onClaim={() =>
          void run(async () => (await claim({ variables: { number } })).data?.claimSet)
        }
      />
    );
  } else if (!review.readingStoredAt) {
    main = (
      <Read
        review={review}
        reading={reading}
        busy={busy}
        onStore={async () => {
          const { matrixKind, triangle } = reading.content;
          const stored = await run(
            async () =>
              (await store({ variables: { number, reading: { matrixKind, triangle } } })).data
                ?.storeSetReading,
          );
          if (stored) reading.forget();
        }}
        onRelease={() =>
          void end(async () => (await release({ variables: { number } })).data?.releaseSet)
        }
      />
    );
  } else {
    main = (
      <>
        <SetComparison
          review={review}
          busy={busy}
          onCorrect={(entry) =>
            run(
              async () => (await correct({ variables: { number, entry } })).data?.correctSetReading,
            )
          }
        />
        {review.set && holds ? (
          <SetDecision
            review={review}
            busy={busy}
            onApprove={(acceptedAnswers, note) =>
              void end(
                async () =>
                  (
                    await approve({
                      variables: { number, version, acceptedAnswers, note: note.trim() || null },
                    })
                  ).data?.approveSet,
              )
            }
            onReturn={(comment) =>
              void end(
                async () =>
                  (await sendBack({ variables: { number, version, comment } })).data?.returnSet,
              )
            }
          />
        ) : !review.set ? (
          <Notice grade="note">
            {item.barredBecause ?? "A later set of the same records waits unread."}
          </Notice>
        ) : (
          <Notice
            grade="note"
            action={
              item.barredBecause || item.state !== "submitted" ? undefined : (
                <Button
                  kind="tonal"
                  label="Claim it again"
                  busy={busy}
                  onPress={() =>
                    void run(async () => (await claim({ variables: { number } })).data?.claimSet)
                  }
                />
              )
            }
          >
            {item.barredBecause ?? "You have read it. It is not claimed by you now."}
          </Notice>
        )}
      </>
    );
  }
  return (
    <View style={styles.all}>
      <StepBar
        label="Steps of the review"
        steps={[
          { key: "read", label: "Read again" },
          { key: "compare", label: "Compare" },
          { key: "decide", label: "Decide" },
        ]}
        current={
          !review.readingStoredAt ? "read" : review.blockers.length > 0 ? "compare" : "decide"
        }
      />
      <Paper review={review} />
      {main}
      {trouble}
    </View>
  );
}

/** Where to look: the paper, the place, and which records the rows of the matrix are. */
function Paper({ review }: { review: SetReviewPartsFragment }) {
  const { item, members } = review;
  return (
    <Card style={styles.stack}>
      <CitationLine citation={item.citation} />
      <Label>{[item.place, item.page ? `page ${item.page}` : ""].filter(Boolean).join(", ")}</Label>
      <Caption>Records, in the order of the submitted matrix</Caption>
      {members.map((member, at) => (
        <Dense key={member.number}>{`${at + 1}  ${member.number}, ${memberLabel(member)}`}</Dense>
      ))}
    </Card>
  );
}

function Claim({
  review,
  busy,
  onClaim,
}: {
  review: SetReviewPartsFragment;
  busy: boolean;
  onClaim: () => void;
}) {
  const { item } = review;
  const taken = item.claimedUntil !== null && item.claimedUntil !== undefined && !item.claimedByMe;
  return (
    <View style={styles.stack}>
      <Body>
        You type the matrix from the paper before you see what was submitted. The claim holds for{" "}
        {String(CLAIM_HOURS)} hours.
      </Body>
      <Button
        kind="filled"
        label="Claim and read"
        busy={busy}
        disabledBecause={
          item.barredBecause ?? (taken ? "Another editor is reading it." : undefined)
        }
        onPress={onClaim}
      />
    </View>
  );
}

function Read({
  review,
  reading,
  busy,
  onStore,
  onRelease,
}: {
  review: SetReviewPartsFragment;
  reading: ReturnType<typeof useSetReading>;
  busy: boolean;
  onStore: () => void;
  onRelease: () => void;
}) {
  const { content, set } = reading;
  const size = review.item.members.length;
  const missing = setReadingMissing(tidySetReading(content, size));
  return (
    <View style={styles.stack}>
      <Section>Your reading</Section>
      {review.item.claimedUntil ? (
        <Caption>{`Yours until ${dateTime(review.item.claimedUntil)}. What you type is kept in this browser until it is stored.`}</Caption>
      ) : null}
      <Segments
        label="Kind of matrix"
        value={content.matrixKind}
        options={[
          { value: "correlation", label: "Correlations" },
          { value: "covariance", label: "Covariances" },
        ]}
        onChange={(kind) => set({ ...content, matrixKind: kind as MatrixKind })}
      />
      {content.matrixKind ? (
        <TriangleEntry
          labels={review.members.map((member) => ({
            number: member.number,
            words: `${member.number}, ${memberLabel(member)}`,
          }))}
          matrixKind={content.matrixKind}
          triangle={fitTriangle(content.triangle, size)}
          onChange={(triangle) => set({ ...content, triangle })}
        />
      ) : null}
      <View style={styles.line}>
        <Button
          kind="filled"
          label="Store my reading"
          busy={busy}
          disabledBecause={missing ?? undefined}
          onPress={onStore}
        />
        <Button kind="text" label="Release claim" onPress={onRelease} />
      </View>
    </View>
  );
}

const styles = StyleSheet.create({
  all: { gap: space.l, maxWidth: 860 },
  narrow: { maxWidth: 560 },
  stack: { gap: space.xs },
  line: { flexDirection: "row", flexWrap: "wrap", alignItems: "center", gap: space.xs },
});
