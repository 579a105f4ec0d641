import { useMutation } from "@apollo/client/react";
import { useLocalSearchParams } from "expo-router";
import { type ReactNode, useState } from "react";
import { View } from "react-native";

import { userMessage } from "@/apollo/userMessage";
import { useSession } from "@/apollo/useSession";
import { AskAuthor } from "@/components/authorCheck/AskAuthor";
import { Button } from "@/components/Button";
import { EvidenceFiles } from "@/components/evidence/EvidenceFiles";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { Notice } from "@/components/Notice";
import { plainFields } from "@/components/statement/plainFields";
import { StatusPill } from "@/components/StatusPill";
import { StepBar } from "@/components/StepBar";
import { Caption, Dense, Mono } from "@/components/Text";
import { dateTime, timeLeft } from "@/components/when";
import { Screen } from "@/layout/Screen";
import { useLayoutClass } from "@/layout/useLayoutClass";
import {
  AcceptAnswerDocument,
  ApproveSubmissionDocument,
  ClaimSubmissionDocument,
  CorrectReadingDocument,
  type OutcomeFragment,
  ReturnSubmissionDocument,
  type ReviewPartsFragment,
  StoreReadingDocument,
  TickChecklistDocument,
} from "~graphql/generated/graphql";
import { emptyFields, type FieldName } from "~shared/statement/fields";
import { isOpen } from "~shared/statement/relevant";

import { Checklist } from "./Checklist";
import { ClaimStep } from "./ClaimStep";
import { ClaimTools } from "./ClaimTools";
import { Comparison } from "./Comparison";
import { Answers, type CommentDraft, Decision } from "./Decision";
import { Difference } from "./Difference";
import { PaperCard } from "./PaperCard";
import { ReadingStep } from "./ReadingStep";
import { fieldName, stillToRead } from "./readingText";
import { Round } from "./Round";
import { useReading } from "./useReading";
import { type ReviewActions, useReview } from "./useReview";

const DESK = "/desk";

/** An editor's work on one submission: claim, read again, compare, decide. */
export function ReviewScreen() {
  const { id } = useLocalSearchParams<{ id: string }>();
  const { viewer, loading, hasRole } = useSession();
  if (loading) {
    return (
      <Frame>
        <Loading label="Fetching the submission" />
      </Frame>
    );
  }
  if (!viewer || !hasRole("editor")) {
    return (
      <Frame>
        <Empty
          icon="lock-outline"
          title={viewer ? "Editors read submissions again" : "Sign in first"}
          text={
            viewer
              ? "Your account has no editor role. A maintainer grants it."
              : "A second reading is stored under a name."
          }
          action={
            viewer ? (
              <Button kind="filled" label="To the desk" href={DESK} />
            ) : (
              <Button
                kind="filled"
                label="Sign in"
                href={`/account/sign-in?next=${encodeURIComponent(`/desk/review/${id}`)}`}
              />
            )
          }
        />
      </Frame>
    );
  }
  return <Loaded key={id} id={id} />;
}

function Frame({ children }: { children: ReactNode }) {
  return (
    <Screen title="Second reading" back={DESK}>
      {children}
    </Screen>
  );
}

function Loaded({ id }: { id: string }) {
  const { review, loading, error, refetch, actions } = useReview(id);
  if (review) return <Work review={review} actions={actions} onReload={() => void refetch()} />;
  return (
    <Frame>
      {loading ? (
        <Loading label="Fetching the submission" />
      ) : error ? (
        <Failed error={error} onRetry={() => void refetch()} />
      ) : (
        <Empty
          icon="help-circle-outline"
          title="No such submission"
          text="It may have been decided or taken back meanwhile."
          action={<Button kind="filled" label="To the queue" href={DESK} />}
        />
      )}
    </Frame>
  );
}

type Step = "claim" | "read" | "compare" | "decide";

function stepOf({ item, readingStoredAt, comparison, blockers }: ReviewPartsFragment): Step {
  if (item.state !== "inReview" || !item.claimedByMe) return "claim";
  if (!readingStoredAt) return "read";
  if (blockers.length === 0) return "decide";
  return comparison.every(({ agrees }) => agrees) ? "decide" : "compare";
}

interface WorkProps {
  review: ReviewPartsFragment;
  actions: ReviewActions;
  onReload: () => void;
}

