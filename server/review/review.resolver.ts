import { Arg, Ctx, ID, Int, Mutation, Query, Resolver } from "type-graphql";

import { requireViewer, type RequestContext } from "~server/common/context";
import { DoneResult, Refusal } from "~server/common/outcomes";
import { Requires } from "~server/common/requires";
import { loadRevision } from "~server/constraint/draft.service";
import type { Revision } from "~server/constraint/revision.entity";
import { acting } from "~server/event/acting";

import { hasRead } from "./blindness";
import * as claims from "./claim.service";
import { papersLeftBy } from "./recusal.service";
import { ReadingInput } from "./reading.input";
import * as reviews from "./review.service";
import {
  OtherEditor,
  queueItem,
  QueueItem,
  ReturnComment,
  Review,
  ReviewResult,
} from "./review.type";
import { reviewFor } from "./review.view";

@Resolver()
export class ReviewResolver {
  @Requires("readQueue")
  @Query(() => [QueueItem])
  async queue(@Ctx() ctx: RequestContext): Promise<QueueItem[]> {
    const who = acting(ctx);
    const revisions = await claims.queued(who);
    const left = await papersLeftBy(ctx.database.manager, who.viewer.id);
    return revisions.map((revision) => queueItem(revision, who.viewer, left, who.now));
  }

  @Requires("readQueue")
  @Query(() => Review, { nullable: true })
  async review(
    @Ctx() ctx: RequestContext,
    @Arg("id", () => ID) id: string,
  ): Promise<Review | null> {
    await claims.lapseClaims(acting(ctx));
    const revision = await loadRevision(ctx.database.manager, id);
    if (!revision?.submittedAt) return null;
    const waiting = revision.state === "submitted" || revision.state === "inReview";
    // A decided submission stays open to the editors who read it, and is nothing to the others.
    if (!waiting && !(await hasRead(ctx.database.manager, requireViewer(ctx).id, id))) return null;
    return reviewFor(ctx, revision);
  }

  @Requires("claimSubmission")
  @Mutation(() => ReviewResult)
  async claimSubmission(
    @Ctx() ctx: RequestContext,
    @Arg("id", () => ID) id: string,
  ): Promise<typeof ReviewResult> {
    return outcome(ctx, await claims.claim(acting(ctx), id));
  }

  @Requires("releaseClaim")
  @Mutation(() => DoneResult)
  releaseClaim(
    @Ctx() ctx: RequestContext,
    @Arg("id", () => ID) id: string,
  ): Promise<typeof DoneResult> {
    return claims.releaseClaim(acting(ctx), id);
  }

  @Requires("claimSubmission")
  @Mutation(() => ReviewResult, {
    description:
      "Starts the hours of one's own claim anew; in its last day only, and twice at most.",
  })
  async renewClaim(
    @Ctx() ctx: RequestContext,
    @Arg("id", () => ID) id: string,
  ): Promise<typeof ReviewResult> {
    return outcome(ctx, await claims.renewClaim(acting(ctx), id));
  }

  @Requires("handOverClaim")
  @Query(() => [OtherEditor], {
    description: "Editors who can take over what one holds; none when one doesn't hold it.",
  })
  async handOverList(
    @Ctx() ctx: RequestContext,
    @Arg("id", () => ID) id: string,
  ): Promise<OtherEditor[]> {
    const editors = await claims.handOverList(acting(ctx), id);
    return editors.map(({ id: editorId, nameOnPapers }) =>
      Object.assign(new OtherEditor(), { id: editorId, nameOnPapers }),
    );
  }

  @Requires("handOverClaim")
  @Mutation(() => DoneResult)
  handOverClaim(
    @Ctx() ctx: RequestContext,
    @Arg("id", () => ID) id: string,
    @Arg("editorId", () => ID) editorId: string,
  ): Promise<typeof DoneResult> {
    return claims.handOverClaim(acting(ctx), id, editorId);
  }

  @Requires("tickChecklist")
  @Mutation(() => ReviewResult, {
    description: "Keeps which points of the checklist are ticked: these and no others.",
  })
  async tickChecklist(
    @Ctx() ctx: RequestContext,
    @Arg("id", () => ID) id: string,
    @Arg("codes", () => [String]) codes: string[],
  ): Promise<typeof ReviewResult> {
    return outcome(ctx, await reviews.tickChecklist(acting(ctx), id, codes));
  }

  @Requires("storeReading")
  @Mutation(() => ReviewResult)
  async storeReading(
    @Ctx() ctx: RequestContext,
    @Arg("id", () => ID) id: string,
    @Arg("reading", () => ReadingInput) reading: ReadingInput,
  ): Promise<typeof ReviewResult> {
    return outcome(ctx, await reviews.storeReading(acting(ctx), id, reading));
  }

  @Requires("correctReading")
  @Mutation(() => ReviewResult, {
    description:
      "Reads one differing field again after the comparison; the first reading stays on record.",
  })
  async correctReading(
    @Ctx() ctx: RequestContext,
    @Arg("id", () => ID) id: string,
    @Arg("field", () => String) field: string,
    @Arg("reading", () => ReadingInput) reading: ReadingInput,
    @Arg("why", () => String) why: string,
  ): Promise<typeof ReviewResult> {
    return outcome(ctx, await reviews.correctReading(acting(ctx), id, field, reading, why));
  }

  @Requires("acceptAnswer")
  @Mutation(() => ReviewResult)
  async acceptAnswer(
    @Ctx() ctx: RequestContext,
    @Arg("id", () => ID) id: string,
    @Arg("code", () => String) code: string,
  ): Promise<typeof ReviewResult> {
    return outcome(ctx, await reviews.acceptAnswer(acting(ctx), id, code));
  }

  @Requires("approveSubmission")
  @Mutation(() => DoneResult)
  approveSubmission(
    @Ctx() ctx: RequestContext,
    @Arg("id", () => ID) id: string,
    @Arg("version", () => Int) version: number,
    @Arg("note", () => String, { nullable: true }) note: string | null = null,
  ): Promise<typeof DoneResult> {
    return reviews.approve(acting(ctx), id, version, note);
  }

  @Requires("returnSubmission")
  @Mutation(() => DoneResult)
  returnSubmission(
    @Ctx() ctx: RequestContext,
    @Arg("id", () => ID) id: string,
    @Arg("version", () => Int) version: number,
    @Arg("comments", () => [ReturnComment]) comments: ReturnComment[],
    @Arg("note", () => String, { nullable: true }) note: string | null = null,
  ): Promise<typeof DoneResult> {
    return reviews.returnSubmission(acting(ctx), id, version, comments, note);
  }
}

async function outcome(
  ctx: RequestContext,
  result: Revision | Refusal,
): Promise<typeof ReviewResult> {
  return result instanceof Refusal ? result : reviewFor(ctx, result);
}
