/** A filter asked of one record at hand; the database asks the same of its index columns. */
import { currentTags } from "~shared/methods/vocabulary";
import type { Quantity, StatementKind, VersionRead, Weighting } from "~shared/statement/fields";

import type { RecordState } from "~shared/review/states";

import { searchWords, STATES_UNLESS_SAID, type ConstraintFilter } from "./filter";

/** What a record is found by. Word lists have commas on both ends: ",dampingWing,other,". */
export interface FilteredRecord {
  readonly quantity: Quantity | null;
  readonly kind: StatementKind | null;
  readonly weighting: Weighting | null;
  readonly versionRead: VersionRead | null;
  readonly zUsed: number | null;
  readonly year: number | null;
  readonly families: string;
  readonly tags: string;
  readonly searchText: string;
  /** Current unless said. */
  readonly state?: RecordState;
}

/** Without case and accents, as the database compares text. */
function folded(text: string): string {
  return text
    .normalize("NFKD")
    .replace(/\p{M}+/gu, "")
    .toLowerCase();
}

function within(value: number | null, from: number | null, to: number | null): boolean {
  if (from === null && to === null) return true;
  return value !== null && value >= (from ?? -Infinity) && value <= (to ?? Infinity);
}

function oneOf<T>(value: T | null, words: readonly T[] | null | undefined): boolean {
  return !words || words.length === 0 || (value !== null && words.includes(value));
}

function anyWord(list: string, words: readonly string[] | null | undefined): boolean {
  return !words || words.length === 0 || words.some((word) => list.includes(`,${word},`));
}

/** Whether the record matches every part of the filter. */
export function matchesFilter(record: FilteredRecord, filter: ConstraintFilter): boolean {
  const text = folded(record.searchText);
  const states = filter.states && filter.states.length > 0 ? filter.states : STATES_UNLESS_SAID;
  return (
    anyWord(record.families, filter.families) &&
    anyWord(record.tags, filter.tags && currentTags(filter.tags)) &&
    oneOf(record.quantity, filter.quantities) &&
    oneOf(record.kind, filter.kinds) &&
    oneOf(record.weighting, filter.weightings) &&
    oneOf(record.versionRead, filter.versions) &&
    states.includes(record.state ?? "current") &&
    within(record.zUsed, filter.zFrom ?? null, filter.zTo ?? null) &&
    within(record.year, filter.yearFrom ?? null, filter.yearTo ?? null) &&
    searchWords(filter).every((word) => text.includes(folded(word)))
  );
}
