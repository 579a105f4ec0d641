import type { EntityManager } from "typeorm";

import { hasRole, type RequestContext, type ViewerIdentity } from "~server/common/context";
import { refuse, type Refusal } from "~server/common/outcomes";
import { Revision } from "~server/constraint/revision.entity";
import { change, type Acting, type Change } from "~server/event/acting";
import { isReadingBlind } from "~server/review/blindness";
import { formatQuotable, parseQuotable } from "~shared/identifiers/recordNumber";
import { MESSAGE_LENGTH, type ReportOutcome, type ReportState } from "~shared/review/errorReport";
import { mayWithOwn } from "~shared/review/policy";

import { ErrorReport, ErrorReportMessage } from "./errorReport.entity";
import { hasEditorsMessage, loadReport } from "./errorReport.query";
import { answerReporter } from "./mails";
import { lengthProblem, plainText } from "./text";

const NOT_FOUND = "There is no such report.";
const CHANGED = "Somebody answered this report meanwhile. Reload the page.";

/**
 * A report as the desk may see it: editors and maintainers, and the contributor of the record.
 * Null for everybody else, and while the viewer is reading the record blind.
 */
export async function deskReport(ctx: RequestContext, id: string): Promise<ErrorReport | null> {
  const { viewer } = ctx;
  const { manager } = ctx.database;
  const report = await loadReport(manager, id);
  if (!report || !viewer) return null;
  const atDesk = hasRole(viewer, "editor") || hasRole(viewer, "maintainer");
  if (!atDesk && report.constraint.ownerId !== viewer.id) return null;
  return (await isReadingBlind(manager, viewer, report.constraintId, new Date())) ? null : report;
}

/** Why this person can't answer a report, in words, or null. */
export function barredFromAnswering(report: ErrorReport, viewer: ViewerIdentity): string | null {
  if (!mayWithOwn("answerErrorReport", report.constraint.ownerId === viewer.id)) {
    return "You brought this record yourself. Another editor answers; if the report is right, correct it with a new revision.";
  }
  return hasRole(viewer, "editor") || hasRole(viewer, "maintainer")
    ? null
    : "An editor or a maintainer answers.";
}

async function answerable(
  manager: EntityManager,
  who: Acting,
  id: string,
): Promise<ErrorReport | Refusal> {
  const report = await loadReport(manager, id);
  if (!report || (await isReadingBlind(manager, who.viewer, report.constraintId, who.now))) {
    return refuse("NOT_FOUND", NOT_FOUND);
  }
  const barred = barredFromAnswering(report, who.viewer);
  return barred ? refuse("BARRED", barred) : report;
}

/** Writes to a report only if it is still at this version: of two who answer at once, one is told so. */
async function moved(
  here: Change,
  report: ErrorReport,
  version: number,
  from: readonly ReportState[],
  set: Partial<ErrorReport>,
): Promise<boolean> {
  const { affected } = await here.manager
    .createQueryBuilder()
    .update(ErrorReport)
    .set({ ...set, version: version + 1 } as never)
    .where("id = :id AND version = :version AND state IN (:...from)", {
      id: report.id,
      version,
      from,
    })
    .execute();
  return affected === 1;
}

async function write(here: Change, who: Acting, report: ErrorReport, text: string): Promise<void> {
  await here.manager.insert(ErrorReportMessage, {
    reportId: report.id,
    byId: who.viewer.id,
    text,
    at: who.now,
  });
}

function told(who: Acting, report: ErrorReport) {
  const { ordinal, citation } = report.revision;
  return { report, ordinal, citation, publicUrl: who.publicUrl };
}

/** Answers a report, or asks back; it is mailed to the reporter, who may reply once. */
export async function answerReport(
  who: Acting,
  id: string,
  version: number,
  given: string,
): Promise<ErrorReport | Refusal> {
  const text = plainText(given);
  const problem = lengthProblem(text, MESSAGE_LENGTH, "Answer");
  if (problem) return problem;
  return change<ErrorReport | Refusal>(who, async (here) => {
    const report = await answerable(here.manager, who, id);
    if (!(report instanceof ErrorReport)) return report;
    const won = await moved(here, report, version, ["open", "answered"], { state: "answered" });
    if (!won) return refuse("STALE", CHANGED);
    await write(here, who, report, text);
    if (who.sendsMail) await answerReporter(here.manager, told(who, report), text, null);
    await here.event({
      kind: "report.answered",
      subject: formatQuotable(report.constraintId, report.revision.ordinal),
      detail: { report: id },
    });
    return (await loadReport(here.manager, id)) ?? report;
  });
}

export interface Closing {
  version: number;
  outcome: ReportOutcome;
  /** FL-0042.3; only with the outcome "corrected". */
  correctedBy: string | null;
  text: string | null;
}

/** Closes a report with what became of it. A closed one can be closed again with another outcome. */
export async function closeReport(
  who: Acting,
  id: string,
  closing: Closing,
): Promise<ErrorReport | Refusal> {
  const text = plainText(closing.text ?? "") || null;
  const problem = text === null ? null : lengthProblem(text, MESSAGE_LENGTH, "Answer");
  if (problem) return problem;
  return change<ErrorReport | Refusal>(who, async (here) => {
    const { manager } = here;
    const report = await answerable(manager, who, id);
    if (!(report instanceof ErrorReport)) return report;
    const corrected = await correctingRevision(manager, report, closing);
    if (typeof corrected === "object" && corrected !== null) return corrected;
    if (text === null && !(await hasEditorsMessage(manager, id))) {
      return refuse("TEXT_MISSING", "Tell the reporter in a sentence why.", "text");
    }
    const set = { outcome: closing.outcome, correctedBy: corrected };
    const won = await moved(here, report, closing.version, ["open", "answered", "closed"], {
      ...set,
      state: "closed",
      closedAt: who.now,
    });
    if (!won) return refuse("STALE", CHANGED);
    if (text !== null) await write(here, who, report, text);
    if (who.sendsMail) await answerReporter(manager, told(who, report), text, set);
    await here.event({
      kind: "report.closed",
      subject: formatQuotable(report.constraintId, report.revision.ordinal),
      detail: { report: id, ...set },
    });
    return (await loadReport(manager, id)) ?? report;
  });
}

/** The correcting revision in its one spelling; null where the outcome has none. */
async function correctingRevision(
  manager: EntityManager,
  report: ErrorReport,
  { outcome, correctedBy }: Closing,
): Promise<string | null | Refusal> {
  if (outcome !== "corrected") return null;
  const named = parseQuotable(correctedBy ?? "");
  if (named === null) {
    return refuse("CORRECTED_BY", "Name the revision that corrects it: FL-0042.3.", "correctedBy");
  }
  const quotable = formatQuotable(named.number, named.ordinal);
  const approved = await manager.existsBy(Revision, {
    constraintId: named.number,
    ordinal: named.ordinal,
    state: "approved",
  });
  if (!approved) {
    return refuse("CORRECTED_BY", `${quotable} is no approved revision.`, "correctedBy");
  }
  if (named.number === report.constraintId && named.ordinal <= report.revision.ordinal) {
    const message = `${quotable} is not newer than the revision that was reported.`;
    return refuse("CORRECTED_BY", message, "correctedBy");
  }
  return quotable;
}
