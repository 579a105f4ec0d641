import { View } from "react-native";

import { Field } from "@/components/Field";
import { Caption, Dense, Label } from "@/components/Text";
import { dateTime } from "@/components/when";
import { useColors } from "@/theme/ThemeProvider";
import type { CommentPartsFragment } from "~graphql/generated/graphql";
import type { FieldName } from "~shared/statement/fields";
import { FIELD_NAMES } from "~shared/statement/words";

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
  // Several fields of a row have their comments below the row: each says whose it is.
  const field = FIELD_NAMES[comment.field as FieldName]?.toLowerCase() ?? "the paper";
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
      <Label style={{ color: colors.emberText }}>{`${comment.by} asks at ${field}`}</Label>
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
