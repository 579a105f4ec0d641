/** The rules that make a record vetted, checked in the form and again on the server. */
import type Big from "big.js";

import { carriesTag, currentTag, findTag } from "~shared/methods/vocabulary";

import { asUsed, HELIUM_PER_HYDROGEN } from "./asUsed";
import type { AsUsed } from "./asUsed";
import { curveFindings } from "./curveRules";
import { parseDecimal } from "./decimal";
import { error, mustAnswer, note, sortFindings } from "./finding";
import type { Finding } from "./finding";
import { CONDITION_KINDS } from "./fields";
import type { ConstraintFields, FieldName } from "./fields";
import { levelProbability } from "./level";
import { printedLevels, printsNumber } from "./printedText";
import { isFractionBearing, isLimit, isOpen, NUMBER_FIELDS, relevantFields } from "./relevant";
import type { NumberField } from "./relevant";
import { openFields } from "./required";
import { FIELD_NAMES, LEVEL_WORDS, withTrueMinus } from "./words";

export interface FindingOptions {
  /** Whether the record has a citation that could be read. */
  citation: boolean;
  /**
   * True at submission, where everything required must be there (grade error, codes "missing.…").
   * False for a draft or an imported row, where only contradictions are errors. Default true.
   */
  complete?: boolean;
}

export { FINDING_GRADES, hasErrors, sortFindings } from "./finding";
export type { Finding, FindingGrade } from "./finding";
export { registryFindings, sentAlready } from "./registryRules";
export type { Neighbour } from "./registryRules";

export const PRINTED_TEXT_LONGEST = 300;
const NOTE_LONGEST = 2000;
const WIDTH_RATIO_LIMIT = 3;
const SECOND_PEAK_RATIO = 2.4;
const WIDE_BIN = 0.4;
const HIGHEST_USUAL_REDSHIFT = 30;

/**
 * Everything that can be said about the fields alone, errors first.
 *
 * @param fields - As typed; any strings may come in, nothing throws.
 */
export function fieldFindings(fields: ConstraintFields, options: FindingOptions): Finding[] {
  const complete = options.complete ?? true;
  const findings = [
    ...(complete ? missing(fields, options.citation) : []),
    ...notNumbers(fields),
    ...orderOfEnds(fields),
    ...ranges(fields),
    ...widths(fields),
    ...limits(fields),
    ...levels(fields),
    ...texts(fields),
    ...origin(fields),
    ...digitizingErrorSaysNothing(fields),
    ...curveFindings(fields, quantityRange(fields)),
    ...notes(fields),
  ];
  return sortFindings(findings);
}

function inSentence(name: FieldName): string {
  const words = FIELD_NAMES[name];
  return words.charAt(0).toLowerCase() + words.slice(1);
}

/** The typed text in a message: short, with a true minus. */
function typed(text: string | null): string {
  const words = (text ?? "").trim();
  return withTrueMinus(words.length > 24 ? `${words.slice(0, 24)}…` : words);
}

// ---- What is missing

const MISSING_WORDS: Partial<Record<FieldName, string>> = {
  quantity: "Say which quantity the paper states.",
  species: "Say whether the paper prints the neutral, the ionized or the electron fraction.",
  helium: "Say whether the electron fraction counts the electrons of helium; unknown is an answer.",
  scale: "Say whether the paper prints the fraction itself or its log10.",
  zRole:
    "Say what the redshift stands for: a point, a bin average, an uncertain redshift or the range of a sample.",
  kind: "Say what kind of statement the paper makes.",
  value: "Give the value as printed.",
  plus: "Give the error above the value as printed.",
  minus: "Give the error below the value as printed.",
  limitBase: "Give the base of the limit: the number before its own sigma.",
  limitSigma: "Give the sigma that the paper adds to the base of the limit.",
  level: "Give the credible level, or choose not stated if the paper gives none.",
  levelPercent: "Give the level in percent.",
  estimator: "Say what the value is: median, mean, mode, best fit, or not stated.",
  printedText: "Copy the exact text the paper prints.",
  methodTags: "Choose at least one method.",
  dataKnown: "Name the data used, or say that they are unknown.",
  dataUsed: "Name at least one sightline, field or sample, or say that the data are unknown.",
  versionRead: "Say which version you read: published, preprint or erratum.",
  place: "Say where in the paper it stands: table and row, figure, section.",
  curveTable: "Give the curve: a file, or its rows pasted.",
  curveColumn: "Say what the second column of the curve holds: a density or ln L.",
  digitizingError:
    "Read off a figure: give the digitizing error, how far off the number can be for having been read.",
};

