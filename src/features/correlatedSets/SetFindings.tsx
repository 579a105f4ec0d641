import { View } from "react-native";

import { Field } from "@/components/Field";
import { Notice } from "@/components/Notice";
import type { SetFinding } from "~shared/correlatedSet/checks";

/** What the rules say about a set; what must be answered takes its answer here. */
export function SetFindings({
  findings,
  answers,
  onAnswer,
}: {
  findings: readonly SetFinding[];
  answers: Record<string, string>;
  onAnswer: (code: string, answer: string) => void;
}) {
  return (
    <View style={{ gap: 12 }} aria-live="polite">
      {findings.map(({ code, grade, message }) => (
        <Notice
          key={code}
          grade={grade}
          title={grade === "mustAnswer" ? "Must be answered" : undefined}
        >
          {grade === "mustAnswer" ? (
            <AnswerField
              message={message}
              value={answers[code] ?? ""}
              onChange={(answer) => onAnswer(code, answer)}
            />
          ) : (
            message
          )}
        </Notice>
      ))}
    </View>
  );
}

function AnswerField({
  message,
  value,
  onChange,
}: {
  message: string;
  value: string;
  onChange: (answer: string) => void;
}) {
  return (
    <View style={{ gap: 8 }}>
      <Field
        label="Your answer, which the editor reads"
        hint={message}
        value={value}
        onChangeText={onChange}
        multiline
        rows={2}
      />
    </View>
  );
}
