import { type ReactNode, useState } from "react";
import { View } from "react-native";

import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { CheckRow } from "@/components/CheckRow";
import { DefinitionList } from "@/components/DefinitionList";
import { Field } from "@/components/Field";
import { Notice } from "@/components/Notice";
import { NotationText } from "@/components/NotationText";
import { METHOD_FIELDS, PRINTED_FIELDS } from "@/components/statement/printedFields";
import { StatementCurve } from "@/components/statement/StatementCurve";
import { Body, Caption, Dense, Section } from "@/components/Text";
import type { FindingPartsFragment } from "~graphql/generated/graphql";
import { asUsed } from "~shared/statement/asUsed";
import type { ConstraintFields, FieldName } from "~shared/statement/fields";
import { notationAsPrinted, notationAsUsed } from "~shared/statement/notation";
import { FIELD_NAMES, fieldText } from "~shared/statement/words";

import type { Findings } from "./findings";
import { redshiftLine } from "./redshiftLine";

/** What was found, how it will read, and the last word before an editor sees it. */
export function CheckStep({
  fields,
  findings,
  answers,
  openComments,
  licence,
  busy,
  refusal,
  onAnswer,
  onBlur,
  onGo,
  onSubmit,
}: {
  fields: ConstraintFields;
  findings: Findings;
  answers: Record<string, string>;
  /** Comments of the return that have no answer yet. */
  openComments: number;
  licence: string;
  busy: boolean;
  refusal: string | null;
  onAnswer: (code: string, answer: string) => void;
  onBlur: () => void;
  onGo: (field: string) => void;
  onSubmit: (agree: boolean) => void;
}) {
  const [agreed, setAgreed] = useState(false);
  const unanswered = findings.mustAnswer.filter(({ code }) => !answers[code]?.trim());
  const because = reasonToWait({
    errors: findings.errors.length,
    unanswered: unanswered.length,
    openComments,
    agreed,
  });

  return (
    <View style={{ gap: 32 }}>
      <View style={{ gap: 12 }}>
        <Section>What was found</Section>
        {findings.all.length === 0 && findings.registry === "done" ? (
          <Notice grade="done">Nothing speaks against submitting this.</Notice>
        ) : null}
        {findings.errors.map((finding) => (
          <Notice
            key={finding.code}
            grade="error"
            title="Error"
            action={<GoTo finding={finding} onGo={onGo} />}
          >
            {finding.message}
          </Notice>
        ))}
        {findings.mustAnswer.map((finding) => (
          <Notice
            key={finding.code}
            grade="mustAnswer"
            title="Must be answered"
            action={<GoTo finding={finding} onGo={onGo} />}
          >
            <Dense>{finding.message}</Dense>
            <Field
              label="Your answer"
              hint="It goes to the editor with the submission."
              value={answers[finding.code] ?? ""}
              onChangeText={(text) => onAnswer(finding.code, text)}
              onBlur={onBlur}
            />
          </Notice>
        ))}
        {findings.notes.map((finding) => (
          <Notice key={finding.code} grade="note" title="Note">
            {finding.message}
          </Notice>
        ))}
        {findings.registry === "waiting" ? (
          <Caption>Comparing with the records of the registry</Caption>
        ) : null}
        {findings.registry === "failed" ? (
          <Notice
            grade="caution"
            title="Not compared with the registry"
            action={
              <Button kind="tonal" icon="refresh" label="Compare again" onPress={findings.retry} />
            }
          >
            The server did not answer. The comparison is made again when you submit.
          </Notice>
        ) : null}
      </View>
      <Reading fields={fields} />
      <Summary fields={fields} />
      <View style={{ gap: 12 }}>
        <Section>Submit</Section>
        <CheckRow
          label={`I give this entry under the registry's data licence, ${licence}`}
          checked={agreed}
          onChange={setAgreed}
        />
        {refusal ? (
          <Notice grade="error" title="Not submitted">
            {refusal}
          </Notice>
        ) : null}
        <Button
          kind="filled"
          icon="send-outline"
          label="Submit for review"
          busy={busy}
          disabledBecause={because}
          onPress={() => onSubmit(agreed)}
        />
      </View>
    </View>
  );
}

function count(n: number, one: string, many: string): string {
  return n === 1 ? `one ${one}` : `${n} ${many}`;
}

/** Why the submit button is not open yet; undefined when it is. */
export function reasonToWait(left: {
  errors: number;
  unanswered: number;
  openComments: number;
  agreed: boolean;
}): string | undefined {
  const reasons: string[] = [];
  if (left.errors > 0) reasons.push(`${count(left.errors, "error", "errors")} to mend`);
  if (left.unanswered > 0) reasons.push(`${count(left.unanswered, "answer", "answers")} to give`);
  if (left.openComments > 0) {
    reasons.push(`${count(left.openComments, "comment", "comments")} of the editor to answer`);
  }
  if (!left.agreed) reasons.push("the licence to agree to");
  return reasons.length === 0 ? undefined : `Not yet: ${reasons.join(", ")}.`;
}

function GoTo({ finding, onGo }: { finding: FindingPartsFragment; onGo: (field: string) => void }) {
  const field = finding.fields[0];
  if (!field) return null;
  const name = FIELD_NAMES[field as FieldName] ?? "the paper";
  return <Button kind="text" label={`Go to ${lowerFirst(name)}`} onPress={() => onGo(field)} />;
}

function lowerFirst(text: string): string {
  return text.charAt(0).toLowerCase() + text.slice(1);
}

function Reading({ fields }: { fields: ConstraintFields }) {
  const used = asUsed(fields);
  if (!fields.quantity || !fields.kind) return null;
  return (
    <View style={{ gap: 12 }}>
      <Section>As it will read</Section>
      <View style={{ flexDirection: "row", flexWrap: "wrap", gap: 16 }}>
        <Side title="As printed">
          <NotationText notation={notationAsPrinted(fields)} size="stated" />
          <Dense>{redshiftLine(fields)}</Dense>
        </Side>
        <Side title="As used">
          {used ? (
            <>
              <NotationText notation={notationAsUsed(used)} size="stated" />
              {used.steps.map((step) => (
                <Dense key={step.code} muted>
                  {step.text}
                </Dense>
              ))}
              {used.steps.length === 0 ? <Dense muted>Nothing is converted.</Dense> : null}
            </>
          ) : (
            <Dense muted>
              {fields.kind === "qualitative"
                ? "A qualitative statement is shown and never fitted."
                : "Not complete enough to be used yet."}
            </Dense>
          )}
        </Side>
      </View>
      {fields.kind === "curve" && used?.curve ? (
        <Card>
          <StatementCurve fields={fields} />
        </Card>
      ) : null}
    </View>
  );
}

function Side({ title, children }: { title: string; children: ReactNode }) {
  return (
    <View style={{ flexGrow: 1, flexBasis: 260 }}>
      <Card style={{ gap: 8 }}>
        <Caption>{title}</Caption>
        {children}
      </Card>
    </View>
  );
}

function Summary({ fields }: { fields: ConstraintFields }) {
  const items = [...PRINTED_FIELDS, ...METHOD_FIELDS]
    .map((name) => ({ term: FIELD_NAMES[name], value: fieldText(name, fields) }))
    .filter(({ value }) => value !== "");
  return (
    <View style={{ gap: 12 }}>
      <Section>Everything typed</Section>
      {items.length > 0 ? <DefinitionList items={items} /> : <Body>Nothing yet.</Body>}
    </View>
  );
}
