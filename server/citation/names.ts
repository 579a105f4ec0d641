import type { CslName } from "./citationJs";

/** "Tarrowin et al. 2025", "Osuwande & Vask 2024", "Halcyon Team 2035". */
export function shortName(
  authors: readonly CslName[],
  moreAuthors: boolean,
  year: number | null,
): string {
  const [first, second] = authors.map(familyName);
  let who: string;
  if (first === undefined) who = "Anonymous";
  else if (authors.length === 2 && !moreAuthors) who = `${first} & ${second}`;
  else who = authors.length > 1 || moreAuthors ? `${first} et al.` : first;
  return year === null ? who : `${who} ${year}`;
}

/** Family name with its particle: "van der Zee". */
export function familyName(name: CslName): string {
  if (name.literal) return name.literal;
  return [name["dropping-particle"], name["non-dropping-particle"], name.family ?? name.given]
    .filter(Boolean)
    .join(" ");
}

/** "van der Zee, M.", as a reference list has it. */
export function listName(name: CslName): string {
  const family = familyName(name);
  const given = name.family ? name.given : undefined;
  return [family, name.suffix, given].filter(Boolean).join(", ");
}

/** Letters of the ASCII alphabet only: "Müllerová" → "Mullerova". */
export function asciiLetters(text: string): string {
  return text
    .replace(/ß/g, "ss")
    .replace(/[æÆ]/g, (c) => (c === "æ" ? "ae" : "Ae"))
    .replace(/[œŒ]/g, (c) => (c === "œ" ? "oe" : "Oe"))
    .replace(/[øØ]/g, (c) => (c === "ø" ? "o" : "O"))
    .replace(/[łŁ]/g, (c) => (c === "ł" ? "l" : "L"))
    .replace(/[đĐðÐ]/g, (c) => (c === "đ" || c === "ð" ? "d" : "D"))
    .replace(/[þÞ]/g, (c) => (c === "þ" ? "th" : "Th"))
    .replace(/ı/g, "i")
    .normalize("NFKD")
    .replace(/[^A-Za-z]/g, "");
}

/** Stem of the registry's citation key: first author and year, ASCII, no blanks. */
export function keyStem(authors: readonly CslName[], year: number | null): string {
  const words = (authors[0] ? familyName(authors[0]) : "")
    .split(/[\s,]+/)
    .filter((word) => !/^(the|collaboration|team|consortium|group)$/i.test(word));
  const name = words.map((word) => word.charAt(0).toUpperCase() + word.slice(1)).join("");
  return (asciiLetters(name).slice(0, 40) || "Paper") + (year ?? "Undated");
}

/** 0 → "", 1 → "b", 25 → "z", 26 → "aa", …: the first paper keeps the bare stem. */
export function keyLetter(nth: number): string {
  if (nth === 0) return "";
  let letters = "";
  for (let n = nth + 1; n > 0; n = Math.floor((n - 1) / 26)) {
    letters = String.fromCharCode(97 + ((n - 1) % 26)) + letters;
  }
  return letters;
}

/** The reference list's authors; "and others" last when the entry says so. */
export function authorList(authors: readonly CslName[], moreAuthors: boolean): string[] {
  const names = authors.map(listName);
  return moreAuthors ? [...names, "and others"] : names;
}
