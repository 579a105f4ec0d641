import { View } from "react-native";

import { Field } from "@/components/Field";
import { Caption, Dense, Label } from "@/components/Text";
import { dateTime } from "@/components/when";
import { useColors } from "@/theme/ThemeProvider";
import type { CommentPartsFragment } from "~graphql/generated/graphql";

/** A comment of the return at its field, with room for the answer. */
export function CommentAtField({
  comment,
  answer,
  onAnswer,
  onBlur,
}: {
  comment: CommentPartsFragment;
  answer: string;
  onAnswer?: (text: string) => void;
  onBlur?: () => void;
}) {
  const colors = useColors();
  return (
    <View
      style={{
        backgroundColor: colors.emberTint,
        borderRadius: 8,
        padding: 12,
        gap: 8,
        marginTop: 8,
      }}
    >
      <Label style={{ color: colors.emberText }}>{`${comment.by} asks`}</Label>
      <Dense>{comment.text}</Dense>
      <Caption>{dateTime(comment.at)}</Caption>
      {onAnswer ? (
        <Field label="Your answer" value={answer} onChangeText={onAnswer} onBlur={onBlur} />
      ) : (
        <Dense muted={!comment.answer}>
          {comment.answer ? `Answer: ${comment.answer}` : "Not answered yet"}
        </Dense>
      )}
    </View>
  );
}
