import { PolynomialTable } from "~shared/numerics/polynomialTable";

describe("PolynomialTable", () => {
  it("holds a cubic exactly, up to its high end and one rounding beyond", () => {
    const cubic = (t: number) => 2 - t + 0.5 * t * t - 0.25 * t ** 3;
    const table = new PolynomialTable(cubic, -2, 3, 2);
    for (const t of [-2, -1.37, 0, 0.5, 2.999, 3]) expect(table.at(t)).toBeCloseTo(cubic(t), 13);
  });

  it("stays within Chebyshev's bound for the exponential, relative to its size", () => {
    const table = new PolynomialTable(Math.exp, -5, 1, 16);
    // |f⁗|/(3072 × 16⁴) with f⁗ = f, at most e^(1/16) larger at the far end of a cell.
    const bound = Math.exp(1 / 16) / (3072 * 16 ** 4);
    for (let t = -5; t < 1; t += 0.0173) {
      expect(Math.abs(table.at(t) / Math.exp(t) - 1)).toBeLessThan(1.01 * bound);
    }
  });

  it("answers for a line as for each of its places", () => {
    const table = new PolynomialTable(Math.sin, -4, 4, 32);
    const scales = Float64Array.of(0.5, 1, 1.5, 2, 2.5);
    const out = new Float64Array(7).fill(10);
    table.setScaled(scales, -1.2, 1, 4, out, 2);
    expect([...out.slice(0, 3), out[6]]).toEqual([10, 10, 10, 10]);
    for (const j of [1, 2, 3]) expect(out[2 + j]).toBeCloseTo(table.at(-1.2 * scales[j]!), 13);
    table.addScaled(scales, 0.7, 3, 1, 3, out, 2);
    for (const j of [1, 2]) {
      const sum = table.at(-1.2 * scales[j]!) + 3 * table.at(0.7 * scales[j]!);
      expect(out[2 + j]).toBeCloseTo(sum, 12);
    }
    expect(out[5]).toBeCloseTo(table.at(-1.2 * scales[3]!), 13);
  });

  it("refuses cells that do not fill its range", () => {
    expect(() => new PolynomialTable(Math.sin, 0, 1, 0.5)).toThrow("cells must be a whole number");
    expect(() => new PolynomialTable(Math.sin, 1, 1, 4)).toThrow("cells must be a whole number");
  });
});
