import { In } from "typeorm";

import type { RequestContext } from "~server/common/context";
import { batched, perRequest } from "~server/constraint/batch";
import { FieldComment, ThreadMessage } from "~server/constraint/constraint.type";
import { nameOf } from "~server/constraint/names";

import { FieldCommentRecord } from "./comment.entity";
import { CommentMessage } from "./commentMessage.entity";

const stored = perRequest((ctx: RequestContext) =>
  batched<string, FieldCommentRecord[]>(async (ids) => {
    const comments = await ctx.database.manager.find(FieldCommentRecord, {
      where: { revisionId: In([...ids]) },
      order: { at: "ASC", position: "ASC" },
    });
    const groups = new Map<string, FieldCommentRecord[]>(ids.map((id) => [id, []]));
    for (const comment of comments) groups.get(comment.revisionId)?.push(comment);
    return groups;
  }),
);

/**
 * Comments made when a revision was returned, each with its thread. Whoever calls this has asked
 * blindness.ts whether the viewer may see that revision.
 */
export async function commentsOf(ctx: RequestContext, revisionId: string): Promise<FieldComment[]> {
  const comments = (await stored(ctx)(revisionId)) ?? [];
  const messages = comments.length === 0 ? [] : await messagesBelow(ctx, comments);
  return Promise.all(
    comments.map((comment) =>
      commentType(
        ctx,
        comment,
        messages.filter(({ commentId }) => commentId === comment.id),
      ),
    ),
  );
}

/** One comment with its thread; as above, the caller has asked whether the viewer may see it. */
export async function threadOf(
  ctx: RequestContext,
  comment: FieldCommentRecord,
): Promise<FieldComment> {
  return commentType(ctx, comment, await messagesBelow(ctx, [comment]));
}

function messagesBelow(
  ctx: RequestContext,
  comments: readonly FieldCommentRecord[],
): Promise<CommentMessage[]> {
  return ctx.database.manager.find(CommentMessage, {
    where: { commentId: In(comments.map(({ id }) => id)) },
    order: { id: "ASC" },
  });
}

async function commentType(
  ctx: RequestContext,
  comment: FieldCommentRecord,
  messages: readonly CommentMessage[],
): Promise<FieldComment> {
  return Object.assign(new FieldComment(), {
    id: comment.id,
    field: comment.field,
    text: comment.text,
    by: await nameOf(ctx)(comment.byId),
    at: comment.at,
    answer: comment.answer,
    messages: await Promise.all(
      messages.map(async ({ id, byId, text, at }) =>
        Object.assign(new ThreadMessage(), {
          id: String(id),
          by: await nameOf(ctx)(byId),
          mine: byId === ctx.viewer?.id,
          text,
          at,
        }),
      ),
    ),
  });
}
