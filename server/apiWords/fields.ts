import type { FieldName } from "~shared/statement/fields";

import type { Words } from "./words";

/** What each field of a statement holds; record, draft and reading share the words. */
export const FIELD_MEANINGS: Record<FieldName, string> = {
  quantity: "What is constrained; decides which of the other fields apply.",
  species:
    "Which fraction of hydrogen the paper prints: neutral, ionized, or electrons per hydrogen. The registry converts to neutral.",
  helium: "Whether a printed electron fraction counts electrons of helium.",
  scale: "Whether the fraction is printed itself or as its decimal logarithm.",
  weighting: "Whether the mean over space is weighted by volume or by mass.",
  rangeLow: "Lower end of the redshift range of an optical depth, as typed.",
  rangeHigh: "Upper end of the redshift range of an optical depth, as typed.",
  fraction: "Fraction that a redshift is given for, in the printed species, 0 to 1, as typed.",
  fractionFrom:
    "Fraction at which a duration begins, in the printed species, 0 to 1, as typed; 0.75 of neutral hydrogen, say.",
  fractionTo: "Fraction at which a duration ends, in the printed species, 0 to 1, as typed.",
  durationUnit: "Unit of a duration: redshift, or millions of years.",
  historyAssumed:
    "Family of histories with which an optical depth or a duration was derived, in words.",
  heliumAssumed: "How electrons of helium were counted in an optical depth, in words.",
  truncationAssumed: "Where the history or the integral was cut off, in words.",
  z: "Redshift of the value, as typed: centre of a bin, mean of a sample, or the point itself.",
  zLow: "Lower end of the bin, of the uncertainty or of the sample in redshift, as typed.",
  zHigh: "Upper end of the bin, of the uncertainty or of the sample in redshift, as typed.",
  zRole: "What the redshift and its ends mean; decides what a history is asked for.",
  kind: "Shape of the statement: two-sided value, limit, band, curve, or words only.",
  value:
    "Value of a two-sided statement, or the limit, in the printed species and scale, as typed (0.30 keeps its zero).",
  plus: "Upward error in the unit of the value, as typed, without sign.",
  minus: "Downward error in the unit of the value, as typed, without sign.",
  limitBase:
    "Value from which a limit's own sigma is counted, as typed; below it (above it for a lower limit) the likelihood is flat.",
  limitSigma: "Sigma that the paper gives for a limit, in the unit of the value, as typed.",
  bandLow: "Lower end of a band, in the unit of the value, as typed.",
  bandHigh: "Upper end of a band, in the unit of the value, as typed.",
  curveTable:
    "A tabulated curve as CSV text of two columns: the value as printed, then probability density or ln L.",
  curveColumn: "What the second column of a tabulated curve holds.",
  level: "Credible or confidence level of the printed errors, limit or band.",
  levelPercent: "Level in percent, as typed, where it is none of the usual ones; 99.7, say.",
  estimator: "Which point of the distribution the printed value is.",
  furtherIntervals: "Further intervals that the same paper prints for it, in words.",
  printedText: "The sentence or table cell of the paper, letter by letter; at most 300 characters.",
  methodTags: "Methods, by tags of the method vocabulary; the families follow from them.",
  priorForm: "Shape of the prior that the paper used, in words; flat, say.",
  priorVariable: "Variable in which that prior is given; the fraction or its logarithm, say.",
  priorRange: "Range of that prior, in words.",
  modelTags: "Models and simulations that the value depends on, by name.",
  conditionedOn:
    "What the value already contains: numbers of records (FL-0012) or kinds of data (cmb, lymanAlpha, luminosityFunction, twentyOneCm).",
  cosmicVariance: "Whether the printed errors include cosmic variance.",
  dataUsed: "Named sightlines, fields and samples that the value was measured on.",
  dataKnown:
    "False where the paper does not say which data it used: unknown is a value, not an empty list. Null: not answered yet.",
  alternativesGroup:
    "Label shared by several answers of one paper to one question; they are never multiplied.",
  alternativesPreferred: "Whether the authors prefer this one of several alternatives.",
  supersedes: "Numbers of records that this one takes the place of once it is approved.",
  erratumOf: "Numbers of records whose printed numbers the paper's own erratum corrects here.",
  reanalysisOf: "Numbers of records of the same data, which are analysed anew here.",
  subsetOf: "Numbers of records whose data contain those of this one.",
  versionRead: "Which version of the paper the numbers were read from.",
  preprintVersion: "Number of the preprint's version, 2 for v2, where a preprint was read.",
  place: "Where it stands in the paper: table and row, figure, section.",
  page: "Page on which it stands.",
  readOffFigure: "Whether the numbers were read off a figure instead of text or a table.",
  digitizingError: "Error of reading off the figure, in the unit of the value, as typed.",
  remark: "What else whoever uses it should know, in words.",
};

