import fc from "fast-check";

import { decimalPlaces, isPrintedNumber, oneMinus, parseDecimal } from "~shared/statement/decimal";

describe("parseDecimal", () => {
  it.each([
    ["0.30", "0.3"],
    ["+0.1", "0.1"],
    ["-0.2", "-0.2"],
    ["\u22120.2", "-0.2"],
    [".5", "0.5"],
    ["7.", "7"],
    [" 12 ", "12"],
    ["3e-4", "0.0003"],
  ])("reads %p as %s", (text, value) => {
    expect(parseDecimal(text)?.toFixed()).toBe(value);
  });

  it.each([
    "O.25",
    "",
    " ",
    "1,2",
    "0.4±0.1",
    "68%",
    "<0.3",
    "NaN",
    "Infinity",
    "1e999",
    "0x1",
    ".",
  ])("does not take %p for a number", (text) => {
    expect(parseDecimal(text)).toBeNull();
    expect(isPrintedNumber(text)).toBe(false);
  });

  it("never throws, and agrees with isPrintedNumber", () => {
    fc.assert(
      fc.property(fc.string({ unit: "binary" }), (text) => {
        expect(parseDecimal(text) !== null).toBe(isPrintedNumber(text));
      }),
      { seed: 20261201 },
    );
  });
});

describe("oneMinus", () => {
  it.each([
    ["0.9", "0.1"], // in binary 1 − 0.9 is 0.09999999999999998
    ["0.30", "0.70"],
    ["1", "0"],
    ["1.00", "0.00"],
    [".5", "0.5"],
    ["3e-4", "0.9997"],
    ["-0.1", "1.1"],
  ])("turns %s into %s", (text, expected) => {
    expect(oneMinus(text)).toBe(expected);
  });

  it("has nothing to say about a text that is no number", () => {
    expect(oneMinus("O.25")).toBeNull();
    expect(oneMinus(null)).toBeNull();
  });

  it("undoes itself, digit for digit", () => {
    const printed = fc
      .tuple(
        fc.integer({ min: 0, max: 1 }),
        fc.integer({ min: 0, max: 9999 }),
        fc.integer({ min: 4, max: 6 }),
      )
      .map(([whole, part, places]) => `${whole}.${String(part).padStart(places, "0")}`);
    fc.assert(
      fc.property(printed, (text) => {
        expect(oneMinus(oneMinus(text))).toBe(text);
      }),
      { seed: 20261201 },
    );
  });
});

it("counts the decimals a printed number resolves", () => {
  expect([decimalPlaces("0.30"), decimalPlaces("3e-4"), decimalPlaces("12")]).toEqual([2, 4, 0]);
});
