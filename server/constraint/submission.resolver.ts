import { Arg, Ctx, FieldResolver, ID, Int, Mutation, Query, Resolver, Root } from "type-graphql";
import { In } from "typeorm";

import { requireViewer, type RequestContext } from "~server/common/context";
import { DoneResult } from "~server/common/outcomes";
import { Requires } from "~server/common/requires";
import { acting } from "~server/event/acting";
import { findingFor, recordsReadBlind } from "~server/review/blindness";
import { commentsOf } from "~server/review/comments";

import { batched, perRequest } from "./batch";
import {
  FieldChange,
  fieldChanges,
  FieldComment,
  FindingAnswer,
  FindingType,
  PublicRevision,
  stateSince,
} from "./constraint.type";
import * as drafts from "./draft.service";
import { ConstraintFieldsInput, fieldsFromInput } from "./fields.type";
import { draftFindings, neighbours, ownSubmissions } from "./neighbours";
import { Revision } from "./revision.entity";
import {
  SaveDraftInput,
  Submission,
  submissionOutcome,
  SubmissionResult,
  submissionType,
} from "./submission.type";

const neighboursOnce = perRequest((ctx: RequestContext) =>
  neighbours(ctx.database.manager, ctx.viewer),
);

const ownOnce = perRequest((ctx: RequestContext) =>
  ownSubmissions(ctx.database.manager, requireViewer(ctx)),
);

/** All revisions of a record, oldest first. */
const revisionsOf = perRequest((ctx: RequestContext) =>
  batched<number, Revision[]>(async (ids) => {
    const revisions = await ctx.database.manager.find(Revision, {
      where: { constraintId: In([...ids]) },
      order: { ordinal: "ASC" },
    });
    const groups = new Map<number, Revision[]>(ids.map((id) => [id, []]));
    for (const revision of revisions) groups.get(revision.constraintId)?.push(revision);
    return groups;
  }),
);

@Resolver(() => Submission)
export class SubmissionResolver {
  @Requires("readSubmission")
  @Query(() => [Submission])
  async mySubmissions(@Ctx() ctx: RequestContext): Promise<Submission[]> {
    const revisions = await ctx.database.manager.find(Revision, {
      where: { constraint: { ownerId: requireViewer(ctx).id } },
      relations: { constraint: true, citation: true },
      order: { updatedAt: "DESC", id: "ASC" },
    });
    return revisions
      .filter((revision) => revision.state !== "discarded")
      .map((revision) => submissionType(revision));
  }

  @Requires("readSubmission")
  @Query(() => Submission, { nullable: true })
  async submission(
    @Ctx() ctx: RequestContext,
    @Arg("id", () => ID) id: string,
  ): Promise<Submission | null> {
    const revision = await drafts.loadRevision(ctx.database.manager, id);
    // An editor reads through `review`, where the second reading comes first.
    return revision?.constraint.ownerId === requireViewer(ctx).id ? submissionType(revision) : null;
  }

  @Requires("saveDraft")
  @Query(() => [FindingType], {
    description:
      "Findings for fields not yet saved; needs the registry (near-duplicates, medians).",
  })
  async checkFields(
    @Ctx() ctx: RequestContext,
    @Arg("fields", () => ConstraintFieldsInput) fields: ConstraintFieldsInput,
    @Arg("citationId", () => ID, { nullable: true }) citationId: string | null = null,
    @Arg("submissionId", () => ID, { nullable: true }) submissionId: string | null = null,
  ): Promise<FindingType[]> {
    const parsed = fieldsFromInput(fields);
    if ("tooLong" in parsed) {
      return [
        Object.assign(new FindingType(), {
          code: "tooLong",
          grade: "error",
          fields: [parsed.tooLong],
          message: "This text is too long to keep. Shorten it.",
        }),
      ];
    }
    const own =
      submissionId === null ? null : await drafts.loadRevision(ctx.database.manager, submissionId);
    const number = own?.constraint.ownerId === requireViewer(ctx).id ? own.constraintId : null;
    return draftFindings(
      parsed.fields,
      citationId,
      number,
      await neighboursOnce(ctx),
      await ownOnce(ctx),
    ).map((finding) => Object.assign(new FindingType(), finding));
  }

  @Requires("startDraft")
  @Mutation(() => SubmissionResult, {
    description:
      "Starts a record with a first draft; from another submission it keeps the citation and its context.",
  })
  async startDraft(
    @Ctx() ctx: RequestContext,
    @Arg("citationId", () => ID, { nullable: true }) citationId: string | null = null,
    @Arg("fromSubmissionId", () => ID, { nullable: true }) submissionId: string | null = null,
  ): Promise<typeof SubmissionResult> {
    return submissionOutcome(await drafts.startDraft(acting(ctx), { citationId, submissionId }));
  }

