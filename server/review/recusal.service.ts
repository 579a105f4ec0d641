import type { EntityManager } from "typeorm";

import { Citation } from "~server/citation/citation.entity";
import { done, refuse, type Done, type Refusal } from "~server/common/outcomes";
import { updateAt } from "~server/constraint/draft.service";
import { Revision } from "~server/constraint/revision.entity";
import { change, type Acting } from "~server/event/acting";
import { formatQuotable } from "~shared/identifiers/recordNumber";
import { orcidsIn } from "~shared/identifiers/orcid";
import { mayWithOwn } from "~shared/review/policy";
import {
  authorMatch,
  RECUSAL_REASON_LONGEST,
  type AuthorMatch,
  type PublishedPerson,
} from "~shared/review/recusal";

import { Recusal } from "./recusal.entity";

/** An editor as the rules on one's own papers ask for them. */
export interface Editor extends PublishedPerson {
  id: string;
}

/** What a citation tells of a paper's authors. */
type Paper = Pick<Citation, "authors" | "csl" | "sourceBibtex">;

/**
 * By what a person is an author of a paper; null when by nothing. CSL-JSON made elsewhere and some
 * BibTeX files carry ORCIDs, each in a place of its own, so the whole text is looked through.
 */
export function authorOf(person: PublishedPerson, citation: Paper | null): AuthorMatch | null {
  if (!citation) return null;
  const orcids = person.orcid === null ? [] : orcidsIn(`${citation.csl}\n${citation.sourceBibtex}`);
  return authorMatch(person, { authors: citation.authors, orcids });
}

const AUTHOR_WORDS: Record<AuthorMatch, string> = {
  name: "You are an author of this paper. Another editor has to read it.",
  furtherName:
    "You are an author of this paper, under another of your names. Another editor has to read it.",
  orcid: "Your ORCID is among this paper's authors. Another editor has to read it.",
};

/** Why a person can't judge a paper, in words, or null. */
export function barredFromPaper(
  editor: Editor,
  citation: (Paper & { id: string }) | null,
  declared: ReadonlySet<string>,
): string | null {
  const match = authorOf(editor, citation);
  if (match) return AUTHOR_WORDS[match];
  if (citation && declared.has(citation.id)) {
    return "You said that you can't read this paper impartially. Another editor reads it.";
  }
  return null;
}

/**
 * Why this person can't read this submission, in words, or null.
 *
 * @param declared - Papers that they leave to others; see `papersLeftBy`.
 */
export function barredBecause(
  revision: Revision,
  editor: Editor,
  declared: ReadonlySet<string>,
): string | null {
  if (!mayWithOwn("storeReading", revision.constraint.ownerId === editor.id)) {
    return "You submitted it. Another editor has to read it.";
  }
  return barredFromPaper(editor, revision.citation, declared);
}

/** Citations of the papers that an editor has said not to read impartially. */
export async function papersLeftBy(
  manager: EntityManager,
  editorId: string,
): Promise<ReadonlySet<string>> {
  const rows = await manager.find(Recusal, {
    select: { id: true, citationId: true },
    where: { editorId },
  });
  return new Set(rows.map(({ citationId }) => citationId));
}

/** The editor's declarations with their papers, newest first. */
export function recusalsOf(manager: EntityManager, editorId: string): Promise<Recusal[]> {
  return manager.find(Recusal, {
    where: { editorId },
    relations: { citation: true },
    order: { at: "DESC", id: "ASC" },
  });
}

/** "paper:Osuwande2027": how events name a paper. */
function paperSubject(citation: Citation): string {
  return `paper:${citation.key}`;
}

/**
 * Keeps an editor's word that they can't read a paper impartially. What they hold of it goes back
 * into the queue; a stored reading stays on record.
 */
export async function declareRecusal(
  who: Acting,
  citationId: string,
  reason: string | null,
): Promise<Done | Refusal> {
  const kept = reason?.trim() || null;
  if (kept !== null && kept.length > RECUSAL_REASON_LONGEST) {
    return refuse(
      "tooLong",
      `The reason has at most ${RECUSAL_REASON_LONGEST} characters.`,
      "reason",
    );
  }
  return change<Done | Refusal>(who, async (here) => {
    const { manager } = here;
    const citation = await manager.findOneBy(Citation, { id: citationId });
    if (!citation) return refuse("notFound", "This paper is not in the registry.");
    const { affectedRows } = await manager.query(
      "INSERT IGNORE INTO recusal (id, citationId, editorId, reason, at) VALUES (UUID(), ?, ?, ?, ?)",
      [citation.id, who.viewer.id, kept, who.now],
    );
    if (Number(affectedRows) === 0) return done("You leave this paper to other editors already.");
    await here.event({ kind: "recusal.declared", subject: paperSubject(citation) });
    const held = await manager.findBy(Revision, {
      state: "inReview",
      claimedById: who.viewer.id,
      citationId: citation.id,
    });
    for (const revision of held) {
      const back = await updateAt(manager, revision.id, revision.version, ["inReview"], {
        state: "submitted",
        claimedById: null,
        claimedUntil: null,
      });
      if (!back) continue; // the claim has ended meanwhile
      await here.event({
        kind: "claim.released",
        subject: formatQuotable(revision.constraintId, revision.ordinal),
      });
    }
    return done(
      held.length === 0
        ? "You leave this paper to other editors now."
        : "You leave this paper to other editors now; what you had claimed of it is back in the queue.",
    );
  });
}

/** Takes such a word back. */
export async function takeBackRecusal(who: Acting, citationId: string): Promise<Done | Refusal> {
  return change<Done | Refusal>(who, async (here) => {
    const citation = await here.manager.findOneBy(Citation, { id: citationId });
    if (!citation) return refuse("notFound", "This paper is not in the registry.");
    const { affected } = await here.manager.delete(Recusal, {
      citationId,
      editorId: who.viewer.id,
    });
    if (affected !== 1) return refuse("notDeclared", "You have not left this paper to others.");
    await here.event({ kind: "recusal.takenBack", subject: paperSubject(citation) });
    return done("You can claim submissions of this paper again.");
  });
}
