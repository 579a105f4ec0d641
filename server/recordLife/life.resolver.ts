import { Arg, Ctx, FieldResolver, ID, Mutation, Query, Resolver, Root } from "type-graphql";

import type { RequestContext } from "~server/common/context";
import { Refusal, refuse } from "~server/common/outcomes";
import { Requires } from "~server/common/requires";
import { findRecordByNumber } from "~server/constraint/constraint.query";
import { ConstraintType, constraintType } from "~server/constraint/constraint.type";
import { acting } from "~server/event/acting";
import type { ConditionChain } from "~shared/dependence/conditions";
import { formatRecordNumber, parseRecordNumber } from "~shared/identifiers/recordNumber";

import { chainsOf, happenedTo, noticesOf, noticeType, relationsOf } from "./life.query";
import { liftNotice, recordNotice } from "./life.service";
import {
  ConditionChainType,
  RecordEventType,
  RecordLifeResult,
  RecordLifeType,
  RecordNoticeType,
  RecordRelationType,
} from "./life.type";

async function lifeOf(ctx: RequestContext, id: number): Promise<RecordLifeType | null> {
  const row = await findRecordByNumber(ctx, id);
  return row && Object.assign(new RecordLifeType(), { constraint: constraintType(row) });
}

async function afterwards(
  ctx: RequestContext,
  outcome: number | Refusal,
): Promise<typeof RecordLifeResult> {
  if (outcome instanceof Refusal) return outcome;
  return (await lifeOf(ctx, outcome)) ?? refuse("notFound", "The record can't be shown now.");
}

@Resolver(() => RecordLifeType)
export class RecordLifeResolver {
  @Query(() => RecordLifeType, { nullable: true })
  async recordLife(
    @Ctx() ctx: RequestContext,
    @Arg("number", () => String) number: string,
  ): Promise<RecordLifeType | null> {
    const id = parseRecordNumber(number);
    return id === null ? null : lifeOf(ctx, id);
  }

  @Requires("changeRecordLife")
  @Mutation(() => RecordLifeResult, {
    description: "A notice on a record; it stays current until a new revision corrects it.",
  })
  async recordErratum(
    @Ctx() ctx: RequestContext,
    @Arg("number", () => String) number: string,
    @Arg("reason", () => String) reason: string,
  ): Promise<typeof RecordLifeResult> {
    return afterwards(ctx, await recordNotice(acting(ctx), { number, kind: "erratum", reason }));
  }

  @Requires("changeRecordLife")
  @Mutation(() => RecordLifeResult)
  async supersedeRecord(
    @Ctx() ctx: RequestContext,
    @Arg("number", () => String) number: string,
    @Arg("replacedBy", () => String) replacedBy: string,
    @Arg("reason", () => String) reason: string,
  ): Promise<typeof RecordLifeResult> {
    const given = { number, kind: "superseded" as const, reason, replacedBy };
    return afterwards(ctx, await recordNotice(acting(ctx), given));
  }

  @Requires("changeRecordLife")
  @Mutation(() => RecordLifeResult)
  async withdrawRecord(
    @Ctx() ctx: RequestContext,
    @Arg("number", () => String) number: string,
    @Arg("reason", () => String) reason: string,
  ): Promise<typeof RecordLifeResult> {
    return afterwards(ctx, await recordNotice(acting(ctx), { number, kind: "withdrawn", reason }));
  }

  @Requires("changeRecordLife")
  @Mutation(() => RecordLifeResult, {
    description: "Takes a notice back; the record's state follows from those that hold.",
  })
  async liftNotice(
    @Ctx() ctx: RequestContext,
    @Arg("notice", () => ID) notice: string,
    @Arg("reason", () => String) reason: string,
  ): Promise<typeof RecordLifeResult> {
    const id = /^\d{1,9}$/.test(notice) ? Number(notice) : 0;
    return afterwards(ctx, await liftNotice(acting(ctx), id, reason));
  }

  @FieldResolver(() => [RecordNoticeType], {
    description: "Newest first; those that were taken back among them.",
  })
  async notices(
    @Ctx() ctx: RequestContext,
    @Root() { constraint }: RecordLifeType,
  ): Promise<RecordNoticeType[]> {
    const notices = (await noticesOf(ctx)(constraint.constraintId)) ?? [];
    return Promise.all(notices.map((notice) => noticeType(ctx, notice)));
  }

  @FieldResolver(() => [RecordRelationType], {
    description: "Approved records that this one names, and that name it.",
  })
  relations(
    @Ctx() ctx: RequestContext,
    @Root() { constraint }: RecordLifeType,
  ): Promise<RecordRelationType[]> {
    return relationsOf(ctx, constraint.constraintId);
  }

  @FieldResolver(() => [ConditionChainType], {
    description: "What it is conditioned on, followed through records to kinds of data.",
  })
  async conditionChains(
    @Ctx() ctx: RequestContext,
    @Root() { constraint }: RecordLifeType,
  ): Promise<ConditionChain[]> {
    const chains = await chainsOf(ctx, constraint.constraintId);
    return chains.map((chain) => Object.assign(new ConditionChainType(), chain));
  }

  @FieldResolver(() => [RecordEventType], {
    description: "What happened to the record since its approval, newest first.",
  })
  happened(
    @Ctx() ctx: RequestContext,
    @Root() { constraint }: RecordLifeType,
  ): Promise<RecordEventType[]> {
    return happenedTo(ctx, constraint.constraintId);
  }
}

@Resolver(() => ConstraintType)
export class SupersededByResolver {
  @FieldResolver(() => String, {
    nullable: true,
    description: "FL-0042: the record in the place of a superseded one.",
  })
  async supersededBy(
    @Ctx() ctx: RequestContext,
    @Root() root: ConstraintType,
  ): Promise<string | null> {
    if (root.state === "current") return null;
    const notices = (await noticesOf(ctx)(root.constraintId)) ?? [];
    const open = notices.find(({ replacedById, endedAt }) => replacedById && !endedAt);
    return open?.replacedById ? formatRecordNumber(open.replacedById) : null;
  }
}
