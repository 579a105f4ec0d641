import { derivedTicks, linearTicks, logTicks, multiples } from "~shared/chart/ticks";

/** Age in Gyr of a matter-dominated universe; any monotonic function serves the test of an axis. */
const matterAge = (z: number) => 17.3 * (1 + z) ** -1.5;

describe("multiples", () => {
  it("holds both ends and no rounding residue", () => {
    expect(multiples([0, 1], 0.1)).toEqual([0, 0.1, 0.2, 0.3, 0.4, 0.5, 0.6, 0.7, 0.8, 0.9, 1]);
  });
  it("stays inside a domain that begins between steps", () => {
    expect(multiples([-0.03, 1.03], 0.2)).toEqual([0, 0.2, 0.4, 0.6, 0.8, 1]);
  });
});

describe("linearTicks", () => {
  it("makes every fifth of the 0.2 ticks of the redshift axis a whole number and major", () => {
    const ticks = linearTicks([5, 11], 1, 0.2);
    expect(ticks).toHaveLength(31);
    expect(ticks.filter((tick) => tick.major).map((tick) => tick.value)).toEqual([
      5, 6, 7, 8, 9, 10, 11,
    ]);
  });
});

describe("logTicks", () => {
  it("marks decades, with 2 to 9 between them", () => {
    const ticks = logTicks([1e-3, 1]);
    expect(ticks.filter((tick) => tick.major).map((tick) => tick.value)).toEqual([
      0.001, 0.01, 0.1, 1,
    ]);
    expect(ticks).toHaveLength(28);
  });
});

describe("derivedTicks", () => {
  it("puts observed frequencies of the 21-cm line at their redshifts", () => {
    // 1420.405751768 MHz / ν − 1: 130 MHz is z = 9.926, 200 MHz is z = 6.102 (PHYSICS, worked values).
    const ticks = derivedTicks([5, 11], (z) => 1420.405751768 / (1 + z), 10, 10);
    const at = (frequency: number) =>
      ticks.find((tick) => tick.value === frequency)?.position as number;
    expect(at(130)).toBeCloseTo(9.926, 3);
    expect(at(200)).toBeCloseTo(6.102, 3);
  });

  it("puts each age where the age function returns it", () => {
    const age = matterAge;
    const ticks = derivedTicks([5, 11], age, 0.1, 0.05);
    expect(ticks.length).toBeGreaterThan(10);
    for (const tick of ticks) expect(age(tick.position)).toBeCloseTo(tick.value, 10);
  });
});
