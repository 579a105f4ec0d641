import { areaPath, fogOpacity, fogStops, linePath, spread } from "~shared/chart/paths";
import { linearScale } from "~shared/chart/scales";

const unit = linearScale([0, 1], [0, 100]);
const up = linearScale([0, 1], [100, 0]);

it("spread holds both ends", () => {
  expect(spread(5, 11, 4)).toEqual([5, 7, 9, 11]);
});

it("a line runs through its points", () => {
  expect(linePath([0, 0.5, 1], [0, 1, 0.5], unit, up)).toBe("M0 100L50 0L100 50");
});

it("an area closes along its floor", () => {
  expect(areaPath([0, 1], [0.2, 0.4], unit, up, 100)).toBe("M0 80L100 60L100 100L0 100Z");
});

describe("fog", () => {
  it("is gone where the gas is ionized and full where it is neutral", () => {
    expect(fogOpacity(0)).toBe(0);
    expect(fogOpacity(1)).toBe(1);
  });
  it("is thinner than the fraction in between", () => {
    expect(fogOpacity(0.5)).toBeLessThan(0.5);
  });
  it("has 25 stops from edge to edge", () => {
    const stops = fogStops(5, 11, (z) => (z - 5) / 6);
    expect(stops).toHaveLength(25);
    expect(stops[0]).toEqual({ offset: 0, opacity: 0 });
    expect(stops[24]).toEqual({ offset: 1, opacity: 1 });
  });
});
