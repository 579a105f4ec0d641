import { decimalsFor, fixed, quantityWords, signed, withErrors } from "~shared/fit/quantityWords";

describe("decimalsFor", () => {
  it.each([
    [0.0142, 3],
    [0.32, 2],
    [1.4, 1],
    [23, 0],
    [0.0998, 2],
    [0.00074, 5],
  ])("keeps two digits of an uncertainty of %p with %p decimals", (uncertainty, decimals) => {
    expect(decimalsFor(uncertainty)).toBe(decimals);
  });

  it("falls back to four where there is no uncertainty", () => {
    expect([0, NaN, Infinity].map(decimalsFor)).toEqual([4, 4, 4]);
  });
});

describe("fixed and signed", () => {
  it("set a true minus, and no sign on zero", () => {
    expect([fixed(-0.312, 2), fixed(-0.001, 2), signed(0.312, 2), signed(0.001, 2)]).toEqual([
      "−0.31",
      "0.00",
      "+0.31",
      "0.00",
    ]);
  });
});

describe("withErrors", () => {
  it("gives value and errors the digits of the smaller error", () => {
    expect(withErrors(7.2134, [6.9312, 7.5331])).toEqual({
      value: "7.21",
      plus: "0.32",
      minus: "0.28",
    });
    expect(withErrors(0.05411, [0.05269, 0.05554])).toEqual({
      value: "0.0541",
      plus: "0.0014",
      minus: "0.0014",
    });
  });

  it("takes the side that has a width where the other has none", () => {
    expect(withErrors(0, [0, 0.02])).toEqual({ value: "0.000", plus: "0.020", minus: "0.000" });
  });
});

describe("quantityWords", () => {
  it("tells a value of the free form by its redshift", () => {
    expect(quantityWords("x(6.5)")).toEqual({
      words: "Neutral fraction at z 6.5",
      symbol: "x(6.5)",
    });
  });
});
