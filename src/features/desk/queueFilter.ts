import type { QueueItemPartsFragment } from "~graphql/generated/graphql";
import { OVERDUE_DAYS } from "~shared/review/states";

export type QueueItem = QueueItemPartsFragment;

/** What the queue can be narrowed to; "free" is what this editor could claim now. */
export const QUEUE_PARTS = ["all", "free", "mine", "others", "barred"] as const;
export type QueuePart = (typeof QUEUE_PARTS)[number];

export const PART_WORDS: Record<QueuePart, string> = {
  all: "All",
  free: "Free to claim",
  mine: "Mine",
  others: "With others",
  barred: "Not for me",
};

const DAY_MS = 86_400_000;

/** The one part, besides "all", that a submission belongs to. */
export function partOf(item: QueueItem): Exclude<QueuePart, "all"> {
  if (item.claimedByMe) return "mine";
  if (item.barredBecause) return "barred";
  return item.claimedUntil ? "others" : "free";
}

/** Whether it has waited longer than it should. What somebody is reading waits no longer. */
export function isOverdue(item: QueueItem, now: Date): boolean {
  return (
    item.claimedUntil === null &&
    now.getTime() - new Date(item.submittedAt).getTime() > OVERDUE_DAYS * DAY_MS
  );
}

/** Letters without case and accents, so that "Muller" finds "Müller". */
function folded(text: string): string {
  return text.normalize("NFKD").replace(/\p{M}/gu, "").toLowerCase();
}

/** Whether every word stands in one of these texts. */
export function hasWords(texts: readonly (string | null | undefined)[], words: string): boolean {
  const where = folded(texts.filter(Boolean).join(" "));
  return folded(words)
    .split(/\s+/)
    .every((word) => where.includes(word));
}

/** Submissions with these words in author, title, number or place, oldest first. */
export function searched(items: readonly QueueItem[], words: string): QueueItem[] {
  return items
    .filter(({ citation, number, ordinal, place, page }) =>
      hasWords(
        [
          ...citation.authors,
          citation.shortName,
          citation.title,
          citation.key,
          `${number}.${ordinal}`,
          place,
          page ? `page ${page}` : null,
        ],
        words,
      ),
    )
    .sort((a, b) => a.submittedAt.localeCompare(b.submittedAt));
}

/** How many belong to each part. */
export function counted(items: readonly QueueItem[]): Record<QueuePart, number> {
  const counts = { all: items.length, free: 0, mine: 0, others: 0, barred: 0 };
  for (const item of items) counts[partOf(item)] += 1;
  return counts;
}
