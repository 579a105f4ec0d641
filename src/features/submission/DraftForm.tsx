import { useMutation } from "@apollo/client/react";
import { useLocalSearchParams, useRouter } from "expo-router";
import { type ReactNode, useEffect, useRef, useState } from "react";
import { useWindowDimensions, View } from "react-native";

import { useSession } from "@/apollo/useSession";
import { userMessage } from "@/apollo/userMessage";
import { Button } from "@/components/Button";
import { Confirm } from "@/components/Confirm";
import { AttachEvidence } from "@/components/evidence/AttachEvidence";
import { IconButton } from "@/components/IconButton";
import { Notice } from "@/components/Notice";
import { StepBar } from "@/components/StepBar";
import { focusField, type SetField } from "@/components/statement/FieldInput";
import { EntryGroup, PrintedEntry } from "@/components/statement/PrintedEntry";
import {
  changeShape,
  METHOD_FIELDS,
  PRINTED_FIELDS,
  type Stash,
} from "@/components/statement/printedFields";
import { Screen } from "@/layout/Screen";
import { useLayoutClass } from "@/layout/useLayoutClass";
import {
  type CitationLinePartsFragment,
  DiscardDraftDocument,
  SubmitDraftDocument,
  type SubmissionPartsFragment,
} from "~graphql/generated/graphql";
import type { FieldName } from "~shared/statement/fields";
import { FIELD_NAMES } from "~shared/statement/words";

import { AsItWillRead } from "./AsItWillRead";
import { ChangesSince } from "./ChangesSince";
import { CheckStep } from "./CheckStep";
import { CitationStep } from "./CitationStep";
import { CommentAtField } from "./comments";
import { serverDraft } from "./draftContent";
import { errorAt, useFindings } from "./findings";
import { DESK, STEPS, type StepKey, submissionLink } from "./links";
import { MethodStep } from "./MethodStep";
import { SaveLine, SaveTrouble } from "./SaveLine";
import { useDraft } from "./useDraft";

const TITLES: Record<StepKey, string> = {
  paper: "The paper",
  printed: "What the paper prints",
  method: "Where it comes from",
  check: "Check and submit",
};

export const STEP_WORDS: Record<StepKey, string> = {
  paper: "Paper",
  printed: "Printed",
  method: "Method",
  check: "Check",
};

const NEXT_WORDS: Partial<Record<StepKey, string>> = {
  paper: "What it prints",
  printed: "Method and data",
  method: "Check",
};

/** Fields whose change decides which other fields are asked. */
const SHAPING: ReadonlySet<FieldName> = new Set<FieldName>([
  "quantity",
  "kind",
  "species",
  "level",
  "versionRead",
  "readOffFigure",
]);

/** Below this height (a phone with its keyboard open) the preview makes room for the form. */
const PREVIEW_MIN_HEIGHT = 560;

function stepOf(param: string | string[] | undefined, fallback: StepKey): StepKey {
  return STEPS.find((step) => step === param) ?? fallback;
}

function stepOfField(field: string): StepKey {
  if (PRINTED_FIELDS.includes(field as FieldName)) return "printed";
  return METHOD_FIELDS.includes(field as FieldName) ? "method" : "paper";
}

