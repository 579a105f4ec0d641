import { type Background, HIGHEST_REDSHIFT, secondHelium } from "~shared/cosmology/background";
import { DomainError } from "~shared/errors/DomainError";
import { requireWithin } from "~shared/numerics/require";

/** The families of histories there are. */
export type HistoryKind = "tanh" | "powerLaw" | "tabulated";

/** Something a reader should know about a history, for display. */
export interface HistoryWarning {
  readonly code: "leaksAtHighRedshift" | "notMonotone";
  readonly text: string;
}

/** A model of the neutral fraction against redshift, whatever its family. */
export interface History {
  readonly kind: HistoryKind;
  /** Parameters by name; empty for a tabulated history. */
  readonly parameters: Readonly<Record<string, number>>;
  /** Redshifts where a derivative jumps; integrals are split there. */
  readonly breaks: readonly number[];
  /** Lowest and highest redshift of a table; null for a family defined everywhere. */
  readonly covered: readonly [low: number, high: number] | null;
  readonly warnings: readonly HistoryWarning[];

  /** Volume-averaged neutral fraction of hydrogen at z ≥ 0; in [0, 1]. */
  x(z: number): number;
  /** 1 − x(z), with its own digits where x is close to 1. */
  ionized(z: number): number;
  /** Free electrons per hydrogen nucleus at z: (1 + f_He) Q + f_He × (second helium, a step at 3.5). */
  electronsPerHydrogen(background: Background, z: number): number;
  /**
   * Optical depth to electron scattering from z1 (default 0) to z2 (default 50, the total).
   * Q stands for the mass-weighted ionization and residual electrons (~2e-4) are left out.
   * @throws {DomainError} Unless 0 ≤ z1 ≤ z2 ≤ HIGHEST_REDSHIFT.
   */
  opticalDepth(background: Background, z1?: number, z2?: number): number;
  /** Redshift at which x = f; the highest one where there are several; null when there is none at z ≥ 0. */
  redshiftAtFraction(f: number): number | null;
  /** z(x = f1) − z(x = f2), default 0.75 → 0.25; null when either is missing. */
  duration(f1?: number, f2?: number): number | null;
  /** Time from x = f1 to x = f2, million years of 365.25 days; null when either redshift is missing. */
  durationMyr(background: Background, f1?: number, f2?: number): number | null;
  /**
   * Mean of x over [zLow, zHigh] by redshift; x itself where the two are equal.
   * @throws {DomainError} Unless 0 ≤ zLow ≤ zHigh.
   */
  binMean(zLow: number, zHigh: number): number;
  /** Whether a value over [zLow, zHigh] needs nothing outside the table. */
  covers(zLow: number, zHigh: number): boolean;
}

/** What a family has to know; the rest of History follows from it. A new family is one file with this. */
export interface HistoryCore {
  readonly kind: HistoryKind;
  readonly parameters: Readonly<Record<string, number>>;
  readonly breaks: readonly number[];
  readonly covered: readonly [number, number] | null;
  readonly warnings: readonly HistoryWarning[];
  x(z: number): number;
  ionized(z: number): number;
  /** ∫ Q × depthDensity over [z1, z2], for 0 ≤ z1 < z2. */
  hydrogenDepth(background: Background, z1: number, z2: number): number;
  redshiftAtFraction(f: number): number | null;
  /** ∫ x dz over [zLow, zHigh], for 0 ≤ zLow < zHigh. */
  integral(zLow: number, zHigh: number): number;
}

/**
 * The full interface over a family's core.
 *
 * @param core - What the family knows.
 * @returns A history whose methods throw a DomainError for redshifts, fractions and bins out of range, as
 *   History says of each.
 * @throws Nothing itself; a family checks its own parameters.
 */
export function historyOf(core: HistoryCore): History {
  const { covered } = core;
  const redshiftAtFraction = (f: number): number | null => {
    requireWithin("f", f, 0, 1);
    // At 0 and 1 every redshift beyond the ends would do: there is no one answer.
    return f === 0 || f === 1 ? null : core.redshiftAtFraction(f);
  };
  return {
    kind: core.kind,
    parameters: core.parameters,
    breaks: core.breaks,
    covered,
    warnings: core.warnings,
    x: core.x,
    ionized: core.ionized,
    electronsPerHydrogen: (background, z) =>
      (1 + background.fHe) * core.ionized(z) + background.fHe * secondHelium(z),
    opticalDepth: (background, z1 = 0, z2 = 50) => {
      requireWithin("z1", z1, 0, HIGHEST_REDSHIFT);
      requireWithin("z2", z2, z1, HIGHEST_REDSHIFT);
      if (z1 === z2) return 0;
      return (
        (1 + background.fHe) * core.hydrogenDepth(background, z1, z2) +
        background.secondHeliumDepth(z1, z2)
      );
    },
    redshiftAtFraction,
    duration: (f1 = 0.75, f2 = 0.25) => {
      const from = redshiftAtFraction(f1);
      const to = redshiftAtFraction(f2);
      return from === null || to === null ? null : from - to;
    },
    durationMyr: (background, f1 = 0.75, f2 = 0.25) => {
      const from = redshiftAtFraction(f1);
      const to = redshiftAtFraction(f2);
      return from === null || to === null
        ? null
        : 1000 * (background.age(to) - background.age(from));
    },
    binMean: (zLow, zHigh) => {
      if (!(zLow >= 0 && zLow <= zHigh && zHigh < Infinity)) {
        throw new DomainError("bin", `[${zLow}, ${zHigh}]`, "0 ≤ low ≤ high");
      }
      return zLow === zHigh ? core.x(zLow) : core.integral(zLow, zHigh) / (zHigh - zLow);
    },
    covers: (zLow, zHigh) => covered === null || (zLow >= covered[0] && zHigh <= covered[1]),
  };
}
