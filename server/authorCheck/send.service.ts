import { emailProblem, normalEmail } from "~server/account/rules";
import { requireViewer, type RequestContext } from "~server/common/context";
import { refuse, Refusal } from "~server/common/outcomes";
import { loadRevision } from "~server/constraint/draft.service";
import { Revision } from "~server/constraint/revision.entity";
import { lengthProblem, plainText } from "~server/errorReport/text";
import { acting, change, type Acting } from "~server/event/acting";
import { hasRead, seesRevision } from "~server/review/blindness";
import { barredBecause, papersLeftBy } from "~server/review/recusal.service";
import { overLimit } from "~server/security/overLimit";
import { formatQuotable, parseQuotable } from "~shared/identifiers/recordNumber";
import { CHECK_DAYS, CHECK_NAME } from "~shared/review/authorCheck";

import { AuthorCheck } from "./authorCheck.entity";
import { loadCheck } from "./authorCheck.query";
import { newToken, tokenHash } from "./link";
import { askAuthor } from "./mails";

const DAY_MS = 86_400_000;

export interface Asked {
  /** FL-0042.3 */
  quotable: string;
  name: string;
  email: string;
}

/** Asks an author of the paper to look at a revision, with a mailed link of their own. */
export async function sendCheck(ctx: RequestContext, asked: Asked): Promise<AuthorCheck | Refusal> {
  const viewer = requireViewer(ctx);
  const name = plainText(asked.name).replace(/\n/g, " ");
  const email = normalEmail(asked.email);
  const wrong =
    named(lengthProblem(name, CHECK_NAME, "Give the author's name"), "name") ?? emailProblem(email);
  if (wrong) return wrong;
  if (email === normalEmail(viewer.email)) {
    return refuse("OWN_ADDRESS", "This is your own address. An author has to be asked.", "email");
  }
  const who = acting(ctx);
  const revision = await askedRevision(who, asked.quotable);
  if (revision instanceof Refusal) return revision;
  const over = await overLimit(ctx, [
    ["checkPerRecord", String(revision.constraintId)],
    ["checkPerAddress", email],
  ]);
  if (over) return over;
  return keepCheck(who, revision, { name, email });
}

const named = (refusal: Refusal | null, field: string): Refusal | null =>
  refusal && refuse(refusal.code, refusal.message, field);

/** The revision that this editor may have checked: in use, or one that they have read again. */
async function askedRevision(who: Acting, quotable: string): Promise<Revision | Refusal> {
  const { manager } = who.database;
  const unknown = refuse(
    "NOT_FOUND",
    "There is no such revision that you have read. Store your reading of it first.",
  );
  const parsed = parseQuotable(quotable);
  const row =
    parsed &&
    (await manager.findOne(Revision, {
      select: { id: true },
      where: { constraintId: parsed.number, ordinal: parsed.ordinal },
    }));
  const revision = row && (await loadRevision(manager, row.id));
  if (!revision) return unknown;
  if (!(await seesRevision(manager, who.viewer, revision, who.now))) return unknown;
  const inUse = revision.constraint.approvedRevisionId === revision.id;
  const waits = revision.state === "submitted" || revision.state === "inReview";
  const left = await papersLeftBy(manager, who.viewer.id);
  const barred = barredBecause(revision, who.viewer, left);
  if (barred) return refuse("BARRED", barred);
  if (inUse) return revision;
  if (waits && (await hasRead(manager, who.viewer.id, revision.id))) return revision;
  return refuse(
    "NOT_CURRENT",
    "An author is asked about the revision in use, or about one that is in review.",
  );
}

/** Keeps the check, its event and its mail together. */
export async function keepCheck(
  who: Acting,
  revision: Revision,
  author: { name: string; email: string },
): Promise<AuthorCheck> {
  return change(who, async (here) => {
    const { manager } = here;
    const token = await newToken(manager);
    const made = manager.create(AuthorCheck, {
      constraintId: revision.constraintId,
      revisionId: revision.id,
      tokenHash: tokenHash(token),
      authorName: author.name,
      authorEmail: author.email,
      state: "sent",
      verdict: null,
      version: 1,
      sentById: who.viewer.id,
      sentAt: who.now,
      expiresAt: new Date(who.now.getTime() + CHECK_DAYS * DAY_MS),
      answeredAt: null,
      endedById: null,
      endedAt: null,
    });
    await manager.insert(AuthorCheck, made);
    const check = await loadCheck(manager, { id: made.id });
    if (!check) throw new Error("the check vanished in its own transaction");
    const { publicUrl, viewer } = who;
    if (who.sendsMail) {
      await askAuthor(manager, check, { editor: viewer.nameOnPapers, token, publicUrl });
    }
    await here.event({
      kind: "authorCheck.sent",
      subject: formatQuotable(revision.constraintId, revision.ordinal),
      detail: { check: check.id },
    });
    return check;
  });
}
