import type { EntityManager } from "typeorm";

import { change, type Acting } from "~server/event/acting";
import { refuse, type Refusal } from "~server/common/outcomes";

import {
  entryWithKey,
  isProblem,
  parseBibtex,
  type BibtexResult,
  type ParsedEntry,
} from "./bibtex";
import { Citation } from "./citation.entity";
import {
  CitationPreview,
  KeptCitation,
  KeptCitations,
  citationType,
  parsedCitation,
} from "./citation.type";
import { findExisting, type Found } from "./matching";
import { authorList, keyLetter, keyStem } from "./names";
import { titleMatch } from "./titles";

export interface Kept {
  citation: Citation;
  created: boolean;
}

/** What an entry would become; nothing is kept. */
export async function previewCitations(
  manager: EntityManager,
  text: string,
): Promise<CitationPreview[]> {
  const previews: CitationPreview[] = [];
  const results = parseBibtex(text);
  for (const [index, result] of results.entries()) {
    if (isProblem(result)) previews.push(problemPreview(index, result));
    else {
      const found = await findExisting(manager, result);
      const earlier = sameInText(results.slice(0, index), result);
      previews.push(entryPreview(index, result, found, earlier));
    }
  }
  return previews;
}

/**
 * Keeps the readable entries among `indices` (all of them when null), each paper once.
 * All in one transaction: what is reported as kept is there, and nothing else.
 */
export async function keepCitations(
  who: Acting,
  text: string,
  indices: readonly number[] | null,
): Promise<KeptCitations | Refusal> {
  const results = parseBibtex(text);
  const unknown = indices?.find((index) => results[index] === undefined);
  if (unknown !== undefined) {
    return refuse("unknownEntry", `The text has no entry ${unknown + 1}.`, "indices");
  }
  const wanted = [...results.entries()].filter(([index]) => indices?.includes(index) ?? true);
  const problems = wanted.flatMap(([index, result]) =>
    isProblem(result) ? [problemPreview(index, result)] : [],
  );
  const readable = wanted.flatMap(([index, result]) =>
    isProblem(result) ? [] : [{ index, result }],
  );
  if (readable.length === 0) {
    const [first] = problems;
    const reason = first ? `Line ${first.line}: ${first.problem}` : "No entry was chosen.";
    return refuse("unreadable", reason, "bibtex");
  }
  const kept = await change(who, async ({ manager }) => {
    const done: KeptCitation[] = [];
    for (const { index, result } of readable) {
      const { citation, created } = await keepEntry(manager, result, who.viewer.id);
      done.push(
        Object.assign(new KeptCitation(), { index, citation: citationType(citation), created }),
      );
    }
    return done;
  });
  return Object.assign(new KeptCitations(), { kept, problems });
}

/**
 * Finds the entry's paper or keeps it, inside the caller's transaction (READ COMMITTED).
 * The gate stays locked until that transaction ends, so two people who bring one paper at once
 * get one citation, also when nothing but the title tells.
 */
export async function keepEntry(
  manager: EntityManager,
  entry: ParsedEntry,
  ownerId: string | null,
): Promise<Kept> {
  await manager.query(
    "INSERT INTO citation_gate (id, passes) VALUES (1, 1) ON DUPLICATE KEY UPDATE passes = passes + 1",
  );
  const { match } = await findExisting(manager, entry);
  if (match) return { citation: match.citation, created: false };

  const stem = keyStem(entry.authors, entry.year);
  for (let nth = 0; ; nth += 1) {
    const key = stem + keyLetter(nth);
    if (await manager.existsBy(Citation, { key })) continue;
    const citation = manager.create(Citation, citationValues(entry, key, ownerId));
    await manager.insert(Citation, citation);
    return { citation, created: true };
  }
}

function citationValues(entry: ParsedEntry, key: string, ownerId: string | null) {
  return {
    key,
    entryType: entry.entryType.slice(0, 40),
    sourceBibtex: entry.raw.source,
    entryBibtex: entryWithKey(entry.raw, key),
    csl: JSON.stringify({ ...entry.csl, id: key }),
    doi: entry.doi,
    arxiv: entry.arxiv,
    arxivVersion: entry.arxivVersion,
    bibcode: entry.bibcode,
    title: entry.title,
    titleMatch: titleMatch(entry.title),
    year: entry.year,
    authors: authorList(entry.authors, entry.moreAuthors),
    authorNames: entry.authors,
    container: entry.container,
    volume: entry.volume?.slice(0, 100) ?? null,
    pages: entry.pages?.slice(0, 100) ?? null,
    shortName: entry.shortName.slice(0, 255),
    createdById: ownerId,
  };
}

function problemPreview(
  index: number,
  problem: Extract<BibtexResult, { problem: string }>,
): CitationPreview {
  return Object.assign(new CitationPreview(), {
    index,
    line: problem.line,
    givenKey: problem.givenKey,
    citation: null,
    existing: null,
    matchedBy: null,
    problem: problem.problem,
    remarks: [],
  });
}

function entryPreview(
  index: number,
  entry: ParsedEntry,
  found: Found,
  earlier: number | null,
): CitationPreview {
  const remarks = [...entry.remarks, ...found.remarks];
  if (earlier !== null)
    remarks.push(`This is the same paper as entry ${earlier + 1} of this text.`);
  return Object.assign(new CitationPreview(), {
    index,
    line: entry.line,
    givenKey: entry.givenKey,
    citation: parsedCitation(entry),
    existing: found.match ? citationType(found.match.citation) : null,
    matchedBy: found.match?.matchedBy ?? null,
    problem: null,
    remarks,
  });
}

function sameInText(before: readonly BibtexResult[], entry: ParsedEntry): number | null {
  const at = before.findIndex(
    (other) =>
      !isProblem(other) &&
      ((entry.doi !== null && other.doi === entry.doi) ||
        (entry.arxiv !== null && other.arxiv === entry.arxiv) ||
        (entry.bibcode !== null && other.bibcode === entry.bibcode) ||
        (titleMatch(other.title) === titleMatch(entry.title) && other.year === entry.year)),
  );
  return at < 0 ? null : at;
}