function missing(fields: ConstraintFields, citation: boolean): Finding[] {
  const found = openFields(fields).map((name) =>
    error(`missing.${name}`, [name], MISSING_WORDS[name] ?? `Give: ${inSentence(name)}.`),
  );
  return citation
    ? found
    : [error("missing.citation", [], "Choose the citation: a record needs a paper."), ...found];
}

/** A digitizing error is text ("0.1 dex"), but one that says how large it is. */
function digitizingErrorSaysNothing(fields: ConstraintFields): Finding[] {
  if (fields.readOffFigure !== true || isOpen(fields, "digitizingError")) return [];
  return /[1-9]/.test(fields.digitizingError ?? "")
    ? []
    : [
        error(
          "digitizingErrorWithoutNumber",
          ["digitizingError"],
          "Give the digitizing error as a number above zero, with its unit if it has one.",
        ),
      ];
}

// ---- Numbers

function relevantNumbers(fields: ConstraintFields): NumberField[] {
  const relevant = relevantFields(fields);
  return NUMBER_FIELDS.filter((name) => relevant.includes(name) && !isOpen(fields, name));
}

function notNumbers(fields: ConstraintFields): Finding[] {
  return relevantNumbers(fields)
    .filter((name) => parseDecimal(fields[name]) === null)
    .map((name) =>
      error(`notANumber.${name}`, [name], notANumberMessage(FIELD_NAMES[name], fields[name] ?? "")),
    );
}

/**
 * Why a text is no number, and what to look at.
 *
 * @param name - What the number is, at the start of the sentence.
 */
export function notANumberMessage(name: string, text: string): string {
  return `${name}: "${typed(text)}" is not a number${numberHint(text.trim())}`;
}

function numberHint(text: string): string {
  if (/^[+\-\u2212]?[\dOoIl.]*$/.test(text)) {
    if (/[Oo]/.test(text)) return ". It looks like a letter O in place of a zero.";
    if (/[Il]/.test(text)) return ". It looks like a letter in place of a one.";
  }
  if (/^[+\-\u2212]?\d+,\d+$/.test(text)) return ". Write a decimal point, not a comma.";
  if (/%/.test(text)) return ". Write the number the paper prints, without the percent sign.";
  if (/^[<>\u2264\u2265]/.test(text)) {
    return ". Leave the sign out: the kind of statement says that it is a limit.";
  }
  if (/[±]|\d\s*[+\u2212-]\s*[\d.]/.test(text)) {
    return ". It holds several numbers; plus and minus have their own fields.";
  }
  return ". Write it as printed, such as 0.30.";
}

function decimals(fields: ConstraintFields): Record<NumberField, Big | null> {
  const relevant = new Set(relevantNumbers(fields));
  return Object.fromEntries(
    NUMBER_FIELDS.map((name) => [name, relevant.has(name) ? parseDecimal(fields[name]) : null]),
  ) as Record<NumberField, Big | null>;
}

