/** Whether a person is an author of a paper, by family name and initials, without accents and case. */

/** Letters that decomposing into base and accent leaves whole. */
const WHOLE_LETTERS: Readonly<Record<string, string>> = {
  ø: "o",
  ł: "l",
  đ: "d",
  ð: "d",
  þ: "th",
  ß: "ss",
  æ: "ae",
  œ: "oe",
  ı: "i",
};

const PARTICLES = new Set(
  "de del della di da dal do dos das du des la le el al van von der den ter ten zu zur af av".split(
    " ",
  ),
);

function fold(text: string): string {
  return text
    .toLowerCase()
    .replace(/[øłđðþßæœı]/g, (letter) => WHOLE_LETTERS[letter] ?? letter)
    .normalize("NFKD")
    .replace(/[^\p{L}]/gu, "");
}

/** "Müller" is met as Muller and as Mueller. */
function spellings(text: string): string[] {
  const spelledOut = text
    .toLowerCase()
    .normalize("NFC")
    .replace(
      /[äöüåø]/g,
      (letter) => ({ ä: "ae", ö: "oe", ü: "ue", å: "aa", ø: "oe" })[letter] ?? letter,
    );
  return [...new Set([fold(text), fold(spelledOut)])];
}

function initials(given: string): string {
  return given
    .split(/[\s.\-\u2010\u2011]+/)
    .filter((part) => part !== "")
    .map((part) => (/^\p{Lu}{2,3}$/u.test(part) ? fold(part) : fold(part).slice(0, 1)))
    .join("");
}

interface NameReading {
  families: string[];
  initials: string;
}

function familySpellings(words: readonly string[]): string[] {
  const bare = words.filter((word) => !PARTICLES.has(word.toLowerCase().replace(/\.$/, "")));
  return [words, bare].flatMap((kept) => (kept.length === 0 ? [] : spellings(kept.join(" "))));
}

/** Every way a name can be split; without a comma the family name may be the last word or several. */
function readings(name: string): NameReading[] {
  const clean = name
    .replace(/[{}\\"~]/g, " ")
    .replace(/\s+/g, " ")
    .trim();
  if (clean === "") return [];
  const [family = "", ...rest] = clean.split(",").map((part) => part.trim());
  if (rest.length > 0) {
    // "Family, Jr., Given" puts the suffix in the middle.
    const given = rest.filter((part) => !/^(?:jr|sr|i{1,3}|iv)\.?$/i.test(part)).join(" ");
    return [{ families: familySpellings(family.split(" ")), initials: initials(given) }];
  }
  const words = clean.split(" ");
  if (words.length === 1) return [{ families: familySpellings(words), initials: "" }];
  return words.slice(1).map((_, index) => ({
    families: familySpellings(words.slice(index + 1)),
    initials: initials(words.slice(0, index + 1).join(" ")),
  }));
}

/** Initials agree when one list begins the other; a missing list agrees with any, for a doubt bars. */
function sameInitials(a: string, b: string): boolean {
  return a.startsWith(b) || b.startsWith(a);
}

/**
 * Whether a name as on papers is among a paper's authors: "L. Arvensis" is "Arvensis, Lena".
 * It errs towards yes: an editor kept from one paper costs less than one who judges their own.
 *
 * @param nameOnPapers - In either order, with full given names or initials.
 * @param authors - Likewise; a collaboration's name matches only itself.
 */
export function isAuthor(nameOnPapers: string, authors: readonly string[]): boolean {
  const own = readings(nameOnPapers);
  return authors.some((author) =>
    readings(author).some((theirs) =>
      own.some(
        (mine) =>
          sameInitials(mine.initials, theirs.initials) &&
          mine.families.some((family) => family !== "" && theirs.families.includes(family)),
      ),
    ),
  );
}

/** A person under every name a paper may have. */
export interface PublishedPerson {
  nameOnPapers: string;
  furtherNames: readonly string[];
  orcid: string | null;
}

/** Whom a paper names. */
export interface PaperAuthors {
  authors: readonly string[];
  /** ORCIDs that the citation carries, whoever's they are. */
  orcids: readonly string[];
}

export type AuthorMatch = "orcid" | "name" | "furtherName";

/** By what a person is an author of a paper; null when by nothing. */
export function authorMatch(person: PublishedPerson, paper: PaperAuthors): AuthorMatch | null {
  if (person.orcid !== null && paper.orcids.includes(person.orcid)) return "orcid";
  if (isAuthor(person.nameOnPapers, paper.authors)) return "name";
  const another = person.furtherNames.some((name) => isAuthor(name, paper.authors));
  return another ? "furtherName" : null;
}

/** Characters of an editor's reason for leaving a paper to others. */
export const RECUSAL_REASON_LONGEST = 500;
