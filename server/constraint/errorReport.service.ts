import { emailProblem, normalEmail } from "~server/account/rules";
import { RoleGrant } from "~server/account/roleGrant.entity";
import { User } from "~server/account/user.entity";
import type { RequestContext } from "~server/common/context";
import { done, refuse, type Done, type Refusal } from "~server/common/outcomes";
import { transact } from "~server/database/transaction";
import { appendEvent } from "~server/event/eventLog";
import { queueMail } from "~server/mail/outbox";
import { readsBlindUntil } from "~server/review/blindness";
import { overLimit } from "~server/security/overLimit";
import { formatQuotable, parseRecordNumber } from "~shared/identifiers/recordNumber";

import { findApprovedByNumber } from "./constraint.query";

const SHORTEST = 10;
const LONGEST = 2000;

export interface ErrorReport {
  number: string;
  text: string;
  email: string | null;
}

/**
 * Passes on what any reader finds wrong with a record to every maintainer, by mail. The event says
 * that it happened and to which revision; the words and the reader's address stand in the mail
 * only, since the log is never cleared.
 */
export async function reportError(
  ctx: RequestContext,
  report: ErrorReport,
): Promise<Done | Refusal> {
  const text = plainText(report.text);
  const length = [...text].length;
  if (length < SHORTEST || length > LONGEST) {
    return refuse(
      "TEXT_LENGTH",
      `Say what is wrong in ${SHORTEST} to ${LONGEST} characters; these are ${length}.`,
      "text",
    );
  }
  const email = normalEmail(report.email ?? "");
  const problem = email === "" ? null : emailProblem(email);
  if (problem) return problem;
  const number = parseRecordNumber(report.number);
  const row = number === null ? null : await findApprovedByNumber(ctx, number);
  if (!row) return refuse("NOT_FOUND", "There is no approved record of this number.", "number");
  const over = await overLimit(ctx, [
    ["reportPerCaller", ctx.ip],
    ["reportInAll", ""],
  ]);
  if (over) return over;

  const { constraint, revision, citation } = row;
  const quotable = formatQuotable(constraint.id, revision.ordinal);
  return transact<Done | Refusal>(ctx.database, async (manager) => {
    const maintainers = await manager
      .createQueryBuilder(User, "user")
      .innerJoin(RoleGrant, "role", "role.userId = user.id AND role.role = 'maintainer'")
      .where("user.confirmedAt IS NOT NULL")
      .orderBy("user.email")
      .getMany();
    if (maintainers.length === 0) {
      return refuse("NOBODY", "This registry has no maintainer yet who could read it.");
    }
    const now = new Date();
    for (const { id, email: to, nameOnPapers } of maintainers) {
      const paragraphs = [
        `Dear ${nameOnPapers},`,
        `A reader reports an error in ${quotable} of ${citation.title} (${citation.key}):`,
        quoted(text),
        email === ""
          ? "The reader left no address."
          : `The reader can be answered at ${email}; nobody has confirmed that address.`,
        `${ctx.config.publicUrl}/constraints/${quotable.replace(/\.\d+$/, "")}`,
        "Fogline",
      ];
      await queueMail(
        manager,
        {
          to,
          subject: `An error is reported in ${quotable}`,
          text: `${paragraphs.join("\n\n")}\n`,
        },
        // The words may hold numbers that a maintainer is just reading blind.
        await readsBlindUntil(manager, id, constraint.id, now),
      );
    }
    await appendEvent(manager, {
      kind: "record.errorReported",
      actorId: ctx.viewer?.id ?? null,
      subject: quotable,
      detail: { characters: length, maintainers: maintainers.length },
      at: now,
    });
    return done("Thank you. The maintainers have your report.");
  });
}

/** Without control characters, with plain line ends. */
function plainText(text: string): string {
  return text
    .normalize("NFC")
    .replace(/\r\n?/g, "\n")
    .replace(/[\u0000-\u0009\u000b-\u001f\u007f-\u009f\u2028-\u202e\u2066-\u2069]+/g, " ")
    .replace(/\n{3,}/g, "\n\n")
    .trim();
}

/** Marked line by line, so that nothing in it passes for the registry's own words. */
function quoted(text: string): string {
  return text
    .split("\n")
    .map((line) => `> ${line}`.trimEnd())
    .join("\n");
}
