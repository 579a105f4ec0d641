import { useMutation } from "@apollo/client/react";
import { useState } from "react";
import { View } from "react-native";

import { userMessage } from "@/apollo/userMessage";
import { Button } from "@/components/Button";
import { Field } from "@/components/Field";
import { Notice } from "@/components/Notice";
import { Caption, Dense } from "@/components/Text";
import { dateTime } from "@/components/when";
import { useColors } from "@/theme/ThemeProvider";
import { type CommentPartsFragment, ReplyToCommentDocument } from "~graphql/generated/graphql";

/** What was written below a comment after its first answer, and room to go on where one may. */
export function Thread({
  comment,
  mayWrite,
}: {
  comment: CommentPartsFragment;
  /** Whether the viewer may write now; the server asks again. */
  mayWrite: boolean;
}) {
  const colors = useColors();
  const [open, setOpen] = useState(false);
  const [text, setText] = useState("");
  const [problem, setProblem] = useState<string | null>(null);
  const [reply, { loading }] = useMutation(ReplyToCommentDocument);
  const send = async () => {
    setProblem(null);
    try {
      const { data } = await reply({ variables: { commentId: comment.id, text } });
      const outcome = data?.replyToComment;
      if (outcome?.__typename === "CommentThread") {
        setText("");
        setOpen(false);
      } else setProblem(outcome?.message ?? "The server gave no answer. Try again.");
    } catch (error) {
      setProblem(userMessage(error));
    }
  };
  return (
    <View style={{ gap: 8 }}>
      {comment.messages.map(({ id, by, mine, at, text: said }) => (
        <View
          key={id}
          style={{ borderLeftWidth: 2, borderColor: colors.outline, paddingLeft: 12, gap: 2 }}
        >
          <Dense style={{ whiteSpace: "pre-line", overflowWrap: "anywhere" } as never}>
            {said}
          </Dense>
          <Caption>{`${mine ? "You" : by}, ${dateTime(at)}`}</Caption>
        </View>
      ))}
      {mayWrite && open ? (
        <View style={{ gap: 8 }}>
          <Field
            label="Your reply"
            multiline
            rows={2}
            value={text}
            onChangeText={setText}
            maxLength={2000}
          />
          {problem ? <Notice grade="error">{problem}</Notice> : null}
          <View style={{ flexDirection: "row", flexWrap: "wrap", gap: 8 }}>
            <Button
              kind="tonal"
              icon="send-outline"
              label="Send the reply"
              busy={loading}
              disabledBecause={text.trim().length < 2 ? "Write something first." : undefined}
              onPress={() => void send()}
            />
            <Button kind="text" label="Cancel" onPress={() => setOpen(false)} />
          </View>
        </View>
      ) : null}
      {mayWrite && !open ? (
        <View style={{ flexDirection: "row", marginLeft: -12 }}>
          <Button
            kind="text"
            icon="comment-text-outline"
            label="Reply"
            accessibilityLabel="Reply to this comment"
            onPress={() => setOpen(true)}
          />
        </View>
      ) : null}
    </View>
  );
}
