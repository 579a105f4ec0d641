import { Arg, Ctx, ID, Mutation, Query, Resolver } from "type-graphql";

import { requireViewer, type RequestContext } from "~server/common/context";
import { DoneResult, Refusal } from "~server/common/outcomes";
import { Requires } from "~server/common/requires";
import { citationType } from "~server/citation/citation.type";
import { acting } from "~server/event/acting";

import { threadOf } from "./comments";
import { declareRecusal, recusalsOf, takeBackRecusal } from "./recusal.service";
import { CommentThread, LeftPaper, ThreadResult } from "./review.type";
import { replyToComment } from "./threads";

/** Threads of comments, and the papers that an editor leaves to others. */
@Resolver()
export class ThreadResolver {
  @Requires("replyToComment")
  @Mutation(() => ThreadResult, {
    description:
      "Goes on with a comment's thread while its answer is with the editors; answers with the comment.",
  })
  async replyToComment(
    @Ctx() ctx: RequestContext,
    @Arg("commentId", () => ID) commentId: string,
    @Arg("text", () => String) text: string,
  ): Promise<typeof ThreadResult> {
    const result = await replyToComment(acting(ctx), commentId, text);
    if (result instanceof Refusal) return result;
    return Object.assign(new CommentThread(), { comment: await threadOf(ctx, result) });
  }

  @Requires("recuse")
  @Query(() => [LeftPaper], { description: "Papers that one leaves to other editors." })
  async papersLeft(@Ctx() ctx: RequestContext): Promise<LeftPaper[]> {
    const recusals = await recusalsOf(ctx.database.manager, requireViewer(ctx).id);
    return recusals.map(({ citation, reason, at }) =>
      Object.assign(new LeftPaper(), { citation: citationType(citation), reason, at }),
    );
  }

  @Requires("recuse")
  @Mutation(() => DoneResult, {
    description: "Keeps that one can't read this paper impartially; claims on it end.",
  })
  leavePaper(
    @Ctx() ctx: RequestContext,
    @Arg("citationId", () => ID) citationId: string,
    @Arg("reason", () => String, { nullable: true }) reason: string | null = null,
  ): Promise<typeof DoneResult> {
    return declareRecusal(acting(ctx), citationId, reason);
  }

  @Requires("recuse")
  @Mutation(() => DoneResult)
  takePaperBack(
    @Ctx() ctx: RequestContext,
    @Arg("citationId", () => ID) citationId: string,
  ): Promise<typeof DoneResult> {
    return takeBackRecusal(acting(ctx), citationId);
  }
}
