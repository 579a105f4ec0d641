/** Papers, mistakes made in copying them, and honest copies: all invented. */
import type { ConstraintFields } from "~shared/statement/fields";

export type Changes = Partial<ConstraintFields>;

const NO_VALUE = { value: null, plus: null, minus: null, estimator: null } as const;
const NO_REDSHIFT = { z: null, zRole: null, scale: null, weighting: null } as const;

/** ln L of a normal curve about `peak`, from 0 to 1. */
function curve(peak: number, rows = 41): string {
  const at = Array.from({ length: rows }, (_, index) => index / (rows - 1));
  return at
    .map((x) => `${x.toFixed(3)},${(-0.5 * ((x - peak) / 0.08) ** 2).toFixed(4)}`)
    .join("\n");
}

/** What ten papers print, as an attentive person enters it. */
export const PAPERS = {
  twoSided: {
    level: "percent68",
    printedText: "At z = 7.13 we find x_HI = 0.43 +0.12 −0.15 (68%).",
  },
  silent: {
    level: "percent68",
    printedText: "At z = 7.13 we find x_HI = 0.43 +0.12 −0.15.",
  },
  ionized: {
    species: "ionized",
    value: "0.30",
    plus: "0.10",
    minus: "0.05",
    level: "percent68",
    printedText: "Q_HII = 0.30 +0.10 −0.05 (68%)",
  },
  bin: {
    z: null,
    zLow: "6.5",
    zHigh: "7.1",
    zRole: "binAverage",
    printedText: "Averaged over 6.5 < z < 7.1 it is 0.43 +0.12 −0.15.",
  },
  upperLimit: {
    ...NO_VALUE,
    kind: "upperLimit",
    value: "0.29",
    level: "percent95",
    printedText: "x_HI < 0.29 at 95% confidence",
  },
  lowerLimit: {
    ...NO_VALUE,
    kind: "lowerLimit",
    species: "ionized",
    value: "0.80",
    level: "percent95",
    printedText: "Q_HII > 0.80 (95%)",
  },
  ownSigma: {
    ...NO_VALUE,
    kind: "upperLimit",
    limitBase: "0.10",
    limitSigma: "0.24",
    level: "oneSigma",
    printedText: "below 0.10 + 0.24 (1σ)",
  },
  band: {
    ...NO_VALUE,
    kind: "band",
    bandLow: "0.21",
    bandHigh: "0.64",
    level: "percent95",
    printedText: "0.21 to 0.64 (95%)",
  },
  logarithm: {
    scale: "log10",
    weighting: "mass",
    value: "-3.2",
    plus: "0.4",
    minus: "0.5",
    level: "percent68",
    printedText: "log x_HI = −3.2 +0.4 −0.5 (68%, mass-weighted)",
  },
  electrons: {
    species: "electron",
    helium: "included",
    value: "0.83",
    plus: "0.10",
    minus: "0.12",
    level: "percent68",
    printedText: "x_e = 0.83 +0.10 −0.12 (68%), with helium",
  },
  opticalDepth: {
    ...NO_REDSHIFT,
    quantity: "opticalDepth",
    species: null,
    value: "0.0561",
    plus: "0.0071",
    minus: "0.0062",
    level: "percent68",
    methodTags: ["cmbPolarization"],
    printedText: "τ = 0.0561 +0.0071 −0.0062 (68%)",
  },
  depthRange: {
    ...NO_REDSHIFT,
    ...NO_VALUE,
    quantity: "opticalDepthRange",
    species: null,
    rangeLow: "15",
    rangeHigh: "30",
    kind: "upperLimit",
    value: "0.019",
    level: "percent95",
    methodTags: ["cmbPolarization"],
    printedText: "τ(15, 30) < 0.019 (95%)",
  },
  midpoint: {
    ...NO_REDSHIFT,
    quantity: "redshiftAtFraction",
    species: "ionized",
    fraction: "0.50",
    value: "7.64",
    plus: "0.74",
    minus: "0.58",
    level: "percent68",
    methodTags: ["cmbPolarization"],
    printedText: "half ionized at z = 7.64 +0.74 −0.58 (68%)",
  },
  duration: {
    ...NO_REDSHIFT,
    quantity: "duration",
    species: "ionized",
    fractionFrom: "0.25",
    fractionTo: "0.75",
    durationUnit: "redshift",
    value: "2.8",
    plus: "0.6",
    minus: "0.5",
    level: "percent68",
    methodTags: ["kineticSz"],
    printedText: "from 25% to 75% ionized takes Δz = 2.8 +0.6 −0.5 (68%)",
  },
  unweighted: {
    weighting: null,
    methodTags: ["quasarDampingWing", "darkPixels"],
    z: "7",
    level: "percent68",
    printedText: "At z = 7 we find 0.43 +0.12 −0.15 (68%).",
  },
  curve: {
    ...NO_VALUE,
    kind: "curve",
    level: null,
    curveTable: curve(0.3),
    curveColumn: "lnLikelihood",
    printedText: "The likelihood is tabulated in file 3.",
  },
} as const satisfies Record<string, Changes>;
export type Paper = keyof typeof PAPERS;

