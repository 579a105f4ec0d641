/** Where a hand-kept list's columns and words can go: the record's fields, and how lists usually spell them. */
import { findTag, looseWord, methodTags } from "~shared/methods/vocabulary";
import { formatRecordNumber, parseRecordNumber } from "~shared/identifiers/recordNumber";
import { parseDecimal } from "~shared/statement/decimal";
import {
  CONDITION_KINDS,
  COSMIC_VARIANCES,
  DURATION_UNITS,
  ESTIMATORS,
  HELIUM,
  LEVELS,
  REDSHIFT_ROLES,
  SCALES,
  SPECIES,
  STATEMENT_KINDS,
  VERSIONS_READ,
  WEIGHTINGS,
} from "~shared/statement/fields";
import type { FieldName } from "~shared/statement/fields";
import {
  CHOICE_WORDS,
  conditionWord,
  FIELD_NAMES,
  QUANTITY_WORDS,
  SPECIES_WORDS,
  tagName,
} from "~shared/statement/words";

/** Fields a column can be matched to, with other spellings of their names; looked at without case and punctuation. */
const COLUMN_SPELLINGS = {
  citationKey: [
    "key",
    "bibkey",
    "cite key",
    "citation",
    "citation key",
    "bibtex key",
    "ref",
    "reference",
    "paper",
  ],
  quantity: ["quantity", "what", "observable", "measures"],
  species: ["species", "fraction printed", "printed fraction", "printed species"],
  helium: ["helium", "helium electrons"],
  scale: ["scale", "scale as printed", "lin or log"],
  weighting: ["weighting", "weight", "average", "weighted by"],
  z: ["z", "redshift", "z mean", "z median", "z eff", "z central", "z value"],
  zLow: ["zlo", "z low", "z min", "z lower", "z from", "redshift low", "redshift min"],
  zHigh: ["zhi", "z high", "z max", "z upper", "z to", "redshift high", "redshift max"],
  zRole: ["zrole", "role", "redshift role", "z type", "z meaning"],
  rangeLow: ["range low", "range from", "tau from"],
  rangeHigh: ["range high", "range to", "tau to"],
  fraction: ["fraction", "at fraction"],
  fractionFrom: ["fraction from", "from fraction"],
  fractionTo: ["fraction to", "to fraction"],
  durationUnit: ["duration unit", "unit"],
  historyAssumed: ["history", "history assumed", "history family"],
  heliumAssumed: ["helium assumed", "helium treatment"],
  truncationAssumed: ["truncation", "truncation assumed", "cut off"],
  kind: ["kind", "statement", "type", "statement kind", "bound type", "sort"],
  value: ["value", "val", "best", "best value", "central value", "central", "x", "xhi", "x hi"],
  plus: [
    "plus",
    "err plus",
    "error plus",
    "err up",
    "err hi",
    "upper error",
    "sigma plus",
    "dplus",
  ],
  minus: [
    "minus",
    "err minus",
    "error minus",
    "err down",
    "err lo",
    "lower error",
    "sigma minus",
    "dminus",
  ],
  limitBase: ["base", "limit base"],
  limitSigma: ["base sigma", "limit sigma", "sigma of base", "base err"],
  bandLow: ["band low", "band min", "interval low"],
  bandHigh: ["band high", "band max", "interval high"],
  level: [
    "level",
    "cl",
    "confidence",
    "confidence level",
    "credible level",
    "conf level",
    "credibility",
  ],
  estimator: ["estimator", "statistic", "central is", "value is"],
  furtherIntervals: ["further intervals", "other intervals"],
  printedText: ["printed", "printed text", "as printed", "quote", "verbatim", "text"],
  methodTags: ["method", "methods", "probe", "technique", "tag", "tags", "method tag"],
  priorForm: ["prior", "prior form", "form of the prior"],
  priorVariable: ["prior variable", "flat in"],
  priorRange: ["prior range"],
  modelTags: ["model", "models", "simulation"],
  conditionedOn: ["conditioned on", "conditional on", "depends on", "uses", "external prior"],
  cosmicVariance: ["cosmic variance", "sightline scatter"],
  dataUsed: ["data", "data used", "sample", "sightline", "field", "dataset", "data set", "object"],
  alternativesGroup: ["alternatives", "alternatives group", "alternative", "alt", "group"],
  supersedes: ["supersedes", "replaces", "instead of"],
  erratumOf: ["erratum of", "corrects"],
  reanalysisOf: ["reanalysis of", "re-analysis of"],
  subsetOf: ["subset of", "part of"],
  versionRead: ["version", "version read"],
  preprintVersion: ["preprint version", "arxiv version"],
  place: ["place", "where", "location", "where in paper", "table or figure"],
  page: ["page", "pages"],
  digitizingError: ["digitizing error", "digitising error", "reading error"],
  remark: ["remark", "remarks", "note", "notes", "comment", "comments"],
} as const satisfies Partial<Record<FieldName | "citationKey", readonly string[]>>;

