import { Arg, Ctx, FieldResolver, ID, Int, Mutation, Query, Resolver, Root } from "type-graphql";

import { requireViewer, type RequestContext } from "~server/common/context";
import { DoneResult, Refusal } from "~server/common/outcomes";
import { Requires } from "~server/common/requires";
import { ConstraintType } from "~server/constraint/constraint.type";
import { acting } from "~server/event/acting";
import { hasReadSet, seesSet } from "~server/review/blindness";
import { formatRecordNumber, parseRecordNumber } from "~shared/identifiers/recordNumber";

import { CorrelatedSet } from "./correlatedSet.entity";
import {
  CorrelatedSetResult,
  CorrelatedSetType,
  SaveSetInput,
  SetEntryInput,
  SetLink,
  SetMemberType,
  SetQueueItem,
  SetReadingInput,
  SetReview,
  SetReviewResult,
  StartSetInput,
} from "./correlatedSet.type";
import * as drafts from "./draft";
import * as reviews from "./review";
import { loadSet, membersOfPaper } from "./store";
import { approvedSets, memberType, setLink, setQueueItem, setReviewFor, setType } from "./view";

@Resolver(() => ConstraintType)
export class CorrelatedSetResolver {
  @FieldResolver(() => [SetLink], {
    description: "Approved correlated sets that this record is part of.",
  })
  async correlatedSets(
    @Ctx() ctx: RequestContext,
    @Root() root: ConstraintType,
  ): Promise<SetLink[]> {
    const number = formatRecordNumber(root.constraintId);
    return (await approvedSets(ctx)())
      .filter(({ members }) => members.includes(number))
      .map(setLink);
  }

  @Query(() => [CorrelatedSetType], {
    name: "correlatedSets",
    description: "Approved sets: all of them, or those that a record is part of.",
  })
  async allSets(
    @Ctx() ctx: RequestContext,
    @Arg("member", () => String, { nullable: true }) member: string | null = null,
  ): Promise<CorrelatedSetType[]> {
    const id = member === null ? null : parseRecordNumber(member);
    const wanted = id === null ? null : formatRecordNumber(id);
    const sets = (await approvedSets(ctx)()).filter(({ members }) =>
      wanted === null ? member === null : members.includes(wanted),
    );
    return Promise.all(sets.map((set) => setType(ctx, set)));
  }

  @Query(() => CorrelatedSetType, {
    nullable: true,
    description: "An approved or withdrawn set, or one that this person submitted or has read.",
  })
  async correlatedSet(
    @Ctx() ctx: RequestContext,
    @Arg("number", () => String) number: string,
  ): Promise<CorrelatedSetType | null> {
    const set = await loadSet(ctx.database.manager, number);
    if (!set || !(await seesSet(ctx.database.manager, ctx.viewer, set, new Date()))) return null;
    return setType(ctx, set);
  }

  @Requires("readSet")
  @Query(() => [CorrelatedSetType])
  async mySets(@Ctx() ctx: RequestContext): Promise<CorrelatedSetType[]> {
    const sets = await ctx.database.manager.find(CorrelatedSet, {
      where: { ownerId: requireViewer(ctx).id },
      relations: { citation: true },
      order: { updatedAt: "DESC", id: "DESC" },
    });
    return Promise.all(
      sets.filter(({ state }) => state !== "discarded").map((set) => setType(ctx, set)),
    );
  }

  @Requires("startSet")
  @Query(() => [SetMemberType], {
    description:
      "Records of a paper for a set: approved ones, and submissions of one's own; each with why it can't join.",
  })
  async setCandidates(
    @Ctx() ctx: RequestContext,
    @Arg("citationId", () => ID) citationId: string,
  ): Promise<SetMemberType[]> {
    const found = await membersOfPaper(ctx.database.manager, requireViewer(ctx), citationId);
    return found.map(memberType);
  }

  @Requires("reviewSet")
  @Query(() => [SetQueueItem])
  async setQueue(@Ctx() ctx: RequestContext): Promise<SetQueueItem[]> {
    const who = acting(ctx);
    const sets = await reviews.queuedSets(who);
    return Promise.all(
      sets.map((set) => setQueueItem(ctx.database.manager, set, who.viewer, who.now)),
    );
  }

  @Requires("reviewSet")
  @Query(() => SetReview, { nullable: true })
  async setReview(
    @Ctx() ctx: RequestContext,
    @Arg("number", () => String) number: string,
  ): Promise<SetReview | null> {
    const { manager } = ctx.database;
    await reviews.lapseSetClaims(acting(ctx));
    const set = await loadSet(manager, number);
    if (!set?.submittedAt) return null;
    const waiting = set.state === "submitted" || set.state === "inReview";
    // A decided set stays open to the editors who read it, and is nothing to the others.
    if (!waiting && !(await hasReadSet(manager, requireViewer(ctx).id, set.id))) return null;
    return setReviewFor(ctx, set);
  }

  @Requires("startSet")
  @Mutation(() => CorrelatedSetResult)
  async startSet(
    @Ctx() ctx: RequestContext,
    @Arg("input", () => StartSetInput) input: StartSetInput,
  ): Promise<typeof CorrelatedSetResult> {
    return outcome(ctx, await drafts.startSet(acting(ctx), input.citationId, input.members));
  }

