import { arxivVersion, normalizeArxiv } from "~shared/identifiers/arxiv";
import { normalizeBibcode } from "~shared/identifiers/bibcode";
import { normalizeDoi } from "~shared/identifiers/doi";

import { MAX_TEXT_BYTES, readBibtex, type BrokenEntry, type RawEntry } from "./bibtexReader";
import { cslOf, type Csl, type CslName } from "./citationJs";
import { journalName } from "./journals";
import { shortName } from "./names";
import { plainText, tidyTex, withoutTex } from "./tex";

/** One entry as it will be cited. */
export interface ParsedEntry {
  line: number;
  givenKey: string;
  entryType: string;
  title: string;
  authors: CslName[];
  /** The entry ends its authors with "and others". */
  moreAuthors: boolean;
  year: number | null;
  container: string | null;
  volume: string | null;
  pages: string | null;
  doi: string | null;
  arxiv: string | null;
  arxivVersion: number | null;
  bibcode: string | null;
  shortName: string;
  csl: Csl;
  raw: RawEntry;
  remarks: string[];
}

export interface EntryProblem {
  line: number;
  givenKey: string;
  problem: string;
}

export type BibtexResult = ParsedEntry | EntryProblem;

export function isProblem(result: BibtexResult): result is EntryProblem {
  return "problem" in result;
}

const MAX_AUTHORS = 5000;
/** Time for one name grows with the square of its length. */
const MAX_NAME = 500;
const MAX_TITLE = 2000;
const MAX_CONTAINER = 500;
/** An identifier stands at the head of its field; the rest of a long note is not searched. */
const MAX_IDENTIFIER_TEXT = 1000;
const LONGEST_ARXIV = 40;

/** Fields that say how a paper is cited; the rest stays in the stored text only. */
const CITED_FIELDS = [
  "author",
  "editor",
  "title",
  "booktitle",
  "year",
  "month",
  "date",
  "volume",
  "number",
  "pages",
  "eid",
  "publisher",
  "school",
  "institution",
  "howpublished",
  "series",
  "edition",
  "type",
  "url",
  "note",
] as const;

/**
 * Reads BibTeX text, one result an entry in the order of the text. Never throws on any text:
 * what can't be read is a problem with its line and reason, and the other entries stay.
 */
export function parseBibtex(text: string): BibtexResult[] {
  if (Buffer.byteLength(text, "utf8") > MAX_TEXT_BYTES) {
    return [problemAt(1, "", "The text is larger than 1 MB. Bring it in parts.")];
  }
  const control = /[\u0000-\u0008\u000b\u000e-\u001f]/.exec(text);
  if (control) {
    const line = text.slice(0, control.index).split("\n").length;
    return [problemAt(line, "", "This is no text: it holds control characters.")];
  }
  const entries = readBibtex(text, (word) => journalName(word) !== null);
  if (entries.length === 0) {
    return [
      problemAt(1, "", "No BibTeX entry was found. An entry begins like @article{key, author = …"),
    ];
  }
  return entries.map((entry) => (entry.broken ? brokenProblem(entry) : parseEntry(entry)));
}

/** The stored text of an entry under another key. */
export function entryWithKey(raw: RawEntry, key: string): string {
  return raw.beforeKey + key + raw.afterKey;
}

function problemAt(line: number, givenKey: string, problem: string): EntryProblem {
  return { line, givenKey, problem };
}

function brokenProblem(entry: BrokenEntry): EntryProblem {
  return problemAt(entry.line, entry.givenKey, entry.reason);
}

