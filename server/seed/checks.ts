import { AuthorCheck, AuthorCheckEntry } from "~server/authorCheck/authorCheck.entity";
import { closeCheck } from "~server/authorCheck/close.service";
import { keepCheck } from "~server/authorCheck/send.service";
import { Constraint } from "~server/constraint/constraint.entity";
import { loadRevision } from "~server/constraint/draft.service";
import { appendEvent } from "~server/event/eventLog";
import { formatQuotable, parseRecordNumber } from "~shared/identifiers/recordNumber";
import type { CheckVerdict } from "~shared/review/authorCheck";

import type { PersonName } from "./people";
import { DAY_MS, done, type Stage, type Step } from "./stage";

interface StoryCheck {
  about: string;
  by: PersonName;
  from: string;
  author: { name: string; email: string };
  answer?: { verdict: CheckVerdict; text: string | null; closing: string | null };
}

/** Authors who were asked: one said it is right, one had a comment, one has not answered. */
const CHECKS: readonly StoryCheck[] = [
  {
    about: "lowerBin",
    by: "editor",
    from: "2026-06-22T10:00:00Z",
    author: { name: "Esk Lindqvaern", email: "esk@lanternmoor.example" },
    answer: { verdict: "correct", text: null, closing: null },
  },
  {
    about: "timeTaken",
    by: "editor",
    from: "2026-07-02T09:00:00Z",
    author: { name: "Rue Hallimund", email: "rue@sledge.example" },
    answer: {
      verdict: "comments",
      text: "The numbers are ours. Please say that the history is a power law that starts at redshift 20.",
      closing: "It stands under the history assumed; the next revision names the start.",
    },
  },
  {
    about: "dustSecond",
    by: "editor",
    from: "2026-11-25T14:00:00Z",
    author: { name: "June Morwhistle", email: "june@harrowmere.example" },
  },
];

export function checkSteps(stage: Stage): Step[] {
  return CHECKS.flatMap((story) => {
    const begin = new Date(story.from);
    let sent: AuthorCheck | null = null;
    const steps: Step[] = [
      {
        at: begin,
        tell: async (at) => {
          const { manager } = stage;
          const id = parseRecordNumber(stage.numberOf(story.about)) ?? 0;
          const record = await manager.findOneByOrFail(Constraint, { id });
          const revision = await loadRevision(manager, record.approvedRevisionId ?? "");
          if (!revision) throw new Error(`${story.about} is not approved`);
          sent = await keepCheck(stage.as(story.by, at), revision, story.author);
        },
      },
    ];
    const { answer } = story;
    if (!answer) return steps;
    const check = (): AuthorCheck => {
      if (!sent) throw new Error("nobody was asked");
      return sent;
    };
    return [
      ...steps,
      {
        at: new Date(begin.getTime() + 4 * DAY_MS),
        tell: async (at) => {
          const { manager } = stage;
          const { id, constraintId, revision } = check();
          const { verdict, text } = answer;
          await manager.update(
            AuthorCheck,
            { id },
            { state: "answered", verdict, answeredAt: at, version: 2 },
          );
          await manager.insert(AuthorCheckEntry, { checkId: id, byId: null, verdict, text, at });
          await appendEvent(manager, {
            kind: "authorCheck.answered",
            actorId: null,
            subject: formatQuotable(constraintId, revision.ordinal),
            detail: { check: id, verdict },
            at,
          });
        },
      },
      {
        at: new Date(begin.getTime() + 6 * DAY_MS),
        tell: async (at) => {
          done(
            await closeCheck(stage.as(story.by, at), check().id, 2, answer.closing),
            "closing of an author's check",
          );
        },
      },
    ];
  });
}
