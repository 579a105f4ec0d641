/** Bibcodes: nineteen characters, year first, the first author's initial last. */

const BIBCODE = /^\d{4}[A-Za-z&.]{5}[A-Za-z0-9.]{4}[A-Za-z0-9.][A-Za-z0-9.]{4}[A-Za-z.:]$/;

/** The bibcode in the text, also from the end of an abstract's address; null when there is none. */
export function normalizeBibcode(text: string): string | null {
  const trimmed = text.trim().replace(/\/(?:abstract)?$/, "");
  let last = trimmed.slice(trimmed.lastIndexOf("/") + 1);
  try {
    last = decodeURIComponent(last); // "A&A" is written A%26A in an address
  } catch {
    return null;
  }
  return BIBCODE.test(last) ? last : null;
}
