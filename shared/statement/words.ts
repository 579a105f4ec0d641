/** Words for every field and every word of the vocabulary, the same in the form, the review and the exports. */
import { currentTag, currentTags } from "~shared/methods/vocabulary";

import { curveText } from "./curve";
import type {
  ConditionKind,
  ConstraintFields,
  CosmicVariance,
  CurveColumn,
  DurationUnit,
  Estimator,
  FieldName,
  Helium,
  Level,
  Quantity,
  RedshiftRole,
  Scale,
  Species,
  StatementKind,
  VersionRead,
  Weighting,
} from "./fields";
import { CONDITION_KINDS } from "./fields";

export const FIELD_NAMES: Record<FieldName, string> = {
  quantity: "Quantity",
  species: "Fraction printed",
  helium: "Helium electrons",
  scale: "Scale",
  weighting: "Weighting",
  rangeLow: "Range from redshift",
  rangeHigh: "Range to redshift",
  fraction: "At fraction",
  fractionFrom: "From fraction",
  fractionTo: "To fraction",
  durationUnit: "Unit of the duration",
  historyAssumed: "History assumed",
  heliumAssumed: "Helium assumed",
  truncationAssumed: "Truncation assumed",
  z: "Redshift",
  zLow: "Low end of the redshift",
  zHigh: "High end of the redshift",
  zRole: "Role of the redshift",
  kind: "Statement",
  value: "Value",
  plus: "Plus",
  minus: "Minus",
  limitBase: "Limit base",
  limitSigma: "Sigma of the limit base",
  bandLow: "Low end of the band",
  bandHigh: "High end of the band",
  curveTable: "Curve",
  curveColumn: "Second column of the curve",
  level: "Level",
  levelPercent: "Level in percent",
  estimator: "Estimator",
  furtherIntervals: "Further intervals",
  printedText: "Printed text",
  methodTags: "Method",
  priorForm: "Form of the prior",
  priorVariable: "Variable of the prior",
  priorRange: "Range of the prior",
  modelTags: "Models and simulations",
  conditionedOn: "Conditioned on",
  cosmicVariance: "Cosmic variance",
  dataUsed: "Data used",
  dataKnown: "Data known",
  alternativesGroup: "Alternatives group",
  alternativesPreferred: "Preferred alternative",
  supersedes: "Supersedes",
  erratumOf: "Erratum of",
  reanalysisOf: "Re-analysis of",
  subsetOf: "Subset of",
  versionRead: "Version read",
  preprintVersion: "Preprint version",
  place: "Place in the paper",
  page: "Page",
  readOffFigure: "Read off a figure",
  digitizingError: "Digitizing error",
  remark: "Remark",
};

export const QUANTITY_WORDS: Record<Quantity, string> = {
  neutralFraction: "Neutral fraction",
  opticalDepth: "Optical depth, total",
  opticalDepthRange: "Optical depth over a redshift range",
  redshiftAtFraction: "Redshift at a fraction",
  duration: "Duration between two fractions",
};

export const SPECIES_WORDS: Record<Species, string> = {
  neutral: "Neutral hydrogen",
  ionized: "Ionized hydrogen",
  electron: "Electrons per hydrogen",
};

export const HELIUM_WORDS: Record<Helium, string> = {
  included: "Helium electrons counted",
  notIncluded: "Helium electrons not counted",
  unknown: "Unknown",
};

export const SCALE_WORDS: Record<Scale, string> = { linear: "Linear", log10: "log10" };

export const WEIGHTING_WORDS: Record<Weighting, string> = {
  volume: "Volume-weighted",
  mass: "Mass-weighted",
  unknown: "Weighting unknown",
};

export const ROLE_WORDS: Record<RedshiftRole, string> = {
  point: "Point",
  binAverage: "Bin average",
  uncertain: "Uncertain",
  sampleRange: "Sample range",
};

export const KIND_WORDS: Record<StatementKind, string> = {
  twoSided: "Two-sided value",
  upperLimit: "Upper limit",
  lowerLimit: "Lower limit",
  band: "Band",
  curve: "Tabulated curve",
  qualitative: "Qualitative",
};

