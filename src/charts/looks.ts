import type { Colors } from "@/theme/tokens";

/** The three places a model history can take; the first one carries the fog. */
export type HistoryLook = "first" | "second" | "third";

export const HISTORY_LOOKS: readonly HistoryLook[] = ["first", "second", "third"];

/** Line of a history: told apart by its dash as well as by its colour. */
export function historyLine(look: HistoryLook, colors: Colors) {
  switch (look) {
    case "first":
      return { stroke: colors.primary, strokeWidth: 2.75, strokeDasharray: undefined };
    case "second":
      return { stroke: colors.ember, strokeWidth: 2, strokeDasharray: "7 4" };
    case "third":
      return { stroke: colors.ink, strokeWidth: 1.75, strokeDasharray: "1.5 4" };
  }
}
