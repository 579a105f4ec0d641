import { conditionChains, conditionChainWords, conditionsIn } from "~shared/dependence/conditions";

function chains(number: string, conditions: Record<string, string[]>) {
  return conditionChains(number, (one) => conditions[one]);
}

describe("condition chains", () => {
  it("follows three records to a kind of data", () => {
    const found = chains("FL-0009", {
      "FL-0009": ["FL-0007"],
      "FL-0007": ["FL-0003"],
      "FL-0003": ["cmb"],
    });
    expect(found).toEqual([{ through: ["FL-0009", "FL-0007", "FL-0003"], on: "cmb" }]);
    expect(found.map(conditionChainWords)).toEqual([
      "FL-0009 is conditioned on FL-0007, which is conditioned on FL-0003, which is conditioned on CMB",
    ]);
  });

  it("ends at a record that has no conditions, or is not known", () => {
    expect(chains("FL-0002", { "FL-0002": ["FL-0001"] })).toEqual([
      { through: ["FL-0002"], on: "FL-0001" },
    ]);
    expect(chains("FL-0002", { "FL-0002": [] })).toEqual([]);
    expect(chains("FL-0002", {})).toEqual([]);
  });

  it("reaches each kind once, by a shortest way, and passes every record", () => {
    const found = chains("A", {
      A: ["B", "C", "cmb"],
      B: ["D", "lymanAlpha"],
      C: ["D"],
      D: ["cmb"],
    });
    expect(found).toEqual([
      { through: ["A"], on: "cmb" },
      { through: ["A", "B"], on: "lymanAlpha" },
      { through: ["A"], on: "C" },
      { through: ["A", "B"], on: "D" },
    ]);
  });

  it("walks a circle once", () => {
    expect(chains("A", { A: ["B"], B: ["A", "cmb"] })).toEqual([
      { through: ["A", "B"], on: "cmb" },
    ]);
  });

  it("reads numbers in any spelling", () => {
    expect(conditionsIn(["cmb", "fl-12", "FL-0012.2", "the moon"])).toEqual(["cmb", "FL-0012"]);
  });
});
