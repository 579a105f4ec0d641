import fc from "fast-check";

import reference from "../../fixtures/checks/reference.json";
import published from "../../fixtures/checks/published.json";
import { background } from "~shared/cosmology/background";
import type { History } from "~shared/history";
import { powerLawHistory, tabulatedHistory, tanhHistory } from "~shared/history";
import { integrateAdaptive } from "~shared/numerics/quadrature";

const cosmology = background();
const redshift = fc.double({ min: 0, max: 30, noNaN: true });
const tanh = fc
  .tuple(fc.double({ min: 4, max: 14, noNaN: true }), fc.double({ min: 0.05, max: 4, noNaN: true }))
  .map(([zRe, deltaZ]) => tanhHistory({ zRe, deltaZ }));
const powerLaw = fc
  .tuple(
    fc.double({ min: 0, max: 9, noNaN: true }),
    fc.double({ min: 0.3, max: 12, noNaN: true }),
    fc.double({ min: 0.5, max: 25, noNaN: true }),
  )
  .map(([zEnd, alpha, span]) => powerLawHistory({ zEnd, alpha, zEarly: zEnd + span }));
const table = fc
  .array(
    fc.tuple(
      fc.double({ min: 0.1, max: 3, noNaN: true }),
      fc.double({ min: 0, max: 1, noNaN: true }),
    ),
    {
      minLength: 2,
      maxLength: 10,
    },
  )
  .map((steps) => {
    let z = 3;
    return tabulatedHistory(
      steps.map(([h]) => (z += h)),
      steps.map(([, x]) => x),
    );
  });
const anyHistory = fc.oneof(tanh, powerLaw, table);

