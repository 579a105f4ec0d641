import { useMutation } from "@apollo/client/react";
import { useRouter } from "expo-router";
import { useState } from "react";
import { StyleSheet, View } from "react-native";

import { userMessage } from "@/apollo/userMessage";
import { useSession } from "@/apollo/useSession";
import { Button } from "@/components/Button";
import { CheckRow } from "@/components/CheckRow";
import { CitationLine } from "@/components/CitationLine";
import { Confirm } from "@/components/Confirm";
import { memberLabel } from "@/components/correlatedSet/SetMatrix";
import { Field } from "@/components/Field";
import { Notice } from "@/components/Notice";
import { Segments } from "@/components/Segments";
import { plainFields } from "@/components/statement/plainFields";
import { Caption, Mono, Section } from "@/components/Text";
import { Screen } from "@/layout/Screen";
import { space } from "@/theme/tokens";
import {
  type CorrelatedSetPartsFragment,
  DiscardSetDocument,
  SubmitSetDocument,
} from "~graphql/generated/graphql";
import { setFindings, type SetFinding } from "~shared/correlatedSet/checks";
import { fitTriangle, rearrange, type MatrixKind } from "~shared/correlatedSet/content";
import type { SetMember } from "~shared/correlatedSet/members";

import { AddMembers, MatrixPreview, MemberList } from "./SetParts";
import { SetFindings } from "./SetFindings";
import { TriangleEntry } from "./TriangleEntry";
import { type SetSave, useSetDraft } from "./useSetDraft";

const AT_FIELDS = ["label", "place", "matrixKind", "members"];

/** Errors that are said at their field already. */
function standsAtField({ grade, fields }: SetFinding): boolean {
  return grade === "error" && fields.some((field) => AT_FIELDS.includes(field));
}

function saveWords(state: SetSave): string {
  switch (state.kind) {
    case "saved":
      return "Saved";
    case "waiting":
    case "saving":
      return "Saving";
    case "trouble":
      return `Not saved: ${state.message} What you typed is kept in this browser.`;
  }
}

function membersOf(set: CorrelatedSetPartsFragment): SetMember[] {
  return set.members.flatMap(({ number, fields }) =>
    fields ? [{ number, citation: set.citation.id, fields: plainFields(fields) }] : [],
  );
}