export interface Planted {
  kind: string;
  paper: Paper;
  /** What was entered in place of what the paper prints. */
  entered: Changes;
  /** Findings that stopped it, or asked about it, before anybody read the paper again. */
  caught: readonly string[];
}

/** A mistake in the fields beside a printed text that was copied right. */
const plant = (kind: string, paper: Paper, entered: Changes, ...caught: string[]): Planted => ({
  kind,
  paper,
  entered,
  caught,
});

/** The same mistake in the printed text: copied from the wrong place, or by the same hand. */
const text = (printedText: string): Changes => ({ printedText });

export const PLANTED: readonly Planted[] = [
  // Digits swapped
  plant("digits swapped", "twoSided", { value: "0.34" }, "printedWithoutNumbers"),
  plant("digits swapped", "twoSided", { plus: "0.21" }, "printedWithoutNumbers"),
  plant(
    "digits swapped",
    "twoSided",
    { minus: "0.51" },
    "endBeyondRange.minus",
    "widthRatio",
    "printedWithoutNumbers",
  ),
  plant("digits swapped", "twoSided", { z: "7.31" }),
  plant("digits swapped", "opticalDepth", { value: "0.0516" }, "printedWithoutNumbers"),
  plant("digits swapped", "bin", { zHigh: "7.01" }),
  plant("digits swapped", "logarithm", { value: "-2.3" }, "printedWithoutNumbers"),
  plant("digits swapped", "midpoint", {
    value: "7.46",
    ...text("half ionized at z = 7.46 +0.74 −0.58 (68%)"),
  }),
  // One digit read for another
  plant("digit misread", "twoSided", { value: "0.48" }, "printedWithoutNumbers"),
  plant("digit misread", "upperLimit", { value: "0.24" }, "printedWithoutNumbers"),
  plant("digit misread", "depthRange", { value: "0.016" }, "printedWithoutNumbers"),
  plant("digit misread", "duration", { value: "2.3", ...text("Δz = 2.3 +0.6 −0.5 (68%)") }),
  plant("digit misread", "band", { bandHigh: "0.84" }, "printedWithoutNumbers"),
  // A digit dropped or doubled
  plant("digit dropped", "twoSided", { value: "0.4" }, "printedWithoutNumbers"),
  plant("digit dropped", "twoSided", { z: "7.1" }),
  plant("digit dropped", "opticalDepth", { value: "0.056" }, "printedWithoutNumbers"),
  plant("digit dropped", "opticalDepth", { plus: "0.007", ...text("τ = 0.0561 +0.007 −0.0062") }),
  plant("digit doubled", "twoSided", { value: "0.433" }, "printedWithoutNumbers"),
  // The decimal point
  plant(
    "decimal point shifted",
    "twoSided",
    { value: "4.3" },
    "outsideRange.value",
    "printedWithoutNumbers",
  ),
  plant(
    "decimal point shifted",
    "twoSided",
    { plus: "0.012", ...text("x_HI = 0.43 +0.012 −0.15 (68%)") },
    "widthRatio",
  ),
  plant("decimal point shifted", "opticalDepth", { value: "0.561" }, "printedWithoutNumbers"),
  plant("decimal point shifted", "midpoint", { fraction: "0.05" }),
  // Levels
  plant("95 % as 68 %", "upperLimit", { level: "percent68" }, "levelUnlikePrinted"),
  plant("95 % as 68 %", "band", { level: "percent68", ...text("0.21 to 0.64") }),
  plant(
    "68 % as 95 %",
    "twoSided",
    { level: "percent95" },
    "levelUnlikePrinted",
    "widthLikeOneSigma",
  ),
  plant("68 % as 95 %", "silent", { level: "percent95" }, "widthLikeOneSigma"),
  plant("68 % as one sigma", "twoSided", { level: "oneSigma" }, "levelUnlikePrinted"),
  plant("level left out", "lowerLimit", { level: "notStated" }, "levelUnlikePrinted"),
  // Plus and minus
  plant("plus and minus swapped", "twoSided", { plus: "0.15", minus: "0.12" }),
  plant("plus and minus swapped", "ionized", { plus: "0.05", minus: "0.10" }),
  plant("plus and minus swapped", "opticalDepth", { plus: "0.0062", minus: "0.0071" }),
  plant("plus and minus swapped", "duration", { plus: "0.5", minus: "0.6" }),
  plant("one width for both", "logarithm", { plus: "0.5" }),
  plant("bound for width", "twoSided", { plus: "0.55" }, "widthRatio", "printedWithoutNumbers"),
  plant(
    "full width for half",
    "ionized",
    { plus: "0.75", ...text("Q_HII = 0.30 +0.75 −0.05") },
    "endBeyondRange.plus",
    "widthRatio",
  ),
  // Which fraction
  plant("ionized for neutral", "twoSided", { species: "ionized" }),
  plant("neutral for ionized", "ionized", { species: "neutral" }),
  plant("neutral for ionized", "lowerLimit", { species: "neutral" }),
  plant("ionized for electrons", "electrons", { species: "ionized", helium: null }),
  plant("helium left out", "electrons", { helium: "notIncluded" }),
  plant("volume for mass", "logarithm", { weighting: "volume" }),
  plant("linear for log10", "logarithm", { scale: "linear" }, "outsideRange.value"),
  plant("log10 for linear", "twoSided", { scale: "log10" }, "outsideRange.value"),
  // Another row
  plant("redshift of another row", "twoSided", { z: "6.62" }),
  plant("redshift of another row", "bin", { zLow: "7.1", zHigh: "7.7" }),
  plant("value of another row", "twoSided", {
    ...{ value: "0.61", plus: "0.14", minus: "0.13" },
    ...text("At z = 7.13 we find x_HI = 0.61 +0.14 −0.13 (68%)."),
  }),
  plant("range of another row", "depthRange", { rangeHigh: "50" }),
  plant("ends of another band", "band", {
    ...{ bandLow: "0.12", bandHigh: "0.55" },
    ...text("0.12 to 0.55 (95%)"),
  }),
  // Limits and bands
  plant("limit flipped", "upperLimit", { kind: "lowerLimit" }),
  plant("limit flipped", "lowerLimit", { kind: "upperLimit" }),
  plant("base and sigma swapped", "ownSigma", { limitBase: "0.24", limitSigma: "0.10" }),
  plant("a curve's row left out", "curve", {
    curveTable: curve(0.3).replace("0.300,0.0000\n", ""),
  }),
];

