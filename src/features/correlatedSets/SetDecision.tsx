import { useState } from "react";
import { StyleSheet, View } from "react-native";

import { Button } from "@/components/Button";
import { CheckRow } from "@/components/CheckRow";
import { Confirm } from "@/components/Confirm";
import { Field } from "@/components/Field";
import { Notice } from "@/components/Notice";
import { Caption, Dense, Section } from "@/components/Text";
import { space } from "@/theme/tokens";
import type { SetReviewPartsFragment } from "~graphql/generated/graphql";

/** Approve a set, with the answers that are accepted, or return it with a comment. */
export function SetDecision({
  review,
  busy,
  onApprove,
  onReturn,
}: {
  review: SetReviewPartsFragment;
  busy: boolean;
  onApprove: (acceptedAnswers: string[], note: string) => void;
  onReturn: (comment: string) => void;
}) {
  const [accepted, setAccepted] = useState<readonly string[]>([]);
  const [text, setText] = useState("");
  const [returning, setReturning] = useState(false);
  const [asking, setAsking] = useState(false);
  const findings = review.set?.findings ?? [];
  const asked = findings.filter(({ grade }) => grade === "mustAnswer");
  const open = asked.filter(({ code }) => !accepted.includes(code));
  const blocked = [
    ...review.blockers,
    ...(open.length > 0 ? ["Accept each answer of the contributor."] : []),
  ];
  return (
    <View style={styles.stack}>
      <Section>Decision</Section>
      {findings
        .filter(({ grade }) => grade === "note")
        .map(({ code, message }) => (
          <Notice key={code} grade="note">
            {message}
          </Notice>
        ))}
      {asked.map(({ code, message }) => (
        <View key={code} style={styles.stack}>
          <Dense>{message}</Dense>
          <Dense
            muted
          >{`“${review.set?.answers.find((answer) => answer.code === code)?.answer ?? "Not answered."}”`}</Dense>
          <CheckRow
            label="I accept this answer"
            checked={accepted.includes(code)}
            onChange={(on) =>
              setAccepted((before) =>
                on ? [...before, code] : before.filter((one) => one !== code),
              )
            }
          />
        </View>
      ))}
      <Field
        label={returning ? "Comment to the contributor" : "Note to the contributor"}
        value={text}
        onChangeText={setText}
        multiline
        rows={2}
        hint={
          returning
            ? "Say what has to change, and where."
            : "It goes with the decision, or leave it empty."
        }
      />
      {returning ? (
        <View style={styles.line}>
          <Button
            kind="return"
            icon="keyboard-return"
            label="Return to contributor"
            busy={busy}
            disabledBecause={text.trim() === "" ? "Write the comment." : undefined}
            onPress={() => setAsking(true)}
          />
          <Button kind="text" label="Cancel the return" onPress={() => setReturning(false)} />
        </View>
      ) : (
        <View style={styles.line}>
          <Button
            kind="filled"
            icon="check"
            label="Approve"
            busy={busy}
            disabledBecause={blocked.length > 0 ? `Not yet: ${blocked.join(" ")}` : undefined}
            onPress={() => onApprove([...accepted], text)}
          />
          <Button
            kind="return"
            icon="keyboard-return"
            label="Return with a comment"
            onPress={() => setReturning(true)}
          />
        </View>
      )}
      <Caption>The contributor gets a mail with the decision, without any number.</Caption>
      <Confirm
        visible={asking}
        title="Return it to the contributor?"
        text="Your comment goes to the contributor, and your claim ends."
        confirmLabel="Return it"
        onConfirm={() => {
          setAsking(false);
          onReturn(text);
        }}
        onCancel={() => setAsking(false)}
      />
    </View>
  );
}

const styles = StyleSheet.create({
  stack: { gap: space.xs },
  line: { flexDirection: "row", flexWrap: "wrap", alignItems: "center", gap: space.xs },
});
