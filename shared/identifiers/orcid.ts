/** ORCID identifiers: sixteen digits, the last a check character. */

/**
 * An ORCID in its one form, 0000-0002-1825-0097.
 *
 * @returns Null when the text is no ORCID or its check character (ISO 7064 MOD 11-2) is wrong.
 */
export function normalizeOrcid(text: string): string | null {
  const bare = text
    .trim()
    .replace(/^(?:https?:\/\/)?(?:www\.)?orcid\.org\//i, "")
    .replace(/[-\s]/g, "")
    .toUpperCase();
  if (!/^\d{15}[\dX]$/.test(bare)) return null;
  if (checkCharacter(bare.slice(0, 15)) !== bare[15]) return null;
  return (bare.match(/.{4}/g) ?? []).join("-");
}

function checkCharacter(digits: string): string {
  let total = 0;
  for (const digit of digits) total = ((total + Number(digit)) * 2) % 11;
  const rest = (12 - total) % 11;
  return rest === 10 ? "X" : String(rest);
}

/** Every ORCID that stands somewhere in a text, in its one form, each once. */
export function orcidsIn(text: string): string[] {
  const found = [...text.matchAll(/(?<![\dX])\d{4}-?\d{4}-?\d{4}-?\d{3}[\dX](?![\dX])/gi)]
    .map(([written]) => normalizeOrcid(written))
    .filter((orcid) => orcid !== null);
  return [...new Set(found)];
}
