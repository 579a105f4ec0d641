import { type Background, background } from "~shared/cosmology/background";
import type { History } from "~shared/history/history";
import { powerLawHistory } from "~shared/history/powerLaw";
import { tabulatedHistory } from "~shared/history/tabulated";
import { tanhHistory } from "~shared/history/tanh";

/** Cosmology as the check files write it. */
export interface CheckCosmology {
  H0: number;
  ombh2: number;
  omch2: number;
  Y: number;
}

/** History as the check files write it. */
export type CheckHistory =
  | { type: "tanh"; z_re: number; Dz: number }
  | { type: "power_law"; z_end: number; alpha: number; z_early: number }
  | { type: "tabulated"; z: number[]; x_HI: number[] };

export function backgroundOf({ H0, ombh2, omch2, Y }: CheckCosmology): Background {
  return background({ h: H0 / 100, omegaBh2: ombh2, omegaCh2: omch2, heliumFraction: Y });
}

export function historyOfCheck(history: CheckHistory): History {
  switch (history.type) {
    case "tanh":
      return tanhHistory({ zRe: history.z_re, deltaZ: history.Dz });
    case "power_law":
      return powerLawHistory({
        zEnd: history.z_end,
        alpha: history.alpha,
        zEarly: history.z_early,
      });
    case "tabulated":
      return tabulatedHistory(history.z, history.x_HI);
  }
}

/** PHYSICS.md section 2: relative 1e-8 for background and optical depth. */
export function expectRelative(actual: number, expected: number, tolerance = 1e-8): void {
  expect(Math.abs(actual - expected)).toBeLessThanOrEqual(tolerance * Math.abs(expected));
}