export type ImportField = keyof typeof COLUMN_SPELLINGS;

export const IMPORT_FIELDS = Object.keys(COLUMN_SPELLINGS) as ImportField[];

/** Whether a text names a field that a column can be matched to. */
export function isImportField(name: string): name is ImportField {
  return Object.hasOwn(COLUMN_SPELLINGS, name);
}

/** A field's name for the person who matches columns. */
export function importFieldName(field: ImportField): string {
  return field === "citationKey" ? "Citation key" : FIELD_NAMES[field];
}

export interface ColumnMatch {
  column: string;
  /** Null: the column is left out. */
  field: ImportField | null;
}

/**
 * Proposes a field for each column, each field once: by its own name, by another spelling, then by one slip away.
 *
 * @param header - Column names as they stand in the file.
 */
export function proposeColumns(header: readonly string[]): ColumnMatch[] {
  const taken = new Set<ImportField>();
  const proposed = new Map<string, ImportField>();
  const claim = (matches: (name: string, spelling: string, own: boolean) => boolean) => {
    for (const column of header) {
      if (proposed.has(column)) continue;
      const name = looseWord(column);
      const field = IMPORT_FIELDS.find(
        (candidate) =>
          !taken.has(candidate) &&
          name !== "" &&
          [candidate, ...COLUMN_SPELLINGS[candidate]].some((spelling, index) =>
            matches(name, looseWord(spelling), index === 0),
          ),
      );
      if (field !== undefined) {
        taken.add(field);
        proposed.set(column, field);
      }
    }
  };
  claim((name, spelling, own) => own && name === spelling);
  claim((name, spelling) => name === spelling);
  claim((name, spelling) => spelling.length >= 5 && oneSlipAway(name, spelling));
  return header.map((column) => ({ column, field: proposed.get(column) ?? null }));
}

/** Whether one letter added, left out or changed turns one word into the other. */
function oneSlipAway(a: string, b: string): boolean {
  if (Math.abs(a.length - b.length) > 1) return false;
  const [short, long] = a.length <= b.length ? [a, b] : [b, a];
  let start = 0;
  while (start < short.length && short[start] === long[start]) start++;
  const rest = short.length === long.length ? start + 1 : start;
  return short.slice(rest) === long.slice(start + 1);
}

// ---- Words

/** Choices for a quantity say the printed fraction too, since lists name both in one word. */
const QUANTITY_CHOICES = [
  "neutralFraction",
  "ionizedFraction",
  "electronFraction",
  "opticalDepth",
  "opticalDepthRange",
  "redshiftAtFraction",
  "duration",
] as const;

/** Fields whose cells hold words of a list that never changes. */
const WORD_CHOICES = {
  quantity: QUANTITY_CHOICES,
  species: SPECIES,
  helium: HELIUM,
  scale: SCALES,
  weighting: WEIGHTINGS,
  zRole: REDSHIFT_ROLES,
  durationUnit: DURATION_UNITS,
  kind: STATEMENT_KINDS,
  level: LEVELS,
  estimator: ESTIMATORS,
  conditionedOn: CONDITION_KINDS,
  cosmicVariance: COSMIC_VARIANCES,
  versionRead: VERSIONS_READ,
} as const satisfies Partial<Record<ImportField, readonly string[]>>;

/** Their words, and those of the method vocabulary. */
export type WordField = keyof typeof WORD_CHOICES | "methodTags";

/** Whether a field's cells hold words that have to be matched. */
export function isWordField(field: string): field is WordField {
  return field === "methodTags" || Object.hasOwn(WORD_CHOICES, field);
}

/** Words a cell of such a field can be matched to; a proposal can be more exact ("other:99.7"). */
export function wordChoices(field: WordField): string[] {
  return field === "methodTags" ? methodTags().map(({ tag }) => tag) : [...WORD_CHOICES[field]];
}