function parseEntry(raw: RawEntry): BibtexResult {
  const remarks = [...raw.remarks];
  const get = (name: string) => raw.fields.get(name)?.value.trim() ?? "";
  const title = get("title");
  if (!withoutTex(title)) {
    return problemAt(raw.line, raw.givenKey, "The entry has no title.");
  }
  if (title.length > MAX_TITLE) {
    const line = raw.fields.get("title")?.line ?? raw.line;
    const reason = `The title is longer than ${MAX_TITLE} characters.`;
    return problemAt(line, raw.givenKey, reason);
  }
  const { names, more } = splitOthers(get("author") || get("editor"));
  const tooMany = names.length > MAX_AUTHORS;
  if (tooMany || names.some((name) => name.length > MAX_NAME)) {
    const line = raw.fields.get("author")?.line ?? raw.line;
    const reason = tooMany
      ? `More than ${MAX_AUTHORS} authors.`
      : `A name is longer than ${MAX_NAME} characters. Is an “and” missing between two?`;
    return problemAt(line, raw.givenKey, reason);
  }

  const fields = new Map<string, string>();
  for (const name of CITED_FIELDS) {
    const value = get(name);
    if (value) fields.set(name, value);
  }
  if (names.length > 0) fields.set(get("author") ? "author" : "editor", names.join(" and "));
  else fields.delete("author");
  const journal = get("journal") || get("journaltitle");
  const container = journal ? journalText(journal, remarks) : null;

  let csl: Csl;
  try {
    csl = cslOfFields(raw.type, fields);
  } catch (error) {
    return problemAt(raw.line, raw.givenKey, `The entry can't be read: ${firstLine(error)}.`);
  }
  const authors = (csl.author ?? csl.editor ?? []).map(cleanName);
  if (authors.length === 0) remarks.push("The entry names no author.");

  const yearText = /\b(1[89]|20|21)\d{2}\b/.exec(get("year") || get("date"))?.[0];
  const year = yearText ? Number(yearText) : null;
  if (year === null) remarks.push("The entry gives no year.");

  const ids = identifiers(raw, remarks);
  const plainTitle = plainText(csl.title ?? "");
  const place = container ?? csl["container-title"] ?? csl.publisher ?? null;
  const entry: ParsedEntry = {
    line: raw.line,
    givenKey: raw.givenKey,
    entryType: raw.type,
    title: plainTitle || withoutTex(title),
    authors,
    moreAuthors: more,
    year,
    container: place === null ? null : plainText(place).slice(0, MAX_CONTAINER),
    volume: plainOrNull(csl.volume ?? get("volume")),
    pages: plainOrNull((get("pages") || get("eid")).replace(/-{2,}/g, "–")),
    ...ids,
    shortName: shortName(authors, more, year),
    csl,
    raw,
    remarks,
  };
  keepInCsl(entry);
  if (get("crossref")) {
    remarks.push("The entry refers to another one by crossref; what that says is not taken over.");
  }
  if (!ids.doi && !ids.arxiv && !ids.bibcode) {
    remarks.push("The entry has no DOI, arXiv number or bibcode.");
  }
  return entry;
}

/** citation-js on tidied TeX; a field it chokes on is given again without its TeX. */
function cslOfFields(type: string, fields: ReadonlyMap<string, string>): Csl {
  const tidy = new Map([...fields].map(([name, value]) => [name, tidyTex(value)]));
  try {
    return cslOf(type, tidy);
  } catch {
    const bare = [...fields].map(([name, value]): [string, string] => {
      const isNames = name === "author" || name === "editor";
      const cleaned = isNames
        ? splitNames(value).map(withoutTex).filter(Boolean).map(bareName).join(" and ")
        : withoutTex(value);
      return [name, cleaned];
    });
    return cslOf(type, new Map(bare));
  }
}

/** Commas beyond "family, suffix, given" are more than the library's grammar of names takes. */
function bareName(name: string): string {
  return name.split(",").slice(0, 3).join(",").replace(/=/g, " ");
}

/** The registry's own reading goes into the CSL-JSON, so that display and export agree with it. */
function keepInCsl(entry: ParsedEntry): void {
  const { csl } = entry;
  csl.title = entry.title;
  if (csl.author) csl.author = entry.authors;
  if (entry.container && entry.raw.fields.has("journal")) csl["container-title"] = entry.container;
  if (entry.pages) csl.page = entry.pages;
  if (entry.doi) csl.DOI = entry.doi;
  else delete csl.DOI;
}

function splitOthers(value: string): { names: string[]; more: boolean } {
  const names = splitNames(value);
  const more = names.length > 0 && /^(others|et al\.?)$/i.test(names.at(-1)!);
  return { names: (more ? names.slice(0, -1) : names).map(openBracedPerson), more };
}

/** Splits at the word "and" outside braces. */
function splitNames(value: string): string[] {
  const text = value.replace(/[\s~]+/g, (blank) => (blank.includes("~") ? "~" : " "));
  const names: string[] = [];
  let depth = 0;
  let start = 0;
  for (let i = 0; i < text.length; i += 1) {
    if (text[i] === "{") depth += 1;
    else if (text[i] === "}") depth -= 1;
    else if (depth === 0 && text[i] === " " && /^ and /i.test(text.slice(i, i + 5))) {
      names.push(text.slice(start, i).trim());
      start = i + 5;
      i += 4;
    }
  }
  names.push(text.slice(start).trim());
  return names.filter(Boolean);
}

/** {Name, I.} as a whole in braces is a person, not a collaboration with a comma in its name. */
function openBracedPerson(name: string): string {
  const inner = /^\{([^{}]+,\s*(?:\p{Lu}\.?[\s~-]?)+)\}$/u.exec(name)?.[1];
  return inner ?? name;
}

