import type { Csl, CslName } from "./citationJs";

/** Bounds on what a service may send; beyond them it is no citation. */
const MOST_AUTHORS = 5000;
const LONGEST_NAME = 300;
const LONGEST_TEXT = 2000;

const TEXTS = [
  "title",
  "container-title",
  "publisher",
  "volume",
  "issue",
  "page",
  "number",
  "edition",
  "DOI",
] as const;
const NAME_PARTS = [
  "family",
  "given",
  "non-dropping-particle",
  "dropping-particle",
  "suffix",
  "literal",
] as const;

type Unknown = Readonly<Record<string, unknown>>;

function isObject(value: unknown): value is Unknown {
  return typeof value === "object" && value !== null && !Array.isArray(value);
}

/** Text without control characters and without markup beyond italics, bold, sub and superscript. */
function text(value: unknown, longest = LONGEST_TEXT): string | null {
  // Some services send a list of titles; the first is the one that is cited.
  const one: unknown = Array.isArray(value) ? value[0] : value;
  if (typeof one !== "string" && typeof one !== "number") return null;
  const plain = String(one)
    .replace(/<(?!\/?(?:i|b|sub|sup)>)\/?[a-z][^<>]*>/gi, "")
    .replace(/[\u0000-\u001f\u007f-\u009f\s]+/g, " ")
    .trim();
  return plain === "" || plain.length > longest ? null : plain;
}

function names(value: unknown): CslName[] {
  if (!Array.isArray(value)) return [];
  return value.slice(0, MOST_AUTHORS).flatMap((one): CslName[] => {
    if (!isObject(one)) return [];
    const parts = NAME_PARTS.flatMap((part) => {
      const found = text(one[part], LONGEST_NAME);
      return found === null ? [] : [[part, found] as const];
    });
    // A collaboration is called "name" by some.
    const literal = text(one.name, LONGEST_NAME);
    if (parts.length === 0) return literal === null ? [] : [{ literal }];
    return [Object.fromEntries(parts)];
  });
}

/** The year alone: a paper is cited by it, and a day in BibTeX's month reads badly. */
function issued(value: unknown): Csl["issued"] | null {
  if (!isObject(value) || !Array.isArray(value["date-parts"])) return null;
  const [parts]: unknown[] = value["date-parts"];
  const year = Number(Array.isArray(parts) ? parts[0] : Number.NaN);
  return Number.isInteger(year) && year >= 1800 && year <= 2199 ? { "date-parts": [[year]] } : null;
}

/**
 * What a citation needs of a service's answer, each part held against what CSL-JSON allows; the
 * rest, abstracts and references among it, is left behind.
 *
 * @param answer - Parsed JSON: one CSL item, or a list whose first is taken.
 * @returns Null when it has no title.
 */
export function tidyCsl(answer: unknown): Csl | null {
  const item: unknown = Array.isArray(answer) ? answer[0] : answer;
  if (!isObject(item)) return null;
  const type = typeof item.type === "string" && /^[a-z-]{2,40}$/.test(item.type) ? item.type : "";
  const csl: Csl = { id: "lookedUp", type: type || "article-journal" };
  for (const name of TEXTS) {
    const found = text(item[name]);
    if (found !== null) csl[name] = found;
  }
  const authors = names(item.author);
  const editors = names(item.editor);
  if (authors.length > 0) csl.author = authors;
  if (editors.length > 0) csl.editor = editors;
  const date = issued(item.issued) ?? issued(item.published);
  if (date) csl.issued = date;
  return csl.title === undefined ? null : csl;
}
