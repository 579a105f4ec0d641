import type { EntityManager } from "typeorm";

import { User } from "~server/account/user.entity";
import { Constraint } from "~server/constraint/constraint.entity";
import { Revision } from "~server/constraint/revision.entity";
import type { Acting, Change } from "~server/event/acting";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";

interface HeldTable {
  slug: string;
  name: string;
  ownerId: string;
}

/** Saved fitting tables whose newest version takes a record in. */
async function tablesWith(manager: EntityManager, constraintId: number): Promise<HeldTable[]> {
  return manager.query(
    `SELECT saved.slug AS slug, saved.name AS name, saved.ownerId AS ownerId
       FROM fitting_table saved
       JOIN fitting_table_row entry ON entry.slug = saved.slug AND entry.version = saved.version
      WHERE entry.constraintId = ? AND entry.included = 1 AND saved.deletedAt IS NULL
      ORDER BY name, slug`,
    [constraintId],
  );
}

/** What happened, as the first sentence of a mail; no full stop. */
export interface Happened {
  constraintId: number;
  /** "was withdrawn", "was superseded by FL-0009" */
  words: string;
}

/**
 * Tells the owner of a record, and the owners of saved tables that take it in, what was recorded about
 * it. The reason stands on the record's page only: it may quote numbers, and a mail is read by whoever
 * holds the mailbox, who may be reading the record blind.
 */
export async function tellOfLife(here: Change, who: Acting, happened: Happened): Promise<void> {
  const { manager } = here;
  const { constraintId, words } = happened;
  const record = await manager.findOneByOrFail(Constraint, { id: constraintId });
  const revision = await manager.findOne(Revision, {
    where: { id: record.approvedRevisionId ?? "" },
    relations: { citation: true },
  });
  const tables = await tablesWith(manager, constraintId);
  const number = formatRecordNumber(constraintId);
  const paper = revision?.citation ? ` (${revision.citation.title}, ${revision.citation.key})` : "";
  for (const personId of new Set([record.ownerId, ...tables.map(({ ownerId }) => ownerId)])) {
    const person =
      personId === who.viewer.id ? null : await manager.findOneBy(User, { id: personId });
    if (!person) continue;
    const own = tables.filter(({ ownerId }) => ownerId === personId);
    await here.mail({
      to: person.email,
      subject: `${number} ${words}`,
      text: [
        `${number}${paper} ${words}.`,
        `Who, when and why stands with the record: ${who.publicUrl}/constraints/${number}`,
        ...(own.length === 0 ? [] : tableWords(who, own)),
        "",
      ].join("\n\n"),
    });
  }
}

function tableWords(who: Acting, own: readonly HeldTable[]): string[] {
  const tables = own.length === 1 ? "a fitting table" : "fitting tables";
  return [
    `It is a row of ${tables} of yours. A saved table doesn't change by itself; its page says what happened to its rows.`,
    own.map(({ slug, name }) => `${name}: ${who.publicUrl}/tables/${slug}`).join("\n"),
  ];
}
