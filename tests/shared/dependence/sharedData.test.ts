import {
  DataRegister,
  directOverlap,
  overlapsAmong,
  type DataUser,
} from "~shared/dependence/sharedData";

const thing = (
  id: number,
  name: string,
  more: Partial<{ aliases: string[]; subsetOf: number[]; overlaps: number[] }> = {},
) => ({ id, name, aliases: [], subsetOf: [], overlaps: [], ...more });

const register = new DataRegister([
  thing(1, "Fennel sample"),
  thing(2, "Fennel north", { subsetOf: [1] }),
  thing(3, "QF 0102-03", { aliases: ["Fennel 12"], subsetOf: [2] }),
  thing(4, "Sorrel field", { overlaps: [2] }),
  thing(5, "Stack of nine", { subsetOf: [] }),
  thing(6, "QF 0911+44", { subsetOf: [5, 1] }),
  thing(7, "Sage field"),
]);

function user(
  number: string,
  dataUsed: string[],
  more: Partial<DataUser["fields"]> = {},
): DataUser {
  return { number, fields: { dataUsed, dataKnown: true, methodTags: ["darkPixels"], ...more } };
}

describe("shared data", () => {
  it.each([
    ["by name in another spelling", "qf 0102−03", "QF0102-03", "QF 0102-03"],
    ["by an alias", "Fennel 12", "QF 0102-03", "QF 0102-03"],
    ["a part of a part", "Fennel sample", "QF 0102-03", "QF 0102-03, a part of Fennel sample"],
    ["stated", "Sorrel field", "Fennel north", "Sorrel field, which overlaps with Fennel north"],
    [
      "stated of a part, asked of the whole",
      "Fennel sample",
      "Sorrel field",
      "Fennel north, which overlaps with Sorrel field",
    ],
    [
      "a common member",
      "Fennel sample",
      "Stack of nine",
      "QF 0911+44, a part of both Fennel sample and Stack of nine",
    ],
    ["a name the registry does not keep", "Lone spot", "lone  spot", "Lone spot"],
  ])("finds %s", (_case, a, b, via) => {
    expect(register.shared(a, b)).toBe(via);
  });

  it.each([
    ["two parts of one sample", "QF 0102-03", "QF 0911+44"],
    ["a sign apart", "QF 0911+44", "QF 0911-44"],
    ["what overlaps with the whole need not with a part", "Sorrel field", "QF 0102-03"],
    ["different things", "Sage field", "Sorrel field"],
  ])("says nothing of %s", (_case, a, b) => {
    expect(register.shared(a, b)).toBeNull();
    expect(register.shared(b, a)).toBeNull();
  });

  it("takes unknown data for no overlap, and a joint inference for one with everything", () => {
    const unknown = user("FL-0001", ["Sage field"], { dataKnown: false });
    const sage = user("FL-0002", ["Sage field"]);
    const joint = user("FL-0003", [], { methodTags: ["jointInference"] });
    expect(directOverlap(unknown, sage, register)).toBeNull();
    expect(directOverlap(sage, joint, register)).toEqual({
      kind: "jointInference",
      via: "the data of FL-0003, a joint inference",
    });
  });

  it("lists the pairs of two analyses of one sightline and a stack that contains it", () => {
    const records = [
      user("FL-0001", ["QF 0911+44"]),
      user("FL-0002", ["Sage field", "QF 0911+44"]),
      user("FL-0003", ["Stack of nine"]),
      user("FL-0004", ["QF 0102-03"]),
      user("FL-0005", [], { methodTags: ["jointInference"] }),
    ];
    expect(overlapsAmong(records, register)).toEqual([
      { a: "FL-0001", b: "FL-0002", via: "QF 0911+44" },
      { a: "FL-0001", b: "FL-0003", via: "QF 0911+44, a part of Stack of nine" },
      { a: "FL-0002", b: "FL-0003", via: "QF 0911+44, a part of Stack of nine" },
    ]);
  });
});
