/** How many helium nuclei come with hydrogen: what an electron fraction may count beside it. */

/** Mass fraction of primordial helium (Planck 2018 VI, table 2). */
export const HELIUM_MASS_FRACTION = 0.2454;
/** Helium nuclei per hydrogen nucleus: Y / (3.9715 (1 − Y)), 3.9715 being the ratio of the atoms' masses. */
export const HELIUM_PER_HYDROGEN = HELIUM_MASS_FRACTION / (3.9715 * (1 - HELIUM_MASS_FRACTION));
