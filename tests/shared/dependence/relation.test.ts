import { chainWords, findCircle, type RecordEdge } from "~shared/dependence/relation";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";

function edge(from: number, relation: RecordEdge["relation"], to: number): RecordEdge {
  return { from, relation, to };
}

describe("circles of relations", () => {
  it("finds a record that names itself", () => {
    expect(findCircle(4, [edge(4, "supersedes", 4)], [])).toEqual([edge(4, "supersedes", 4)]);
  });

  it("finds a circle through several relations, and says its words", () => {
    const others = [edge(3, "supersedes", 2), edge(2, "subsetOf", 7), edge(3, "erratumOf", 1)];
    const circle = findCircle(7, [{ relation: "reanalysisOf", to: 3 }], others);
    expect(circle && chainWords(circle, formatRecordNumber)).toBe(
      "FL-0007 is a re-analysis of FL-0003, which supersedes FL-0002, which is a subset of FL-0007",
    );
  });

  it("takes the shortest of two", () => {
    const others = [
      edge(2, "conditionedOn", 3),
      edge(3, "conditionedOn", 1),
      edge(4, "conditionedOn", 1),
    ];
    const own = [2, 4].map((to) => ({ relation: "conditionedOn" as const, to }));
    expect(findCircle(1, own, others)?.map(({ to }) => to)).toEqual([4, 1]);
  });

  it("looks at conditions apart from relations", () => {
    const others = [edge(3, "conditionedOn", 7)];
    expect(findCircle(7, [{ relation: "reanalysisOf", to: 3 }], others)).toBeNull();
    expect(findCircle(7, [{ relation: "conditionedOn", to: 3 }], others)).toHaveLength(2);
  });

  it("puts the record's new links in place of its old ones", () => {
    const others = [edge(7, "conditionedOn", 3), edge(3, "conditionedOn", 2)];
    expect(findCircle(2, [{ relation: "conditionedOn", to: 7 }], others)).toHaveLength(3);
    expect(findCircle(7, [], others)).toBeNull();
  });

  it("ends on circles that it is no part of", () => {
    const others = [edge(2, "conditionedOn", 3), edge(3, "conditionedOn", 2)];
    expect(findCircle(1, [{ relation: "conditionedOn", to: 2 }], others)).toBeNull();
  });
});
