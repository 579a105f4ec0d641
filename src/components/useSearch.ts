import { useLocalSearchParams, useRouter } from "expo-router";
import { useEffect, useState } from "react";

const SEARCH_DELAY_MS = 250;

const first = (value: string | string[] | undefined): string =>
  (Array.isArray(value) ? value[0] : value) ?? "";

/** Words and part of a list, kept in the page's address, so that a reload and a link find the same. */
export function useSearch<P extends string>(parts: readonly P[], all: P) {
  const router = useRouter();
  const params = useLocalSearchParams();
  const q = first(params.q);
  const asked = first(params.show) as P;
  const [typed, setTyped] = useState(q);
  useEffect(() => {
    const timer = setTimeout(() => {
      if (typed.trim() !== q) router.setParams({ q: typed.trim() || undefined });
    }, SEARCH_DELAY_MS);
    return () => clearTimeout(timer);
  }, [typed, q, router]);
  return {
    /** As the address has it; what is typed gets there after a moment. */
    q,
    typed,
    setTyped,
    part: parts.includes(asked) ? asked : all,
    setPart: (part: P) => router.setParams({ show: part === all ? undefined : part }),
    clear: () => {
      setTyped("");
      router.setParams({ q: undefined, show: undefined });
    },
  };
}