function Work({ review, actions, onReload }: WorkProps) {
  const layout = useLayoutClass();
  const { item } = review;
  const { id, version } = item;
  const step = stepOf(review);
  const reading = useReading(id);

  const [claim] = useMutation(ClaimSubmissionDocument);
  const [store] = useMutation(StoreReadingDocument);
  const [correct] = useMutation(CorrectReadingDocument);
  const [accept] = useMutation(AcceptAnswerDocument);
  const [approve] = useMutation(ApproveSubmissionDocument);
  const [sendBack] = useMutation(ReturnSubmissionDocument);
  const [tick] = useMutation(TickChecklistDocument);

  const [comments, setComments] = useState<CommentDraft[]>([]);
  const [returning, setReturning] = useState(false);
  const [ended, setEnded] = useState<{ message: string; then: string } | null>(null);
  const [endProblem, setEndProblem] = useState<string | null>(null);
  const [ending, setEnding] = useState(false);

  const end = async (
    send: () => Promise<OutcomeFragment | undefined>,
    then = "The contributor gets a mail.",
  ): Promise<void> => {
    setEnding(true);
    setEndProblem(null);
    try {
      const outcome = await send();
      if (outcome?.__typename === "Done") {
        // What was typed and not stored goes with the claim.
        reading.forget();
        setEnded({ message: outcome.message, then });
      } else {
        setEndProblem(outcome?.message ?? "The server gave no answer. Try again.");
      }
    } catch (error) {
      setEndProblem(userMessage(error));
    } finally {
      setEnding(false);
    }
  };

  const missing = stillToRead(reading.fields, review.fieldsToRead as FieldName[]);
  const storeReading = async () => {
    // Only what is asked for leaves the browser.
    const asked = emptyFields() as unknown as Record<string, unknown>;
    for (const name of review.fieldsToRead as FieldName[]) asked[name] = reading.fields[name];
    const stored = await actions.run(
      async () => (await store({ variables: { id, reading: asked as never } })).data?.storeReading,
    );
    if (stored) reading.forget();
  };

  if (ended) {
    return (
      <Screen title="Second reading" subtitle={item.number} back={DESK}>
        <View style={{ maxWidth: 560 }}>
          <Notice
            grade="done"
            title={ended.message}
            action={<Button kind="filled" label="To the queue" href="/desk/queue" />}
          >
            {ended.then}
          </Notice>
        </View>
      </Screen>
    );
  }

  const steps = (
    <StepBar
      label="Steps of the review"
      steps={[
        { key: "read", label: "Read again" },
        { key: "compare", label: "Compare" },
        { key: "decide", label: "Decide" },
      ]}
      current={step === "claim" ? "read" : step}
    />
  );
  const trouble =
    actions.refusal && step !== "read" ? (
      <Notice
        grade="error"
        action={
          <Button kind="tonal" icon="refresh" label="See how it stands now" onPress={onReload} />
        }
      >
        {actions.refusal.message}
      </Notice>
    ) : null;

  const decision = (
    <Decision
      blockers={review.blockers}
      comments={comments}
      setComments={setComments}
      returning={returning}
      setReturning={setReturning}
      busy={ending}
      refusal={endProblem}
      onReload={() => {
        setEndProblem(null);
        onReload();
      }}
      onApprove={(note) =>
        void end(
          async () =>
            (await approve({ variables: { id, version, note: note.trim() || null } })).data
              ?.approveSubmission,
        )
      }
      onReturn={(note) =>
        void end(
          async () =>
            (
              await sendBack({
                variables: {
                  id,
                  version,
                  note: note.trim() || null,
                  comments: comments.filter(({ text }) => text.trim() !== ""),
                },
              })
            ).data?.returnSubmission,
        )
      }
    />
  );

  let main: ReactNode;
  let beside: ReactNode = null;
  let footer: ReactNode;
  if (step === "claim") {
    main = (
      <ClaimStep
        review={review}
        busy={actions.busy || ending}
        end={end}
        onClaim={() =>
          void actions.run(async () => (await claim({ variables: { id } })).data?.claimSubmission)
        }
      />
    );
  } else if (step === "read") {
    const refused = actions.refusal;
    main = (
      <View style={{ gap: 24 }}>
        <ReadingStep
          fields={reading.fields}
          set={reading.set}
          fieldsToRead={review.fieldsToRead}
          refusal={refused?.message ?? null}
          refusedField={refused?.field ?? null}
        />
        {refused ? (
          <Notice
            grade="error"
            title="The reading is not stored"
            action={
              <Button
                kind="tonal"
                icon="refresh"
                label="See how it stands now"
                onPress={onReload}
              />
            }
          >
            {`${refused.message} What you typed is kept in this browser.`}
          </Notice>
        ) : null}
        {returning ? (
          decision
        ) : (
          <View style={{ gap: 12 }}>
            <View style={{ flexDirection: "row", marginLeft: -12 }}>
              <Button
                kind="text"
                label="It can't be read there: return it"
                onPress={() => {
                  setComments([{ field: "place", text: "" }]);
                  setReturning(true);
                }}
              />
            </View>
            <ClaimTools item={item} actions={actions} end={end} />
          </View>
        )}
      </View>
    );
    footer = (
      <View style={{ gap: 8 }}>
        <View role="status">
          <Caption>{leftWords(review.fieldsToRead, reading.fields, missing)}</Caption>
        </View>
        <Button
          kind="filled"
          label="Store my reading"
          busy={actions.busy}
          disabledBecause={
            missing.length > 0
              ? `${missing.length === 1 ? "One field is" : `${missing.length} fields are`} still open.`
              : undefined
          }
          onPress={() => void storeReading()}
        />
      </View>
    );
  } else {
    const submission = review.submission ? plainFields(review.submission) : null;
    main = (
      <View style={{ gap: 24 }}>
        {trouble}
        <Comparison
          rows={review.comparison}
          busy={actions.busy}
          open
          onCorrect={(field, fields, why) =>
            actions.run(
              async () =>
                (await correct({ variables: { id, field, reading: fields, why } })).data
                  ?.correctReading,
            )
          }
          onReturnAt={({ field, reading: mine, submitted }) => {
            setComments([
              ...comments.filter((one) => one.field !== field && one.text.trim() !== ""),
              {
                field,
                text: `I read ${mine ?? "nothing"} where ${submitted ?? "nothing"} is given.`,
              },
            ]);
            setReturning(true);
          }}
        />
        <Round review={review} />
        <EvidenceFiles number={`${item.number}.${item.ordinal}`} level={2} />
      </View>
    );
    beside = (
      <View style={{ gap: 24 }}>
        {submission ? <Difference submission={submission} comparison={review.comparison} /> : null}
        <Answers
          review={review}
          busy={actions.busy}
          open
          onAccept={(code) =>
            void actions.run(
              async () => (await accept({ variables: { id, code } })).data?.acceptAnswer,
            )
          }
        />
        <Checklist
          points={review.checklist}
          onTick={(codes) =>
            void actions.run(
              async () => (await tick({ variables: { id, codes } })).data?.tickChecklist,
            )
          }
        />
        {decision}
        <AskAuthor quotable={`${item.number}.${item.ordinal}`} />
        <ClaimTools item={item} actions={actions} end={end} />
      </View>
    );
  }

  const wide = layout === "wide";
  return (
    <Screen
      // The comparison begins at its top; deciding goes on in the same place.
      key={step === "decide" ? "compare" : step}
      title="Second reading"
      documentTitle={`Second reading ${item.number}`}
      subtitle={<Standing review={review} />}
      back={DESK}
      footer={footer}
    >
      {wide ? (
        <View style={{ flexDirection: "row", gap: 32, alignItems: "flex-start" }}>
          <View style={{ width: 300, gap: 24 }}>
            {steps}
            <PaperCard item={item} />
          </View>
          <View style={{ flex: 1, minWidth: 0, maxWidth: 760, gap: 24 }}>{main}</View>
          {beside ? <View style={{ width: 320 }}>{beside}</View> : null}
        </View>
      ) : (
        <View style={{ gap: 24, maxWidth: 760 }}>
          {steps}
          <PaperCard item={item} />
          {main}
          {beside}
        </View>
      )}
      {endProblem && !returning && step !== "compare" && step !== "decide" ? (
        <Notice grade="error">{endProblem}</Notice>
      ) : null}
    </Screen>
  );
}

