/** What a newer source would change in a table, row by row, in words. */
import { byRecordNumber } from "./overlapClusters";

export interface ComparedRow {
  /** FL-0042 */
  readonly number: string;
  /** FL-0042.3 */
  readonly revision: string;
  readonly state: string;
  readonly included: boolean;
  readonly reason: string | null;
}

export interface RowChange {
  readonly number: string;
  readonly words: string;
}

/** Differences in the order of record numbers; rows that stay as they are don't appear. */
export function rowChanges(then: readonly ComparedRow[], now: readonly ComparedRow[]): RowChange[] {
  const before = new Map(then.map((row) => [row.number, row]));
  const after = new Map(now.map((row) => [row.number, row]));
  return [...new Set([...before.keys(), ...after.keys()])]
    .sort(byRecordNumber)
    .flatMap((number) => {
      const words = changeWords(before.get(number) ?? null, after.get(number) ?? null);
      return words === null ? [] : [{ number, words }];
    });
}

function changeWords(then: ComparedRow | null, now: ComparedRow | null): string | null {
  if (then === null && now !== null) {
    return now.included ? "New, and in." : `New, and out: ${now.reason ?? "no reason given"}.`;
  }
  if (now === null) return "No longer among the records that match.";
  if (then === null) return null;
  const parts: string[] = [];
  if (then.revision !== now.revision)
    parts.push(`Revised: ${now.revision} in place of ${then.revision}.`);
  if (then.state !== now.state) parts.push(`Now ${now.state}.`);
  if (then.included && !now.included)
    parts.push(`Would go out: ${now.reason ?? "no reason given"}.`);
  else if (!then.included && now.included) parts.push("Would come in.");
  else if (!now.included && then.reason !== now.reason) {
    parts.push(`Out for another reason: ${now.reason ?? "none given"}.`);
  }
  return parts.length === 0 ? null : parts.join(" ");
}
