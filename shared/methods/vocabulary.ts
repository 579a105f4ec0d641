/** The method vocabulary: families drive marker and filter; a tag belongs to exactly one family. */

export const METHOD_FAMILIES = [
  "dampingWing",
  "darkPixels",
  "forestOpacity",
  "luminosityFunction",
  "lineStrength",
  "emitterClustering",
  "twentyOneCm",
  "cmb",
  "other",
] as const;
export type MethodFamily = (typeof METHOD_FAMILIES)[number];

export const FAMILY_NAMES: Record<MethodFamily, string> = {
  dampingWing: "Damping wing",
  darkPixels: "Dark pixels",
  forestOpacity: "Forest opacity",
  luminosityFunction: "Lyα luminosity function",
  lineStrength: "Lyα line strength",
  emitterClustering: "Emitter clustering",
  twentyOneCm: "21-cm signal",
  cmb: "CMB",
  other: "Other",
};

export interface MethodTag {
  tag: string;
  family: MethodFamily;
  name: string;
  definition: string;
  /** The usual systematic, shown as a caution on the record. */
  caution: string;
  /** Other spellings met in hand-kept lists; matched without case or punctuation. */
  aliases: readonly string[];
}

export const METHOD_TAGS: readonly MethodTag[] = [
  {
    tag: "quasarDampingWing",
    family: "dampingWing",
    name: "Quasar damping wing",
    definition: "Absorption redward of Lyα in one quasar spectrum.",
    caution: "Depends on the reconstruction of the intrinsic spectrum.",
    aliases: ["damping wing (quasar)", "qso damping wing", "quasar wing"],
  },
  {
    tag: "stackedQuasarDampingWing",
    family: "dampingWing",
    name: "Stacked quasar damping wing",
    definition: "Mean damping wing of several quasar spectra.",
    caution: "A stack shares its sightlines with single analyses.",
    aliases: ["damping wing (stack)", "stacked damping wing"],
  },
  {
    tag: "galaxyDampingWing",
    family: "dampingWing",
    name: "Galaxy damping wing",
    definition: "Lyα break profile of galaxies.",
    caution: "Local neutral gas of the galaxy mimics the signal.",
    aliases: ["damping wing (galaxy)", "galaxy wing"],
  },
  {
    tag: "burstDampingWing",
    family: "dampingWing",
    name: "Gamma-ray burst damping wing",
    definition: "Damping wing in the afterglow of a gamma-ray burst.",
    caution: "The host's own absorption must be separated.",
    aliases: ["damping wing (gamma-ray burst)", "grb damping wing"],
  },
  {
    tag: "darkPixels",
    family: "darkPixels",
    name: "Dark pixels",
    definition: "Fraction of forest pixels without flux.",
    caution: "Nearly model-independent, yet only an upper limit.",
    aliases: ["dark pixel fraction", "dark pixel"],
  },
  {
    tag: "darkGaps",
    family: "forestOpacity",
    name: "Dark gaps",
    definition: "Lengths of stretches without transmission.",
    caution: "Depends on simulated opacity fluctuations.",
    aliases: ["dark gap", "dark gap lengths"],
  },
  {
    tag: "forestOpacity",
    family: "forestOpacity",
    name: "Forest opacity",
    definition: "Effective optical depth of the Lyman forests.",
    caution: "Saturates at small neutral fractions.",
    aliases: ["lya forest opacity", "effective optical depth"],
  },
  {
    tag: "nearZones",
    family: "forestOpacity",
    name: "Near zones",
    definition: "Sizes of ionized regions around quasars.",
    caution: "Depends on quasar age and luminosity.",
    aliases: ["near zone", "proximity zones"],
  },
  {
    tag: "meanFreePath",
    family: "forestOpacity",
    name: "Mean free path",
    definition: "Mean free path of ionizing photons.",
    caution: "The step to a neutral fraction is a model.",
    aliases: ["mfp"],
  },
  {
    tag: "emitterLuminosityFunction",
    family: "luminosityFunction",
    name: "Lyα luminosity function",
    definition: "Evolution of the luminosity function of Lyα emitters.",
    caution: "Depends on the assumed intrinsic evolution.",
    aliases: [
      "lya emitter luminosity function",
      "lae luminosity function",
      "lya luminosity function",
      "laelf",
    ],
  },
  {
    tag: "equivalentWidths",
    family: "lineStrength",
    name: "Lyα equivalent widths",
    definition: "Distribution of Lyα equivalent widths of galaxies.",
    caution: "Depends on the intrinsic line and velocity offset.",
    aliases: ["lya equivalent widths", "equivalent width distribution"],
  },
  {
    tag: "emitterFraction",
    family: "lineStrength",
    name: "Lyα emitter fraction",
    definition: "Fraction of galaxies that show Lyα.",
    caution: "Depends on selection and completeness.",
    aliases: ["lya fraction", "lya emitter fraction"],
  },
  {
    tag: "lineProfile",
    family: "lineStrength",
    name: "Lyα line profile",
    definition: "Shape of the Lyα line.",
    caution: "Depends on outflow models.",
    aliases: ["lya line profile", "lya profile"],
  },
  {
    tag: "emitterClustering",
    family: "emitterClustering",
    name: "Emitter clustering",
    definition: "Angular correlation of Lyα emitters.",
    caution: "Halo model and patchiness are degenerate.",
    aliases: ["lya emitter clustering", "lae clustering"],
  },
  {
    tag: "ionizedRegionSizes",
    family: "emitterClustering",
    name: "Ionized-region sizes",
    definition: "Sizes of ionized regions around emitters.",
    caution: "Few regions, strong cosmic variance.",
    aliases: ["bubble sizes", "ionized bubbles"],
  },
  {
    tag: "twentyOneCmPower",
    family: "twentyOneCm",
    name: "21-cm power",
    definition: "Power spectrum of the 21-cm line.",
    caution: "Foregrounds and calibration dominate the error.",
    aliases: ["21-cm power spectrum", "21cm power"],
  },
  {
    tag: "twentyOneCmGlobal",
    family: "twentyOneCm",
    name: "21-cm sky average",
    definition: "Sky-averaged 21-cm signal.",
    caution: "Degenerate with smooth foregrounds.",
    aliases: ["21-cm global signal", "sky-averaged signal"],
  },
  {
    tag: "twentyOneCmForest",
    family: "twentyOneCm",
    name: "21-cm forest",
    definition: "21-cm absorption against radio sources.",
    caution: "Depends on the heating of the gas.",
    aliases: ["21cm forest"],
  },
  {
    tag: "cmbPolarization",
    family: "cmb",
    name: "CMB polarization",
    definition: "Large-scale polarization of the CMB.",
    caution: "The optical depth came from a history family.",
    aliases: ["cmb optical depth", "large-scale polarization"],
  },
  {
    tag: "kineticSz",
    family: "cmb",
    name: "Kinetic SZ power",
    definition: "Small-scale CMB power from patchy reionization.",
    caution: "Depends on the late-time contribution that was removed.",
    aliases: ["kinetic sz power", "ksz", "kinetic sz"],
  },
  {
    tag: "thermalHistory",
    family: "other",
    name: "Thermal history",
    definition: "Temperature of the gas after reionization.",
    caution: "The step to a neutral fraction is a model.",
    aliases: ["igm temperature"],
  },
  {
    tag: "sourceBudget",
    family: "other",
    name: "Source budget",
    definition: "Ionizing photons counted from galaxies.",
    caution: "Escape fraction and faint sources are assumed; never independent.",
    aliases: ["photon budget"],
  },
  {
    tag: "jointInference",
    family: "other",
    name: "Joint inference",
    definition: "Posterior from several data sets at once.",
    caution: "Contains other constraints; never independent of them.",
    aliases: ["joint fit", "joint constraints"],
  },
];

