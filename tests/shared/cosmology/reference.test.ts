import boltzmann from "../../fixtures/checks/boltzmann.json";
import published from "../../fixtures/checks/published.json";
import reference from "../../fixtures/checks/reference.json";
import { background } from "~shared/cosmology/background";
import { frequencyOf21cmMHz, redshiftOf21cm } from "~shared/cosmology/line21cm";
import { tanhHistory } from "~shared/history/tanh";
import { backgroundOf, expectRelative } from "../support/checks";

/** scipy and astropy, each case computed by two independent paths: tests/fixtures/checks/README.md. */
const cases = reference.cases as unknown as {
  id: string;
  function: string;
  inputs: { cosmology: never; z: number; MHz: number };
  value: number;
}[];
const of = (name: string) => cases.filter((c) => c.function === name);

describe("background", () => {
  it.each(of("hubble"))("gives H(z) of $id", ({ inputs, value }) => {
    expectRelative(backgroundOf(inputs.cosmology).hubble(inputs.z), value);
  });
  it.each(of("efunc"))("gives E(z) of $id", ({ inputs, value }) => {
    expectRelative(backgroundOf(inputs.cosmology).efunc(inputs.z), value);
  });
  it.each(of("age"))("gives the age of $id", ({ inputs, value }) => {
    expectRelative(backgroundOf(inputs.cosmology).age(inputs.z), value);
  });
  it.each(of("n_H0"))("gives the hydrogen density of $id", ({ inputs, value }) => {
    expectRelative(backgroundOf(inputs.cosmology).nH0, value);
  });
  it.each(of("f_He"))("gives helium per hydrogen of $id", ({ inputs, value }) => {
    expectRelative(backgroundOf(inputs.cosmology).fHe, value);
  });
  it.each(of("tau_prefactor"))("gives the optical-depth prefactor of $id", ({ inputs, value }) => {
    expectRelative(backgroundOf(inputs.cosmology).tauPrefactor, value);
  });

  it("has no curvature: E(0) = 1", () => {
    expect(background().efunc(0)).toBeCloseTo(1, 15);
  });

  it("gives the same age just below and above the end of its tables", () => {
    const cosmology = background();
    const slope = (cosmology.age(199.9) - cosmology.age(200)) / 0.1;
    expect(cosmology.age(200) - cosmology.age(200.001)).toBeCloseTo(slope * 0.001, 10);
  });

  it("falls back to a matter-dominated age at high redshift", () => {
    // Einstein–de Sitter: t = 2/(3 H); radiation and Λ change it by a few percent at z = 30.
    const cosmology = background();
    const hubbleTimeGyr = 977.792221 / cosmology.hubble(30);
    expect(Math.abs(cosmology.age(30) / ((2 / 3) * hubbleTimeGyr) - 1)).toBeLessThan(0.02);
  });

  it("shares one object between equal parameters", () => {
    expect(background({ h: 0.7 })).toBe(background({ h: 0.7 }));
    expect(background({ h: 0.7 })).not.toBe(background({ h: 0.71 }));
  });

  it.each([
    ["h", { h: 0 }],
    ["omegaBh2", { omegaBh2: -1 }],
    ["omegaCh2", { omegaCh2: Number.NaN }],
    ["heliumFraction", { heliumFraction: 1 }],
  ])("rejects a malformed %s, naming it", (name, parameters) => {
    expect(() => background(parameters)).toThrow(`${name} must be`);
  });

  it("rejects a negative redshift for an age", () => {
    expect(() => background().age(-0.1)).toThrow("z must be");
  });
});

describe("21-cm line", () => {
  it.each(of("z_of_21cm_frequency"))("gives the redshift of $id", ({ inputs, value }) => {
    expect(Math.abs(redshiftOf21cm(inputs.MHz) - value)).toBeLessThan(1e-10);
  });
  it("turns a redshift back into its frequency", () => {
    expect(redshiftOf21cm(frequencyOf21cmMHz(7.5))).toBeCloseTo(7.5, 13);
  });
  it("rejects frequencies that no redshift has", () => {
    expect(() => redshiftOf21cm(0)).toThrow("frequencyMHz");
    expect(() => redshiftOf21cm(1500)).toThrow("frequencyMHz");
    expect(() => frequencyOf21cmMHz(-1)).toThrow("z must be");
  });
});

describe("optical depths that others printed", () => {
  it.each(boltzmann.cases)(
    "agree with the Boltzmann code of $id to 4e-5: its constants and residual electrons differ",
    (c) => {
      const cosmology = background({
        h: c.h,
        omegaBh2: c.omega_b,
        omegaCh2: c.omega_c,
        heliumFraction: c.Y,
      });
      const tau = tanhHistory({ zRe: c.z_re, deltaZ: c.Dz }).opticalDepth(cosmology);
      expect(Math.abs(tau - c.tau)).toBeLessThan(4e-5);
    },
  );

  // Planck 2013 XVI table 5, 2015 XIII table 4, 2018 VI table 2, as shipped with astropy 5.2.1.
  const shipped = published.a_astropy_shipped;
  it.each([
    ["Planck 2013", shipped.Planck13],
    ["Planck 2015", shipped.Planck15],
    ["Planck 2018", shipped.Planck18],
  ])("%s: τ at the printed midpoint lies within 0.0005 of the printed τ", (_, release) => {
    const used = release.computed.cosmology_used;
    const h = used.H0 / 100;
    const cosmology = background({
      h,
      omegaBh2: used.Ob0 * h * h,
      omegaCh2: (used.Om0 - used.Ob0) * h * h,
    });
    const tau = tanhHistory({ zRe: release.as_shipped.z_reion.value }).opticalDepth(cosmology);
    expect(Math.abs(tau - release.as_shipped.tau)).toBeLessThan(0.0005);
    // The offset is real (a posterior mean is not a curve through its midpoint): keep it exactly.
    expectRelative(tau, release.computed.tau_tanh_at_shipped_z_reion);
    expectRelative(cosmology.age(0), release.computed.t0_spec_cosmology_Gyr);
  });

  const columns = Object.entries(published.b_planck2018_VI_table2_from_memory.columns);
  it.each(columns)(
    "2018 VI table 2, %s (from memory): the offsets are as computed elsewhere",
    (_, c) => {
      const cosmology = background({
        h: c.published.H0 / 100,
        omegaBh2: c.published.ombh2,
        omegaCh2: c.published.omch2,
      });
      const tau = tanhHistory({ zRe: c.published.z_re }).opticalDepth(cosmology);
      expectRelative(tau, c.computed.tau_tanh);
      expect(Math.abs(tau - c.published.tau)).toBeLessThan(0.0005);
      expectRelative(cosmology.age(0), c.computed.age_Gyr);
    },
  );
});
