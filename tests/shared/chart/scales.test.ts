import { linearScale, logScale } from "~shared/chart/scales";

describe("linearScale", () => {
  it("puts the ends of its domain on the ends of its range", () => {
    const scale = linearScale([5, 11], [64, 908]);
    expect(scale.at(5)).toBe(64);
    expect(scale.at(11)).toBe(908);
    expect(scale.at(8)).toBe(486);
  });

  it("undoes itself on an upside-down range", () => {
    const scale = linearScale([-0.03, 1.03], [500, 40]);
    for (const value of [-0.03, 0, 0.37, 1]) {
      expect(scale.invert(scale.at(value))).toBeCloseTo(value, 12);
    }
  });

  it("rejects an empty domain, naming it", () => {
    expect(() => linearScale([3, 3], [0, 1])).toThrow("domain must be wider than a point");
  });
});

describe("logScale", () => {
  it("gives every decade the same length", () => {
    const scale = logScale([1e-3, 1], [300, 0]);
    expect(scale.at(1e-3) - scale.at(1e-2)).toBeCloseTo(100, 10);
    expect(scale.at(1e-1) - scale.at(1)).toBeCloseTo(100, 10);
  });

  it("keeps zero drawable, below its lower end", () => {
    const scale = logScale([1e-3, 1], [300, 0]);
    expect(Number.isFinite(scale.at(0))).toBe(true);
    expect(scale.at(0)).toBeGreaterThan(300);
  });

  it("rejects a domain that reaches zero", () => {
    expect(() => logScale([0, 1], [0, 1])).toThrow("domain start must be positive");
  });
});
