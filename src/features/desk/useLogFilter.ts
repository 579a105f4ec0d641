import { useLocalSearchParams, useRouter } from "expo-router";
import { useMemo } from "react";

const NAMES = ["person", "about", "kind", "from", "to"] as const;
export type LogFilterName = (typeof NAMES)[number];
export type LogFilter = Partial<Record<LogFilterName, string>>;

const one = (value: string | string[] | undefined): string =>
  ((Array.isArray(value) ? value[0] : value) ?? "").trim();

/** What the log is narrowed to, kept in the page's address: a link or a reload keeps it. */
export function useLogFilter() {
  const params = useLocalSearchParams();
  const router = useRouter();
  const key = JSON.stringify(params);
  return useMemo(() => {
    const filter: LogFilter = {};
    for (const name of NAMES) {
      const value = one(params[name]);
      if (value !== "") filter[name] = value;
    }
    const asked = Number(one(params.before));
    const query = new URLSearchParams(filter as Record<string, string>).toString();
    return {
      filter,
      /** The page of the list: events older than this one; null for the newest. */
      before: Number.isInteger(asked) && asked > 0 ? asked : null,
      /** The filter as it stands behind an address, with its question mark. */
      query: query === "" ? "" : `?${query}`,
      /** Narrows and begins at the newest again. */
      set: (changes: LogFilter): void =>
        router.setParams({
          ...Object.fromEntries(
            Object.entries(changes).map(([name, value]) => [name, value?.trim() || undefined]),
          ),
          before: undefined,
        }),
      clear: (): void =>
        router.setParams({
          ...Object.fromEntries(NAMES.map((name) => [name, undefined])),
          before: undefined,
        }),
      goBefore: (before: number | null): void =>
        router.setParams({ before: before === null ? undefined : String(before) }),
    };
    // The parameters are compared by content: their object is new at every render.
    // eslint-disable-next-line react-hooks/exhaustive-deps
  }, [key, router]);
}