/** Errors in themselves, by their number above: these three never reach an editor. */
export const REFUSED_AT_SUBMISSION: readonly number[] = [19, 42, 43];

export interface Honest {
  paper: Paper;
  /** How the editor writes what the contributor wrote otherwise. */
  read: Changes & {
    curveRows?: string;
    curveFirst?: string;
    curveLast?: string;
    curvePeak?: string;
  };
}

/** Pairs that say the same number in two ways of writing. */
export const HONEST: readonly Honest[] = [
  { paper: "twoSided", read: { value: "0.430" } },
  { paper: "twoSided", read: { value: ".43" } },
  { paper: "twoSided", read: { plus: "+0.12" } },
  { paper: "twoSided", read: { minus: "-0.15" } },
  { paper: "twoSided", read: { minus: "\u22120.15" } },
  { paper: "twoSided", read: { minus: "\u2013.150" } },
  { paper: "twoSided", read: { value: "  0.43 ", plus: "0.12\t" } },
  { paper: "twoSided", read: { z: "7.130" } },
  { paper: "twoSided", read: { value: "43e-2" } },
  { paper: "ionized", read: { value: "0.3", plus: "0.1", minus: "-0.05" } },
  { paper: "bin", read: { zLow: "6.50", zHigh: "7.10" } },
  { paper: "lowerLimit", read: { value: ".8" } },
  { paper: "ownSigma", read: { limitBase: "0.1", limitSigma: "+.240" } },
  { paper: "band", read: { bandLow: ".21", bandHigh: "0.640" } },
  { paper: "logarithm", read: { value: "\u22123.20", minus: "\u22120.50" } },
  { paper: "opticalDepth", read: { value: "5.61e-2" } },
  { paper: "depthRange", read: { rangeLow: "15.0", rangeHigh: "30." } },
  { paper: "midpoint", read: { fraction: ".5" } },
  { paper: "duration", read: { value: "2.80", fractionFrom: "0.250" } },
  { paper: "unweighted", read: { weighting: "unknown" } },
  { paper: "unweighted", read: { weighting: "unknown", z: "7.0" } },
  {
    paper: "unweighted",
    read: { weighting: "unknown", methodTags: ["darkPixels", "quasarDampingWing"] },
  },
  {
    paper: "curve",
    read: { curveTable: null, curveRows: "41", curveFirst: "0", curveLast: "1", curvePeak: ".3" },
  },
];