  @Requires("saveSet")
  @Mutation(() => CorrelatedSetResult)
  async saveSet(
    @Ctx() ctx: RequestContext,
    @Arg("input", () => SaveSetInput) input: SaveSetInput,
  ): Promise<typeof CorrelatedSetResult> {
    return outcome(ctx, await drafts.saveSet(acting(ctx), input));
  }

  @Requires("submitSet")
  @Mutation(() => CorrelatedSetResult)
  async submitSet(
    @Ctx() ctx: RequestContext,
    @Arg("number", () => String) number: string,
    @Arg("version", () => Int) version: number,
    @Arg("agreeToLicence", () => Boolean) agreeToLicence: boolean,
  ): Promise<typeof CorrelatedSetResult> {
    return outcome(ctx, await drafts.submitSet(acting(ctx), number, version, agreeToLicence));
  }

  @Requires("discardSet")
  @Mutation(() => DoneResult)
  discardSet(
    @Ctx() ctx: RequestContext,
    @Arg("number", () => String) number: string,
    @Arg("version", () => Int) version: number,
  ): Promise<typeof DoneResult> {
    return drafts.discardSet(acting(ctx), number, version);
  }

  @Requires("reviseSet")
  @Mutation(() => CorrelatedSetResult, {
    description: "A new set that answers a return, or corrects an approved or withdrawn one.",
  })
  async reviseSet(
    @Ctx() ctx: RequestContext,
    @Arg("number", () => String) number: string,
  ): Promise<typeof CorrelatedSetResult> {
    return outcome(ctx, await drafts.reviseSet(acting(ctx), number));
  }

  @Requires("reviewSet")
  @Mutation(() => SetReviewResult)
  async claimSet(
    @Ctx() ctx: RequestContext,
    @Arg("number", () => String) number: string,
  ): Promise<typeof SetReviewResult> {
    return reviewOutcome(ctx, await reviews.claimSet(acting(ctx), number));
  }

  @Requires("reviewSet")
  @Mutation(() => DoneResult)
  releaseSet(
    @Ctx() ctx: RequestContext,
    @Arg("number", () => String) number: string,
  ): Promise<typeof DoneResult> {
    return reviews.releaseSet(acting(ctx), number);
  }

  @Requires("reviewSet")
  @Mutation(() => SetReviewResult)
  async storeSetReading(
    @Ctx() ctx: RequestContext,
    @Arg("number", () => String) number: string,
    @Arg("reading", () => SetReadingInput) reading: SetReadingInput,
  ): Promise<typeof SetReviewResult> {
    const { matrixKind, triangle } = reading;
    return reviewOutcome(
      ctx,
      await reviews.storeSetReading(acting(ctx), number, {
        matrixKind: matrixKind ?? null,
        triangle,
      }),
    );
  }

  @Requires("reviewSet")
  @Mutation(() => SetReviewResult, {
    description:
      "Reads one differing entry again after the comparison; the first reading stays on record.",
  })
  async correctSetReading(
    @Ctx() ctx: RequestContext,
    @Arg("number", () => String) number: string,
    @Arg("entry", () => SetEntryInput) entry: SetEntryInput,
  ): Promise<typeof SetReviewResult> {
    const { row, column, text, why } = entry;
    return reviewOutcome(
      ctx,
      await reviews.correctSetReading(acting(ctx), number, {
        row: row ?? null,
        column: column ?? null,
        text,
        why,
      }),
    );
  }

  @Requires("reviewSet")
  @Mutation(() => DoneResult)
  approveSet(
    @Ctx() ctx: RequestContext,
    @Arg("number", () => String) number: string,
    @Arg("version", () => Int) version: number,
    @Arg("acceptedAnswers", () => [String]) acceptedAnswers: string[],
    @Arg("note", () => String, { nullable: true }) note: string | null = null,
  ): Promise<typeof DoneResult> {
    return reviews.approveSet(acting(ctx), number, version, acceptedAnswers, note);
  }

  @Requires("reviewSet")
  @Mutation(() => DoneResult)
  returnSet(
    @Ctx() ctx: RequestContext,
    @Arg("number", () => String) number: string,
    @Arg("version", () => Int) version: number,
    @Arg("comment", () => String) comment: string,
  ): Promise<typeof DoneResult> {
    return reviews.returnSet(acting(ctx), number, version, comment);
  }

  @Requires("withdrawSet")
  @Mutation(() => DoneResult)
  withdrawSet(
    @Ctx() ctx: RequestContext,
    @Arg("number", () => String) number: string,
    @Arg("version", () => Int) version: number,
    @Arg("reason", () => String) reason: string,
  ): Promise<typeof DoneResult> {
    return reviews.withdrawSet(acting(ctx), number, version, reason);
  }
}

async function outcome(
  ctx: RequestContext,
  result: CorrelatedSet | Refusal,
): Promise<typeof CorrelatedSetResult> {
  return result instanceof Refusal ? result : setType(ctx, result);
}

async function reviewOutcome(
  ctx: RequestContext,
  result: CorrelatedSet | Refusal,
): Promise<typeof SetReviewResult> {
  return result instanceof Refusal ? result : setReviewFor(ctx, result);
}