/** The four steps of a submission; what is typed saves itself. */
export function DraftForm({ submission }: { submission: SubmissionPartsFragment }) {
  const router = useRouter();
  const params = useLocalSearchParams<{ step?: string }>();
  const layout = useLayoutClass();
  const { height } = useWindowDimensions();
  const { licence } = useSession();
  const { id } = submission;

  const { content, version, save, keeper } = useDraft(submission);
  const { fields, citationId, answers, commentAnswers } = content;
  const [citation, setCitation] = useState<CitationLinePartsFragment | null>(
    submission.citation ?? null,
  );
  const step = stepOf(params.step, citation ? "printed" : "paper");
  const [checked, setChecked] = useState(step === "check");
  const [discarding, setDiscarding] = useState(false);
  const [refusal, setRefusal] = useState<string | null>(null);
  const stash = useRef<Stash>({});
  const wanted = useRef<FieldName | null>(null);
  const shownStep = useRef(step);

  const findings = useFindings(
    fields,
    citationId,
    id,
    step === "check" && save.kind !== "waiting" && save.kind !== "saving",
  );
  const [submit, submitting] = useMutation(SubmitDraftDocument);
  const [discard] = useMutation(DiscardDraftDocument);

  useEffect(() => {
    if (wanted.current) focusField(wanted.current);
    else if (shownStep.current !== step) globalThis.document?.getElementById("content")?.focus();
    wanted.current = null;
    shownStep.current = step;
  }, [step]);

  const flush = () => void keeper.flush();
  const go = (next: StepKey) => {
    if (save.kind === "waiting") flush();
    if (next === "check") setChecked(true);
    router.setParams({ step: next });
  };
  const goToField = (field: string) => {
    const target = stepOfField(field);
    if (target === step) return focusField(field as FieldName);
    wanted.current = field as FieldName;
    go(target);
  };

  const set: SetField = (name, value) => {
    const now = keeper.snapshot().content.fields;
    if (!SHAPING.has(name)) return keeper.setField(name, value);
    const changed = changeShape(now, name, value, stash.current);
    stash.current = changed.stash;
    const { fields: next } = changed;
    // Almost every paper prints a linear fraction; the second reading asks for the scale anew.
    const scale = next.quantity === "neutralFraction" ? (next.scale ?? "linear") : next.scale;
    keeper.change({ fields: { ...next, scale } });
  };
  const blur = () => {
    if (keeper.snapshot().save.kind === "waiting") flush();
  };

  const choose = (next: CitationLinePartsFragment) => {
    setCitation(next);
    keeper.change({ citationId: next.id });
    go("printed");
  };

  const send = async (agreeToLicence: boolean) => {
    setRefusal(null);
    if (!(await keeper.flush())) {
      return setRefusal("What you typed is not saved yet. Save it first, then submit.");
    }
    try {
      const { data } = await submit({
        variables: { id, version: keeper.snapshot().version, agreeToLicence },
      });
      const outcome = data?.submitDraft;
      if (outcome?.__typename === "Submission") keeper.adopt(serverDraft(outcome));
      else {
        setRefusal(outcome?.message ?? "The server gave no answer. Try again.");
        if (outcome?.field) goToField(outcome.field);
      }
    } catch (error) {
      setRefusal(userMessage(error));
    }
  };

  const throwAway = async () => {
    setDiscarding(false);
    try {
      const { data } = await discard({ variables: { id, version } });
      if (data?.discardDraft.__typename === "Refusal") {
        return setRefusal(data.discardDraft.message);
      }
      keeper.forget();
      router.replace(DESK);
    } catch (error) {
      setRefusal(userMessage(error));
    }
  };

  const error = (name: FieldName) => errorAt(findings.all, name, fields, checked);
  const commentsAt = (name: string) =>
    submission.comments
      .filter(({ field }) => field === name)
      .map((comment) => (
        <CommentAtField
          key={comment.id}
          comment={comment}
          answer={commentAnswers[comment.id] ?? ""}
          onAnswer={(text) =>
            keeper.change({
              commentAnswers: { ...keeper.snapshot().content.commentAnswers, [comment.id]: text },
            })
          }
          onBlur={blur}
        />
      ));
  const under = (name: FieldName): ReactNode => commentsAt(name);
  // What hangs on no field of the two middle steps is shown with the paper.
  const loose = submission.comments.filter(({ field }) => stepOfField(field) === "paper");
  const openComments = submission.comments.filter((comment) => !commentAnswers[comment.id]?.trim());

  const at = STEPS.indexOf(step);
  const back = STEPS[at - 1];
  const next = STEPS[at + 1];
  const wide = layout === "wide";
  const preview = step === "printed" || step === "method";
  const nav = (
    <View
      style={{
        flexDirection: "row",
        flexWrap: "wrap",
        alignItems: "center",
        justifyContent: "flex-end",
        gap: 12,
      }}
    >
      {back ? <Button kind="outline" label="Back" onPress={() => go(back)} /> : null}
      <View style={{ flex: 1, alignItems: "center" }}>
        <SaveLine save={save} />
      </View>
      {next ? (
        <Button
          kind={step === "check" ? "outline" : "filled"}
          label={NEXT_WORDS[step]!}
          disabledBecause={step === "paper" && !citation ? "Choose the paper" : undefined}
          onPress={() => go(next)}
        />
      ) : null}
    </View>
  );

  return (
    <Screen
      // A step begins at its top.
      key={step}
      title={TITLES[step]}
      subtitle={subtitleOf(submission, citation)}
      back={DESK}
      actions={
        // A phone's head has no room for it beside the title; there it ends the first step.
        layout === "compact" ? undefined : (
          <IconButton
            icon="delete-outline"
            label="Discard this draft"
            onPress={() => setDiscarding(true)}
          />
        )
      }
      aside={
        wide && preview ? (
          <View style={{ padding: 24 }}>
            <AsItWillRead fields={fields} direction="column" />
          </View>
        ) : undefined
      }
      footer={
        <View style={{ gap: 12 }}>
          {!wide && preview && height >= PREVIEW_MIN_HEIGHT ? (
            <AsItWillRead fields={fields} direction="row" />
          ) : null}
          {nav}
        </View>
      }
    >
      <View style={{ gap: 24, maxWidth: 760 }}>
        <StepBar
          label="Steps of the submission"
          steps={STEPS.map((key) => ({
            key,
            label: STEP_WORDS[key],
            closed: key !== "paper" && !citation,
          }))}
          current={step}
          onGo={(key) => go(key as StepKey)}
        />
        <SaveTrouble save={save} keeper={keeper} here={String(submissionLink(id, step))} />
        {openComments.length > 0 && step !== "check" ? (
          <Returned comments={openComments} onGo={goToField} />
        ) : null}
        {step === "paper" ? (
          <>
            <CitationStep current={citation} onChosen={choose} />
            {loose.flatMap(({ field }) => commentsAt(field))}
          </>
        ) : null}
        {step === "printed" ? (
          <PrintedEntry fields={fields} set={set} error={error} under={under} onBlur={blur} />
        ) : null}
        {step === "method" ? (
          <>
            <MethodStep fields={fields} set={set} error={error} under={under} onBlur={blur} />
            <EntryGroup title="Evidence">
              <AttachEvidence
                revisionId={id}
                number={`${submission.number}.${submission.ordinal}`}
              />
            </EntryGroup>
          </>
        ) : null}
        {step === "check" ? (
          <>
            <ChangesSince changes={submission.changes} />
            <CheckStep
              fields={fields}
              findings={findings}
              answers={answers}
              openComments={openComments.length}
              licence={licence}
              busy={submitting.loading}
              refusal={refusal}
              onAnswer={(code, text) =>
                keeper.change({
                  answers: { ...keeper.snapshot().content.answers, [code]: text },
                })
              }
              onBlur={blur}
              onGo={goToField}
              onSubmit={(agree) => void send(agree)}
            />
          </>
        ) : refusal ? (
          <Notice grade="error">{refusal}</Notice>
        ) : null}
        {layout === "compact" && (step === "paper" || step === "check") ? (
          <View style={{ flexDirection: "row" }}>
            <Button
              kind="text"
              icon="delete-outline"
              label="Discard this draft"
              onPress={() => setDiscarding(true)}
            />
          </View>
        ) : null}
      </View>
      <Confirm
        visible={discarding}
        title="Discard this draft?"
        text="What was typed is gone then. Approved revisions of the record stay as they are."
        confirmLabel="Discard"
        onConfirm={() => void throwAway()}
        onCancel={() => setDiscarding(false)}
      />
    </Screen>
  );
}

function subtitleOf(
  { number, ordinal }: SubmissionPartsFragment,
  citation: CitationLinePartsFragment | null,
): string {
  const record = ordinal > 1 ? `${number}, revision ${ordinal}` : number;
  return citation ? `${record}, ${citation.shortName}` : record;
}

function fieldWord(field: string): string {
  return FIELD_NAMES[field as FieldName] ?? "The paper";
}

/** What the editor asks, with the way to each field. */
function Returned({
  comments,
  onGo,
}: {
  comments: SubmissionPartsFragment["comments"];
  onGo: (field: string) => void;
}) {
  return (
    <Notice
      grade="mustAnswer"
      title={
        comments.length === 1
          ? "One comment waits for your answer"
          : `${comments.length} comments wait for your answer`
      }
      action={
        <View style={{ flexDirection: "row", flexWrap: "wrap", gap: 8 }}>
          {comments.map((comment) => (
            <Button
              key={comment.id}
              kind="text"
              label={fieldWord(comment.field)}
              accessibilityLabel={`Go to the comment at ${fieldWord(comment.field)}`}
              onPress={() => onGo(comment.field)}
            />
          ))}
        </View>
      }
    >
      Each stands at its field, with room for your answer.
    </Notice>
  );
}
