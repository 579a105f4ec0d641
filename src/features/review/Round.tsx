import { View } from "react-native";

import { Notice } from "@/components/Notice";
import { Thread } from "@/components/review/Thread";
import { Dense } from "@/components/Text";
import type { ReviewPartsFragment } from "~graphql/generated/graphql";

import { fieldName } from "./readingText";

/** What was asked in the round before, answered and changed, each comment with its thread. */
export function Round({ review }: { review: ReviewPartsFragment }) {
  const { comments, changes, item } = review;
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
          <Thread comment={comment} mayWrite={item.claimedByMe && comment.answer !== null} />
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
