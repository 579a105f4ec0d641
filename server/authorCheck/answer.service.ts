import { hasRole, type RequestContext } from "~server/common/context";
import { refuse, type Refusal } from "~server/common/outcomes";
import { transact } from "~server/database/transaction";
import { lengthProblem, plainText } from "~server/errorReport/text";
import { appendEvent } from "~server/event/eventLog";
import { isReadingBlind, seesRevision } from "~server/review/blindness";
import { overLimit } from "~server/security/overLimit";
import { formatQuotable } from "~shared/identifiers/recordNumber";
import {
  CHECK_TEXT,
  linkStanding,
  type CheckVerdict,
  type LinkStanding,
} from "~shared/review/authorCheck";

import { AuthorCheck, AuthorCheckEntry } from "./authorCheck.entity";
import { loadCheck } from "./authorCheck.query";
import { hashOfToken } from "./link";
import { tellAnswered } from "./mails";

export interface OpenedLink {
  check: AuthorCheck;
  standing: LinkStanding;
}

/** What a link opens now; null when it was not made here. */
export async function openLink(ctx: RequestContext, token: string): Promise<OpenedLink | null> {
  const { manager } = ctx.database;
  const hash = await hashOfToken(manager, token);
  const check = hash === null ? null : await loadCheck(manager, { tokenHash: hash });
  if (!check) return null;
  const now = new Date();
  return {
    check,
    standing: (await isHidden(ctx, check, now)) ? "hidden" : linkStanding(check, now),
  };
}

/**
 * An editor who has yet to read the revision sees nothing through an author's link either. Whoever
 * is no editor holds the link because it was mailed to them.
 */
async function isHidden(ctx: RequestContext, check: AuthorCheck, now: Date): Promise<boolean> {
  const { viewer } = ctx;
  const { manager } = ctx.database;
  if (!viewer) return false;
  if (await isReadingBlind(manager, viewer, check.constraintId, now)) return true;
  if (!hasRole(viewer, "editor")) return false;
  return !(await seesRevision(manager, viewer, check.revision, now));
}

const STANDING_WORDS: Record<Exclude<LinkStanding, "open" | "answered">, string> = {
  closed: "This check is closed. Nothing can be changed in it any more.",
  expired: "This link has run out.",
  revoked: "The editor has taken this link back.",
  hidden: "You have yet to read this record yourself. Store that reading first.",
};

/** An answer may be put right this often before the editors close it. */
const MOST_ENTRIES = 20;

/** Takes the author's answer; until the editors close the check it can be corrected, and each answer stays. */
export async function answerLink(
  ctx: RequestContext,
  token: string,
  given: { version: number; verdict: CheckVerdict; text: string | null },
): Promise<AuthorCheck | Refusal> {
  const text = plainText(given.text ?? "") || null;
  if (given.verdict === "comments" || text !== null) {
    const problem = lengthProblem(text ?? "", CHECK_TEXT, "Comment");
    if (problem) return problem;
  }
  const opened = await openLink(ctx, token);
  if (!opened)
    return refuse("UNKNOWN", "This link opens nothing. Open the whole link from the mail.");
  const { check, standing } = opened;
  if (standing !== "open" && standing !== "answered") {
    return refuse("CLOSED", STANDING_WORDS[standing]);
  }
  const { viewer } = ctx;
  if (viewer && (viewer.id === check.sentById || viewer.id === check.constraint.ownerId)) {
    return refuse(
      "NOT_THE_AUTHOR",
      "You are signed in as somebody who worked on this record. An author of the paper answers here.",
    );
  }
  const over = await overLimit(ctx, [["checkAnswerPerCaller", ctx.ip]]);
  if (over) return over;
  const now = new Date();
  return transact<AuthorCheck | Refusal>(ctx.database, async (manager) => {
    const entries = await manager.countBy(AuthorCheckEntry, { checkId: check.id });
    if (entries >= MOST_ENTRIES) {
      return refuse("TOO_MANY", "This answer was corrected too often. Write to the editor.");
    }
    // Of two answers sent at once, and of an answer and the closing, the database takes one.
    const { affected } = await manager
      .createQueryBuilder()
      .update(AuthorCheck)
      .set({
        state: "answered",
        verdict: given.verdict,
        answeredAt: now,
        version: () => "version + 1",
      })
      .where(
        "id = :id AND version = :version AND state IN ('sent', 'answered') AND expiresAt > :now",
        { id: check.id, version: given.version, now },
      )
      .execute();
    if (affected !== 1) {
      return refuse("STALE", "This check has changed since you opened the page. Reload it.");
    }
    await manager.insert(AuthorCheckEntry, {
      checkId: check.id,
      byId: null,
      verdict: given.verdict,
      text,
      at: now,
    });
    await appendEvent(manager, {
      kind: "authorCheck.answered",
      actorId: null,
      subject: formatQuotable(check.constraintId, check.revision.ordinal),
      detail: { check: check.id, verdict: given.verdict },
      at: now,
    });
    await tellAnswered(manager, check, given.verdict, { publicUrl: ctx.config.publicUrl, now });
    return (await loadCheck(manager, { id: check.id })) ?? check;
  });
}