function orderOfEnds(fields: ConstraintFields): Finding[] {
  const at = decimals(fields);
  const found: Finding[] = [];
  const pairs = [
    ["zLow", "zHigh", "redshift"],
    ["rangeLow", "rangeHigh", "range"],
    ["bandLow", "bandHigh", "band"],
  ] as const;
  for (const [low, high, what] of pairs) {
    const [bottom, top] = [at[low], at[high]];
    if (!bottom || !top) continue;
    const needsWidth =
      what !== "redshift" || fields.zRole === "binAverage" || fields.zRole === "uncertain";
    if (bottom.gt(top)) {
      found.push(
        error(
          `lowAboveHigh.${what}`,
          [low, high],
          `${FIELD_NAMES[low]} ${typed(fields[low])} is above the high end ${typed(fields[high])}. Look whether the two are swapped.`,
        ),
      );
    } else if (needsWidth && bottom.eq(top)) {
      found.push(
        error(
          `noWidth.${what}`,
          [low, high],
          `Both ends are ${typed(fields[low])}: a ${what === "redshift" ? "bin" : what} needs a width.`,
        ),
      );
    }
  }
  const { z, zLow, zHigh } = at;
  const ordered = !zLow || !zHigh || zLow.lte(zHigh);
  if (z && ordered && ((zLow && z.lt(zLow)) || (zHigh && z.gt(zHigh)))) {
    found.push(
      error(
        "outsideEnds.z",
        ["z", "zLow", "zHigh"],
        `The redshift ${typed(fields.z)} lies outside its ends, ${typed(fields.zLow) || "open"} to ${typed(fields.zHigh) || "open"}.`,
      ),
    );
  }
  if (at.fractionFrom && at.fractionTo && at.fractionFrom.eq(at.fractionTo)) {
    found.push(
      error(
        "noWidth.fractions",
        ["fractionFrom", "fractionTo"],
        `Both fractions are ${typed(fields.fractionFrom)}: a duration runs between two different ones.`,
      ),
    );
  }
  return found;
}

interface QuantityRange {
  low: number | null;
  high: number | null;
  words: string;
}

/** Bounds of the printed number itself; for a log10 the upper one only. */
function quantityRange(fields: ConstraintFields): QuantityRange {
  switch (fields.quantity) {
    case null:
      return { low: null, high: null, words: "" };
    case "neutralFraction":
      return fractionRange(fields, fields.scale === "log10");
    case "opticalDepth":
    case "opticalDepthRange":
      return { low: 0, high: null, words: "an optical depth is not negative" };
    case "redshiftAtFraction":
      return { low: 0, high: null, words: "a redshift is not negative" };
    case "duration":
      return { low: 0, high: null, words: "a duration is not negative" };
  }
}

function fractionRange(fields: ConstraintFields, log: boolean): QuantityRange {
  const electrons = fields.species === "electron" && fields.helium !== "notIncluded";
  const high = electrons ? 1 + 2 * HELIUM_PER_HYDROGEN : 1;
  const name = electrons ? "the number of electrons per hydrogen" : "a fraction";
  if (log) {
    const highest = Math.log10(high);
    return { low: null, high: highest, words: `log10 of ${name} is at most ${bound(highest)}` };
  }
  return { low: 0, high, words: `${name} lies between 0 and ${bound(high)}` };
}

function bound(value: number): string {
  return String(Number(value.toFixed(4)));
}

function outside(value: Big, range: QuantityRange): boolean {
  return (
    (range.low !== null && value.lt(range.low)) || (range.high !== null && value.gt(range.high))
  );
}

