import reference from "../../fixtures/checks/reference.json";
import {
  backgroundOf,
  type CheckCosmology,
  type CheckHistory,
  expectRelative,
  historyOfCheck,
} from "../support/checks";

/** scipy and astropy, each case computed by two independent paths: tests/fixtures/checks/README.md. */
const cases = reference.cases as unknown as {
  id: string;
  function: string;
  inputs: {
    cosmology: CheckCosmology;
    history: CheckHistory;
    z: number;
    z1: number;
    z2: number;
    f: number;
    f_hi: number;
    f_lo: number;
    z_lo: number;
    z_hi: number;
  };
  value: number;
}[];
const of = (name: string) => cases.filter((c) => c.function === name);
// PHYSICS.md section 2: absolute 1e-10 for fractions and redshifts.
const expectClose = (actual: number | null, expected: number): void => {
  expect(actual).not.toBeNull();
  expect(Math.abs(actual! - expected)).toBeLessThanOrEqual(1e-10);
};

describe("histories against independent code", () => {
  it.each([...of("tau_total"), ...of("tau_range")])("optical depth of $id", ({ inputs, value }) => {
    const { cosmology, history, z1, z2 } = inputs;
    const tau = historyOfCheck(history).opticalDepth(backgroundOf(cosmology), z1, z2);
    expectRelative(tau, value, 1e-11);
  });
  it.each(of("x_HI"))("neutral fraction of $id", ({ inputs, value }) => {
    expectClose(historyOfCheck(inputs.history).x(inputs.z), value);
  });
  it.each(of("f_e"))("electrons per hydrogen of $id", ({ inputs, value }) => {
    const { cosmology, history, z } = inputs;
    expectClose(historyOfCheck(history).electronsPerHydrogen(backgroundOf(cosmology), z), value);
  });
  it.each(of("z_at_fraction"))("redshift at a fraction of $id", ({ inputs, value }) => {
    expectClose(historyOfCheck(inputs.history).redshiftAtFraction(inputs.f), value);
  });
  it.each(of("duration"))("duration of $id", ({ inputs, value }) => {
    expectClose(historyOfCheck(inputs.history).duration(inputs.f_hi, inputs.f_lo), value);
  });
  it.each(of("bin_mean"))("bin mean of $id", ({ inputs, value }) => {
    expectClose(historyOfCheck(inputs.history).binMean(inputs.z_lo, inputs.z_hi), value);
  });

  it("covers every function of the file that belongs here", () => {
    const here = ["tau_total", "tau_range", "x_HI", "f_e", "z_at_fraction", "duration", "bin_mean"];
    expect(here.reduce((sum, name) => sum + of(name).length, 0)).toBe(31);
  });
});
