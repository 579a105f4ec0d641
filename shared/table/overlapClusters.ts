/** Rows that share data: the clusters they form, and which rows of a cluster a table can take together. */

/** What the choice between overlapping rows goes by. */
export interface OverlappingRow {
  /** FL-0042 */
  readonly number: string;
  /** False for a row that was read in a preprint only. */
  readonly published: boolean;
  /** Year of the paper; an unknown one counts as earliest. */
  readonly year: number | null;
}

/** Two rows with the data they share. */
export interface Overlap {
  readonly a: string;
  readonly b: string;
  /** Name of the sightline, field or sample, or another reason in words. */
  readonly via: string;
}

export interface OverlapCluster {
  /** Numbers of its rows, ascending; at least two. */
  readonly rows: string[];
  /** Its overlaps; every row is reached from every other through them. */
  readonly overlaps: Overlap[];
}

export interface ClusterChoice {
  /** Numbers of the rows to keep, ascending. */
  readonly kept: string[];
  /** Numbers of the rows to leave out, each with the kept rows that it overlaps with. */
  readonly left: { number: string; because: Overlap[] }[];
  /** Whether no larger set exists; false for clusters too large to look at every set. */
  readonly exact: boolean;
  /** Why these, in one sentence. */
  readonly words: string;
}

/** Up to this many rows every set is looked at; 3^(20/3) of them, about 1,500, at the worst. */
export const EXACT_UP_TO = 20;

/** Plain digits in a number compare as numbers: FL-10000 comes after FL-9999. */
export function byRecordNumber(a: string, b: string): number {
  return a.length - b.length || (a < b ? -1 : a > b ? 1 : 0);
}

/**
 * The clusters of rows that share data, directly or through others.
 *
 * @param overlaps - Pairs of different rows, in any order, each pair once.
 * @returns Clusters in the order of their lowest record number.
 */
export function overlapClusters(overlaps: readonly Overlap[]): OverlapCluster[] {
  const neighbours = neighboursOf(overlaps);
  const seen = new Set<string>();
  const clusters: OverlapCluster[] = [];
  for (const start of [...neighbours.keys()].sort(byRecordNumber)) {
    if (seen.has(start)) continue;
    const rows = new Set([start]);
    for (const row of rows) for (const next of neighbours.get(row) ?? []) rows.add(next);
    for (const row of rows) seen.add(row);
    clusters.push({
      rows: [...rows].sort(byRecordNumber),
      overlaps: overlaps.filter((pair) => rows.has(pair.a)),
    });
  }
  return clusters;
}

function neighboursOf(overlaps: readonly Overlap[]): Map<string, Set<string>> {
  const neighbours = new Map<string, Set<string>>();
  const join = (from: string, to: string): void => {
    neighbours.set(from, (neighbours.get(from) ?? new Set()).add(to));
  };
  for (const { a, b } of overlaps) {
    join(a, b);
    join(b, a);
  }
  return neighbours;
}

/**
 * A largest set of a cluster's rows of which no two overlap directly. Of several such sets the one
 * with more published rows is taken, then that with the later years, then that with the lower record numbers.
 *
 * @param rows - At least the cluster's rows, in any order.
 * @throws RangeError if a row of the cluster is not among them.
 */
export function chooseRows(
  cluster: OverlapCluster,
  rows: readonly OverlappingRow[],
): ClusterChoice {
  const byNumber = new Map(rows.map((row) => [row.number, row]));
  const members = cluster.rows.map((number) => {
    const row = byNumber.get(number);
    if (!row) throw new RangeError(`no row ${number} was given`);
    return row;
  });
  const neighbours = neighboursOf(cluster.overlaps);
  const exact = members.length <= EXACT_UP_TO;
  const kept = exact ? best(members, neighbours) : oneByOne(members, neighbours);
  const keptNumbers = new Set(kept.map((row) => row.number));
  return {
    kept: [...keptNumbers].sort(byRecordNumber),
    left: cluster.rows
      .filter((number) => !keptNumbers.has(number))
      .map((number) => ({
        number,
        because: cluster.overlaps.filter(
          ({ a, b }) =>
            (a === number && keptNumbers.has(b)) || (b === number && keptNumbers.has(a)),
        ),
      })),
    exact,
    words: exact
      ? `${inWords(keptNumbers.size)} of these ${members.length} rows can stand together at most; among equal choices published papers go first, then later years, then lower numbers.`
      : `With more than ${EXACT_UP_TO} rows sharing data, rows were taken one by one: published first, then later years, then lower numbers. A larger set may exist.`,
  };
}

