/**
 * What one paper prints about one quantity, field by field, exactly as typed.
 * Every number is a string: 0.30 keeps its zero. A draft may leave any field open (null).
 */

export const QUANTITIES = [
  "neutralFraction",
  "opticalDepth",
  "opticalDepthRange",
  "redshiftAtFraction",
  "duration",
] as const;
export type Quantity = (typeof QUANTITIES)[number];

/** Which fraction the paper prints; the registry uses the neutral one. */
export const SPECIES = ["neutral", "ionized", "electron"] as const;
export type Species = (typeof SPECIES)[number];

/** Whether an electron fraction counts helium electrons. */
export const HELIUM = ["included", "notIncluded", "unknown"] as const;
export type Helium = (typeof HELIUM)[number];

export const SCALES = ["linear", "log10"] as const;
export type Scale = (typeof SCALES)[number];

export const WEIGHTINGS = ["volume", "mass", "unknown"] as const;
export type Weighting = (typeof WEIGHTINGS)[number];

export const REDSHIFT_ROLES = ["point", "binAverage", "uncertain", "sampleRange"] as const;
export type RedshiftRole = (typeof REDSHIFT_ROLES)[number];

export const STATEMENT_KINDS = [
  "twoSided",
  "upperLimit",
  "lowerLimit",
  "band",
  "curve",
  "qualitative",
] as const;
export type StatementKind = (typeof STATEMENT_KINDS)[number];

export const LEVELS = [
  "oneSigma",
  "percent68",
  "percent90",
  "percent95",
  "twoSigma",
  "other",
  "notStated",
] as const;
export type Level = (typeof LEVELS)[number];

export const ESTIMATORS = ["median", "mean", "mode", "bestFit", "notStated"] as const;
export type Estimator = (typeof ESTIMATORS)[number];

export const COSMIC_VARIANCES = ["included", "excluded", "unknown"] as const;
export type CosmicVariance = (typeof COSMIC_VARIANCES)[number];

export const VERSIONS_READ = ["published", "preprint", "erratum"] as const;
export type VersionRead = (typeof VERSIONS_READ)[number];

export const DURATION_UNITS = ["redshift", "myr"] as const;
export type DurationUnit = (typeof DURATION_UNITS)[number];

/** What the second column of a tabulated curve holds. */
export const CURVE_COLUMNS = ["density", "lnLikelihood"] as const;
export type CurveColumn = (typeof CURVE_COLUMNS)[number];

export interface ConstraintFields {
  // Quantity
  quantity: Quantity | null;
  species: Species | null;
  helium: Helium | null;
  scale: Scale | null;
  weighting: Weighting | null;
  /** Ends of an optical depth over a redshift range. */
  rangeLow: string | null;
  rangeHigh: string | null;
  /** Fraction of a redshift at a fraction, in the printed species. */
  fraction: string | null;
  /** A duration runs from this fraction to that one, in the printed species. */
  fractionFrom: string | null;
  fractionTo: string | null;
  durationUnit: DurationUnit | null;
  /** History family and truncation an optical depth or duration was derived with, in words. */
  historyAssumed: string | null;
  /** How helium was treated in an optical depth, in words. */
  heliumAssumed: string | null;
  /** Where the history or the integral was cut off, in words. */
  truncationAssumed: string | null;

  // Redshift
  z: string | null;
  zLow: string | null;
  zHigh: string | null;
  zRole: RedshiftRole | null;

  // Statement
  kind: StatementKind | null;
  value: string | null;
  plus: string | null;
  minus: string | null;
  limitBase: string | null;
  limitSigma: string | null;
  bandLow: string | null;
  bandHigh: string | null;
  /** A tabulated curve as CSV text of two columns: the value as printed, then density or ln L. */
  curveTable: string | null;
  curveColumn: CurveColumn | null;
  level: Level | null;
  /** Percent, when level is "other"; 99.7, say. */
  levelPercent: string | null;
  estimator: Estimator | null;
  /** Further intervals of the same paper, in words. */
  furtherIntervals: string | null;
  /** Exact printed text, 300 characters at most. */
  printedText: string | null;

  // Method and dependence
  methodTags: string[];
  priorForm: string | null;
  priorVariable: string | null;
  priorRange: string | null;
  modelTags: string[];
  /** Record numbers ("FL-0012") or kinds of data ("cmb"), see CONDITION_KINDS. */
  conditionedOn: string[];
  cosmicVariance: CosmicVariance | null;

  // Data used; null dataKnown means not answered yet
  /** Named sightlines, fields and samples. */
  dataUsed: string[];
  /** False when the paper does not say: unknown is a value, not an empty list. */
  dataKnown: boolean | null;

  // Groups: a label shared by the alternatives of one paper
  alternativesGroup: string | null;
  alternativesPreferred: boolean | null;

  // Relations: record numbers ("FL-0012")
  /** Records that this one takes the place of, once it is approved. */
  supersedes: string[];
  /** Records whose printed numbers this one corrects by the paper's own erratum. */
  erratumOf: string[];
  /** Records of the same data, analysed anew here. */
  reanalysisOf: string[];
  /** Records whose data contain those of this one. */
  subsetOf: string[];

  // Provenance
  versionRead: VersionRead | null;
  preprintVersion: string | null;
  /** Table, row, figure, section. */
  place: string | null;
  page: string | null;
  readOffFigure: boolean | null;
  digitizingError: string | null;
  remark: string | null;
}

export type FieldName = keyof ConstraintFields;

/** Kinds of data a constraint can be conditioned on, beside record numbers. */
export const CONDITION_KINDS = ["cmb", "lymanAlpha", "luminosityFunction", "twentyOneCm"] as const;
export type ConditionKind = (typeof CONDITION_KINDS)[number];

/** A draft with every field open. */
export function emptyFields(): ConstraintFields {
  return {
    quantity: null,
    species: null,
    helium: null,
    scale: null,
    weighting: null,
    rangeLow: null,
    rangeHigh: null,
    fraction: null,
    fractionFrom: null,
    fractionTo: null,
    durationUnit: null,
    historyAssumed: null,
    heliumAssumed: null,
    truncationAssumed: null,
    z: null,
    zLow: null,
    zHigh: null,
    zRole: null,
    kind: null,
    value: null,
    plus: null,
    minus: null,
    limitBase: null,
    limitSigma: null,
    bandLow: null,
    bandHigh: null,
    curveTable: null,
    curveColumn: null,
    level: null,
    levelPercent: null,
    estimator: null,
    furtherIntervals: null,
    printedText: null,
    methodTags: [],
    priorForm: null,
    priorVariable: null,
    priorRange: null,
    modelTags: [],
    conditionedOn: [],
    cosmicVariance: null,
    dataUsed: [],
    dataKnown: null,
    alternativesGroup: null,
    alternativesPreferred: null,
    supersedes: [],
    erratumOf: [],
    reanalysisOf: [],
    subsetOf: [],
    versionRead: null,
    preprintVersion: null,
    place: null,
    page: null,
    readOffFigure: null,
    digitizingError: null,
    remark: null,
  };
}
