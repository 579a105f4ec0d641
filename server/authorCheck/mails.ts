import type { EntityManager } from "typeorm";

import { User } from "~server/account/user.entity";
import { quoted } from "~server/errorReport/text";
import { queueMail } from "~server/mail/outbox";
import { readsBlindUntil } from "~server/review/blindness";
import { formatQuotable } from "~shared/identifiers/recordNumber";
import { CHECK_ADDRESS_KEPT_DAYS, CHECK_DAYS, type CheckVerdict } from "~shared/review/authorCheck";

import type { AuthorCheck } from "./authorCheck.entity";

// None of these holds a number of the record: the author reads it on the page, and an editor's
// mailbox may belong to somebody who has yet to read it blind.

function quotable({ constraintId, revision }: AuthorCheck): string {
  return formatQuotable(constraintId, revision.ordinal);
}

function paper({ revision }: AuthorCheck): string {
  const { citation } = revision;
  return citation ? `${citation.title} (${citation.shortName})` : "your paper";
}

/** Asks the author, with the one link that opens the page. */
export async function askAuthor(
  manager: EntityManager,
  check: AuthorCheck,
  { editor, token, publicUrl }: { editor: string; token: string; publicUrl: string },
): Promise<void> {
  if (check.authorEmail === null) return;
  await queueMail(manager, {
    to: check.authorEmail,
    subject: "Would you look at what a registry says about your paper?",
    text: [
      `Dear ${check.authorName ?? "colleague"},`,
      `Fogline is a registry of published constraints on the neutral-fraction history of the intergalactic medium. One of its records, ${quotable(check)}, says what is printed in ${paper(check)}.`,
      `${editor}, an editor of the registry, asks you to look at it. The page takes "correct" or your comments; it needs no account:`,
      `${publicUrl}/check/${token}`,
      `The link works for ${CHECK_DAYS} days. Whoever has it can answer for you, so please don't pass it on.`,
      `If you would rather not, do nothing. Your name and address, as the editor typed them, are forgotten ${CHECK_ADDRESS_KEPT_DAYS} days after the check has ended.`,
      "Fogline",
      "",
    ].join("\n\n"),
  });
}

/** Tells the editor who asked that there is an answer; its words stand at the desk. */
export async function tellAnswered(
  manager: EntityManager,
  check: AuthorCheck,
  verdict: CheckVerdict,
  { publicUrl, now }: { publicUrl: string; now: Date },
): Promise<void> {
  const editor = await manager.findOneBy(User, { id: check.sentById });
  if (!editor) return;
  await queueMail(
    manager,
    {
      to: editor.email,
      subject:
        verdict === "correct"
          ? `An author checked ${quotable(check)}: correct`
          : `An author comments on ${quotable(check)}`,
      text: [
        `You asked an author of ${paper(check)} to check ${quotable(check)}. There is an answer.`,
        `Read it at ${publicUrl}/desk/author-checks/${check.id}`,
        "",
      ].join("\n\n"),
    },
    await readsBlindUntil(manager, editor.id, check.constraintId, now),
  );
}

/** Tells the author what the editors did about the comments. */
export async function tellClosed(
  manager: EntityManager,
  check: AuthorCheck,
  { editor, text, publicUrl }: { editor: string; text: string; publicUrl: string },
): Promise<void> {
  if (check.authorEmail === null) return;
  const number = quotable(check).replace(/\.\d+$/, "");
  await queueMail(manager, {
    to: check.authorEmail,
    subject: `Your comments on ${quotable(check)}`,
    text: [
      `Dear ${check.authorName ?? "colleague"},`,
      `Thank you for looking at ${quotable(check)} of ${paper(check)}. ${editor} writes:`,
      quoted(text),
      `The record stands at ${publicUrl}/constraints/${number}`,
      "Fogline",
      "",
    ].join("\n\n"),
  });
}
