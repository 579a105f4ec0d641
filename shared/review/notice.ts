/** What can be recorded about a record after its approval, and the state that follows. */
import type { RecordState } from "./states";

export const NOTICE_KINDS = ["erratum", "superseded", "withdrawn"] as const;
export type NoticeKind = (typeof NOTICE_KINDS)[number];

/** Characters of a notice's reason. */
export const NOTICE_REASON = { shortest: 10, longest: 1000 } as const;

/** How a list says that a notice stands. */
export const NOTICE_WORDS: Record<NoticeKind, string> = {
  erratum: "Erratum",
  superseded: "Superseded",
  withdrawn: "Withdrawn",
};

/**
 * The state of a record from the notices that hold: an erratum leaves it current until a new
 * revision corrects it, and nothing outweighs a withdrawal.
 */
export function stateFromNotices(kinds: readonly NoticeKind[]): RecordState {
  if (kinds.includes("withdrawn")) return "withdrawn";
  return kinds.includes("superseded") ? "superseded" : "current";
}
