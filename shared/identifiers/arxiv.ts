/** arXiv numbers, new form (3101.01234) and old form (astro-ph/0604177). */

const BEFORE = /^(?:https?:\/\/)?(?:www\.)?(?:arxiv\.org\/(?:abs|pdf)\/)?(?:arxiv:?\s*)?/i;
const NUMBER = /^(\d{4}\.\d{4,5}|[a-z-]+(?:\.[a-z]{2})?\/\d{7})(?:v(\d{1,3}))?(?:\.pdf)?$/i;

function match(text: string): RegExpExecArray | null {
  return NUMBER.exec(
    text
      .trim()
      .replace(BEFORE, "")
      .replace(/\s*\[[^\]]*\]$/, ""),
  );
}

/**
 * An arXiv number in its one form: no prefix, no version, lower case.
 *
 * @returns Null when the text is no arXiv number.
 */
export function normalizeArxiv(text: string): string | null {
  const number = match(text)?.[1]?.toLowerCase();
  if (number === undefined) return null;
  // The subject class of an old number (math.GT/0309136) is no part of the identifier.
  return number.includes("/") ? number.replace(/\.[a-z]{2}\//, "/") : number;
}

/** Version in the text, 2 for "arXiv:3306.09999v2"; null without one. */
export function arxivVersion(text: string): number | null {
  const version = match(text)?.[2];
  return version === undefined ? null : Number(version);
}

/** The first arXiv number inside a longer text ("arXiv:3309.54321, submitted"); null without one. */
export function findArxiv(text: string): string | null {
  const found =
    /arxiv[:\s/]*(?:abs\/|pdf\/|org\/(?:abs|pdf)\/)?([a-z-]+\/\d{7}|\d{4}\.\d{4,5})/i.exec(
      text.replace(/arxiv\.org/gi, "arxiv"),
    );
  return found?.[1] === undefined ? null : normalizeArxiv(found[1]);
}
