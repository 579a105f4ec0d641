/**
 * Physical constants in SI units unless the name says otherwise: CODATA 2018 (Tiesinga et al. 2021,
 * RMP 93, 025010) and the IAU 2015 parsec. The mass of hydrogen is a convention of this registry.
 */

/** Speed of light, m/s, exact. */
export const SPEED_OF_LIGHT = 299792458;
/** Newton's constant, m³ kg⁻¹ s⁻². */
export const GRAVITATIONAL_CONSTANT = 6.6743e-11;
/** Thomson cross-section, m². */
export const THOMSON_CROSS_SECTION = 6.6524587321e-29;
/** Mass of hydrogen, kg: 1.00784 u by convention, the lower edge of the standard atomic weight. */
export const HYDROGEN_MASS = 1.6735575e-27;
/** Mass of a helium atom in masses of hydrogen. */
export const HELIUM_TO_HYDROGEN_MASS = 3.9715;
/** Boltzmann's constant, J/K, exact. */
export const BOLTZMANN_CONSTANT = 1.380649e-23;
/** Planck's constant, J s, exact. */
export const PLANCK_CONSTANT = 6.62607015e-34;
/** Electronvolt, J, exact. */
export const ELECTRONVOLT = 1.602176634e-19;
/** Megaparsec, m. */
export const MEGAPARSEC = 3.085677581491367e22;
/** Gigayear, s: 1e9 × 365.25 days. */
export const GIGAYEAR = 1e9 * 365.25 * 86400;
/** Rest frequency of the 21-cm line of neutral hydrogen, MHz. */
export const LINE_21CM_MHZ = 1420.405751768;

/** Temperature of the microwave background today, K (Fixsen 2009, ApJ 707, 916). */
export const CMB_TEMPERATURE = 2.7255;
/** Effective number of neutrino species. */
export const NEUTRINO_SPECIES = 3.046;
/** Masses of the three neutrinos, eV. */
export const NEUTRINO_MASSES_EV = [0, 0, 0.06] as const;
