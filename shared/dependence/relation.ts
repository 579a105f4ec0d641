/** Relations between records, and the circles they must not close. */

/** Relations that say what a record is to an older one. */
export const RECORD_RELATIONS = ["supersedes", "erratumOf", "reanalysisOf", "subsetOf"] as const;
export type RecordRelation = (typeof RECORD_RELATIONS)[number];

/** Every way in which one record names another. */
export const LINK_RELATIONS = [...RECORD_RELATIONS, "conditionedOn"] as const;
export type LinkRelation = (typeof LINK_RELATIONS)[number];

/** Between the numbers of two records: "FL-0007 supersedes FL-0003". */
export const RELATION_VERBS: Record<LinkRelation, string> = {
  supersedes: "supersedes",
  erratumOf: "is an erratum of",
  reanalysisOf: "is a re-analysis of",
  subsetOf: "is a subset of",
  conditionedOn: "is conditioned on",
};

/** Seen from the other end: "FL-0003 is superseded by FL-0007". */
export const INVERSE_VERBS: Record<LinkRelation, string> = {
  supersedes: "is superseded by",
  erratumOf: "has an erratum in",
  reanalysisOf: "is re-analysed in",
  subsetOf: "contains",
  conditionedOn: "goes into",
};

/** One record naming another. */
export interface RecordEdge {
  /** Number of the record that says it. */
  readonly from: number;
  readonly relation: LinkRelation;
  readonly to: number;
}

/**
 * A circle that a record's own links would close: the steps from the record back to itself, the
 * fewest there are. What a record is to another and what it is conditioned on are looked at apart:
 * a re-analysis may well take a prior from what it re-analyses.
 *
 * @param number - The record.
 * @param own - Links it would have; they stand in place of those it has among `others`.
 * @param others - Links of every record.
 * @returns Null when there is none.
 */
export function findCircle(
  number: number,
  own: readonly Omit<RecordEdge, "from">[],
  others: readonly RecordEdge[],
): RecordEdge[] | null {
  const kept = others.filter(({ from }) => from !== number);
  const edges = [...kept, ...own.map((edge) => ({ ...edge, from: number }))];
  const conditions = edges.filter(({ relation }) => relation === "conditionedOn");
  const relations = edges.filter(({ relation }) => relation !== "conditionedOn");
  return shortestCircle(number, relations) ?? shortestCircle(number, conditions);
}

function shortestCircle(start: number, edges: readonly RecordEdge[]): RecordEdge[] | null {
  const from = new Map<number, RecordEdge[]>();
  for (const edge of edges) from.set(edge.from, [...(from.get(edge.from) ?? []), edge]);
  const reachedBy = new Map<number, RecordEdge>();
  const waiting = [start];
  for (const place of waiting) {
    for (const edge of from.get(place) ?? []) {
      if (edge.to === start) return wayTo(place, start, reachedBy, edge);
      if (reachedBy.has(edge.to)) continue;
      reachedBy.set(edge.to, edge);
      waiting.push(edge.to);
    }
  }
  return null;
}

function wayTo(
  place: number,
  start: number,
  reachedBy: ReadonlyMap<number, RecordEdge>,
  last: RecordEdge,
): RecordEdge[] {
  const way = [last];
  for (let at = place; at !== start;) {
    const edge = reachedBy.get(at);
    if (!edge) break;
    way.unshift(edge);
    at = edge.from;
  }
  return way;
}

/**
 * A chain of links as a sentence without its full stop: "FL-0007 is conditioned on FL-0003, which is
 * conditioned on FL-0007".
 *
 * @param edges - Each begins where the one before ends; at least one.
 * @param name - How a record is named.
 */
export function chainWords(edges: readonly RecordEdge[], name: (number: number) => string): string {
  const [first, ...rest] = edges;
  if (!first) return "";
  const start = `${name(first.from)} ${RELATION_VERBS[first.relation]} ${name(first.to)}`;
  return rest.reduce(
    (words, { relation, to }) => `${words}, which ${RELATION_VERBS[relation]} ${name(to)}`,
    start,
  );
}