function cleanName(name: CslName): CslName {
  const entries = Object.entries(name).map(([part, text]) => [
    part,
    typeof text === "string" ? plainText(text) : text,
  ]);
  return Object.fromEntries(entries) as CslName;
}

function journalText(value: string, remarks: string[]): string {
  const opened = value.replace(/^\{+\s*(\\[A-Za-z]+)\s*\}+$/, "$1").trim();
  const whole = /^\\([A-Za-z]+)$/.exec(opened)?.[1];
  if (whole) {
    const name = journalName(whole);
    if (name !== null) return name;
    remarks.push(`\\${whole} is no journal macro known here; it stays as it is.`);
    return whole;
  }
  const expanded = value.replace(/\\([A-Za-z]+)\s*/g, (all, word: string) => {
    return journalName(word) ?? all;
  });
  try {
    const csl = cslOf("article", new Map([["journal", tidyTex(expanded)]]));
    return plainText(csl["container-title"] ?? "") || withoutTex(expanded);
  } catch {
    return withoutTex(expanded);
  }
}

function plainOrNull(value: string | undefined): string | null {
  return plainText(withoutTex(String(value ?? ""))) || null;
}

type Identifiers = Pick<ParsedEntry, "doi" | "arxiv" | "arxivVersion" | "bibcode">;

function identifiers(raw: RawEntry, remarks: string[]): Identifiers {
  const get = (name: string) =>
    (raw.fields.get(name)?.value ?? "")
      .slice(0, MAX_IDENTIFIER_TEXT)
      .replace(/\\([_&%#$])/g, "$1")
      .replace(/[{}]/g, "")
      .trim();

  const doiGiven = get("doi");
  let doi = doiGiven ? normalizeDoi(doiGiven) : null;
  if (doiGiven && doi === null)
    remarks.push(`“${clip(doiGiven)}” is no DOI; it stays in the text.`);
  for (const name of ["url", "ee", "adsurl", "note", "howpublished"]) {
    const inText = /\b(?:doi\.org\/|doi:\s*)(10\.\d{4,9}\/[^\s,;]+)/i.exec(get(name))?.[1];
    if (doi === null && inText) doi = normalizeDoi(inText.replace(/[.)\]]+$/, ""));
  }

  const archive = get("archiveprefix") || get("eprinttype");
  let arxiv: string | null = null;
  let version: number | null = null;
  const take = (text: string) => {
    if (arxiv !== null) return;
    const number = normalizeArxiv(text);
    if (number === null || number.length > LONGEST_ARXIV) return;
    arxiv = number;
    version = arxivVersion(text);
  };
  const eprint = get("eprint");
  if (eprint && (!archive || /^arxiv$/i.test(archive))) {
    const inClass = get("primaryclass");
    take(eprint);
    // Numbers before 2007 are sometimes given without their archive: 0601001 with its class.
    if (arxiv === null && /^\d{7}(v\d+)?$/.test(eprint) && inClass) {
      take(`${inClass.split(".")[0]}/${eprint}`);
    }
    if (arxiv === null) remarks.push(`“${clip(eprint)}” is no arXiv number; it stays in the text.`);
  }
  for (const name of ["arxiv", "arxivid"]) if (get(name)) take(get(name));
  for (const name of ["journal", "pages", "eid", "note", "howpublished", "url", "ee"]) {
    const found =
      /arxiv(?:\.org\/(?:abs|pdf)\/|[\s:]+(?:e-?prints?[\s,:]+)?(?:arxiv:)?)([a-z-]+(?:\.[A-Z]{2})?\/\d{7}(?:v\d+)?|\d{4}\.\d{4,5}(?:v\d+)?)/i.exec(
        get(name),
      )?.[1];
    if (found) take(found);
  }

  let bibcode: string | null = null;
  for (const candidate of [get("bibcode"), ...bibcodesInAddresses(get), raw.givenKey]) {
    bibcode ??= candidate ? normalizeBibcode(candidate) : null;
  }
  return { doi, arxiv, arxivVersion: version, bibcode };
}

function bibcodesInAddresses(get: (name: string) => string): string[] {
  return ["adsurl", "url"].flatMap((name) => {
    const last = /\/abs\/([^/\s]+)/.exec(get(name))?.[1];
    if (!last) return [];
    try {
      return [decodeURIComponent(last)];
    } catch {
      return [last];
    }
  });
}

function firstLine(error: unknown): string {
  const text = error instanceof Error ? error.message : String(error);
  return clip(text.split("\n")[0] ?? "");
}

function clip(text: string): string {
  return text.length > 80 ? `${text.slice(0, 80)}…` : text;
}
