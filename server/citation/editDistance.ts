/** Edit distance of two strings (insert, delete, replace), or more than `limit` when it exceeds it. */
export function distance(a: string, b: string, limit: number): number {
  let row = Array.from({ length: b.length + 1 }, (_, j) => j);
  for (let i = 1; i <= a.length; i += 1) {
    const next = [i];
    for (let j = 1; j <= b.length; j += 1) {
      const replaced = row[j - 1]! + (a[i - 1] === b[j - 1] ? 0 : 1);
      next.push(Math.min(replaced, row[j]! + 1, next[j - 1]! + 1));
    }
    if (Math.min(...next) > limit) return limit + 1;
    row = next;
  }
  return row[b.length]!;
}