function ranges(fields: ConstraintFields): Finding[] {
  const at = decimals(fields);
  const range = quantityRange(fields);
  const found: Finding[] = [];
  const refuse = (name: NumberField, words: string) =>
    found.push(
      error(
        `outsideRange.${name}`,
        [name],
        `${FIELD_NAMES[name]} ${typed(fields[name])} can't be: ${words}. Look at the number, and at the quantity and scale chosen.`,
      ),
    );

  for (const name of ["value", "limitBase"] as const) {
    const value = at[name];
    if (value && outside(value, range)) refuse(name, range.words);
  }
  const { bandLow, bandHigh } = at;
  if (bandLow && bandHigh && bandLow.lte(bandHigh)) {
    const below = range.low !== null && bandHigh.lt(range.low);
    const above = range.high !== null && bandLow.gt(range.high);
    if (above) refuse("bandLow", range.words);
    else if (below) refuse("bandHigh", range.words);
    else {
      for (const name of ["bandLow", "bandHigh"] as const) {
        if (outside(at[name] as Big, range)) {
          found.push(endBeyond(name, typed(fields[name]), [name], range.words));
        }
      }
    }
  }
  const fractions = fractionRange(fields, false);
  for (const name of ["fraction", "fractionFrom", "fractionTo"] as const) {
    const value = at[name];
    if (value && outside(value, fractions)) refuse(name, fractions.words);
  }
  for (const name of ["z", "zLow", "zHigh", "rangeLow", "rangeHigh"] as const) {
    if (at[name]?.lt(0)) refuse(name, "a redshift is not negative");
  }
  const { value, plus, minus } = at;
  if (value && !outside(value, range)) {
    const top = plus && value.plus(plus.abs());
    const bottom = minus && value.minus(minus.abs());
    if (top && outside(top, range)) {
      found.push(
        endBeyond(
          "plus",
          `${typed(fields.value)} + ${top.minus(value).toFixed()}`,
          ["value", "plus"],
          range.words,
        ),
      );
    }
    if (bottom && outside(bottom, range)) {
      found.push(
        endBeyond(
          "minus",
          `${typed(fields.value)} \u2212 ${value.minus(bottom).toFixed()}`,
          ["value", "minus"],
          range.words,
        ),
      );
    }
  }
  return found;
}

function endBeyond(side: string, numbers: string, fields: FieldName[], words: string): Finding {
  return mustAnswer(
    `endBeyondRange.${side}`,
    fields,
    `The interval ends at ${numbers}, but ${words}. Does the paper print it so? Say how it is meant.`,
  );
}

function widths(fields: ConstraintFields): Finding[] {
  const at = decimals(fields);
  const found: Finding[] = [];
  const { plus, minus, limitSigma } = at;
  if (plus?.lt(0)) {
    found.push(
      error(
        "wrongSign.plus",
        ["plus"],
        `Plus is ${typed(fields.plus)}: the upper error can't be negative. Look whether plus and minus are swapped.`,
      ),
    );
  }
  if (minus?.gt(0) && (fields.minus ?? "").trim().startsWith("+")) {
    found.push(
      error(
        "wrongSign.minus",
        ["minus"],
        `Minus is ${typed(fields.minus)}: the lower error can't carry a plus. Look whether plus and minus are swapped.`,
      ),
    );
  }
  if (limitSigma && limitSigma.lte(0)) {
    found.push(
      error(
        "wrongSign.limitSigma",
        ["limitSigma"],
        `The sigma of the limit is ${typed(fields.limitSigma)}; it must be above zero.`,
      ),
    );
  }
  if (plus && minus) {
    const large = plus.abs().gt(minus.abs()) ? plus.abs() : minus.abs();
    const small = plus.abs().gt(minus.abs()) ? minus.abs() : plus.abs();
    if (small.eq(0)) {
      found.push(
        mustAnswer(
          "zeroWidth",
          ["plus", "minus"],
          `One side has no width (plus ${typed(fields.plus)}, minus ${typed(fields.minus)}). Does the paper state a limit, or are digits missing?`,
        ),
      );
    } else if (large.gt(small.times(WIDTH_RATIO_LIMIT))) {
      found.push(
        mustAnswer(
          "widthRatio",
          ["plus", "minus"],
          `Plus ${typed(fields.plus)} and minus ${typed(fields.minus)} differ by a factor of ${ratioText(large, small)}. Look at both in the paper: a digit may be missing, or a bound may have been typed in place of a width.`,
        ),
      );
    } else if (
      fields.kind === "twoSided" &&
      fields.estimator === "median" &&
      large.gt(small.times(SECOND_PEAK_RATIO))
    ) {
      found.push(
        note(
          "secondPeak",
          ["plus", "minus"],
          `Plus and minus differ by a factor of ${ratioText(large, small)}: the likelihood through the quantiles has a second peak. A fitting table proposes the two-piece form instead.`,
        ),
      );
    }
  }
  return found;
}

