import { Revision } from "~server/constraint/revision.entity";
import { refuse, Refusal } from "~server/common/outcomes";
import { loadRevision } from "~server/constraint/draft.service";
import { lengthProblem, plainText } from "~server/errorReport/text";
import { change, type Acting } from "~server/event/acting";
import { Not } from "typeorm";

import { hasRead } from "./blindness";
import { holdsClaim, subjectOf } from "./claim.service";
import { FieldCommentRecord } from "./comment.entity";
import { CommentMessage } from "./commentMessage.entity";
import { tellThread } from "./mails";

const MESSAGE_LENGTH = { shortest: 2, longest: 2000 } as const;
/** Of one thread; whoever needs more writes a note with the decision. */
const MOST_MESSAGES = 40;

const NOT_FOUND = "There is no such comment.";

/**
 * Goes on with the thread of a comment while its answer is with the editors: the editor who holds
 * the answer and has read it, and the contributor once an editor has written again.
 */
export async function replyToComment(
  who: Acting,
  commentId: string,
  given: string,
): Promise<FieldCommentRecord | Refusal> {
  const text = plainText(given);
  const problem = lengthProblem(text, MESSAGE_LENGTH, "Write");
  if (problem) return problem;
  return change<FieldCommentRecord | Refusal>(who, async (here) => {
    const { manager } = here;
    const comment = await manager.findOne(FieldCommentRecord, {
      where: { id: commentId },
      lock: { mode: "pessimistic_write" },
    });
    const answer = comment && (await answerTo(here.manager, comment.revisionId));
    if (!comment || !answer) return refuse("notFound", NOT_FOUND);
    const asOwner = answer.constraint.ownerId === who.viewer.id;
    // To who neither owns the record nor has read the answer, the thread is not there.
    if (!asOwner && !(await hasRead(manager, who.viewer.id, answer.id))) {
      return refuse("notFound", NOT_FOUND);
    }
    const messages = await manager.find(CommentMessage, {
      where: { commentId },
      order: { id: "ASC" },
    });
    if (answer.state !== "submitted" && answer.state !== "inReview") {
      return refuse("closed", "This thread goes on while the answer is with the editors only.");
    }
    if (asOwner && !messages.some(({ byId }) => byId !== who.viewer.id)) {
      return refuse("notYourTurn", "You have answered. You can write again once an editor has.");
    }
    if (!asOwner && !holdsClaim(answer, who.viewer.id, who.now)) {
      return refuse("notClaimed", "Claim the submission first.");
    }
    if (messages.length >= MOST_MESSAGES) {
      return refuse("tooMany", `A thread has at most ${MOST_MESSAGES} entries.`);
    }
    await manager.insert(CommentMessage, { commentId, byId: who.viewer.id, text, at: who.now });
    await here.event({
      kind: "comment.replied",
      subject: subjectOf(answer),
      detail: { field: comment.field },
    });
    await tellThread(here, who, answer, comment.field, asOwner);
    return comment;
  });
}

/** The revision that answers a returned one, unless it was discarded. */
async function answerTo(
  manager: Parameters<typeof loadRevision>[0],
  returnedId: string,
): Promise<Revision | null> {
  const following = await manager.findOne(Revision, {
    select: { id: true },
    where: { followsId: returnedId, state: Not("discarded") },
    order: { ordinal: "DESC" },
  });
  return following ? loadRevision(manager, following.id) : null;
}