function inWords(count: number): string {
  return count === 1 ? "Only one" : String(count);
}

/** Every set to which no row can be added is visited once: Bron and Kerbosch 1973, on "don't overlap". */
function best(
  members: readonly OverlappingRow[],
  neighbours: ReadonlyMap<string, ReadonlySet<string>>,
): OverlappingRow[] {
  const apart = (a: OverlappingRow, b: OverlappingRow): boolean =>
    a !== b && !neighbours.get(a.number)?.has(b.number);
  let chosen: OverlappingRow[] = [];
  const grow = (
    set: readonly OverlappingRow[],
    open: readonly OverlappingRow[],
    done: readonly OverlappingRow[],
  ): void => {
    if (open.length === 0 && done.length === 0) {
      if (compareSets(set, chosen) < 0) chosen = [...set];
      return;
    }
    // The pivot with most open rows apart from it leaves the fewest branches.
    let branches = open;
    for (const pivot of [...open, ...done]) {
      const rest = open.filter((row) => !apart(pivot, row));
      if (rest.length < branches.length) branches = rest;
    }
    let [left, tried] = [open, done];
    for (const row of branches) {
      grow(
        [...set, row],
        left.filter((other) => apart(row, other)),
        tried.filter((other) => apart(row, other)),
      );
      left = left.filter((other) => other !== row);
      tried = [...tried, row];
    }
  };
  grow([], members, []);
  return chosen;
}

function oneByOne(
  members: readonly OverlappingRow[],
  neighbours: ReadonlyMap<string, ReadonlySet<string>>,
): OverlappingRow[] {
  const kept: OverlappingRow[] = [];
  for (const row of [...members].sort(compareRows)) {
    if (!kept.some((other) => neighbours.get(row.number)?.has(other.number))) kept.push(row);
  }
  return kept;
}

const yearOf = (row: OverlappingRow): number => row.year ?? -Infinity;

/** Better first. */
function compareRows(a: OverlappingRow, b: OverlappingRow): number {
  return (
    Number(b.published) - Number(a.published) ||
    descending(yearOf(a), yearOf(b)) ||
    byRecordNumber(a.number, b.number)
  );
}

function descending(a: number, b: number): number {
  return a === b ? 0 : a > b ? -1 : 1;
}

/** Better first: negative when the set a is to be taken rather than b. A total order of sets. */
function compareSets(a: readonly OverlappingRow[], b: readonly OverlappingRow[]): number {
  const published = (set: readonly OverlappingRow[]): number =>
    set.filter((row) => row.published).length;
  const years = (set: readonly OverlappingRow[]): number[] => set.map(yearOf).sort(descending);
  const numbers = (set: readonly OverlappingRow[]): string[] =>
    set.map((row) => row.number).sort(byRecordNumber);
  return (
    b.length - a.length ||
    published(b) - published(a) ||
    firstDifference(years(a), years(b), descending) ||
    firstDifference(numbers(a), numbers(b), byRecordNumber)
  );
}

function firstDifference<T>(
  a: readonly T[],
  b: readonly T[],
  compare: (left: T, right: T) => number,
): number {
  for (const [index, left] of a.entries()) {
    const difference = compare(left, b[index] as T);
    if (difference !== 0) return difference;
  }
  return 0;
}