  @Requires("saveDraft")
  @Mutation(() => SubmissionResult)
  async saveDraft(
    @Ctx() ctx: RequestContext,
    @Arg("input", () => SaveDraftInput) input: SaveDraftInput,
  ): Promise<typeof SubmissionResult> {
    return submissionOutcome(await drafts.saveDraft(acting(ctx), input));
  }

  @Requires("submitDraft")
  @Mutation(() => SubmissionResult)
  async submitDraft(
    @Ctx() ctx: RequestContext,
    @Arg("id", () => ID) id: string,
    @Arg("version", () => Int) version: number,
    @Arg("agreeToLicence", () => Boolean) agreeToLicence: boolean,
  ): Promise<typeof SubmissionResult> {
    return submissionOutcome(await drafts.submitDraft(acting(ctx), id, version, agreeToLicence));
  }

  @Requires("discardDraft")
  @Mutation(() => DoneResult)
  discardDraft(
    @Ctx() ctx: RequestContext,
    @Arg("id", () => ID) id: string,
    @Arg("version", () => Int) version: number,
  ): Promise<typeof DoneResult> {
    return drafts.discardDraft(acting(ctx), id, version);
  }

  @Requires("reviseSubmission")
  @Mutation(() => SubmissionResult, {
    description: "A new draft revision of a returned or approved record of one's own.",
  })
  async reviseSubmission(
    @Ctx() ctx: RequestContext,
    @Arg("id", () => ID) id: string,
  ): Promise<typeof SubmissionResult> {
    return submissionOutcome(await drafts.reviseSubmission(acting(ctx), id));
  }

  @FieldResolver(() => [FindingType])
  async findings(
    @Ctx() ctx: RequestContext,
    @Root() { revision }: Submission,
  ): Promise<FindingType[]> {
    if (revision.state === "draft") {
      const { fields, citationId, constraintId } = revision;
      return draftFindings(
        fields,
        citationId,
        constraintId,
        await neighboursOnce(ctx),
        await ownOnce(ctx),
      ).map((finding) => Object.assign(new FindingType(), finding));
    }
    const blind = await recordsReadBlind(ctx.database.manager, ctx.viewer, new Date());
    return revision.findings.map((finding) =>
      Object.assign(new FindingType(), findingFor(finding, blind)),
    );
  }

  @FieldResolver(() => [FindingAnswer])
  answers(@Root() { revision }: Submission): FindingAnswer[] {
    return revision.answers.map((answer) => Object.assign(new FindingAnswer(), answer));
  }

  @FieldResolver(() => [FieldComment], {
    description: "Comments of the return this revision answers, or of the return of this revision.",
  })
  async comments(
    @Ctx() ctx: RequestContext,
    @Root() { revision }: Submission,
  ): Promise<FieldComment[]> {
    const returned = revision.state === "returned" ? revision.id : revision.followsId;
    return returned === null ? [] : commentsOf(ctx, returned);
  }

  @FieldResolver(() => [FieldChange])
  async changes(
    @Ctx() ctx: RequestContext,
    @Root() { revision }: Submission,
  ): Promise<FieldChange[]> {
    const all = (await revisionsOf(ctx)(revision.constraintId)) ?? [];
    const followed = all.find((one) => one.id === revision.followsId);
    return followed ? fieldChanges(followed.fields, revision.fields) : [];
  }

  @FieldResolver(() => [PublicRevision])
  async history(
    @Ctx() ctx: RequestContext,
    @Root() { revision }: Submission,
  ): Promise<PublicRevision[]> {
    const all = (await revisionsOf(ctx)(revision.constraintId)) ?? [];
    return all.map((one) => {
      const followed = all.find((other) => other.id === one.followsId);
      return Object.assign(new PublicRevision(), {
        ordinal: one.ordinal,
        state: one.state,
        at: stateSince(one),
        changes: followed ? fieldChanges(followed.fields, one.fields) : [],
      });
    });
  }

  @FieldResolver(() => ID, {
    nullable: true,
    description:
      "The revision that follows this one, if there is one: the answer to a return, or a later correction.",
  })
  async answeredBy(
    @Ctx() ctx: RequestContext,
    @Root() { revision }: Submission,
  ): Promise<string | null> {
    const all = (await revisionsOf(ctx)(revision.constraintId)) ?? [];
    return (
      all.find((one) => one.followsId === revision.id && one.state !== "discarded")?.id ?? null
    );
  }
}
