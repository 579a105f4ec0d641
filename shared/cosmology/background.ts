import {
  BOLTZMANN_CONSTANT,
  CMB_TEMPERATURE,
  ELECTRONVOLT,
  GIGAYEAR,
  GRAVITATIONAL_CONSTANT,
  HELIUM_TO_HYDROGEN_MASS,
  HYDROGEN_MASS,
  MEGAPARSEC,
  NEUTRINO_MASSES_EV,
  NEUTRINO_SPECIES,
  PLANCK_CONSTANT,
  SPEED_OF_LIGHT,
  THOMSON_CROSS_SECTION,
} from "~shared/constants/physical";
import { requireFinite, requirePositive, requireWithin } from "~shared/numerics/require";
import { PiecewiseSeries } from "~shared/numerics/piecewiseSeries";
import { integratePanels } from "~shared/numerics/quadrature";
import { logistic } from "~shared/numerics/special";

/** Parameters of a flat ΛCDM background; dimensionless. */
export interface BackgroundParameters {
  /** Hubble constant in units of 100 km/s/Mpc. */
  readonly h: number;
  /** Physical density of baryons ω_b = Ω_b h². */
  readonly omegaBh2: number;
  /** Physical density of cold dark matter ω_c = Ω_c h². */
  readonly omegaCh2: number;
  /** Mass fraction of helium Y. */
  readonly heliumFraction: number;
}

/** Planck Collaboration 2020 (2018 results VI), A&A 641, A6, table 2, TT,TE,EE+lowE+lensing. */
export const DEFAULT_BACKGROUND: BackgroundParameters = {
  h: 0.6736,
  omegaBh2: 0.02237,
  omegaCh2: 0.12,
  heliumFraction: 0.2454,
};

/** Highest redshift to which optical depths can be asked. */
export const HIGHEST_REDSHIFT = 200;

/** Second helium is taken as a step of this width at this redshift, in every history. */
const SECOND_HELIUM_REDSHIFT = 3.5;
const SECOND_HELIUM_WIDTH = 0.5;

/** Uniform panels in u = √(1 + z), fine enough that every table below holds about 1e-14. */
const PANEL_WIDTH = 1 / 16;
const PANELS = Math.ceil((Math.sqrt(1 + HIGHEST_REDSHIFT) - 1) / PANEL_WIDTH);

/**
 * A flat ΛCDM background with photons, two massless and one massive neutrino, and what optical
 * depths and ages need from it. Its tables are built on first use and then serve every history.
 */
export class Background {
  readonly omegaM: number;
  readonly omegaPhoton: number;
  readonly omegaLambda: number;
  /** Hubble rate today, 1/s. */
  readonly h0PerSecond: number;
  /** Hydrogen nuclei per m³ today. */
  readonly nH0: number;
  /** Helium nuclei per hydrogen nucleus. */
  readonly fHe: number;
  /** c σ_T n_H0 / H_0, dimensionless. */
  readonly tauPrefactor: number;
  private depthTable: PiecewiseSeries | null = null;
  private heliumTable: PiecewiseSeries | null = null;
  private timeTable: PiecewiseSeries | null = null;
  private ageAtTableEnd = 0;

  /** @throws {DomainError} If h or a density is not positive or Y not in [0, 1). */
  constructor(readonly parameters: BackgroundParameters) {
    const { h, omegaBh2, omegaCh2, heliumFraction } = parameters;
    requirePositive("h", h);
    requirePositive("omegaBh2", omegaBh2);
    requireWithin("omegaCh2", requireFinite("omegaCh2", omegaCh2), 0, 10);
    requireWithin("heliumFraction", heliumFraction, 0, 0.99);
    this.h0PerSecond = (h * 1e5) / MEGAPARSEC;
    const criticalDensity =
      (3 * this.h0PerSecond * this.h0PerSecond) / (8 * Math.PI * GRAVITATIONAL_CONSTANT);
    this.omegaM = (omegaBh2 + omegaCh2) / (h * h);
    this.omegaPhoton = photonDensity() / criticalDensity;
    this.omegaLambda = 1 - this.omegaM - this.omegaPhoton * (1 + neutrinosPerPhoton(0));
    this.nH0 = ((1 - heliumFraction) * (omegaBh2 / (h * h)) * criticalDensity) / HYDROGEN_MASS;
    this.fHe = heliumFraction / (HELIUM_TO_HYDROGEN_MASS * (1 - heliumFraction));
    this.tauPrefactor = (SPEED_OF_LIGHT * THOMSON_CROSS_SECTION * this.nH0) / this.h0PerSecond;
  }

  /** H(z)/H_0, dimensionless; z > −1. */
  efunc(z: number): number {
    const a = 1 + z;
    const radiation = this.omegaPhoton * (1 + neutrinosPerPhoton(z)) * a;
    return Math.sqrt((this.omegaM + radiation) * a * a * a + this.omegaLambda);
  }

  /** Hubble rate at z, km/s/Mpc. */
  hubble(z: number): number {
    return 100 * this.parameters.h * this.efunc(z);
  }

