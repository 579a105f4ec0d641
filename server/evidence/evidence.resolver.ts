import { Arg, Ctx, ID, Mutation, Query, Resolver } from "type-graphql";

import type { RequestContext } from "~server/common/context";
import { DoneResult, Refusal } from "~server/common/outcomes";
import { Requires } from "~server/common/requires";
import { Constraint } from "~server/constraint/constraint.entity";
import { Revision } from "~server/constraint/revision.entity";
import { acting } from "~server/event/acting";
import { seesEvidence, seesRevision } from "~server/review/blindness";
import { parseQuotable, parseRecordNumber } from "~shared/identifiers/recordNumber";

import { describeEvidence, removeEvidence } from "./evidence.service";
import { EvidenceResult, EvidenceType, evidenceType } from "./evidence.type";
import { evidenceOf } from "./ofRevision";

@Resolver()
export class EvidenceResolver {
  @Query(() => [EvidenceType], {
    description: "Files of a revision (FL-0042.3), or of a record's approved one (FL-0042).",
  })
  async evidence(
    @Ctx() ctx: RequestContext,
    @Arg("number", () => String) number: string,
  ): Promise<EvidenceType[]> {
    const { manager } = ctx.database;
    const now = new Date();
    const revision = await findRevision(ctx, number);
    // Unknown, unseen and without files look alike.
    if (!revision || !(await seesRevision(manager, ctx.viewer, revision, now))) return [];
    const open = await seesEvidence(manager, ctx.viewer, revision, now);
    if (!open && revision.state !== "approved") return [];
    return (await evidenceOf(manager, revision.id)).map((one) => evidenceType(one, open));
  }

  @Requires("keepEvidence")
  @Mutation(() => EvidenceResult)
  async describeEvidence(
    @Ctx() ctx: RequestContext,
    @Arg("id", () => ID) id: string,
    @Arg("caption", () => String) caption: string,
  ): Promise<typeof EvidenceResult> {
    const outcome = await describeEvidence(acting(ctx), id, caption);
    return outcome instanceof Refusal ? outcome : evidenceType(outcome, true);
  }

  @Requires("keepEvidence")
  @Mutation(() => DoneResult)
  removeEvidence(
    @Ctx() ctx: RequestContext,
    @Arg("id", () => ID) id: string,
  ): Promise<typeof DoneResult> {
    return removeEvidence(acting(ctx), id);
  }
}

async function findRevision(ctx: RequestContext, number: string): Promise<Revision | null> {
  const { manager } = ctx.database;
  const relations = { constraint: true } as const;
  const quoted = parseQuotable(number);
  if (quoted) {
    const where = { constraintId: quoted.number, ordinal: quoted.ordinal };
    return manager.findOne(Revision, { where, relations });
  }
  const record = parseRecordNumber(number);
  const constraint = record === null ? null : await manager.findOneBy(Constraint, { id: record });
  if (!constraint?.approvedRevisionId) return null;
  return manager.findOne(Revision, { where: { id: constraint.approvedRevisionId }, relations });
}