export const LEVEL_WORDS: Record<Level, string> = {
  oneSigma: "One sigma (68.27 %)",
  percent68: "68 %",
  percent90: "90 %",
  percent95: "95 %",
  twoSigma: "Two sigma (95.45 %)",
  other: "Other",
  notStated: "Not stated",
};

export const ESTIMATOR_WORDS: Record<Estimator, string> = {
  median: "Median",
  mean: "Mean",
  mode: "Mode",
  bestFit: "Best fit",
  notStated: "Not stated",
};

export const COSMIC_VARIANCE_WORDS: Record<CosmicVariance, string> = {
  included: "Included",
  excluded: "Excluded",
  unknown: "Unknown",
};

export const VERSION_WORDS: Record<VersionRead, string> = {
  published: "Published version",
  preprint: "Preprint",
  erratum: "Erratum",
};

export const DURATION_UNIT_WORDS: Record<DurationUnit, string> = {
  redshift: "Redshift",
  myr: "Million years",
};

export const CURVE_COLUMN_WORDS: Record<CurveColumn, string> = {
  density: "Probability density",
  lnLikelihood: "ln L",
};

export const CONDITION_WORDS: Record<ConditionKind, string> = {
  cmb: "CMB",
  lymanAlpha: "Lyα data",
  luminosityFunction: "Galaxy luminosity functions",
  twentyOneCm: "21-cm data",
};

/** Words of the fields that hold one of a list. */
export const CHOICE_WORDS: Partial<Record<FieldName, Readonly<Record<string, string>>>> = {
  quantity: QUANTITY_WORDS,
  species: SPECIES_WORDS,
  helium: HELIUM_WORDS,
  scale: SCALE_WORDS,
  weighting: WEIGHTING_WORDS,
  zRole: ROLE_WORDS,
  kind: KIND_WORDS,
  level: LEVEL_WORDS,
  estimator: ESTIMATOR_WORDS,
  cosmicVariance: COSMIC_VARIANCE_WORDS,
  versionRead: VERSION_WORDS,
  durationUnit: DURATION_UNIT_WORDS,
  curveColumn: CURVE_COLUMN_WORDS,
};

/** What "conditioned on" names: a kind of data in words, or a record's number as it is. */
export function conditionWord(condition: string): string {
  return (CONDITION_KINDS as readonly string[]).includes(condition)
    ? CONDITION_WORDS[condition as ConditionKind]
    : condition;
}

/** Name of a method tag, of what took it over if it is retired, or the tag itself when the vocabulary does not hold it. */
export function tagName(tag: string): string {
  return currentTag(tag)?.name ?? tag;
}

/** The level a statement holds at, in a sentence: "at 95 %", "at one sigma", "level not stated"; "" while open. */
export function levelPhrase(level: Level | null, levelPercent: string | null): string {
  switch (level) {
    case null:
      return "";
    case "notStated":
      return "level not stated";
    case "oneSigma":
      return "at one sigma";
    case "twoSigma":
      return "at two sigma";
    case "other":
      return levelPercent === null ? "at another level" : `at ${levelPercent} %`;
    default:
      return `at ${LEVEL_WORDS[level]}`;
  }
}

/** Sets a hyphen before a digit as a true minus, for numbers on a screen. */
export function withTrueMinus(text: string): string {
  return text.replace(/^-/, "\u2212");
}

/** A field's content as a person reads it, for comparisons and differences; "" when it is open; of a curve its facts. */
export function fieldText(name: FieldName, fields: ConstraintFields): string {
  const held = fields[name];
  if (held === null || held === undefined) return "";
  if (name === "curveTable") {
    return curveText(fields.curveTable, fields.curveColumn) || "A table that is no curve yet";
  }
  if (typeof held === "boolean") return held ? "Yes" : "No";
  if (Array.isArray(held)) {
    const word =
      name === "methodTags" ? tagName : name === "conditionedOn" ? conditionWord : String;
    const entries = name === "methodTags" ? currentTags(held as string[]) : held;
    return entries.map((entry) => word(entry)).join("; ");
  }
  return CHOICE_WORDS[name]?.[held] ?? held;
}
