/** Digital object identifiers. */

/** In the order they are met before a DOI: address, then prefix. */
const BEFORE = /^(?:https?:\/\/)?(?:dx\.|www\.)?(?:doi\.org\/)?(?:doi:?\s*)?/i;

/**
 * A DOI in its one form: lower case, without address or prefix. Case does not matter in a DOI.
 *
 * @param text - "10.5555/ABC", "doi:10.5555/abc", "https://doi.org/10.5555/abc".
 * @returns Null when the text is no DOI.
 */
export function normalizeDoi(text: string): string | null {
  let bare = text.trim().replace(BEFORE, "");
  if (/%[0-9a-f]{2}/i.test(bare)) {
    try {
      bare = decodeURIComponent(bare);
    } catch {
      // A stray percent sign belongs to the DOI itself.
    }
  }
  bare = bare.replace(/\\_/g, "_").replace(/[.,;]+$/, "");
  return /^10\.\d{4,9}(?:\.\d+)*\/\S+$/.test(bare) && bare.length <= 255
    ? bare.toLowerCase()
    : null;
}
