import type { EntityManager } from "typeorm";

import { citationType } from "~server/citation/citation.type";
import { requireViewer, type RequestContext, type ViewerIdentity } from "~server/common/context";
import { batched, perRequest } from "~server/constraint/batch";
import { FindingAnswer, FindingType } from "~server/constraint/constraint.type";
import { fieldsType } from "~server/constraint/fields.type";
import { nameOf } from "~server/constraint/names";
import { findingFor, recordsReadBlind, seesSet } from "~server/review/blindness";
import { setFindings } from "~shared/correlatedSet/checks";
import { correlations, usedCorrelations } from "~shared/correlatedSet/matrix";
import { whyNotMember } from "~shared/correlatedSet/members";
import { compareSetReading } from "~shared/correlatedSet/reading";
import type { Finding } from "~shared/statement/finding";
import { formatSetNumber } from "~shared/identifiers/setNumber";

import { CorrelatedSet, type SetReading } from "./correlatedSet.entity";
import {
  CorrelatedSetType,
  SetEntry,
  SetLink,
  SetMemberType,
  SetQueueItem,
  SetReview,
} from "./correlatedSet.type";
import { barredFromSet, holdsSetClaim, readingOf, setBlockersOf, setClaimIsLive } from "./review";
import { contentOfSet, membersFor, type FoundMember } from "./store";

export function memberType(found: FoundMember): SetMemberType {
  return Object.assign(new SetMemberType(), {
    number: found.number,
    quotable: found.quotable,
    fields: fieldsType(found.fields),
    approved: found.approved,
    cannotJoin: whyNotMember(found.fields),
  });
}

export function setLink(set: CorrelatedSet): SetLink {
  const number = formatSetNumber(set.id);
  return Object.assign(new SetLink(), {
    number,
    label: set.label ?? number,
    members: set.members,
  });
}

function hiddenMember(number: string): SetMemberType {
  return Object.assign(new SetMemberType(), {
    number,
    quotable: null,
    fields: null,
    approved: false,
    cannotJoin: null,
  });
}

/** A set as this person sees it. Whoever calls this has asked blindness.ts whether they may. */
export async function setType(ctx: RequestContext, set: CorrelatedSet): Promise<CorrelatedSetType> {
  const { manager } = ctx.database;
  const found = await membersFor(manager, ctx.viewer, set.members);
  const byNumber = new Map(found.map((member) => [member.number, member]));
  const inOrder = set.members.map((number) => byNumber.get(number));
  const printed = correlations(set, set.members.length);
  const known = inOrder.flatMap((member) => member ?? []);
  const mine = ctx.viewer?.id === set.ownerId;
  // Findings of what is decided speak to the owner and its readers; the public sees the matrix.
  const inside = mine || !["approved", "withdrawn"].includes(set.state);
  const blind = await recordsReadBlind(manager, ctx.viewer, new Date());
  const findings = !inside
    ? []
    : set.state === "draft"
      ? setFindings(contentOfSet(set), found, set.citationId)
      : set.findings;
  return Object.assign(new CorrelatedSetType(), {
    number: formatSetNumber(set.id),
    state: set.state,
    version: set.version,
    label: set.label,
    citation: citationType(set.citation),
    members: set.members.map((number, at) => {
      const member = inOrder[at];
      return member ? memberType(member) : hiddenMember(number);
    }),
    matrixKind: set.matrixKind,
    triangle: set.triangle,
    printedRho: printed,
    usedRho:
      printed && known.length === set.members.length ? usedCorrelations(printed, known) : null,
    place: set.place,
    page: set.page,
    note: set.note,
    submittedBy: await nameOf(ctx)(set.ownerId),
    readBy: set.decidedById === null ? null : await nameOf(ctx)(set.decidedById),
    submittedAt: set.submittedAt,
    decidedAt: set.decidedAt,
    updatedAt: set.updatedAt,
    changedMembers: set.memberRevisions.flatMap((quotable, at) => {
      const now = inOrder[at];
      return now && now.quotable !== quotable ? [now.number] : [];
    }),
    withdrawnBecause: set.withdrawnBecause,
    follows: set.followsId === null ? null : formatSetNumber(set.followsId),
    mine,
    decisionNote: inside ? set.decisionNote : null,
    findings: findings.map((finding) =>
      Object.assign(new FindingType(), findingFor(finding as unknown as Finding, blind)),
    ),
    answers: inside ? set.answers.map((answer) => Object.assign(new FindingAnswer(), answer)) : [],
  });
}

export async function setQueueItem(
  manager: EntityManager,
  set: CorrelatedSet,
  editor: ViewerIdentity,
  now: Date,
): Promise<SetQueueItem> {
  if (!set.submittedAt) throw new Error(`set ${set.id} was submitted without a date`);
  const live = setClaimIsLive(set, now);
  return Object.assign(new SetQueueItem(), {
    number: formatSetNumber(set.id),
    state: set.state,
    version: set.version,
    citation: citationType(set.citation),
    members: set.members,
    place: set.place,
    page: set.page,
    submittedAt: set.submittedAt,
    claimedByMe: live && set.claimedById === editor.id,
    claimedUntil: live ? set.claimedUntil : null,
    barredBecause: await barredFromSet(manager, set, editor, now),
  });
}

/** A set as this editor may see it now: after the reading with everything, before it without. */
export async function setReviewFor(ctx: RequestContext, set: CorrelatedSet): Promise<SetReview> {
  const { manager } = ctx.database;
  const editor = requireViewer(ctx);
  const now = new Date();
  const waiting = set.state === "submitted" || set.state === "inReview";
  const reading = await readingOf(manager, set.id, editor.id);
  const members = await membersFor(manager, editor, set.members);
  const byNumber = new Map(members.map((member) => [member.number, member]));
  const review = Object.assign(new SetReview(), {
    item: await setQueueItem(manager, set, editor, now),
    members: set.members.map((number) => {
      const member = byNumber.get(number);
      return member ? memberType(member) : hiddenMember(number);
    }),
    readingStoredAt: reading?.storedAt ?? null,
    blockers: waiting
      ? setBlockersOf(set, null, holdsSetClaim(set, editor.id, now))
      : ["It is decided."],
    comparison: [],
    set: null,
  });
  if (!reading || !(await seesSet(manager, editor, set, now))) return review;
  return Object.assign(review, {
    blockers: waiting
      ? setBlockersOf(set, reading, holdsSetClaim(set, editor.id, now))
      : review.blockers,
    comparison: comparison(reading, set),
    set: await setType(ctx, set),
  });
}

function comparison(reading: SetReading, set: CorrelatedSet): SetEntry[] {
  return compareSetReading(reading.latest, set).map((entry) =>
    Object.assign(new SetEntry(), {
      ...entry,
      earlier: reading.corrections
        .filter(({ row, column }) => row === entry.row && column === entry.column)
        .map(({ before }) => before),
    }),
  );
}

/** Every set in use that this person may see, oldest first; asked once for each request. */
export const approvedSets = perRequest((ctx: RequestContext) => {
  const load = batched<"all", CorrelatedSet[]>(async () => {
    const { manager } = ctx.database;
    const sets = await manager.find(CorrelatedSet, {
      where: { state: "approved" },
      relations: { citation: true },
      order: { id: "ASC" },
    });
    const seen = await Promise.all(
      sets.map((set) => seesSet(manager, ctx.viewer, set, new Date())),
    );
    return new Map([["all", sets.filter((_, at) => seen[at])]]);
  });
  return async () => (await load("all")) ?? [];
});
