import { useEffect, useRef, useState } from "react";
import { View } from "react-native";

import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { Choice } from "@/components/Choice";
import { Confirm } from "@/components/Confirm";
import { Field } from "@/components/Field";
import { Notice } from "@/components/Notice";
import { Body, Dense, Label, Section } from "@/components/Text";
import { useColors } from "@/theme/ThemeProvider";
import type { ReviewPartsFragment } from "~graphql/generated/graphql";
import { METHOD_FIELDS, PRINTED_FIELDS } from "@/components/statement/printedFields";

import { fieldName } from "./readingText";

export interface CommentDraft {
  field: string;
  text: string;
}

const FIELDS = [...PRINTED_FIELDS, ...METHOD_FIELDS, "citation"].map((field) => ({
  value: field,
  label: fieldName(field),
}));

/** The contributor's answers to findings, each to be accepted or not. */
export function Answers({
  review,
  busy,
  open,
  onAccept,
}: {
  review: ReviewPartsFragment;
  busy: boolean;
  open: boolean;
  onAccept: (code: string) => void;
}) {
  const colors = useColors();
  const asked = review.findings.filter(({ grade }) => grade === "mustAnswer");
  if (asked.length === 0) return null;
  return (
    <View style={{ gap: 12 }}>
      <Section>To be answered</Section>
      {asked.map((finding) => {
        const answer = review.answers.find(({ code }) => code === finding.code);
        return (
          <View key={finding.code} style={{ gap: 8 }}>
            <Dense>{finding.message}</Dense>
            {answer ? (
              <View style={{ borderLeftWidth: 2, borderColor: colors.hairline, paddingLeft: 12 }}>
                <Dense
                  muted
                >{`“${answer.answer}”${review.contributor ? ` ${review.contributor}` : ""}`}</Dense>
              </View>
            ) : (
              <Dense muted>Not answered. Return it with a comment.</Dense>
            )}
            {answer?.accepted ? (
              <Label style={{ color: colors.primary }}>Answer accepted</Label>
            ) : answer && open ? (
              <View style={{ flexDirection: "row" }}>
                <Button
                  kind="text"
                  icon="check"
                  label="Accept the answer"
                  busy={busy}
                  onPress={() => onAccept(finding.code)}
                />
              </View>
            ) : null}
          </View>
        );
      })}
    </View>
  );
}

/** Approve, or return with comments at fields. */
export function Decision({
  blockers,
  comments,
  setComments,
  returning,
  setReturning,
  busy,
  refusal,
  onApprove,
  onReturn,
  onReload,
}: {
  blockers: readonly string[];
  comments: CommentDraft[];
  setComments: (comments: CommentDraft[]) => void;
  returning: boolean;
  setReturning: (returning: boolean) => void;
  busy: boolean;
  refusal: string | null;
  onApprove: (note: string) => void;
  onReturn: (note: string) => void;
  onReload: () => void;
}) {
  const [note, setNote] = useState("");
  const [asking, setAsking] = useState(false);
  const first = useRef<HTMLDivElement>(null);
  useEffect(() => {
    if (!returning) return;
    // The composer can open from a row far above it.
    first.current?.scrollIntoView?.({ block: "nearest" });
    first.current?.querySelector<HTMLElement>("input, textarea")?.focus();
  }, [returning, comments.length]);
  const written = comments.filter(({ text }) => text.trim() !== "");
  const change = (index: number, part: Partial<CommentDraft>) =>
    setComments(comments.map((one, at) => (at === index ? { ...one, ...part } : one)));

  return (
    <View style={{ gap: 12 }}>
      <Section>Decision</Section>
      {returning ? (
        <Card style={{ gap: 16 }}>
          <Body>
            Each comment stands at its field; the contributor answers each one with a new revision.
          </Body>
          {comments.map((comment, index) => (
            <div key={index} ref={index === comments.length - 1 ? first : undefined}>
              <View role="group" aria-label={`Comment ${index + 1}`} style={{ gap: 8 }}>
                <Choice
                  label="At the field"
                  value={comment.field}
                  options={FIELDS}
                  onChange={(field) => change(index, { field: field ?? "citation" })}
                />
                <Field
                  label="Comment"
                  multiline
                  rows={2}
                  value={comment.text}
                  onChangeText={(text) => change(index, { text })}
                />
                <View style={{ flexDirection: "row" }}>
                  <Button
                    kind="text"
                    label="Leave this comment out"
                    onPress={() => setComments(comments.filter((_, at) => at !== index))}
                  />
                </View>
              </View>
            </div>
          ))}
          <View style={{ flexDirection: "row" }}>
            <Button
              kind="outline"
              icon="plus"
              label="Comment at another field"
              onPress={() => setComments([...comments, { field: "value", text: "" }])}
            />
          </View>
        </Card>
      ) : null}
      <Field
        label="Note to the contributor"
        value={note}
        onChangeText={setNote}
        hint="It goes with the decision, or leave it empty."
      />
      {refusal ? (
        <Notice
          grade="error"
          action={
            <Button kind="tonal" icon="refresh" label="See how it stands now" onPress={onReload} />
          }
        >
          {refusal}
        </Notice>
      ) : null}
      {returning ? (
        <View style={{ gap: 8 }}>
          <Button
            kind="return"
            icon="keyboard-return"
            label="Return to contributor"
            busy={busy}
            disabledBecause={
              written.length === 0 ? "Write at least one comment at a field." : undefined
            }
            onPress={() => setAsking(true)}
          />
          <View style={{ flexDirection: "row" }}>
            <Button kind="text" label="Cancel the return" onPress={() => setReturning(false)} />
          </View>
        </View>
      ) : (
        <View style={{ gap: 8 }}>
          <Button
            kind="filled"
            icon="check"
            label="Approve"
            busy={busy}
            disabledBecause={blockers.length > 0 ? `Not yet: ${blockers.join(" ")}` : undefined}
            onPress={() => onApprove(note)}
          />
          <Button
            kind="return"
            icon="keyboard-return"
            label="Return with comments"
            onPress={() => {
              if (comments.length === 0) setComments([{ field: "value", text: "" }]);
              setReturning(true);
            }}
          />
        </View>
      )}
      <Confirm
        visible={asking}
        title="Return it to the contributor?"
        text={`${written.length === 1 ? "One comment goes" : `${written.length} comments go`} to the contributor, and your claim ends.`}
        confirmLabel="Return it"
        onConfirm={() => {
          setAsking(false);
          onReturn(note);
        }}
        onCancel={() => setAsking(false)}
      />
    </View>
  );
}
