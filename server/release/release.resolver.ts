import { Arg, Ctx, FieldResolver, Int, Mutation, Query, Resolver, Root } from "type-graphql";

import type { RequestContext } from "~server/common/context";
import { Refusal } from "~server/common/outcomes";
import { Requires } from "~server/common/requires";
import { acting } from "~server/event/acting";
import { noticeType } from "~server/recordLife/life.query";
import { recordsReadBlind } from "~server/review/blindness";

import { tellOwners } from "~server/table/tellOwners";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";

import * as releases from "./release.service";
import {
  Release,
  ReleaseDifference,
  ReleaseNotice,
  ReleaseReadiness,
  ReleaseResult,
  releaseType,
} from "./release.type";

@Resolver(() => Release)
export class ReleaseResolver {
  @Query(() => [Release], { description: "All releases, newest first." })
  async releases(@Ctx() ctx: RequestContext): Promise<Release[]> {
    const found = await releases.findReleases(ctx.database.manager);
    return found.map((release) => releaseType(release, ctx.config.publicUrl));
  }

  @Query(() => Release, { nullable: true })
  async release(
    @Ctx() ctx: RequestContext,
    @Arg("number", () => Int) number: number,
  ): Promise<Release | null> {
    const found = await releases.findRelease(ctx.database.manager, number);
    return found && releaseType(found, ctx.config.publicUrl);
  }

  @Query(() => ReleaseDifference, {
    description: "What changed from one release to another, in the order of record numbers.",
  })
  async releaseDifference(
    @Ctx() ctx: RequestContext,
    @Arg("from", () => Int) from: number,
    @Arg("to", () => Int) to: number,
  ): Promise<ReleaseDifference> {
    const { manager } = ctx.database;
    const blind = await recordsReadBlind(manager, ctx.viewer, new Date());
    return Object.assign(
      new ReleaseDifference(),
      await releases.releaseDifference(manager, from, to, blind),
    );
  }

  @FieldResolver(() => [ReleaseNotice], {
    description:
      "Errata, supersessions and withdrawals recorded since it was cut. Its bytes never change by them.",
  })
  async notices(@Ctx() ctx: RequestContext, @Root() root: Release): Promise<ReleaseNotice[]> {
    const found = await releases.noticesSince(ctx.database.manager, root.number, root.cutAt);
    return Promise.all(
      found.map(async (notice) =>
        Object.assign(new ReleaseNotice(), {
          number: formatRecordNumber(notice.constraintId),
          notice: await noticeType(ctx, notice),
        }),
      ),
    );
  }

  @Requires("cutRelease")
  @Query(() => ReleaseReadiness)
  async releaseReadiness(@Ctx() ctx: RequestContext): Promise<ReleaseReadiness> {
    return Object.assign(
      new ReleaseReadiness(),
      await releases.readiness(ctx.database.manager, new Date()),
    );
  }

  @Requires("cutRelease")
  @Mutation(() => ReleaseResult)
  async cutRelease(
    @Ctx() ctx: RequestContext,
    @Arg("notes", () => String) notes: string,
  ): Promise<typeof ReleaseResult> {
    const who = acting(ctx);
    const outcome = await releases.cutRelease(who, notes);
    if (outcome instanceof Refusal) return outcome;
    await tellOwners(who, outcome);
    return releaseType(outcome, ctx.config.publicUrl);
  }
}