/** The form of a set: saved by itself while it is typed, checked by the rules the server applies. */
export function SetForm({
  set,
  onReload,
}: {
  set: CorrelatedSetPartsFragment;
  onReload: () => void;
}) {
  const router = useRouter();
  const { licence } = useSession();
  const { draft, change, state, flush, version } = useSetDraft(set);
  const [submit, { loading: sending }] = useMutation(SubmitSetDocument);
  const [discard] = useMutation(DiscardSetDocument);
  const [agreed, setAgreed] = useState(false);
  const [tried, setTried] = useState(false);
  const [asking, setAsking] = useState(false);
  const [problem, setProblem] = useState<string | null>(null);
  const byNumber = new Map(set.members.map((member) => [member.number, member]));
  const labels = draft.members.map((number) => {
    const member = byNumber.get(number);
    return { number, words: member ? `${number}, ${memberLabel(member)}` : number };
  });
  const findings = setFindings(draft, membersOf(set), set.citation.id);
  // Before the first try only what was typed is judged, not what is still missing.
  const shown = tried
    ? findings
    : findings.filter(
        ({ code }) => !["open", "label", "place", "matrixKind", "tooFew"].includes(code),
      );
  const wrong = new Set(
    shown.filter(({ grade }) => grade !== "note").flatMap(({ fields }) => fields),
  );
  const at = (field: string): string | null =>
    shown.find(({ grade, fields }) => grade === "error" && fields.includes(field))?.message ?? null;
  const unanswered = findings.filter(
    ({ grade, code }) => grade === "mustAnswer" && !draft.answers[code]?.trim(),
  );
  const errors = findings.filter(({ grade }) => grade === "error");

  const setKind = (matrixKind: MatrixKind) =>
    change({
      matrixKind,
      triangle: draft.triangle.map((row, i) =>
        row.map((text, j) => {
          if (i !== j) return text;
          if (matrixKind === "correlation") return "1";
          return text === "1" ? "" : text;
        }),
      ),
    });
  const move = (from: number, to: number) => {
    const order = draft.members.map((_, index) => index);
    const [taken] = order.splice(from, 1);
    order.splice(to, 0, taken ?? from);
    change(rearrange(draft, order));
  };

  const send = async () => {
    setTried(true);
    setProblem(null);
    if (errors.length > 0 || unanswered.length > 0) {
      setProblem("Something is open yet: it stands above.");
      return;
    }
    if (!agreed) {
      setProblem("Agree to the licence first.");
      return;
    }
    if (!(await flush())) return;
    try {
      const outcome = (
        await submit({
          variables: { number: set.number, version: version.current, agreeToLicence: true },
        })
      ).data?.submitSet;
      if (outcome?.__typename === "CorrelatedSet") onReload();
      else {
        setProblem(outcome?.message ?? "The server gave no answer. Try again.");
      }
    } catch (thrown) {
      setProblem(userMessage(thrown));
    }
  };
  const putAside = async () => {
    setAsking(false);
    if (!(await flush())) return;
    const outcome = (await discard({ variables: { number: set.number, version: version.current } }))
      .data?.discardSet;
    if (outcome?.__typename === "Done") router.replace("/desk" as never);
    else setProblem(outcome?.message ?? "The server gave no answer. Try again.");
  };

  return (
    <Screen
      title="Correlated set"
      documentTitle={set.number}
      subtitle={<Mono style={styles.number}>{set.number}</Mono>}
      back="/desk"
      footer={
        <View style={styles.foot}>
          <View role="status">
            <Caption>{saveWords(state)}</Caption>
          </View>
          <Button
            kind="filled"
            icon="send-outline"
            label="Submit for a second reading"
            busy={sending}
            onPress={() => void send()}
          />
        </View>
      }
    >
      <View style={styles.page}>
        {state.kind === "trouble" && state.stale ? (
          <Notice
            grade="error"
            action={<Button kind="tonal" icon="refresh" label="Reload it" onPress={onReload} />}
          >
            {state.message}
          </Notice>
        ) : null}
        <CitationLine citation={set.citation} />
        <Field
          label="Label"
          value={draft.label ?? ""}
          onChangeText={(label) => change({ label })}
          error={at("label")}
          hint="As a paper would name it: the bins of Table 3, say."
          maxLength={120}
        />
        <MemberList
          labels={labels}
          errors={shown
            .filter(({ grade, fields }) => grade === "error" && fields.includes("members"))
            .map(({ message }) => message)}
          onMove={move}
          onDrop={(index) =>
            change(
              rearrange(
                draft,
                draft.members.map((_, i) => i).filter((i) => i !== index),
              ),
            )
          }
        />
        <AddMembers
          citationId={set.citation.id}
          members={draft.members}
          onAdd={(number) =>
            change({
              members: [...draft.members, number],
              triangle: fitTriangle(draft.triangle, draft.members.length + 1).map((row, i, all) =>
                i === all.length - 1 && draft.matrixKind === "correlation"
                  ? row.map((text, j) => (j === i ? "1" : text))
                  : row,
              ),
            })
          }
        />
        <Section>Matrix as printed</Section>
        <Segments
          label="Kind of matrix"
          value={draft.matrixKind}
          options={[
            { value: "correlation", label: "Correlations" },
            { value: "covariance", label: "Covariances" },
          ]}
          onChange={(kind) => setKind(kind as MatrixKind)}
        />
        {draft.matrixKind === null ? (
          <Caption>{at("matrixKind") ?? "Correlations have ones on their diagonal."}</Caption>
        ) : (
          <TriangleEntry
            labels={labels}
            matrixKind={draft.matrixKind}
            triangle={draft.triangle}
            onChange={(triangle) => change({ triangle })}
            wrong={wrong}
          />
        )}
        <MatrixPreview draft={draft} labels={labels} />
        <Field
          label="Place in the paper"
          value={draft.place ?? ""}
          onChangeText={(place) => change({ place })}
          error={at("place")}
          hint="Table, equation, figure or section"
        />
        <Field
          label="Page"
          value={draft.page ?? ""}
          onChangeText={(page) => change({ page })}
          maxLength={120}
        />
        <Field
          label="Note"
          value={draft.note ?? ""}
          onChangeText={(note) => change({ note })}
          multiline
          rows={2}
          hint="What a reader of the matrix must know; it becomes public with it."
        />
        <SetFindings
          findings={shown.filter((finding) => !standsAtField(finding))}
          answers={draft.answers}
          onAnswer={(code, answer) => change({ answers: { ...draft.answers, [code]: answer } })}
        />
        <CheckRow
          label={`I agree that the registry passes it on under ${licence}`}
          checked={agreed}
          onChange={setAgreed}
        />
        {problem ? <Notice grade="error">{problem}</Notice> : null}
        <View style={styles.line}>
          <Button
            kind="text"
            icon="delete-outline"
            label="Discard"
            onPress={() => setAsking(true)}
          />
        </View>
        <Confirm
          visible={asking}
          title="Discard this set?"
          text="What you typed of its matrix is gone then."
          confirmLabel="Discard it"
          onConfirm={() => void putAside()}
          onCancel={() => setAsking(false)}
        />
      </View>
    </Screen>
  );
}

const styles = StyleSheet.create({
  page: { gap: space.m, maxWidth: 760 },
  line: { flexDirection: "row", flexWrap: "wrap", alignItems: "center", gap: space.xs },
  foot: { gap: space.xs },
  number: { fontSize: 14 },
});