function ratioText(large: Big, small: Big): string {
  return String(Number(large.div(small).toPrecision(2)));
}

// ---- Limits, levels

function limits(fields: ConstraintFields): Finding[] {
  const found: Finding[] = [];
  if (!isLimit(fields.kind)) {
    return fields.kind === "band" ? bandEdges(fields) : found;
  }
  if (!isOpen(fields, "value") && !isOpen(fields, "limitBase")) {
    found.push(
      error(
        "twoLimits",
        ["value", "limitBase"],
        `The limit has a value (${typed(fields.value)}) and a base with its own sigma (${typed(fields.limitBase)}). Keep the form the paper prints and clear the other.`,
      ),
    );
  }
  const used = asUsed(fields);
  if (used && used.quantity === "neutralFraction" && used.evaluatedIn === "linear") {
    const empty = emptyLimit(used);
    if (empty !== null) {
      found.push(
        mustAnswer(
          "flatLimit",
          [used.value === null ? "limitBase" : "value", "level"],
          `${empty} Look at the number and the level again, or say why the record is worth keeping.`,
        ),
      );
    }
  }
  return found;
}

/** Why a limit carries nothing, or null when it does. A flat prior on [0, 1] already excludes 1 − L above, L below. */
function emptyLimit(used: AsUsed): string | null {
  const upper = used.kind === "upperLimit";
  if (used.limitBase !== null) {
    const nothing = upper ? Number(used.limitBase) >= 1 : Number(used.limitBase) <= 0;
    return nothing ? "The base allows every neutral fraction: the limit says nothing." : null;
  }
  if (used.value === null || used.level === null) return null;
  const value = Number(used.value);
  // Twelve digits keep 1 − 0.95 from missing 0.05 by a binary rounding.
  const edge = Number((upper ? used.level : 1 - used.level).toPrecision(12));
  if (upper ? value < edge : value > edge) return null;
  const level = `${Number((used.level * 100).toPrecision(6))} %`;
  return `As a neutral fraction the limit is ${upper ? "below" : "above"} ${used.value} at ${level}; a flat prior alone says as much, so it carries nothing.`;
}

function bandEdges(fields: ConstraintFields): Finding[] {
  if (fields.quantity !== "neutralFraction" || fields.scale !== "linear") return [];
  const low = parseDecimal(fields.bandLow);
  const high = parseDecimal(fields.bandHigh);
  if (!low || !high || !(low.eq(0) || high.eq(1))) return [];
  return [
    note(
      "bandTouchesEdge",
      ["bandLow", "bandHigh"],
      `The band touches ${low.eq(0) ? "0" : "1"}. If the paper means a bound on one side only, enter a limit.`,
    ),
  ];
}

function levels(fields: ConstraintFields): Finding[] {
  const found: Finding[] = [];
  if (!relevantFields(fields).includes("level")) return found;
  if (fields.level === "other") {
    const percent = parseDecimal(fields.levelPercent);
    if (percent && (percent.lte(0) || percent.gte(100))) {
      found.push(
        error(
          "outsideRange.levelPercent",
          ["levelPercent"],
          `A level of ${typed(fields.levelPercent)} % can't be: it lies between 0 and 100.`,
        ),
      );
    } else if (percent?.lte(1)) {
      found.push(
        mustAnswer(
          "smallLevel",
          ["levelPercent"],
          `The level reads ${typed(fields.levelPercent)} %. Was ${percent.times(100).toFixed()} % meant?`,
        ),
      );
    }
  }
  const text = fields.printedText ?? "";
  const named = printedLevels(text);
  if (fields.level === null || named.length === 0) return found;
  const entered = levelProbability(fields.level, fields.levelPercent);
  if (fields.level !== "notStated" && entered === null) return found;
  // 68.3 % and 68.27 % are one level; 68 % and one sigma are two.
  const same = named.some(
    (level) => entered !== null && Math.abs(level.probability - entered) < 0.0006,
  );
  if (!same) {
    const words = [...new Set(named.map((level) => level.words.trim()))].join(", ");
    const chosen =
      fields.level === "other"
        ? `${typed(fields.levelPercent)} %`
        : LEVEL_WORDS[fields.level].toLowerCase();
    found.push(
      mustAnswer(
        "levelUnlikePrinted",
        ["level", "printedText"],
        `The printed text says ${words}; the level entered is ${chosen}. Choose the level as printed, or say why it differs.`,
      ),
    );
  }
  return found;
}

