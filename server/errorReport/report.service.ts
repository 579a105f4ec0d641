import { emailProblem, normalEmail } from "~server/account/rules";
import type { RequestContext } from "~server/common/context";
import { refuse, type Refusal } from "~server/common/outcomes";
import { findApprovedByNumber } from "~server/constraint/constraint.query";
import { transact } from "~server/database/transaction";
import { appendEvent } from "~server/event/eventLog";
import { isReadingBlind } from "~server/review/blindness";
import { overLimit } from "~server/security/overLimit";
import { formatQuotable, parseRecordNumber } from "~shared/identifiers/recordNumber";
import { MESSAGE_LENGTH, REPORT_LENGTH } from "~shared/review/errorReport";

import { ErrorReport, ErrorReportMessage } from "./errorReport.entity";
import { hasEditorsMessage, loadReport } from "./errorReport.query";
import { reportOfToken, reportToken } from "./link";
import { tellDesk, thankReporter } from "./mails";
import { lengthProblem, plainText } from "./text";

/**
 * Keeps what any reader finds wrong with a record and tells the desk. The event says that it
 * happened and to which revision; words and address stand in the report only, since the log is
 * never cleared.
 *
 * @returns The token of the page where the answer will stand.
 */
export async function reportError(
  ctx: RequestContext,
  given: { number: string; text: string; email: string | null },
): Promise<{ token: string } | Refusal> {
  const text = plainText(given.text);
  const tooLong = lengthProblem(text, REPORT_LENGTH, "Say what is wrong");
  if (tooLong) return tooLong;
  const email = normalEmail(given.email ?? "");
  const problem = email === "" ? null : emailProblem(email);
  if (problem) return problem;
  const number = parseRecordNumber(given.number);
  const row = number === null ? null : await findApprovedByNumber(ctx, number);
  if (!row) return refuse("NOT_FOUND", "There is no approved record of this number.", "number");
  const over = await overLimit(ctx, [
    ["reportPerCaller", ctx.ip],
    ["reportInAll", ""],
    ...(email === "" ? [] : [["mailPerAddress", email] as const]),
  ]);
  if (over) return over;

  const { constraint, revision, citation } = row;
  const now = new Date();
  return transact(ctx.database, async (manager) => {
    const report = manager.create(ErrorReport, {
      constraintId: constraint.id,
      revisionId: revision.id,
      text,
      reporterId: ctx.viewer?.id ?? null,
      reporterEmail: email === "" ? null : email,
      state: "open",
      outcome: null,
      correctedBy: null,
      createdAt: now,
      repliedAt: null,
      closedAt: null,
    });
    await manager.insert(ErrorReport, report);
    const { publicUrl } = ctx.config;
    const told = { report, ordinal: revision.ordinal, citation, publicUrl };
    await tellDesk(manager, told, "report", now);
    await thankReporter(manager, told);
    await appendEvent(manager, {
      kind: "record.errorReported",
      actorId: ctx.viewer?.id ?? null,
      subject: formatQuotable(constraint.id, revision.ordinal),
      detail: { report: report.id },
      at: now,
    });
    return { token: await reportToken(manager, report.id) };
  });
}

const NO_REPORT = "There is no report at this address. Open the whole link from the mail.";

/** The report a reporter's link opens, or null: made up, or about a record that the viewer reads blind. */
export async function reportByToken(
  ctx: RequestContext,
  token: string,
): Promise<ErrorReport | null> {
  const { manager } = ctx.database;
  const id = await reportOfToken(manager, token);
  const report = id === null ? null : await loadReport(manager, id);
  if (!report) return null;
  const blind = await isReadingBlind(manager, ctx.viewer, report.constraintId, new Date());
  return blind ? null : report;
}

/** Takes the reporter's one reply to an answer; the report is open again. */
export async function replyToReport(
  ctx: RequestContext,
  token: string,
  given: string,
): Promise<ErrorReport | Refusal> {
  const text = plainText(given);
  const problem = lengthProblem(text, MESSAGE_LENGTH, "Reply");
  if (problem) return problem;
  const found = await reportByToken(ctx, token);
  if (!found) return refuse("NOT_FOUND", NO_REPORT);
  const over = await overLimit(ctx, [["reportPerCaller", ctx.ip]]);
  if (over) return over;
  const now = new Date();
  return transact<ErrorReport | Refusal>(ctx.database, async (manager) => {
    if (!(await hasEditorsMessage(manager, found.id))) {
      return refuse("NOT_ANSWERED", "You can reply once the editors have answered.");
    }
    // Of two replies sent at once the database takes one.
    const { affected } = await manager
      .createQueryBuilder()
      .update(ErrorReport)
      .set({
        state: "open",
        outcome: null,
        correctedBy: null,
        closedAt: null,
        repliedAt: now,
        version: () => "version + 1",
      })
      .where("id = :id AND repliedAt IS NULL", { id: found.id })
      .execute();
    if (affected !== 1) return refuse("REPLIED", "You have replied already; one reply is kept.");
    await manager.insert(ErrorReportMessage, { reportId: found.id, byId: null, text, at: now });
    const { ordinal, citation } = found.revision;
    const { publicUrl } = ctx.config;
    await tellDesk(manager, { report: found, ordinal, citation, publicUrl }, "reply", now);
    await appendEvent(manager, {
      kind: "report.replied",
      actorId: ctx.viewer?.id ?? null,
      subject: formatQuotable(found.constraintId, ordinal),
      detail: { report: found.id },
      at: now,
    });
    return (await loadReport(manager, found.id)) ?? found;
  });
}
