/** A filter in words, for headers, empty states and announcements. */
import { FAMILY_NAMES } from "~shared/methods/vocabulary";
import {
  KIND_WORDS,
  QUANTITY_WORDS,
  VERSION_WORDS,
  WEIGHTING_WORDS,
  tagName,
} from "~shared/statement/words";

import { canonicalFilter } from "./address";
import type { ConstraintFilter } from "./filter";

/** Lower case at the start, except for names such as CMB, Lyα and 21-cm. */
function inSentence(words: string): string {
  return /^[A-Z][a-z-]*(?:[\s,]|$)/.test(words)
    ? words.charAt(0).toLowerCase() + words.slice(1)
    : words;
}

function either(words: readonly string[]): string {
  const lower = words.map(inSentence);
  return lower.length < 2
    ? (lower[0] ?? "")
    : `${lower.slice(0, -1).join(", ")} or ${lower[lower.length - 1]}`;
}

function between(from: number | undefined, to: number | undefined): string {
  if (from === undefined) return `up to ${to}`;
  return to === undefined ? `from ${from}` : `${from} to ${to}`;
}

/** "Family: damping wing; redshift 6 to 8", or "All constraints". */
export function filterWords(filter: ConstraintFilter): string {
  const kept = canonicalFilter(filter);
  const parts: (string | null)[] = [
    kept.text === undefined ? null : `text "${kept.text.replace(/\s+/g, " ")}"`,
    kept.families ? `family: ${either(kept.families.map((word) => FAMILY_NAMES[word]))}` : null,
    kept.tags ? `method: ${either(kept.tags.map(tagName))}` : null,
    kept.quantities
      ? `quantity: ${either(kept.quantities.map((word) => QUANTITY_WORDS[word]))}`
      : null,
    kept.kinds ? `statement: ${either(kept.kinds.map((word) => KIND_WORDS[word]))}` : null,
    kept.weightings
      ? `weighting: ${either(kept.weightings.map((word) => WEIGHTING_WORDS[word]))}`
      : null,
    kept.versions
      ? `version read: ${either(kept.versions.map((word) => VERSION_WORDS[word]))}`
      : null,
    kept.states ? `state: ${either(kept.states)}` : null,
    kept.zFrom === undefined && kept.zTo === undefined
      ? null
      : `redshift ${between(kept.zFrom, kept.zTo)}`,
    kept.yearFrom === undefined && kept.yearTo === undefined
      ? null
      : `year ${between(kept.yearFrom, kept.yearTo)}`,
  ];
  const words = parts.filter((part) => part !== null).join("; ");
  return words === "" ? "All constraints" : words.charAt(0).toUpperCase() + words.slice(1);
}