describe("every history", () => {
  it("keeps the neutral fraction in [0, 1] and its complement with it", () => {
    fc.assert(
      fc.property(anyHistory, redshift, (history, z) => {
        const x = history.x(z);
        const q = history.ionized(z);
        return x >= 0 && x <= 1 && q >= 0 && q <= 1 && Math.abs(x + q - 1) < 1e-14;
      }),
      { numRuns: 2000, seed: 21 },
    );
  });

  it("adds up optical depths of adjoining ranges", () => {
    fc.assert(
      fc.property(anyHistory, redshift, redshift, redshift, (history, a, b, c) => {
        const [z1, z2, z3] = [a, b, c].sort((p, q) => p - q) as [number, number, number];
        const whole = history.opticalDepth(cosmology, z1, z3);
        const parts =
          history.opticalDepth(cosmology, z1, z2) + history.opticalDepth(cosmology, z2, z3);
        expect(Math.abs(whole - parts)).toBeLessThan(1e-10 * whole + 1e-16);
      }),
      { numRuns: 300, seed: 22 },
    );
  });

  it("has the optical depth of its own integrand", () => {
    // Against adaptive quadrature of (1 + f_He) Q + second helium with H(z) itself.
    fc.assert(
      fc.property(anyHistory, redshift, redshift, (history, a, b) => {
        const [z1, z2] = [Math.min(a, b), Math.max(a, b)];
        const integrand = (z: number) =>
          (cosmology.tauPrefactor * history.electronsPerHydrogen(cosmology, z) * (1 + z) ** 2) /
          cosmology.efunc(z);
        const ends = [z1, ...history.breaks.filter((z) => z > z1 && z < z2), z2];
        let sum = 0;
        for (let i = 0; i + 1 < ends.length; i++) {
          sum += integrateAdaptive(integrand, ends[i]!, ends[i + 1]!, 1e-12);
        }
        expect(Math.abs(history.opticalDepth(cosmology, z1, z2) - sum)).toBeLessThan(
          1e-9 * sum + 1e-16,
        );
      }),
      { numRuns: 60, seed: 23 },
    );
  });

  it("has the bin mean of its own x", () => {
    fc.assert(
      fc.property(
        anyHistory,
        redshift,
        fc.double({ min: 0.01, max: 4, noNaN: true }),
        (history, z, w) => {
          const ends = [z, ...history.breaks.filter((b) => b > z && b < z + w), z + w];
          let sum = 0;
          for (let i = 0; i + 1 < ends.length; i++) {
            sum += integrateAdaptive(history.x, ends[i]!, ends[i + 1]!, 1e-12);
          }
          expect(Math.abs(history.binMean(z, z + w) - sum / w)).toBeLessThan(1e-9);
        },
      ),
      { numRuns: 200, seed: 24 },
    );
  });

  it("has x = f at the redshift of f", () => {
    fc.assert(
      fc.property(anyHistory, fc.double({ min: 0.001, max: 0.999, noNaN: true }), (history, f) => {
        const z = history.redshiftAtFraction(f);
        if (z === null) return;
        expect(z).toBeGreaterThanOrEqual(0);
        expect(Math.abs(history.x(z) - f)).toBeLessThan(1e-9);
      }),
      { numRuns: 1000, seed: 25 },
    );
  });

  it("has no duration where a fraction has no redshift, and a bin mean of x in a bin of no width", () => {
    const wide = tanhHistory({ zRe: 5, deltaZ: 3 });
    expect(wide.duration(0.75, 0.05)).toBeNull();
    expect(wide.durationMyr(cosmology, 0.75, 0.05)).toBeNull();
    expect(wide.binMean(6, 6)).toBe(wide.x(6));
  });

  it("gives no redshift at exactly 0 or 1, where every redshift beyond the end would do", () => {
    const histories: History[] = [
      tanhHistory({ zRe: 7 }),
      powerLawHistory({ zEnd: 6, alpha: 4 }),
      tabulatedHistory([5, 10], [0, 1]),
    ];
    for (const history of histories) {
      expect(history.redshiftAtFraction(0)).toBeNull();
      expect(history.redshiftAtFraction(1)).toBeNull();
      expect(() => history.redshiftAtFraction(1.1)).toThrow("f must be");
    }
  });

  it("rejects ranges out of order or out of reach", () => {
    const history = tanhHistory({ zRe: 7 });
    expect(() => history.opticalDepth(cosmology, 5, 4)).toThrow("z2");
    expect(() => history.opticalDepth(cosmology, -1, 4)).toThrow("z1");
    expect(() => history.opticalDepth(cosmology, 0, 1000)).toThrow("z2");
    expect(() => history.binMean(7, 6)).toThrow("bin");
    expect(history.opticalDepth(cosmology, 7, 7)).toBe(0);
  });
});