/** Whether a value is one that buildRows understands for the field. */
export function isWordChoice(field: WordField, value: string): boolean {
  if (wordChoices(field).includes(value)) return true;
  if (field === "level")
    return /^other:[\d.]{1,8}$/.test(value) && parseDecimal(value.slice(6)) !== null;
  if (field === "conditionedOn") return /^FL-\d{4,9}$/.test(value);
  if (field === "quantity") {
    return /^duration:[\d.]{1,8}:[\d.]{1,8}$|^redshiftAtFraction:[\d.]{1,8}$/.test(value);
  }
  return false;
}

/** A choice in words, for the list it is picked from. */
export function choiceWords(field: WordField, value: string): string {
  if (field === "methodTags") return tagName(value);
  if (field === "conditionedOn") return conditionWord(value);
  if (field === "quantity") return quantityWords(value);
  if (value.startsWith("other:")) return `${value.slice(6)} %`;
  return CHOICE_WORDS[field]?.[value] ?? value;
}

function quantityWords(value: string): string {
  const [name = "", from, to] = value.split(":");
  if (name === "neutralFraction") return QUANTITY_WORDS.neutralFraction;
  if (name === "ionizedFraction") return `Fraction of ${SPECIES_WORDS.ionized.toLowerCase()}`;
  if (name === "electronFraction") return SPECIES_WORDS.electron;
  const words: string = (QUANTITY_WORDS as Record<string, string>)[name] ?? name;
  if (from === undefined) return words;
  return to === undefined ? `${words}, ${from}` : `${words}, ${from} to ${to}`;
}

const WORD_SPELLINGS: Partial<Record<WordField, Readonly<Record<string, readonly string[]>>>> = {
  quantity: {
    neutralFraction: [
      "neutral fraction",
      "neutral hydrogen fraction",
      "xhi",
      "hi fraction",
      "neutral",
    ],
    ionizedFraction: [
      "ionized fraction",
      "ionised fraction",
      "xhii",
      "q",
      "qhii",
      "hii fraction",
      "ionized",
      "filling factor",
    ],
    electronFraction: ["electron fraction", "xe", "free electron fraction"],
    opticalDepth: [
      "optical depth",
      "tau",
      "total optical depth",
      "electron scattering optical depth",
      "thomson optical depth",
    ],
    opticalDepthRange: [
      "optical depth over range",
      "optical depth over a range",
      "optical depth range",
      "optical depth over redshift range",
      "high z optical depth",
      "tau range",
    ],
    redshiftAtFraction: [
      "redshift at fraction",
      "redshift at a fraction",
      "midpoint",
      "midpoint redshift",
      "zre",
    ],
    duration: ["duration", "delta z", "dz", "length"],
  },
  helium: {
    included: ["included", "yes", "with helium", "counted"],
    notIncluded: ["not included", "no", "without helium", "not counted", "hydrogen only"],
    unknown: ["unknown", "not stated", "?"],
  },
  scale: { linear: ["linear", "lin"], log10: ["log10", "log", "logarithmic", "dex"] },
  weighting: {
    volume: ["volume", "volume weighted", "volume averaged", "vol", "v"],
    mass: ["mass", "mass weighted", "mass averaged", "m"],
    unknown: ["unknown", "not stated", "none", "n/a", "na", "?"],
  },
  zRole: {
    point: ["point", "single", "exact"],
    binAverage: ["bin average", "bin", "average", "binned", "bin mean"],
    uncertain: ["uncertain", "error", "uncertainty"],
    sampleRange: ["sample range", "sample", "range", "spread"],
  },
  durationUnit: { redshift: ["redshift", "z", "dz"], myr: ["myr", "million years", "ma"] },
  kind: {
    twoSided: [
      "two sided",
      "two-sided value",
      "value",
      "measurement",
      "interval",
      "2 sided",
      "central",
    ],
    upperLimit: ["upper limit", "upper", "upper bound", "ul", "<", "less than", "max"],
    lowerLimit: ["lower limit", "lower", "lower bound", "ll", ">", "greater than", "min"],
    band: ["band", "range", "box"],
    curve: ["curve", "tabulated curve", "posterior", "pdf", "likelihood curve"],
    qualitative: ["qualitative", "words", "text"],
  },
  species: {
    neutral: ["neutral", "hi", "xhi", "neutral hydrogen"],
    ionized: ["ionized", "ionised", "hii", "xhii", "q", "ionized hydrogen"],
    electron: ["electron", "electrons", "xe"],
  },
  cosmicVariance: {
    included: ["included", "yes", "in the error"],
    excluded: ["excluded", "no", "not included"],
    unknown: ["unknown", "not stated", "?", "-"],
  },
  level: { notStated: ["not stated", "none", "unknown", "not given", "n/a", "na", "?", "-"] },
  estimator: {
    median: ["median", "50th percentile"],
    mean: ["mean", "average"],
    mode: ["mode", "peak", "maximum a posteriori", "map"],
    bestFit: ["best fit", "best-fit", "maximum likelihood", "ml"],
    notStated: ["not stated", "none", "unknown", "not given", "n/a", "na", "?", "-"],
  },
  versionRead: {
    published: ["published", "journal", "published version"],
    preprint: ["preprint", "arxiv", "submitted"],
    erratum: ["erratum", "corrigendum"],
  },
};

