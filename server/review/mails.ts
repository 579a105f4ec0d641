import { RoleGrant } from "~server/account/roleGrant.entity";
import { User } from "~server/account/user.entity";
import type { Revision } from "~server/constraint/revision.entity";
import type { Acting, Change } from "~server/event/acting";
import { formatQuotable } from "~shared/identifiers/recordNumber";
import { isAuthor } from "~shared/review/recusal";
import type { FieldName } from "~shared/statement/fields";
import { FIELD_NAMES } from "~shared/statement/words";

// A mail is read by whoever holds the mailbox, and in the demonstration by maintainers: none of
// these holds a number of a submission, nor a comment, which may quote one.

function quotable(revision: Revision): string {
  return formatQuotable(revision.constraintId, revision.ordinal);
}

function paper(revision: Revision): string {
  const { citation } = revision;
  return citation ? `${citation.title} (${citation.key})` : "a paper";
}

/** Tells every editor who may read it that something waits: not the contributor, nor an author. */
export async function tellEditors(here: Change, who: Acting, revision: Revision): Promise<void> {
  const editors = await here.manager
    .createQueryBuilder(User, "user")
    .innerJoin(RoleGrant, "role", "role.userId = user.id AND role.role = 'editor'")
    .where("user.id <> :owner AND user.confirmedAt IS NOT NULL", {
      owner: revision.constraint.ownerId,
    })
    .orderBy("user.email")
    .getMany();
  const authors = revision.citation?.authors ?? [];
  for (const editor of editors) {
    if (isAuthor(editor.nameOnPapers, authors)) continue;
    await here.mail({
      to: editor.email,
      subject: `${quotable(revision)} waits for a second reading`,
      text: [
        `${quotable(revision)} was submitted and waits for a second reading.`,
        `Paper: ${paper(revision)}.`,
        `Claim it at your desk: ${who.publicUrl}/desk/review/${revision.id}`,
        "",
      ].join("\n\n"),
    });
  }
}

async function owner(here: Change, revision: Revision): Promise<User> {
  return here.manager.findOneByOrFail(User, { id: revision.constraint.ownerId });
}

/** Tells the contributor that the revision came back, and at which fields there are comments. */
export async function tellReturned(
  here: Change,
  who: Acting,
  revision: Revision,
  fields: readonly string[],
): Promise<void> {
  const names = [...new Set(fields)].map((field) => FIELD_NAMES[field as FieldName] ?? field);
  await here.mail({
    to: (await owner(here, revision)).email,
    subject: `${quotable(revision)} was returned to you`,
    text: [
      `An editor read ${paper(revision)} again and returned ${quotable(revision)}.`,
      `There are comments at: ${names.join(", ")}.`,
      `Read and answer them: ${who.publicUrl}/desk/submit/${revision.id}`,
      "",
    ].join("\n\n"),
  });
}

/** Tells the contributor that the revision is in use now. */
export async function tellApproved(here: Change, who: Acting, revision: Revision): Promise<void> {
  const number = quotable(revision).replace(/\.\d+$/, "");
  await here.mail({
    to: (await owner(here, revision)).email,
    subject: `${quotable(revision)} is approved`,
    text: [
      `${quotable(revision)} of ${paper(revision)} was read again by an editor and is approved.`,
      `It stands at ${who.publicUrl}/constraints/${number}`,
      "",
    ].join("\n\n"),
  });
}