/** Vocabularies of a statement. */
export const FIELD_VOCABULARIES: Words = {
  Quantity: {
    "": "What a record constrains.",
    neutralFraction: "Mean neutral fraction of hydrogen x at a redshift, 0 to 1.",
    opticalDepth: "Thomson optical depth to the last scattering, from z = 0 on; dimensionless.",
    opticalDepthRange: "Thomson optical depth between two redshifts; dimensionless.",
    redshiftAtFraction: "Redshift at which the mean fraction has a given value.",
    duration: "How long the mean fraction takes from one value to another.",
  },
  Species: {
    "": "Which fraction of hydrogen a paper prints.",
    neutral: "Neutral hydrogen per hydrogen, x.",
    ionized: "Ionized hydrogen per hydrogen, Q = 1 - x.",
    electron: "Free electrons per hydrogen; above 1 where helium is counted.",
  },
  Helium: {
    "": "Whether an electron fraction counts electrons of helium.",
    included: "Electrons of helium are counted; converted by Q = x_e/(1 + f_He).",
    notIncluded: "Only electrons of hydrogen are counted.",
    unknown: "The paper does not say.",
  },
  Scale: {
    "": "How a fraction is printed.",
    linear: "The fraction itself.",
    log10: "Its decimal logarithm.",
  },
  Weighting: {
    "": "How the mean over space is weighted.",
    volume: "By volume: what the registry's histories are.",
    mass: "By mass; never converted.",
    unknown: "The paper does not say.",
  },
  RedshiftRole: {
    "": "What the redshift of a statement means.",
    point: "The value holds at this redshift: a history is asked for x(z).",
    binAverage: "A mean over the bin: a history is asked for its mean of x between the ends.",
    uncertain: "At some redshift between the ends: the likelihood is averaged over them.",
    sampleRange: "The sample spans the range; x is taken at the representative redshift.",
  },
  StatementKind: {
    "": "Shape of a statement.",
    twoSided: "A value with an error on each side.",
    upperLimit: "The quantity lies below the value at the given level.",
    lowerLimit: "The quantity lies above the value at the given level.",
    band: "The quantity lies between two ends, none of which is preferred.",
    curve: "A tabulated probability density or likelihood.",
    qualitative: "Words only: shown, never fitted.",
  },
  Level: {
    "": "Probability that an interval holds or that a limit leaves.",
    oneSigma: "68.27 %, said as one sigma.",
    percent68: "68 % as printed (0.99446 sigma).",
    percent90: "90 %.",
    percent95: "95 %.",
    twoSigma: "95.45 %, said as two sigma.",
    other: "Another level: see levelPercent.",
    notStated: "The paper states none; a fitting table has to decide.",
  },
  Estimator: {
    "": "Which point of its distribution a value is.",
    median: "Half of the probability lies on either side.",
    mean: "Mean of the distribution.",
    mode: "Where the distribution peaks.",
    bestFit: "Maximum of the likelihood.",
    notStated: "The paper does not say.",
  },
  CosmicVariance: {
    "": "Whether errors contain the scatter between regions of the universe.",
    included: "The printed errors contain it.",
    excluded: "The printed errors leave it out.",
    unknown: "The paper does not say.",
  },
  VersionRead: {
    "": "Version of a paper from which numbers were read.",
    published: "As the journal printed it.",
    preprint: "A preprint, whose numbers may still change.",
    erratum: "The journal's erratum.",
  },
  DurationUnit: {
    "": "Unit of a duration.",
    redshift: "Difference of redshifts; dimensionless.",
    myr: "Millions of Julian years, under the paper's cosmology.",
  },
  CurveColumn: {
    "": "Second column of a tabulated curve.",
    density: "Probability density, up to a factor.",
    lnLikelihood: "Natural logarithm of the likelihood, up to a constant.",
  },
  MethodFamily: {
    "": "Family of methods; marker and colour of a record in every chart.",
    dampingWing: "Damping wing of a quasar, a galaxy or a gamma-ray burst.",
    darkPixels: "Share of dark pixels in quasar spectra; needs no model.",
    forestOpacity: "Opacity of the Lyα forest, dark gaps, near zones, mean free path.",
    luminosityFunction: "Evolution of the Lyα luminosity function.",
    lineStrength: "Lyα equivalent widths, fraction of emitters, line profiles.",
    emitterClustering: "Clustering of Lyα emitters and sizes of ionized regions.",
    twentyOneCm: "21-cm signal of neutral hydrogen.",
    cmb: "Cosmic microwave background.",
    other: "Thermal history, source budget, joint inference.",
  },
  LikelihoodForm: {
    twoPiece:
      "Two half-parabolas that meet at the value: ((x - m)/sigma)², a sigma for either side.",
    quantileMatched:
      "A smooth density whose median and two quantiles are the printed ones; for medians.",
    variableWidth: "(x - m)² over a variance that grows linearly from one end to the other.",
    gaussian: "((q - m)/sigma)², for symmetric errors.",
    halfGaussianBounded:
      "Half a Gaussian about 0 (1 for a lower limit), its width such that the level's share of its area within 0 and 1 is allowed.",
    halfGaussianUnbounded: "Half a Gaussian whose width is the limit over k of its level.",
    flatThenGaussian: "0 on the allowed side of the base, ((x - base)/s)² beyond.",
    smoothedStep: "-2 ln of half the complementary error function: a step smeared by s.",
    hardStep: "0 on the allowed side, infinite beyond.",
    band: "0 inside, (distance/s)² outside, s such that a flat prior puts the level inside.",
    bandWideTails: "0 inside, (distance/w)² outside, w the half-width over k.",
    tabulated: "ln p linear between the nodes of a printed curve, infinite outside.",
  },
  RedshiftTreatment: {
    point: "x at the representative redshift.",
    binMean: "Mean of x between the ends of the bin.",
    averagedLikelihood: "Likelihood averaged over the redshifts between the ends.",
  },
};

/** A field's words say what is printed; a reading adds four for a curve. */
export const FIELD_TYPES: Words = {
  ConstraintFields: {
    "": "What one paper prints about one quantity, number by number as typed. Null: left open, or of no use to this quantity.",
    ...FIELD_MEANINGS,
  },
  ConstraintFieldsInput: {
    "": "What a paper prints, field by field; whatever is left out stays open.",
    ...FIELD_MEANINGS,
  },
  ReadingInput: {
    ...FIELD_MEANINGS,
    curveFirst: "First value of the curve's first column, as printed.",
    curveLast: "Last value of the curve's first column, as printed.",
    curvePeak: "Value in the first column where the curve is highest, as printed.",
    curveRows: "How many rows the printed curve has.",
  },
};
