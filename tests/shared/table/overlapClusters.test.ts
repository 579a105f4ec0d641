import fc from "fast-check";

import {
  byRecordNumber,
  chooseRows,
  overlapClusters,
  type Overlap,
  type OverlapCluster,
  type OverlappingRow,
} from "~shared/table/overlapClusters";

const number = (index: number): string => `FL-${String(index).padStart(4, "0")}`;

function row(index: number, more: Partial<OverlappingRow> = {}): OverlappingRow {
  return { number: number(index), published: true, year: 2024, ...more };
}

function pair(a: number, b: number, via = "QV 0001+01"): Overlap {
  return { a: number(a), b: number(b), via };
}

/** The one cluster of these overlaps. */
function only(overlaps: readonly Overlap[]): OverlapCluster {
  const clusters = overlapClusters(overlaps);
  expect(clusters).toHaveLength(1);
  return clusters[0] as OverlapCluster;
}

describe("overlapClusters", () => {
  it("joins rows through chains and keeps separate data apart", () => {
    const clusters = overlapClusters([pair(7, 3), pair(9, 7), pair(1, 2)]);
    expect(clusters.map((cluster) => cluster.rows)).toEqual([
      ["FL-0001", "FL-0002"],
      ["FL-0003", "FL-0007", "FL-0009"],
    ]);
    expect(clusters.map((cluster) => cluster.overlaps.length)).toEqual([1, 2]);
  });

  it("has none without overlaps", () => {
    expect(overlapClusters([])).toEqual([]);
  });
});

describe("chooseRows", () => {
  it("keeps both analyses of two sightlines rather than the stack that contains both", () => {
    const choice = chooseRows(only([pair(1, 3, "QV 0001+01"), pair(2, 3, "QV 0002+02")]), [
      row(1),
      row(2),
      row(3, { year: 2026 }),
    ]);
    expect(choice.kept).toEqual(["FL-0001", "FL-0002"]);
    expect(choice.left).toEqual([
      { number: "FL-0003", because: [pair(1, 3, "QV 0001+01"), pair(2, 3, "QV 0002+02")] },
    ]);
    expect(choice.exact).toBe(true);
  });

  it("of two analyses of one sightline keeps the published, then the later, then the lower number", () => {
    const cluster = only([pair(1, 2)]);
    const kept = (one: Partial<OverlappingRow>, two: Partial<OverlappingRow>): string[] =>
      chooseRows(cluster, [row(1, one), row(2, two)]).kept;
    expect(kept({ published: false, year: 2026 }, { year: 2020 })).toEqual(["FL-0002"]);
    expect(kept({ year: 2023 }, { year: 2025 })).toEqual(["FL-0002"]);
    expect(kept({ year: null }, { year: 1999 })).toEqual(["FL-0002"]);
    expect(kept({}, {})).toEqual(["FL-0001"]);
  });

  it("compares numbers as numbers", () => {
    expect([number(10000), number(9999)].sort(byRecordNumber)).toEqual(["FL-9999", "FL-10000"]);
  });

  it("says so when a cluster is too large to look at every set", () => {
    const star = Array.from({ length: 25 }, (_, index) => pair(1, index + 2));
    const choice = chooseRows(
      only(star),
      Array.from({ length: 26 }, (_, index) => row(index + 1, { published: index > 0 })),
    );
    expect(choice.exact).toBe(false);
    expect(choice.kept).toHaveLength(25);
  });

  it("needs every row of the cluster", () => {
    expect(() => chooseRows(only([pair(1, 2)]), [row(1)])).toThrow(RangeError);
  });

  /** Every subset of a cluster, by counting in binary: slow, plain, and written apart from the search. */
  function bestByCounting(cluster: OverlapCluster, rows: readonly OverlappingRow[]): string[] {
    const members = rows.filter((one) => cluster.rows.includes(one.number));
    let winner: { key: (number | string)[]; kept: string[] } | null = null;
    for (let mask = 1; mask < 1 << members.length; mask += 1) {
      const set = members.filter((_, index) => (mask >> index) & 1);
      const held = new Set(set.map((one) => one.number));
      if (cluster.overlaps.some(({ a, b }) => held.has(a) && held.has(b))) continue;
      const key = [
        -set.length,
        -set.filter((one) => one.published).length,
        ...set.map((one) => -(one.year ?? 0)).sort((a, b) => a - b),
        ...[...held].sort(),
      ];
      if (winner === null || isBefore(key, winner.key)) winner = { key, kept: [...held].sort() };
    }
    return winner?.kept ?? [];
  }

  function isBefore(a: readonly (number | string)[], b: readonly (number | string)[]): boolean {
    const at = a.findIndex((part, index) => part !== b[index]);
    return at >= 0 && (a[at] as number) < (b[at] as number);
  }

  it("finds what looking at every subset finds", () => {
    const size = 9;
    const rows = fc.array(
      fc.record({ published: fc.boolean(), year: fc.constantFrom(null, 2021, 2022, 2023) }),
      { minLength: size, maxLength: size },
    );
    const pairs = fc.uniqueArray(
      fc
        .tuple(fc.integer({ min: 1, max: size }), fc.integer({ min: 1, max: size }))
        .filter(([a, b]) => a < b),
      { selector: ([a, b]) => a * 100 + b, minLength: 1, maxLength: 20 },
    );
    fc.assert(
      fc.property(rows, pairs, (kinds, edges) => {
        const all = kinds.map((kind, index) => row(index + 1, kind));
        for (const cluster of overlapClusters(edges.map(([a, b]) => pair(a, b)))) {
          expect(chooseRows(cluster, all).kept).toEqual(bestByCounting(cluster, all));
        }
      }),
      { numRuns: 300 },
    );
  });
});