/** A word that is all punctuation, such as "<" or "?", is looked at as it stands. */
function spelled(word: string): string {
  const loose = looseWord(word);
  return loose === "" ? word.trim() : loose;
}

/**
 * What a list's word probably means.
 *
 * @param field - The field its column is matched to.
 * @param word - One word of a cell, as it stands.
 * @returns A choice of the field ("other:99.7" and "duration:0.75:0.25" carry numbers), or null.
 */
export function proposeWords(field: WordField, word: string): string | null {
  const plain = spelled(word);
  if (plain === "") return null;
  if (field === "methodTags") return findTag(word)?.tag ?? null;
  if (field === "conditionedOn") return conditionOf(word);
  if (field === "level") {
    const level = levelOf(word);
    if (level !== null) return level;
  }
  if (field === "quantity") {
    const quantity = quantityWithNumbers(word);
    if (quantity !== null) return quantity;
  }
  for (const choice of WORD_CHOICES[field]) {
    const spellings = [choice, ...(WORD_SPELLINGS[field]?.[choice] ?? [])];
    if (spellings.some((spelling) => spelled(spelling) === plain)) return choice;
  }
  return null;
}

function conditionOf(word: string): string | null {
  const record = parseRecordNumber(word);
  if (record !== null) return formatRecordNumber(record);
  const loose = looseWord(word);
  if (/cmb|opticaldepth|tau/.test(loose)) return "cmb";
  if (/21cm|twentyonecm/.test(loose)) return "twentyOneCm";
  if (/luminosityfunction|uvlf/.test(loose)) return "luminosityFunction";
  if (/lya|lymana|forest/.test(loose)) return "lymanAlpha";
  return null;
}

/** "0.68" and "68 %" are a printed 68 %; "0.6827", "68.3 %" and "1 sigma" are one sigma: the record keeps which. */
function levelOf(word: string): string | null {
  const sigma = /^\s*([123]|one|two)\s*-?\s*(?:σ|sigma)\s*$/i.exec(word)?.[1]?.toLowerCase();
  if (sigma === "1" || sigma === "one") return "oneSigma";
  if (sigma === "2" || sigma === "two") return "twoSigma";
  if (sigma === "3") return "other:99.73";
  const number = parseDecimal(word.replace(/\s*(?:%|percent|per cent|c\.?l\.?)\s*/gi, ""));
  if (number === null || number.lte(0)) return null;
  const percent = number.lte(1) && !/%/.test(word) ? number.times(100) : number;
  // A bare 2 may be two sigma or a mistake; only a person can tell.
  if (percent.gte(100) || (number.gt(1) && percent.lt(50))) return null;
  switch (percent.toFixed()) {
    case "68":
      return "percent68";
    case "68.27":
    case "68.3":
      return "oneSigma";
    case "90":
      return "percent90";
    case "95":
      return "percent95";
    case "95.45":
    case "95.4":
    case "95.5":
      return "twoSigma";
    default: {
      const text = percent.toFixed();
      return text.length <= 8 ? `other:${text}` : null;
    }
  }
}

/** "duration 0.75 to 0.25", "redshift at fraction 0.5". */
function quantityWithNumbers(word: string): string | null {
  const numbers = [...word.matchAll(/\d*\.\d+|\d+/g)].map(([number]) => number);
  const letters = looseWord(word.replace(/[\d.]+/g, " "));
  const [from, to] = numbers;
  if (/^(?:duration|deltaz|dz|length)(?:from)?(?:to)?$/.test(letters) && numbers.length === 2) {
    return isWordChoice("quantity", `duration:${from}:${to}`) ? `duration:${from}:${to}` : null;
  }
  if (/^redshiftat(?:a)?fraction(?:of)?$/.test(letters) && numbers.length === 1) {
    const choice = `redshiftAtFraction:${from}`;
    return isWordChoice("quantity", choice) ? choice : null;
  }
  return null;
}