describe("tanh history", () => {
  it("gives more optical depth the earlier its midpoint", () => {
    fc.assert(
      fc.property(
        fc.double({ min: 4, max: 14, noNaN: true }),
        fc.double({ min: 0.01, max: 1, noNaN: true }),
        fc.double({ min: 0.05, max: 3, noNaN: true }),
        (zRe, later, deltaZ) =>
          tanhHistory({ zRe: zRe + later, deltaZ }).opticalDepth(cosmology) >
          tanhHistory({ zRe, deltaZ }).opticalDepth(cosmology),
      ),
      { numRuns: 300, seed: 26 },
    );
  });

  it("tends to a sharp step as its width vanishes", () => {
    const step =
      (1 + cosmology.fHe) * cosmology.depthBetween(0, 7) + cosmology.secondHeliumDepth(0, 50);
    expect(tanhHistory({ zRe: 7, deltaZ: 1e-6 }).opticalDepth(cosmology)).toBeCloseTo(step, 9);
  });

  it("keeps relative digits of Q in the tail where ½(1 + tanh) loses them", () => {
    // published.json, e_definition_checks.naive_0.5(1+tanh)_Q_at_z15: stable 7.388484937155485e-16.
    const stable = published.e_definition_checks["naive_0.5(1+tanh)_Q_at_z15"].stable;
    const at15 = tanhHistory({ zRe: 7.67, deltaZ: 0.5 }).ionized(15);
    expect(at15 / stable).toBeCloseTo(1, 10);
  });

  it("has a duration that is not its width: 0.5494 from 0.75 to 0.25 at Δz 0.5", () => {
    // PHYSICS.md section 6, with 1.099 and 1.474 for 10–90 and 5–95 % at z_re 7.
    expect(tanhHistory({ zRe: 7.67 }).duration()).toBeCloseTo(0.5494, 4);
    const seven = tanhHistory({ zRe: 7, deltaZ: 0.5 });
    expect(seven.duration(0.9, 0.1)).toBeCloseTo(1.099, 3);
    expect(seven.duration(0.95, 0.05)).toBeCloseTo(1.474, 3);
  });

  it("has no redshift for a fraction it has already passed today", () => {
    const [edge] = reference.edge_cases;
    expect(edge!.id).toBe("pub-edge-1");
    const wide = tanhHistory({ zRe: 5, deltaZ: 3 });
    expect(wide.x(0)).toBeCloseTo(edge!.x_HI_at_z0!, 12);
    expect(wide.redshiftAtFraction(0.05)).toBeNull();
  });

  it("takes Δz 0.5 unless told otherwise", () => {
    expect(tanhHistory({ zRe: 7 }).parameters).toEqual({ zRe: 7, deltaZ: 0.5 });
  });

  it("rejects malformed parameters, naming them", () => {
    expect(() => tanhHistory({ zRe: -1 })).toThrow("zRe");
    expect(() => tanhHistory({ zRe: 7, deltaZ: 0 })).toThrow("deltaZ");
  });
});

describe("power-law history", () => {
  it("is ionized up to z_end and neutral from z_early", () => {
    const history = powerLawHistory({ zEnd: 6, alpha: 4 });
    expect([history.x(5.9), history.x(6), history.x(20), history.x(25)]).toEqual([0, 0, 1, 1]);
    expect(history.parameters).toEqual({ zEnd: 6, alpha: 4, zEarly: 20 });
  });
  it("keeps relative digits of x just above z_end", () => {
    // First order: x = α (z − z_end)/(z_early − z_end).
    const history = powerLawHistory({ zEnd: 6, alpha: 4 });
    expect(history.x(6 + 1e-12) / ((4 * 1e-12) / 14)).toBeCloseTo(1, 3);
    expect(history.binMean(6, 6 + 1e-8) / ((2 * 1e-8) / 14)).toBeCloseTo(1, 6);
  });
  it("is linear for an exponent of one", () => {
    const history = powerLawHistory({ zEnd: 6, alpha: 1, zEarly: 16 });
    expect(history.redshiftAtFraction(0.25)).toBeCloseTo(8.5, 12);
    expect(history.binMean(6, 16)).toBeCloseTo(0.5, 12);
  });
  it("rejects malformed parameters, naming them", () => {
    expect(() => powerLawHistory({ zEnd: -1, alpha: 4 })).toThrow("zEnd");
    expect(() => powerLawHistory({ zEnd: 6, alpha: 0 })).toThrow("alpha");
    expect(() => powerLawHistory({ zEnd: 6, alpha: 4, zEarly: 6 })).toThrow("zEarly");
  });
});