  /**
   * Age of the Universe at z, ∫_z^∞ dz/((1+z)H), in Gyr of 1e9 × 365.25 days.
   *
   * @throws {DomainError} If z is negative or not finite.
   */
  age(z: number): number {
    requireFinite("z", z);
    requireWithin("z", z, 0, Infinity);
    if (z > HIGHEST_REDSHIFT) return this.ageDirect(z);
    const table = this.time();
    return this.ageAtTableEnd + table.integral(Math.sqrt(1 + z), table.end);
  }

  /**
   * dτ/du per ionized hydrogen, with u = √(1+z): c σ_T n_H0 (1+z)²/H × dz/du.
   * For 1 ≤ u ≤ √(1 + HIGHEST_REDSHIFT), unchecked.
   */
  depthDensity(u: number): number {
    return this.depth().value(u);
  }

  /** Optical depth of one electron per hydrogen from z1 to z2 (0 ≤ z1 ≤ z2 ≤ HIGHEST_REDSHIFT). */
  depthBetween(z1: number, z2: number): number {
    return this.depth().integral(Math.sqrt(1 + z1), Math.sqrt(1 + z2));
  }

  /** Optical depth of the second electrons of helium alone, from z1 to z2; the same for all histories. */
  secondHeliumDepth(z1: number, z2: number): number {
    this.heliumTable ??= new PiecewiseSeries(
      (u) => this.fHe * secondHelium(u * u - 1) * this.depthIntegrand(u),
      1,
      PANEL_WIDTH,
      PANELS,
      12,
    );
    return this.heliumTable.integral(Math.sqrt(1 + z1), Math.sqrt(1 + z2));
  }

  private depth(): PiecewiseSeries {
    this.depthTable ??= new PiecewiseSeries(
      (u) => this.depthIntegrand(u),
      1,
      PANEL_WIDTH,
      PANELS,
      8,
    );
    return this.depthTable;
  }

  private depthIntegrand(u: number): number {
    return (2 * this.tauPrefactor * u ** 5) / this.efunc(u * u - 1);
  }

  private time(): PiecewiseSeries {
    if (this.timeTable === null) {
      const hubbleTimeGyr = 1 / (this.h0PerSecond * GIGAYEAR);
      this.timeTable = new PiecewiseSeries(
        (u) => (2 * hubbleTimeGyr) / (u * this.efunc(u * u - 1)),
        1,
        PANEL_WIDTH,
        PANELS,
        8,
      );
      this.ageAtTableEnd = this.ageDirect(this.timeTable.end ** 2 - 1);
    }
    return this.timeTable;
  }

  /** Age by direct quadrature over the scale factor a = s⁴, smooth from radiation to matter. */
  private ageDirect(z: number): number {
    const integrand = (s: number): number => {
      const a = s ** 4;
      return a === 0 ? 0 : 4 / (s * this.efunc(1 / a - 1));
    };
    const top = (1 + z) ** -0.25;
    return integratePanels(integrand, 0, top, 12, 16) / (this.h0PerSecond * GIGAYEAR);
  }
}

/**
 * A background of these parameters. Equal parameters share one object, so that its tables are built once.
 *
 * @param parameters - Those that differ from the default, Planck 2018 VI, table 2; dimensionless.
 * @throws {DomainError} If h or a density is not positive or Y not in [0, 1).
 */
export function background(parameters: Partial<BackgroundParameters> = {}): Background {
  const full = { ...DEFAULT_BACKGROUND, ...parameters };
  const key = `${full.h} ${full.omegaBh2} ${full.omegaCh2} ${full.heliumFraction}`;
  let found = known.get(key);
  if (!found) {
    found = new Background(full);
    // A slider over h makes many; the tables of old ones are not worth keeping.
    if (known.size >= 32) known.clear();
    known.set(key, found);
  }
  return found;
}
const known = new Map<string, Background>();

/**
 * Fraction of helium ionized twice, ½[1 + tanh((3.5 − z)/0.5)]: common practice, not a measurement.
 *
 * @param z - Redshift, any number.
 * @returns In [0, 1].
 */
export function secondHelium(z: number): number {
  return logistic((2 * (SECOND_HELIUM_REDSHIFT - z)) / SECOND_HELIUM_WIDTH);
}

/** Density of the photons today, kg/m³. */
function photonDensity(): number {
  const radiationConstant =
    (8 * Math.PI ** 5 * BOLTZMANN_CONSTANT ** 4) / (15 * (PLANCK_CONSTANT * SPEED_OF_LIGHT) ** 3);
  return (radiationConstant * CMB_TEMPERATURE ** 4) / SPEED_OF_LIGHT ** 2;
}

/** 0.3173 m c²/(k T_ν0) of each neutrino. */
const SCALED_MASSES = NEUTRINO_MASSES_EV.map(
  (mass) =>
    (0.3173 * mass * ELECTRONVOLT) / (BOLTZMANN_CONSTANT * CMB_TEMPERATURE * Math.cbrt(4 / 11)),
);

/**
 * ρ_ν/ρ_γ at z: the fit of Komatsu et al. (2011), ApJS 192, 18, eq. 26; within 0.4 % of the exact integral.
 */
function neutrinosPerPhoton(z: number): number {
  let sum = 0;
  for (const mass of SCALED_MASSES) {
    sum += mass === 0 ? 1 : (1 + (mass / (1 + z)) ** 1.83) ** (1 / 1.83);
  }
  return 0.22710731766 * (NEUTRINO_SPECIES / 3) * sum;
}
