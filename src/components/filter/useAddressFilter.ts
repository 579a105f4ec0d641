import { useMemo } from "react";
import { useLocalSearchParams, useRouter } from "expo-router";

import { filterToParams, filterToQuery, paramsToFilter } from "~shared/filter/address";
import type { CanonicalFilter, ConstraintFilter, ConstraintSort } from "~shared/filter/filter";

const NAMES = [
  "q",
  "family",
  "tag",
  "quantity",
  "kind",
  "weighting",
  "version",
  "state",
  "z",
  "year",
  "sort",
];

/** The filter that stands in the page's address: a link or a reload keeps it. */
export function useAddressFilter(): {
  filter: CanonicalFilter;
  sort: ConstraintSort | null;
  /** Page of the list, from 1. */
  page: number;
  /** The filter as it stands behind an address, with its question mark. */
  query: string;
  setFilter(filter: ConstraintFilter): void;
  setSort(sort: ConstraintSort | null): void;
  setPage(page: number): void;
} {
  const params = useLocalSearchParams();
  const router = useRouter();
  const key = JSON.stringify(params);
  return useMemo(() => {
    const { filter, sort } = paramsToFilter(params);
    const asked = Number(params.page);
    const page = Number.isInteger(asked) && asked > 0 ? asked : 1;
    function go(next: ConstraintFilter, nextSort: ConstraintSort | null, nextPage: number) {
      const open = Object.fromEntries(NAMES.map((name) => [name, undefined]));
      router.setParams({
        ...open,
        ...filterToParams(next, nextSort),
        page: nextPage > 1 ? String(nextPage) : undefined,
      });
    }
    return {
      filter,
      sort,
      page,
      query: filterToQuery(filter, sort),
      setFilter: (next) => go(next, sort, 1),
      setSort: (next) => go(filter, next, 1),
      setPage: (next) => go(filter, sort, next),
    };
    // The parameters are compared by content: their object is new at every render.
    // eslint-disable-next-line react-hooks/exhaustive-deps
  }, [key, router]);
}
