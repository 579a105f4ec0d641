/** A filter as the parameters of an address, and back: once, for the client's pages and the downloads. */
import { currentTags, METHOD_FAMILIES, methodTags } from "~shared/methods/vocabulary";
import { RECORD_STATES } from "~shared/review/states";
import { QUANTITIES, STATEMENT_KINDS, VERSIONS_READ, WEIGHTINGS } from "~shared/statement/fields";

import { CONSTRAINT_SORTS } from "./filter";
import type { CanonicalFilter, ConstraintFilter, ConstraintSort } from "./filter";

export type FilterParams = Record<string, string>;

/** What an address parser hands over: a value, several of one name, or nothing. */
export type AddressParams = Record<string, string | readonly string[] | null | undefined>;

const LONGEST_TEXT = 200;

function canonicalList<T extends string>(
  order: readonly T[],
  given: readonly string[] | null | undefined,
): T[] | undefined {
  if (!given) return undefined;
  const kept = order.filter((word) => given.includes(word));
  return kept.length === 0 ? undefined : kept;
}

function finite(value: number | null | undefined): number | undefined {
  if (value === null || value === undefined || !Number.isFinite(value)) return undefined;
  return value === 0 ? 0 : value; // −0 would not survive an address
}

function redshift(value: number | null | undefined): number | undefined {
  const kept = finite(value);
  return kept === undefined || kept < 0 || kept > 1e6 ? undefined : kept;
}

function year(value: number | null | undefined): number | undefined {
  const kept = finite(value);
  return kept === undefined || !Number.isInteger(kept) || kept < 1 || kept > 9999
    ? undefined
    : kept;
}

/** The one form of a filter: nothing open, nothing empty, nothing unknown, lists in the vocabulary's order. */
export function canonicalFilter(filter: ConstraintFilter): CanonicalFilter {
  const text = filter.text?.trim().slice(0, LONGEST_TEXT).trim();
  const entries = {
    text: text === "" ? undefined : text,
    families: canonicalList(METHOD_FAMILIES, filter.families),
    tags: canonicalList(
      methodTags().map(({ tag }) => tag),
      filter.tags && currentTags(filter.tags),
    ),
    quantities: canonicalList(QUANTITIES, filter.quantities),
    kinds: canonicalList(STATEMENT_KINDS, filter.kinds),
    weightings: canonicalList(WEIGHTINGS, filter.weightings),
    versions: canonicalList(VERSIONS_READ, filter.versions),
    states: canonicalList(RECORD_STATES, filter.states),
    zFrom: redshift(filter.zFrom),
    zTo: redshift(filter.zTo),
    yearFrom: year(filter.yearFrom),
    yearTo: year(filter.yearTo),
  };
  return Object.fromEntries(
    Object.entries(entries).filter(([, value]) => value !== undefined),
  ) as CanonicalFilter;
}

/** Whether the filter lets everything through. */
export function isEmptyFilter(filter: ConstraintFilter): boolean {
  return Object.keys(canonicalFilter(filter)).length === 0;
}

function rangeText(from: number | undefined, to: number | undefined): string | undefined {
  if (from === undefined && to === undefined) return undefined;
  return `${plain(from)}-${plain(to)}`;
}

/** Without an exponent, whose minus would read as the dash between two ends. */
function plain(value: number | undefined): string {
  if (value === undefined) return "";
  const text = String(value);
  return text.includes("e") ? value.toFixed(20).replace(/\.?0+$/, "") : text;
}

/**
 * A filter as address parameters: `q`, `family`, `tag`, `quantity`, `kind`, `weighting`, `version`,
 * `state` (comma lists), `z` and `year` as "6-8" with either end open, `sort`. Empty entries are left out.
 */
export function filterToParams(
  filter: ConstraintFilter,
  sort?: ConstraintSort | null,
): FilterParams {
  const kept = canonicalFilter(filter);
  const entries: [string, string | undefined][] = [
    ["q", kept.text],
    ["family", kept.families?.join(",")],
    ["tag", kept.tags?.join(",")],
    ["quantity", kept.quantities?.join(",")],
    ["kind", kept.kinds?.join(",")],
    ["weighting", kept.weightings?.join(",")],
    ["version", kept.versions?.join(",")],
    ["state", kept.states?.join(",")],
    ["z", rangeText(kept.zFrom, kept.zTo)],
    ["year", rangeText(kept.yearFrom, kept.yearTo)],
    ["sort", sort ?? undefined],
  ];
  return Object.fromEntries(entries.filter((entry): entry is [string, string] => !!entry[1]));
}

/** The parameters as the part of an address behind the question mark, with it; "" when there are none. */
export function filterToQuery(filter: ConstraintFilter, sort?: ConstraintSort | null): string {
  const query = new URLSearchParams(filterToParams(filter, sort)).toString();
  return query === "" ? "" : `?${query}`;
}

function one(value: AddressParams[string]): string | undefined {
  if (typeof value === "string") return value;
  return Array.isArray(value)
    ? value.filter((part) => typeof part === "string").join(",")
    : undefined;
}

function list(value: AddressParams[string]): string[] | undefined {
  return one(value)
    ?.split(",")
    .map((word) => word.trim());
}

function range(value: AddressParams[string]): { from?: number; to?: number } {
  const ends = /^\s*(\d*\.?\d*)\s*[-\u2013]\s*(\d*\.?\d*)\s*$/.exec(one(value) ?? "");
  const number = (text: string | undefined) =>
    text === undefined || !/\d/.test(text) ? undefined : Number(text);
  if (ends) return { from: number(ends[1]), to: number(ends[2]) };
  const single = /^\s*(\d+\.?\d*|\.\d+)\s*$/.exec(one(value) ?? "")?.[1];
  return single === undefined ? {} : { from: Number(single), to: Number(single) };
}

/** Reads address parameters; what it does not know it leaves out, so an old or mistyped address still opens. */
export function paramsToFilter(params: AddressParams): {
  filter: CanonicalFilter;
  sort: ConstraintSort | null;
} {
  const z = range(params.z);
  const years = range(params.year);
  const filter = canonicalFilter({
    text: Array.isArray(params.q) ? params.q.join(" ") : one(params.q),
    families: list(params.family) as never,
    tags: list(params.tag),
    quantities: list(params.quantity) as never,
    kinds: list(params.kind) as never,
    weightings: list(params.weighting) as never,
    versions: list(params.version) as never,
    states: list(params.state) as never,
    zFrom: z.from,
    zTo: z.to,
    yearFrom: years.from,
    yearTo: years.to,
  });
  const sort = CONSTRAINT_SORTS.find((word) => word === one(params.sort)) ?? null;
  return { filter, sort };
}
