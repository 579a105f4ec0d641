import { Between, IsNull, type EntityManager } from "typeorm";

import type { ParsedEntry } from "./bibtex";
import { Citation } from "./citation.entity";
import { asciiLetters, familyName } from "./names";
import { nearEqualTitles, titleMatch } from "./titles";

export type MatchedBy = "doi" | "arxiv" | "bibcode" | "title";

export interface Match {
  citation: Citation;
  matchedBy: MatchedBy;
}

export interface Found {
  match: Match | null;
  /** What a person should look at. */
  remarks: string[];
}

const IDENTIFIERS = ["doi", "arxiv", "bibcode"] as const;
const IDENTIFIER_WORDS = { doi: "DOI", arxiv: "arXiv number", bibcode: "bibcode" } as const;

/** The paper in the registry that an entry is: by DOI, arXiv number, bibcode, or title and year. */
export async function findExisting(manager: EntityManager, entry: ParsedEntry): Promise<Found> {
  const remarks: string[] = [];
  let match: Match | null = null;
  for (const matchedBy of IDENTIFIERS) {
    const value = entry[matchedBy];
    if (value === null) continue;
    const citation = await manager.findOneBy(Citation, { [matchedBy]: value });
    if (!citation) continue;
    if (!match) match = { citation, matchedBy };
    else if (match.citation.id !== citation.id) {
      remarks.push(
        `The ${IDENTIFIER_WORDS[matchedBy]} belongs to another paper in the registry, ${citation.key}.`,
      );
    }
  }
  match ??= await findByTitle(manager, entry, remarks);
  if (match) remarks.push(...differences(entry, match.citation));
  return { match, remarks };
}

async function findByTitle(
  manager: EntityManager,
  entry: ParsedEntry,
  remarks: string[],
): Promise<Match | null> {
  const near = await manager.find(Citation, {
    // Without the long texts: there may be hundreds of papers in three years.
    select: {
      id: true,
      key: true,
      title: true,
      authorNames: true,
      entryType: true,
      doi: true,
      arxiv: true,
    },
    where:
      entry.year === null
        ? { year: IsNull(), titleMatch: titleMatch(entry.title) }
        : { year: Between(entry.year - 1, entry.year + 1) },
    order: { createdAt: "ASC", id: "ASC" },
  });
  for (const citation of near) {
    if (!nearEqualTitles(entry.title, citation.title)) continue;
    if (!sameFirstAuthor(entry, citation)) continue;
    const unlike = conflict(entry, citation);
    if (unlike === null) {
      const whole = await manager.findOneByOrFail(Citation, { id: citation.id });
      return { citation: whole, matchedBy: "title" };
    }
    remarks.push(
      `${citation.key} in the registry has nearly the same title and year, but ${unlike}. ` +
        "It is kept as another paper.",
    );
  }
  return null;
}

/** Why two entries of one title are still two papers, or null. */
function conflict(
  entry: ParsedEntry,
  citation: Pick<Citation, "doi" | "arxiv" | "entryType">,
): string | null {
  // A bibcode changes when a preprint is printed, so it tells no two papers apart.
  for (const name of ["doi", "arxiv"] as const) {
    if (entry[name] && citation[name] && entry[name] !== citation[name]) {
      return `another ${IDENTIFIER_WORDS[name]}`;
    }
  }
  const isThesis = (type: string) => /thesis$/.test(type);
  return isThesis(entry.entryType) === isThesis(citation.entryType)
    ? null
    : "one of the two is a thesis";
}

function sameFirstAuthor(entry: ParsedEntry, citation: Pick<Citation, "authorNames">): boolean {
  const [a, b] = [entry.authors[0], citation.authorNames[0]].map((name) =>
    name ? asciiLetters(familyName(name)).toLowerCase() : "",
  );
  return a === b;
}

function differences(entry: ParsedEntry, citation: Citation): string[] {
  const remarks: string[] = [];
  for (const name of IDENTIFIERS) {
    const [given, kept] = [entry[name], citation[name]];
    if (!given || given === kept) continue;
    const word = IDENTIFIER_WORDS[name];
    remarks.push(
      kept
        ? `The registry's entry ${citation.key} has another ${word}: ${kept}, here ${given}.`
        : `The registry's entry ${citation.key} has no ${word}; here it is ${given}.`,
    );
  }
  if (!nearEqualTitles(entry.title, citation.title)) {
    remarks.push(`The registry's entry ${citation.key} has another title: “${citation.title}”.`);
  }
  return remarks;
}
