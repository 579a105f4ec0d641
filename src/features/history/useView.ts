import { useCallback, useMemo } from "react";
import { useLocalSearchParams, useRouter } from "expo-router";

export interface View {
  upperAxis: "age" | "frequency";
  logarithmic: boolean;
  /** Number of the record that is looked at. */
  point: string | null;
  setUpperAxis(axis: "age" | "frequency"): void;
  setLogarithmic(logarithmic: boolean): void;
  setPoint(number: string | null): void;
}

/** How the chart is drawn and what is looked at, kept in the address. */
export function useView(): View {
  const params = useLocalSearchParams<{ axis?: string; fraction?: string; point?: string }>();
  const router = useRouter();
  const set = useCallback(
    (part: Record<string, string | undefined>) => router.setParams(part),
    [router],
  );
  const { axis, fraction, point } = params;
  return useMemo(
    () => ({
      upperAxis: axis === "frequency" ? "frequency" : "age",
      logarithmic: fraction === "log",
      point: point ?? null,
      setUpperAxis: (next) => set({ axis: next === "age" ? undefined : next }),
      setLogarithmic: (next) => set({ fraction: next ? "log" : undefined }),
      setPoint: (next) => set({ point: next ?? undefined }),
    }),
    [axis, fraction, point, set],
  );
}
