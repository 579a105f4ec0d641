import { RoleGrant } from "~server/account/roleGrant.entity";
import { User } from "~server/account/user.entity";
import type { Revision } from "~server/constraint/revision.entity";
import type { Acting, Change } from "~server/event/acting";
import { formatQuotable } from "~shared/identifiers/recordNumber";
import { CLAIM_HOURS } from "~shared/review/states";
import type { FieldName } from "~shared/statement/fields";
import { FIELD_NAMES } from "~shared/statement/words";

import { barredBecause, papersLeftBy } from "./recusal.service";

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
  for (const editor of editors) {
    const left = await papersLeftBy(here.manager, editor.id);
    if (barredBecause(revision, editor, left) !== null) continue;
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

/** Tells an editor that another one handed a submission to them. */
export async function tellHandedOver(
  here: Change,
  who: Acting,
  revision: Revision,
  next: User,
): Promise<void> {
  await here.mail({
    to: next.email,
    subject: `${quotable(revision)} was handed to you`,
    text: [
      `${who.viewer.nameOnPapers} handed ${quotable(revision)} to you for a second reading.`,
      `Paper: ${paper(revision)}.`,
      `You hold it for ${CLAIM_HOURS} hours and read the paper on your own: ${who.publicUrl}/desk/review/${revision.id}`,
      "If you can't read it, release it there; it goes back into the queue.",
      "",
    ].join("\n\n"),
  });
}

/** Tells the other side of a comment's thread that something was written; not what. */
export async function tellThread(
  here: Change,
  who: Acting,
  revision: Revision,
  field: string,
  byContributor: boolean,
): Promise<void> {
  const name = FIELD_NAMES[field as FieldName] ?? "The paper";
  const to = byContributor
    ? await here.manager.findOneBy(User, { id: revision.claimedById ?? "" })
    : await owner(here, revision);
  if (!to) return; // nobody holds it now; whoever claims it next reads the thread
  const page = byContributor ? "review" : "submit";
  await here.mail({
    to: to.email,
    subject: `${quotable(revision)}: an entry about ${name.toLowerCase()}`,
    text: [
      `${byContributor ? "The contributor" : "An editor"} wrote about ${name.toLowerCase()} in ${quotable(revision)} of ${paper(revision)}.`,
      `Read it at ${who.publicUrl}/desk/${page}/${revision.id}`,
      "",
    ].join("\n\n"),
  });
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
