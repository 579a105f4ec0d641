import { Arg, Ctx, FieldResolver, Int, Query, Resolver, Root } from "type-graphql";

import type { RequestContext } from "~server/common/context";
import { ConstraintSortEnum } from "~server/common/enums";
import { eventMark } from "~server/event/event.type";
import { lastEvent } from "~server/event/eventLog";
import { canonicalFilter } from "~shared/filter/address";
import type { ConstraintSort } from "~shared/filter/filter";
import { parseRecordNumber } from "~shared/identifiers/recordNumber";

import { countApproved, findApproved, findRecordByNumber, MOST_ROWS } from "./constraint.query";
import {
  ConstraintFilterInput,
  ConstraintPage,
  ConstraintType,
  constraintType,
  PublicRevision,
  RecordLink,
} from "./constraint.type";
import { nameOf } from "./names";
import { alternativesOf, approvedRevisions, sharingData } from "./relations";

@Resolver(() => ConstraintType)
export class ConstraintResolver {
  @Query(() => ConstraintPage)
  async constraints(
    @Ctx() ctx: RequestContext,
    @Arg("filter", () => ConstraintFilterInput, { nullable: true })
    filter: ConstraintFilterInput | null = null,
    @Arg("sort", () => ConstraintSortEnum, { nullable: true }) sort: ConstraintSort | null = null,
    @Arg("offset", () => Int, { nullable: true }) offset: number | null = null,
    @Arg("limit", () => Int, { nullable: true }) limit: number | null = null,
  ): Promise<ConstraintPage> {
    const wanted = canonicalFilter(filter ?? {});
    const from = Math.max(0, offset ?? 0);
    const most = Math.min(MOST_ROWS, Math.max(0, limit ?? MOST_ROWS));
    const [rows, total, registryTotal, last] = await Promise.all([
      most === 0 ? [] : findApproved(ctx, wanted, sort ?? "redshift", from, most),
      countApproved(ctx, wanted),
      countApproved(ctx, {}),
      lastEvent(ctx.database.manager),
    ]);
    return Object.assign(new ConstraintPage(), {
      constraints: rows.map(constraintType),
      total,
      registryTotal,
      lastEvent: last && eventMark(last),
    });
  }

  @Query(() => ConstraintType, { nullable: true })
  async constraint(
    @Ctx() ctx: RequestContext,
    @Arg("number", () => String) number: string,
  ): Promise<ConstraintType | null> {
    const parsed = parseRecordNumber(number);
    const row = parsed === null ? null : await findRecordByNumber(ctx, parsed);
    return row && constraintType(row);
  }

  @FieldResolver(() => String)
  submittedBy(@Ctx() ctx: RequestContext, @Root() root: ConstraintType): Promise<string> | string {
    return root.names?.submittedBy ?? nameOf(ctx)(root.submittedById);
  }

  @FieldResolver(() => String)
  readBy(@Ctx() ctx: RequestContext, @Root() root: ConstraintType): Promise<string> | string {
    return root.names?.readBy ?? nameOf(ctx)(root.readById);
  }

  @FieldResolver(() => [RecordLink], {
    description:
      "Other approved records that stand on the same data: by name or alias, as parts of one another, or stated to overlap.",
  })
  async sharesDataWith(
    @Ctx() ctx: RequestContext,
    @Root() root: ConstraintType,
  ): Promise<RecordLink[]> {
    return (await sharingData(ctx)(root.constraintId)) ?? [];
  }

  @FieldResolver(() => [RecordLink], {
    description: "Members of the same alternatives group, this one included.",
  })
  async alternatives(
    @Ctx() ctx: RequestContext,
    @Root() root: ConstraintType,
  ): Promise<RecordLink[]> {
    return (await alternativesOf(ctx)(root.constraintId)) ?? [];
  }

  @FieldResolver(() => [PublicRevision])
  async revisions(
    @Ctx() ctx: RequestContext,
    @Root() root: ConstraintType,
  ): Promise<PublicRevision[]> {
    return (await approvedRevisions(ctx)(root.constraintId)) ?? [];
  }
}