// ---- Texts, data, method

/** Numbers of the statement, which the printed text must hold. */
const STATED: readonly NumberField[] = [
  "value",
  "plus",
  "minus",
  "limitBase",
  "limitSigma",
  "bandLow",
  "bandHigh",
];

function texts(fields: ConstraintFields): Finding[] {
  const found: Finding[] = [];
  const printed = fields.printedText ?? "";
  if (printed.length > PRINTED_TEXT_LONGEST) {
    found.push(
      error(
        "tooLong.printedText",
        ["printedText"],
        `The printed text has ${printed.length} characters; keep the sentence with the numbers, ${PRINTED_TEXT_LONGEST} at most.`,
      ),
    );
  }
  for (const [name, held] of Object.entries(fields) as [FieldName, unknown][]) {
    const longest = Array.isArray(held)
      ? Math.max(0, ...held.map((entry) => String(entry).length))
      : typeof held === "string"
        ? held.length
        : 0;
    // A curve says itself that it is too long.
    if (name !== "printedText" && name !== "curveTable" && longest > NOTE_LONGEST) {
      found.push(
        error(
          `tooLong.${name}`,
          [name],
          `${FIELD_NAMES[name]} has ${longest} characters; ${NOTE_LONGEST} at most.`,
        ),
      );
    }
  }
  if (printed.trim() !== "") {
    const relevant = relevantNumbers(fields);
    const absent = STATED.filter(
      (name) =>
        relevant.includes(name) &&
        parseDecimal(fields[name]) !== null &&
        !printsNumber(printed.slice(0, NOTE_LONGEST), fields[name] ?? ""),
    );
    if (absent.length > 0) {
      const list = absent.map((name) => `${inSentence(name)} ${typed(fields[name])}`).join(", ");
      found.push(
        mustAnswer(
          "printedWithoutNumbers",
          [...absent, "printedText"],
          `The printed text doesn't contain ${list}. Compare both with the paper.`,
        ),
      );
    }
  }
  return found;
}

/** Tags whose result comes from single lines of sight. */
const SIGHTLINE_TAGS = ["quasarDampingWing", "burstDampingWing", "nearZones", "twentyOneCmForest"];
/** Names that say themselves that they are more than one sightline. */
const COLLECTION =
  /\b(?:samples?|surveys?|stack(?:ed)?|fields?|quasars|qsos|bursts|sightlines|spectra)\b/i;

