import type { AsUsed } from "~shared/statement/asUsed";

/**
 * Whether two statements of one paper stand at separate redshifts. One paper cuts one sample into bins: its
 * parts at separate redshifts are different data. False while a redshift is open.
 */
export function atSeparateRedshifts(a: AsUsed | null, b: AsUsed | null): boolean {
  const [first, second] = [redshiftSpan(a), redshiftSpan(b)];
  if (!first || !second) return false;
  if (first.low === first.high || second.low === second.high) {
    return first.high < second.low || second.high < first.low;
  }
  // Neighbouring bins may touch.
  return first.high <= second.low || second.high <= first.low;
}

function redshiftSpan(used: AsUsed | null): { low: number; high: number } | null {
  const low = used?.zLow ?? used?.z;
  const high = used?.zHigh ?? used?.z;
  return low === null || low === undefined || high === null || high === undefined
    ? null
    : { low, high };
}