function leftWords(
  asked: readonly string[],
  fields: ReturnType<typeof emptyFields>,
  missing: readonly string[],
): string {
  const typed = asked.filter((name) => !isOpen(fields, name as FieldName)).length;
  const kept = typed > 0 ? `Draft kept, ${typed} typed.` : "Nothing typed yet.";
  if (missing.length === 0) {
    return typed > 0
      ? `${kept} All that is asked is read.`
      : `${kept} What stays open is read as not given.`;
  }
  const names = missing.slice(0, 3).map((name) => fieldName(name).toLowerCase());
  const more = missing.length - names.length;
  return `${kept} To read: ${names.join(", ")}${more > 0 ? ` and ${more} more` : ""}.`;
}

/** Number, state and claim in the head of the page. */
function Standing({ review }: { review: ReviewPartsFragment }) {
  const { item } = review;
  const phone = useLayoutClass() === "compact";
  if (phone) {
    const held = item.claimedByMe && item.claimedUntil;
    return (
      <Caption>
        <Mono>{item.number}</Mono>
        {held ? `, ${timeLeft(item.claimedUntil!)} left` : ""}
      </Caption>
    );
  }
  return (
    <View style={{ flexDirection: "row", flexWrap: "wrap", alignItems: "center", gap: 8 }}>
      <Mono style={{ fontSize: 15 }}>{item.number}</Mono>
      <StatusPill state={item.state} />
      {item.claimedByMe && item.claimedUntil ? (
        <Dense
          muted
        >{`yours until ${dateTime(item.claimedUntil)}, ${timeLeft(item.claimedUntil)} left`}</Dense>
      ) : null}
    </View>
  );
}
