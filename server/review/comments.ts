import { In } from "typeorm";

import type { RequestContext } from "~server/common/context";
import { batched, perRequest } from "~server/constraint/batch";
import { FieldComment } from "~server/constraint/constraint.type";
import { nameOf } from "~server/constraint/names";

import { FieldCommentRecord } from "./comment.entity";

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
 * Comments made when a revision was returned. Whoever calls this has asked blindness.ts whether
 * the viewer may see that revision.
 */
export async function commentsOf(ctx: RequestContext, revisionId: string): Promise<FieldComment[]> {
  const comments = (await stored(ctx)(revisionId)) ?? [];
  return Promise.all(
    comments.map(async (comment) =>
      Object.assign(new FieldComment(), {
        id: comment.id,
        field: comment.field,
        text: comment.text,
        by: await nameOf(ctx)(comment.byId),
        at: comment.at,
        answer: comment.answer,
      }),
    ),
  );
}