describe("tabulated history", () => {
  it("passes through its nodes and holds its ends outside", () => {
    const history = tabulatedHistory([5, 6, 8, 10], [0.01, 0.2, 0.7, 0.98]);
    expect([4, 5, 6, 8, 10, 12].map(history.x)).toEqual([0.01, 0.01, 0.2, 0.7, 0.98, 0.98]);
    expect(history.covered).toEqual([5, 10]);
    expect([history.covers(5, 10), history.covers(4.9, 6), history.covers(9, 10.1)]).toEqual([
      true,
      false,
      false,
    ]);
  });

  it("has the slopes of Fritsch and Butland, not those of Fritsch and Carlson", () => {
    // published.json, e_definition_checks.pchip_flavour: scipy's interior slopes.
    for (const flavour of published.e_definition_checks.pchip_flavour) {
      const history = tabulatedHistory(flavour.z, flavour.x_HI);
      flavour.z.slice(1, -1).forEach((z, i) => {
        const h = 1e-6;
        const slope = (history.x(z + h) - history.x(z - h)) / (2 * h);
        expect(slope).toBeCloseTo(flavour.scipy_interior_slopes[i + 1]!, 4);
      });
    }
  });

  it("stays monotone between monotone nodes", () => {
    fc.assert(
      fc.property(
        fc.array(fc.double({ min: 0, max: 1, noNaN: true }), { minLength: 3, maxLength: 9 }),
        (values) => {
          const x = [...values].sort((a, b) => a - b);
          const history = tabulatedHistory(
            x.map((_, i) => 5 + i),
            x,
          );
          for (let z = 5; z < 4 + x.length; z += 0.05) {
            if (history.x(z + 0.05) < history.x(z) - 1e-12) return false;
          }
          return true;
        },
      ),
      { numRuns: 200, seed: 27 },
    );
  });

  it("is linear between two nodes", () => {
    const history = tabulatedHistory([6, 8], [0.2, 0.8]);
    expect(history.x(6.5)).toBeCloseTo(0.35, 14);
    expect(history.warnings.map(({ code }) => code)).toEqual(["leaksAtHighRedshift"]);
  });

  it("leaks 0.035 of optical depth where Q = 0.05 is held from 12 to 50", () => {
    // PHYSICS.md section 2 and published.json, clamped_table_leftover: 0.03512514313444489.
    const leaking = tabulatedHistory([6, 9, 12], [0, 0.5, 0.95]);
    const leak = leaking.opticalDepth(cosmology, 12, 50);
    expect(leak).toBeCloseTo(
      published.d_sensitivities_of_definitions["clamped_table_leftover_Q=0.05_at_12<z<50_tau_abs"],
      9,
    );
    expect(leaking.warnings.map(({ code }) => code)).toEqual(["leaksAtHighRedshift"]);
    expect(tabulatedHistory([6, 9, 12], [0, 0.5, 0.99]).warnings).toEqual([]);
  });

  it("is allowed to fall with redshift, is warned of, and has the highest redshift of a fraction", () => {
    const bumpy = tabulatedHistory([5, 6, 7, 8, 9], [0, 0.6, 0.3, 0.7, 1]);
    expect(bumpy.warnings.map(({ code }) => code)).toEqual(["notMonotone"]);
    const z = bumpy.redshiftAtFraction(0.5)!;
    expect(z).toBeGreaterThan(7);
    expect(bumpy.x(z)).toBeCloseTo(0.5, 10);
    expect(bumpy.redshiftAtFraction(0.6)).toBeGreaterThan(7);
  });

  it("finds a fraction that is a node, and none outside its values", () => {
    const history = tabulatedHistory([5, 6, 8, 10], [0.1, 0.2, 0.7, 0.9]);
    expect(history.redshiftAtFraction(0.7)).toBe(8);
    expect(history.redshiftAtFraction(0.9)).toBe(10);
    expect(history.redshiftAtFraction(0.1)).toBe(5);
    expect(history.redshiftAtFraction(0.95)).toBeNull();
    expect(history.redshiftAtFraction(0.05)).toBeNull();
  });

  it.each<[string, number[], number[]]>([
    ["x[1]", [5, 6], [0, 1.2]],
    ["x[0]", [5, 6], [Number.NaN, 1]],
    ["z[0]", [-1, 6], [0, 1]],
    ["x[1] must be above", [6, 6], [0, 1]],
    ["table", [5, 6], [0]],
    ["table", [5], [0]],
  ])("rejects a malformed table, naming %s", (name, z, x) => {
    expect(() => tabulatedHistory(z, x)).toThrow(name);
  });
});