/**
 * Family a record is shown under: the one its tags share; several families make it a joint result,
 * shown as "other".
 *
 * @returns Null when no tag belongs to the vocabulary.
 */
export function familyOf(tags: readonly string[]): MethodFamily | null {
  const families = familiesOf(tags);
  if (families.length > 1) return "other";
  return families[0] ?? null;
}

/** Every family the tags belong to, in the order of the vocabulary: what a filter by family looks at. */
export function familiesOf(tags: readonly string[]): MethodFamily[] {
  const met = new Set(
    tags.map((tag) => METHOD_TAGS.find((entry) => entry.tag === tag)?.family ?? null),
  );
  return METHOD_FAMILIES.filter((family) => met.has(family));
}

/** Letters and digits only, Lyα spelled one way: what two spellings of one word share. */
export function looseWord(text: string): string {
  return text
    .replace(/[αΑ]/g, "a")
    .normalize("NFKD")
    .toLowerCase()
    .replace(/lyman/g, "ly")
    .replace(/alpha/g, "a")
    .replace(/[^a-z0-9]+/g, "");
}

/** The tag a hand-kept list means by a word: its tag, name or one of its aliases, without case or punctuation. */
export function findTag(word: string): MethodTag | null {
  const loose = looseWord(word);
  if (loose === "") return null;
  return (
    METHOD_TAGS.find((entry) =>
      [entry.tag, entry.name, ...entry.aliases].some((spelling) => looseWord(spelling) === loose),
    ) ?? null
  );
}
