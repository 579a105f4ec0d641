import { createHash } from "node:crypto";

import { answerReport, closeReport } from "~server/errorReport/answer.service";
import { ErrorReport } from "~server/errorReport/errorReport.entity";
import { Constraint } from "~server/constraint/constraint.entity";
import { Revision } from "~server/constraint/revision.entity";
import { appendEvent } from "~server/event/eventLog";
import { declareRecusal } from "~server/review/recusal.service";
import { recordNotice } from "~server/recordLife/life.service";
import { formatQuotable, parseRecordNumber } from "~shared/identifiers/recordNumber";
import type { ReportOutcome } from "~shared/review/errorReport";

import type { PersonName } from "./people";
import { DAY_MS, done, type Stage, type Step } from "./stage";
import type { StoryRecord } from "./story";

/** What a maintainer records of a record after its approval. */
export function noticeSteps(stage: Stage, { name, notice }: StoryRecord): Step[] {
  if (!notice || !name) return [];
  return [
    {
      at: new Date(notice.from),
      tell: async (at) => {
        const { kind, reason, replacedBy } = notice;
        done(
          await recordNotice(stage.as("maintainer", at), {
            number: stage.numberOf(name),
            kind,
            reason,
            ...(replacedBy ? { replacedBy: stage.numberOf(replacedBy) } : {}),
          }),
          `notice on ${name}`,
        );
      },
    },
  ];
}

/** An editor leaves a paper to others. Papers of their own they are kept from anyway. */
export function recusalSteps(stage: Stage): Step[] {
  return [
    {
      at: new Date("2026-11-19T08:15:00Z"),
      tell: async (at) => {
        const who = stage.as("secondEditor", at);
        const paper = await stage.citation("marlpit", who);
        done(
          await declareRecusal(who, paper, "I share an office with two of the collaboration."),
          "recusal",
        );
      },
    },
  ];
}

interface StoryReport {
  about: string;
  from: string;
  text: string;
  by: PersonName | null;
  answer?: { by: PersonName; text: string; outcome: ReportOutcome };
}

/** What readers told the editors: one answered and closed, one open. */
const REPORTS: readonly StoryReport[] = [
  {
    about: "dustSecond",
    from: "2026-09-15T18:20:00Z",
    by: null,
    text: "Your value is 0.43, but my copy of the paper has 0.45 in the abstract.",
    answer: {
      by: "editor",
      text: "The abstract rounds a preliminary number; Table 6 and the conclusions print 0.43. The record stays.",
      outcome: "noError",
    },
  },
  {
    about: "endOfFog",
    from: "2026-11-12T08:40:00Z",
    by: "reader",
    text: "Is this for hydrogen alone? The section before the table counts helium electrons.",
  },
];

export function reportSteps(stage: Stage): Step[] {
  return REPORTS.flatMap((report) => {
    const begin = new Date(report.from);
    const id = stableReportId(report.about);
    const steps: Step[] = [
      {
        at: begin,
        tell: async (at) => {
          const { manager } = stage;
          const constraintId = parseRecordNumber(stage.numberOf(report.about)) ?? 0;
          const record = await manager.findOneByOrFail(Constraint, { id: constraintId });
          const revision = await manager.findOneByOrFail(Revision, {
            id: record.approvedRevisionId ?? "",
          });
          const reporterId = report.by === null ? null : stage.as(report.by, at).viewer.id;
          await manager.insert(ErrorReport, {
            id,
            constraintId,
            revisionId: revision.id,
            text: report.text,
            reporterId,
            reporterEmail: null,
            state: "open",
            outcome: null,
            correctedBy: null,
            createdAt: at,
            repliedAt: null,
            closedAt: null,
          });
          await appendEvent(manager, {
            kind: "record.errorReported",
            actorId: reporterId,
            subject: formatQuotable(constraintId, revision.ordinal),
            detail: { report: id },
            at,
          });
        },
      },
    ];
    const { answer } = report;
    if (!answer) return steps;
    return [
      ...steps,
      {
        at: new Date(begin.getTime() + 2 * DAY_MS),
        tell: async (at) => {
          const who = stage.as(answer.by, at);
          const { version } = done(await answerReport(who, id, 1, answer.text), "answer");
          const { outcome } = answer;
          done(
            await closeReport(who, id, { version, outcome, correctedBy: null, text: null }),
            "closing of a report",
          );
        },
      },
    ];
  });
}

/** The same id in every demonstration. */
function stableReportId(word: string): string {
  const hex = createHash("sha256").update(`fogline report: ${word}`).digest("hex");
  return `${hex.slice(0, 8)}-${hex.slice(8, 12)}-4${hex.slice(13, 16)}-8${hex.slice(17, 20)}-${hex.slice(20, 32)}`;
}