function origin(fields: ConstraintFields): Finding[] {
  const found: Finding[] = [];
  for (const tag of fields.methodTags) {
    if (currentTag(tag) === null) {
      const near = findTag(tag);
      found.push(
        error(
          `unknownMethod.${tag.slice(0, 40)}`,
          ["methodTags"],
          `"${typed(tag)}" is not in the method vocabulary.${near ? ` Did you mean ${near.name}?` : ""}`,
        ),
      );
    }
  }
  const sightlines =
    fields.methodTags.length > 0 &&
    fields.methodTags.every((tag) => SIGHTLINE_TAGS.some((one) => carriesTag([tag], one)));
  const only = fields.dataUsed.length === 1 ? (fields.dataUsed[0] ?? "") : "";
  if (
    fields.quantity === "neutralFraction" &&
    fields.kind !== "qualitative" &&
    sightlines &&
    only !== "" &&
    !COLLECTION.test(only) &&
    fields.cosmicVariance !== "included"
  ) {
    found.push(
      mustAnswer(
        "oneSightline",
        ["dataUsed", "cosmicVariance"],
        `One sightline (${typed(only)}) stands for the cosmic mean. Look whether the quoted error contains the scatter between sightlines, and set cosmic variance or say what the paper means.`,
      ),
    );
  }
  if (fields.dataKnown === false && fields.dataUsed.length > 0) {
    found.push(
      error(
        "dataUnknownAndNamed",
        ["dataKnown", "dataUsed"],
        "The data are said to be unknown, yet some are named. Keep one of the two.",
      ),
    );
  }
  if (fields.quantity === "neutralFraction" && fields.zRole === null) {
    const low = parseDecimal(fields.zLow);
    const high = parseDecimal(fields.zHigh);
    if (low && high && high.minus(low).gt(WIDE_BIN)) {
      found.push(
        mustAnswer(
          "wideBinNoRole",
          ["zRole", "zLow", "zHigh"],
          `The redshift runs over ${high.minus(low).toFixed()}, more than ${WIDE_BIN}, and its role is open. Look whether the paper averages over the bin, or whether it is an uncertainty or the range of a sample.`,
        ),
      );
    }
  }
  return found;
}

function notes(fields: ConstraintFields): Finding[] {
  const found: Finding[] = [];
  if (fields.kind === "qualitative") {
    found.push(note("qualitative", ["kind"], "A qualitative statement is shown and never fitted."));
  }
  if (
    fields.level === "notStated" &&
    fields.kind !== "curve" &&
    relevantFields(fields).includes("level")
  ) {
    found.push(
      note(
        "levelNotStated",
        ["level"],
        "Without a level the widths can't be turned into sigma: each fitting table has to decide.",
      ),
    );
  }
  if (fields.quantity === "neutralFraction") {
    if (fields.weighting === "mass") {
      found.push(
        note(
          "massWeighted",
          ["weighting"],
          "Mass-weighted: shown as such and never converted to a volume average.",
        ),
      );
    }
    if (fields.weighting === null) {
      found.push(
        note("weightingOpen", ["weighting"], "The weighting is open and counts as unknown."),
      );
    }
    const z = parseDecimal(fields.z);
    if (z?.gt(HIGHEST_USUAL_REDSHIFT)) {
      found.push(
        note(
          "highRedshift",
          ["z"],
          `The redshift is ${typed(fields.z)}, above ${HIGHEST_USUAL_REDSHIFT}. Look at it again.`,
        ),
      );
    }
  }
  if (
    isFractionBearing(fields.quantity) &&
    fields.species === "electron" &&
    fields.helium === "unknown"
  ) {
    found.push(
      note(
        "heliumUnknown",
        ["helium"],
        "While it is unknown whether helium electrons are counted, the record is shown and not used.",
      ),
    );
  }
  if (fields.versionRead === "preprint") {
    found.push(
      note(
        "preprintOnly",
        ["versionRead"],
        isOpen(fields, "preprintVersion")
          ? "Read in a preprint: say which version. Each fitting table decides whether it takes preprints."
          : "Read in a preprint: each fitting table decides whether it takes preprints.",
      ),
    );
  }
  for (const condition of fields.conditionedOn) {
    if (
      !(CONDITION_KINDS as readonly string[]).includes(condition) &&
      !/^FL-\d{4,}$/.test(condition)
    ) {
      found.push(
        note(
          `unknownCondition.${condition.slice(0, 40)}`,
          ["conditionedOn"],
          `"${typed(condition)}" is neither a record's number nor a kind of data; a table can't follow it.`,
        ),
      );
    }
  }
  const relevant = relevantFields(fields);
  const left = NUMBER_FIELDS.filter((name) => !relevant.includes(name) && !isOpen(fields, name));
  if (left.length > 0 && fields.quantity !== null && fields.kind !== null) {
    found.push(
      note(
        "notUsed",
        left,
        `Not used for this quantity and kind of statement: ${left.map(inSentence).join(", ")}.`,
      ),
    );
  }
  return found;
}
