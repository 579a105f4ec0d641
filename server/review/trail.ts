import { In } from "typeorm";

import type { RequestContext } from "~server/common/context";
import { fieldChanges } from "~server/constraint/constraint.type";
import { nameOf } from "~server/constraint/names";
import { Revision } from "~server/constraint/revision.entity";

import { findingFor, recordsReadBlind } from "./blindness";
import { commentsOf } from "./comments";
import { Reading } from "./reading.entity";
import { AnsweredFinding, TrailRound } from "./trail.type";

/**
 * All rounds of a record for its contributor, who sees all of them; nobody else is handed a
 * Submission. Who reads is said once it is decided: until then nobody should be asked for haste.
 */
export async function trailOf(ctx: RequestContext, one: Revision): Promise<TrailRound[]> {
  const { manager } = ctx.database;
  const revisions = await manager.find(Revision, {
    where: { constraintId: one.constraintId },
    order: { ordinal: "ASC" },
  });
  const readings = await manager.find(Reading, {
    select: { id: true, revisionId: true, editorId: true, storedAt: true },
    where: { revisionId: In(revisions.map(({ id }) => id)) },
  });
  const blind = await recordsReadBlind(manager, ctx.viewer, new Date());
  const enteredBy = await nameOf(ctx)(one.constraint.ownerId);
  return Promise.all(
    revisions.map(async (revision) => {
      const followed = revisions.find(({ id }) => id === revision.followsId);
      const decided = revision.decidedById;
      const reading = readings.find(
        ({ revisionId, editorId }) => revisionId === revision.id && editorId === decided,
      );
      return Object.assign(new TrailRound(), {
        id: revision.id,
        ordinal: revision.ordinal,
        state: revision.state,
        enteredBy,
        begunAt: revision.createdAt,
        submittedAt: revision.submittedAt,
        changes: followed ? fieldChanges(followed.fields, revision.fields) : [],
        answers: revision.answers.flatMap(({ code, answer, accepted }) => {
          const finding = revision.findings.find((asked) => asked.code === code);
          if (!finding) return [];
          const { message } = findingFor(finding, blind);
          return [Object.assign(new AnsweredFinding(), { message, answer, accepted })];
        }),
        readBy: decided === null ? null : await nameOf(ctx)(decided),
        readAt: reading?.storedAt ?? null,
        decidedAt: revision.decidedAt,
        decisionNote: revision.decisionNote,
        comments: await commentsOf(ctx, revision.id),
      });
    }),
  );
}
