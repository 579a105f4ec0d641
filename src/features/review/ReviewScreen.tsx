import { useMutation } from "@apollo/client/react";
import { useLocalSearchParams } from "expo-router";
import { type ReactNode, useState } from "react";
import { View } from "react-native";

import { userMessage } from "@/apollo/userMessage";
import { useSession } from "@/apollo/useSession";
import { Button } from "@/components/Button";
import { Confirm } from "@/components/Confirm";
import { EvidenceFiles } from "@/components/evidence/EvidenceFiles";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { Notice } from "@/components/Notice";
import { plainFields } from "@/components/statement/plainFields";
import { StatusPill } from "@/components/StatusPill";
import { StepBar } from "@/components/StepBar";
import { Caption, Dense, Mono } from "@/components/Text";
import { dateTime, shortDateTime } from "@/components/when";
import { Screen } from "@/layout/Screen";
import { useLayoutClass } from "@/layout/useLayoutClass";
import {
  AcceptAnswerDocument,
  ApproveSubmissionDocument,
  ClaimSubmissionDocument,
  CorrectReadingDocument,
  type OutcomeFragment,
  ReleaseClaimDocument,
  ReturnSubmissionDocument,
  type ReviewPartsFragment,
  StoreReadingDocument,
} from "~graphql/generated/graphql";
import { CLAIM_HOURS } from "~shared/review/states";
import { emptyFields, type FieldName } from "~shared/statement/fields";
import { isOpen } from "~shared/statement/relevant";

import { Comparison } from "./Comparison";
import { Answers, type CommentDraft, Decision } from "./Decision";
import { Difference } from "./Difference";
import { PaperCard } from "./PaperCard";
import { ReadingStep } from "./ReadingStep";
import { fieldName, stillToRead } from "./readingText";
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
  const [release] = useMutation(ReleaseClaimDocument);

  const [comments, setComments] = useState<CommentDraft[]>([]);
  const [returning, setReturning] = useState(false);
  const [releasing, setReleasing] = useState(false);
  const [ended, setEnded] = useState<{ message: string; decided: boolean } | null>(null);
  const [endProblem, setEndProblem] = useState<string | null>(null);
  const [ending, setEnding] = useState(false);

  const end = async (
    send: () => Promise<OutcomeFragment | undefined>,
    decided: boolean,
  ): Promise<void> => {
    setEnding(true);
    setEndProblem(null);
    try {
      const outcome = await send();
      if (outcome?.__typename === "Done") {
        if (decided) reading.forget();
        setEnded({ message: outcome.message, decided });
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
            action={<Button kind="filled" label="To the queue" href={DESK} />}
          >
            {ended.decided
              ? "The contributor gets a mail."
              : "Another editor can claim it now; what you stored stays on record."}
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
          true,
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
          true,
        )
      }
    />
  );

  let main: ReactNode;
  let beside: ReactNode = null;
  let footer: ReactNode;
  if (step === "claim") {
    main = (
      <Claim
        review={review}
        busy={actions.busy}
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
          <View style={{ flexDirection: "row", flexWrap: "wrap", gap: 8 }}>
            <Button
              kind="text"
              label="It can't be read there: return it"
              onPress={() => {
                setComments([{ field: "place", text: "" }]);
                setReturning(true);
              }}
            />
            <Button kind="text" label="Release claim" onPress={() => setReleasing(true)} />
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
        <Changes review={review} />
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
        {decision}
        <View style={{ flexDirection: "row" }}>
          <Button kind="text" label="Release claim" onPress={() => setReleasing(true)} />
        </View>
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
      <Confirm
        visible={releasing}
        title="Release the claim?"
        text="The submission goes back to the queue. What you typed and did not store is dropped."
        confirmLabel="Release it"
        onConfirm={() => {
          setReleasing(false);
          void end(async () => {
            const outcome = (await release({ variables: { id } })).data?.releaseClaim;
            if (outcome?.__typename === "Done") reading.forget();
            return outcome;
          }, false);
        }}
        onCancel={() => setReleasing(false)}
      />
      {step === "read" && endProblem && !returning ? (
        <Notice grade="error">{endProblem}</Notice>
      ) : null}
    </Screen>
  );
}

function leftWords(
  asked: readonly string[],
  fields: ReturnType<typeof emptyFields>,
  missing: readonly FieldName[],
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
        {held ? `, claimed until ${shortDateTime(item.claimedUntil!)}` : ""}
      </Caption>
    );
  }
  return (
    <View style={{ flexDirection: "row", flexWrap: "wrap", alignItems: "center", gap: 8 }}>
      <Mono style={{ fontSize: 15 }}>{item.number}</Mono>
      <StatusPill state={item.state} />
      {item.claimedByMe && item.claimedUntil ? (
        <Dense muted>{`claimed by you until ${dateTime(item.claimedUntil)}`}</Dense>
      ) : null}
    </View>
  );
}

/** Before the claim: the paper, and whether this editor may read it. */
function Claim({
  review,
  busy,
  onClaim,
}: {
  review: ReviewPartsFragment;
  busy: boolean;
  onClaim: () => void;
}) {
  const { item } = review;
  if (item.state === "approved" || item.state === "returned") {
    return (
      <Notice
        grade="note"
        title={
          item.state === "approved" ? "This revision is approved" : "This revision is returned"
        }
        action={<Button kind="tonal" label="To the queue" href={DESK} />}
      >
        It is decided; nothing is left to read.
      </Notice>
    );
  }
  if (item.barredBecause) {
    return (
      <Notice grade="caution" title="You can't read this one">
        {item.barredBecause}
      </Notice>
    );
  }
  if (item.claimedUntil && !item.claimedByMe) {
    return (
      <Notice
        grade="note"
        title="Another editor is reading it"
        action={<Button kind="tonal" label="To the queue" href={DESK} />}
      >
        {`The claim ends on ${dateTime(item.claimedUntil)} unless it is decided before.`}
      </Notice>
    );
  }
  return (
    <View style={{ gap: 16 }}>
      <Dense style={{ fontSize: 16, lineHeight: 24 }}>
        {`A claim holds this submission for ${CLAIM_HOURS} hours. You read the paper and type its numbers before the submitted ones are shown to you.`}
      </Dense>
      <Button
        kind="filled"
        icon="eye-outline"
        label="Claim for a second reading"
        busy={busy}
        onPress={onClaim}
      />
    </View>
  );
}

function Changes({ review }: { review: ReviewPartsFragment }) {
  const { comments, changes } = review;
  if (comments.length === 0 && changes.length === 0) return null;
  return (
    <View style={{ gap: 12 }}>
      {comments.map((comment) => (
        <Notice
          key={comment.id}
          grade="note"
          title={`${comment.by} asked at ${fieldName(comment.field).toLowerCase()}`}
        >
          <Dense>{comment.text}</Dense>
          <Dense muted>{comment.answer ? `Answer: ${comment.answer}` : "Not answered"}</Dense>
        </Notice>
      ))}
      {changes.length > 0 ? (
        <Notice grade="note" title="Changed since the last revision">
          {changes.map(({ field, before, after }) => (
            <Dense key={field}>
              {`${fieldName(field)}: ${before || "open"}, now ${after || "open"}`}
            </Dense>
          ))}
        </Notice>
      ) : null}
    </View>
  );
}
