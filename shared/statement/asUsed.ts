/** From as printed to as used: every conversion a record needs before a likelihood can take it. */
import Big from "big.js";

import { sigmasOfLevel } from "~shared/numerics/special";

import { curveNodes, type CurveNodes, trimmedRows } from "./curve";
import { computedText, decimalPlaces, decimalText, oneMinus, parseDecimal } from "./decimal";
import type {
  ConstraintFields,
  DurationUnit,
  Estimator,
  Quantity,
  RedshiftRole,
  StatementKind,
  Weighting,
} from "./fields";
import { HELIUM_MASS_FRACTION, HELIUM_PER_HYDROGEN } from "./helium";
import { levelProbability } from "./level";

export { HELIUM_MASS_FRACTION, HELIUM_PER_HYDROGEN };

export interface ConversionStep {
  code: string;
  /** The conversion in words, with its formula. */
  text: string;
}

/** A statement in the registry's convention; fractions are neutral, numbers stand at the printed level. */
export interface AsUsed {
  quantity: Quantity;
  kind: StatementKind;
  /** "log10": value, widths, ends and base are in log10 of the neutral fraction. */
  evaluatedIn: "linear" | "log10";
  weighting: Weighting;
  value: string | null;
  plus: string | null;
  minus: string | null;
  limitBase: string | null;
  limitSigma: string | null;
  low: string | null;
  high: string | null;
  /** Probability of the level; null when the paper states none. */
  level: number | null;
  /** Half-width of that level in sigma. */
  k: number | null;
  /** One-sigma equivalents, minus / k and plus / k. */
  sigmaMinus: number | null;
  sigmaPlus: number | null;
  estimator: Estimator;
  z: number | null;
  zLow: number | null;
  zHigh: number | null;
  zRole: RedshiftRole | null;
  rangeLow: number | null;
  rangeHigh: number | null;
  /** Neutral fraction of a redshift at a fraction. */
  fraction: number | null;
  /** Neutral fractions of a duration, from the higher to the lower one. */
  fractionFrom: number | null;
  fractionTo: number | null;
  durationUnit: DurationUnit | null;
  /** The nodes of a tabulated curve; left out for what is no curve, or one that can't be used. */
  curve?: CurveNodes;
  /** True when a number rests on more than an exact change of convention. */
  derived: boolean;
  /** The part of `derived` that concerns the stated numbers (an assumption about helium, a logarithm undone). */
  valueDerived: boolean;
  /** The part of `derived` that concerns the one-sigma equivalents. */
  sigmaDerived: boolean;
  steps: ConversionStep[];
}

/** The numbers of a statement while they are converted. */
interface Numbers {
  kind: StatementKind;
  value: string | null;
  plus: string | null;
  minus: string | null;
  limitBase: string | null;
  limitSigma: string | null;
  low: string | null;
  high: string | null;
}

/**
 * The statement as a table hands it to a likelihood.
 *
 * @param fields - A revision's fields; strings as printed.
 * @returns Null when the fields do not say enough yet (a draft), say it in a way that can't be used
 *   (an electron fraction with helium unknown), or hold something that is not a number.
 *   A qualitative statement comes back without numbers, a curve with the interval quoted beside it, if any.
 */
export function asUsed(fields: ConstraintFields): AsUsed | null {
  const { quantity, kind } = fields;
  if (quantity === null || kind === null) return null;
  if (!hasItsNumbers(fields)) return null;

  const steps: ConversionStep[] = [];
  const start = numbersAsPrinted(fields);
  const converted =
    quantity === "neutralFraction" ? convertFraction(fields, start, steps) : { numbers: start };
  if (converted === null) return null;
  const ends = convertEnds(fields, steps);
  if (ends === null) return null;

  const { numbers } = converted;
  const evaluatedIn = "evaluatedIn" in converted ? converted.evaluatedIn : "linear";
  const valueDerived = ("derived" in converted && converted.derived) || ends.derived;
  const level = levelProbability(fields.level, fields.levelPercent);
  const k = level === null ? null : sigmasOfLevel(level);
  const sigmas = oneSigma(numbers, k);
  const sigmaDerived = sigmas.minus !== null && fields.level !== "oneSigma";
  const curve = curveNodes(fields);
  if (curve !== null) describeCurve(fields, curve, evaluatedIn, steps);
  describeLevel(fields, numbers, k, steps);
  if (quantity === "neutralFraction" && fields.weighting === "mass") {
    steps.push({
      code: "massWeighted",
      text: "Mass-weighted: used as it is; no conversion to a volume average is made.",
    });
  }

  return {
    quantity,
    kind: numbers.kind,
    evaluatedIn,
    weighting: fields.weighting ?? "unknown",
    value: numbers.value,
    plus: numbers.plus,
    minus: numbers.minus,
    limitBase: numbers.limitBase,
    limitSigma: numbers.limitSigma,
    low: numbers.low,
    high: numbers.high,
    level,
    k,
    sigmaMinus: sigmas.minus,
    sigmaPlus: sigmas.plus,
    estimator: fields.estimator ?? "notStated",
    z: numberOf(fields.z),
    zLow: numberOf(fields.zLow),
    zHigh: numberOf(fields.zHigh),
    zRole: quantity === "neutralFraction" ? fields.zRole : null,
    rangeLow: numberOf(fields.rangeLow),
    rangeHigh: numberOf(fields.rangeHigh),
    fraction: ends.fraction,
    fractionFrom: ends.from,
    fractionTo: ends.to,
    durationUnit: quantity === "duration" ? (fields.durationUnit ?? "redshift") : null,
    ...(curve === null ? {} : { curve }),
    derived: valueDerived || sigmaDerived,
    valueDerived,
    sigmaDerived,
    steps,
  };
}

function numberOf(text: string | null): number | null {
  return parseDecimal(text)?.toNumber() ?? null;
}

/** A width as typed may carry the sign it is printed with; its size is what counts. */
export function widthText(text: string | null): string | null {
  const value = parseDecimal(text);
  if (value === null || text === null) return null;
  return decimalText(value.abs(), decimalPlaces(text));
}

function plain(text: string | null): string | null {
  const value = parseDecimal(text);
  if (value === null || text === null) return null;
  return decimalText(value, decimalPlaces(text));
}

function numbersAsPrinted(fields: ConstraintFields): Numbers {
  const kind = fields.kind ?? "qualitative";
  const limit = kind === "upperLimit" || kind === "lowerLimit";
  const own = limit && parseDecimal(fields.limitBase) !== null;
  const interval = kind === "twoSided" || (kind === "curve" && quotesInterval(fields));
  return {
    kind,
    value: interval || (limit && !own) ? plain(fields.value) : null,
    plus: interval ? widthText(fields.plus) : null,
    minus: interval ? widthText(fields.minus) : null,
    limitBase: own ? plain(fields.limitBase) : null,
    limitSigma: own ? widthText(fields.limitSigma) : null,
    low: kind === "band" ? plain(fields.bandLow) : null,
    high: kind === "band" ? plain(fields.bandHigh) : null,
  };
}

/** Whether a curve comes with the interval the paper quotes of it. */
function quotesInterval({ value, plus, minus }: ConstraintFields): boolean {
  return [value, plus, minus].every((text) => parseDecimal(text) !== null);
}

function hasItsNumbers(fields: ConstraintFields): boolean {
  const given = (...names: (string | null)[]) => names.every((text) => parseDecimal(text) !== null);
  switch (fields.kind) {
    case "twoSided":
      return given(fields.value, fields.plus, fields.minus);
    case "upperLimit":
    case "lowerLimit":
      return given(fields.value) || given(fields.limitBase, fields.limitSigma);
    case "band":
      return given(fields.bandLow, fields.bandHigh);
    default:
      return true;
  }
}

interface ConvertedFraction {
  numbers: Numbers;
  evaluatedIn: "linear" | "log10";
  derived: boolean;
}

function convertFraction(
  fields: ConstraintFields,
  printed: Numbers,
  steps: ConversionStep[],
): ConvertedFraction | null {
  const { species } = fields;
  if (species === null || fields.scale === null) return null;
  if (species === "electron" && fields.helium !== "included" && fields.helium !== "notIncluded") {
    return null;
  }
  let numbers = printed;
  let evaluatedIn: "linear" | "log10" = "linear";
  let derived = false;
  const needsHelium = species === "electron" && fields.helium === "included";

  if (fields.scale === "log10") {
    const limit = numbers.kind === "upperLimit" || numbers.kind === "lowerLimit";
    const staysLog = species === "neutral" && !(limit && numbers.limitBase === null);
    if (staysLog) {
      evaluatedIn = "log10";
      steps.push({
        code: "log10Kept",
        text: "Printed as log10 of the neutral fraction: evaluated in log10, as printed.",
      });
    } else {
      const undone = undoLog10(numbers);
      if (undone === null) return null;
      numbers = undone;
      derived = true;
      steps.push({
        code: "log10Undone",
        text: limit
          ? "Limit from log10: x = 10^(printed number)."
          : "From log10: every end is 10^(printed number); the widths follow from the ends.",
      });
    }
  }
  if (needsHelium) {
    numbers = divideNumbers(numbers, 1 + HELIUM_PER_HYDROGEN);
    derived = true;
    steps.push(heliumStep("derived"));
  } else if (species === "electron") {
    steps.push({
      code: "electronsOfHydrogen",
      text: "Electrons of hydrogen only: the ionized fraction is the electron fraction, x_HII = x_e.",
    });
  }
  if (species !== "neutral") {
    numbers = ionizedToNeutral(numbers);
    steps.push({ code: "neutralFromIonized", text: flipText(numbers) });
  }
  return { numbers, evaluatedIn, derived };
}

function heliumStep(code: string): ConversionStep {
  return {
    code: `heliumElectrons.${code}`,
    text:
      `Ionized from electrons, derived: x_HII = x_e / (1 + f_He) with f_He = ` +
      `${HELIUM_PER_HYDROGEN.toFixed(4)} = Y / (3.9715 (1 \u2212 Y)) at Y = ${HELIUM_MASS_FRACTION}. ` +
      "This assumes that helium loses its first electron together with hydrogen.",
  };
}

function flipText(neutral: Numbers): string {
  const start = "Neutral from ionized: x_HI = 1 \u2212 x_HII; ";
  switch (neutral.kind) {
    case "twoSided":
      return `${start}plus and minus swap.`;
    case "upperLimit":
      return `${start}the lower limit becomes an upper limit.`;
    case "lowerLimit":
      return `${start}the upper limit becomes a lower limit.`;
    case "band":
      return `${start}the ends of the band swap.`;
    case "curve":
      return `${start}every place of the curve moves to the other side${neutral.value === null ? "." : ", and plus and minus of the quoted interval swap."}`;
    default:
      return `${start}no number to convert.`;
  }
}

function ionizedToNeutral(numbers: Numbers): Numbers {
  const kind: StatementKind =
    numbers.kind === "upperLimit"
      ? "lowerLimit"
      : numbers.kind === "lowerLimit"
        ? "upperLimit"
        : numbers.kind;
  return {
    kind,
    value: oneMinus(numbers.value),
    plus: numbers.minus,
    minus: numbers.plus,
    limitBase: oneMinus(numbers.limitBase),
    limitSigma: numbers.limitSigma,
    low: oneMinus(numbers.high),
    high: oneMinus(numbers.low),
  };
}

function divideNumbers(numbers: Numbers, divisor: number): Numbers {
  const divided = (text: string | null) =>
    text === null ? null : computedText(Number(text) / divisor);
  return {
    kind: numbers.kind,
    value: divided(numbers.value),
    plus: divided(numbers.plus),
    minus: divided(numbers.minus),
    limitBase: divided(numbers.limitBase),
    limitSigma: divided(numbers.limitSigma),
    low: divided(numbers.low),
    high: divided(numbers.high),
  };
}

/** Null when a power overflows: no fraction has such a logarithm. */
function undoLog10(numbers: Numbers): Numbers | null {
  const power = (text: string | null) => (text === null ? null : 10 ** Number(text));
  const text = (value: number | null) => (value === null ? null : computedText(value));
  const value = power(numbers.value);
  const top =
    numbers.value === null || numbers.plus === null
      ? null
      : 10 ** (Number(numbers.value) + Number(numbers.plus));
  const bottom =
    numbers.value === null || numbers.minus === null
      ? null
      : 10 ** (Number(numbers.value) - Number(numbers.minus));
  const base = power(numbers.limitBase);
  const ends = [value, top, base, power(numbers.low), power(numbers.high)];
  if (ends.some((end) => end === Infinity)) return null;
  const sign = numbers.kind === "upperLimit" ? 1 : -1;
  const beyond =
    numbers.limitBase === null || numbers.limitSigma === null
      ? null
      : 10 ** (Number(numbers.limitBase) + sign * Number(numbers.limitSigma));
  if (beyond === Infinity) return null;
  return {
    kind: numbers.kind,
    value: text(value),
    plus: value === null || top === null ? null : computedText(top - value),
    minus: value === null || bottom === null ? null : computedText(value - bottom),
    limitBase: text(base),
    limitSigma: base === null || beyond === null ? null : computedText(Math.abs(beyond - base)),
    low: text(power(numbers.low)),
    high: text(power(numbers.high)),
  };
}

interface Ends {
  fraction: number | null;
  from: number | null;
  to: number | null;
  derived: boolean;
}

/** Fractions that belong to the quantity itself, in the neutral convention. */
function convertEnds(fields: ConstraintFields, steps: ConversionStep[]): Ends | null {
  const none: Ends = { fraction: null, from: null, to: null, derived: false };
  if (fields.quantity === "opticalDepthRange") {
    const given = parseDecimal(fields.rangeLow) !== null && parseDecimal(fields.rangeHigh) !== null;
    return given ? none : null;
  }
  if (fields.quantity !== "redshiftAtFraction" && fields.quantity !== "duration") return none;

  const species = fields.species ?? "neutral";
  if (species === "electron" && fields.helium !== "included" && fields.helium !== "notIncluded") {
    return null;
  }
  const derived = species === "electron" && fields.helium === "included";
  const neutral = (text: string | null): number | null => {
    const value = parseDecimal(text);
    if (value === null) return null;
    if (species === "neutral") return value.toNumber();
    const ionized = derived ? new Big(value.toNumber() / (1 + HELIUM_PER_HYDROGEN)) : value;
    return new Big(1).minus(ionized).toNumber();
  };
  if (derived) steps.push(heliumStep("fractions"));
  if (species !== "neutral") {
    steps.push({
      code: "fractionsNeutral",
      text: "Fractions of the quantity, neutral from ionized: x_HI = 1 \u2212 x_HII.",
    });
  }
  if (fields.quantity === "redshiftAtFraction") {
    const fraction = neutral(fields.fraction);
    return fraction === null ? null : { ...none, fraction, derived };
  }
  const a = neutral(fields.fractionFrom);
  const b = neutral(fields.fractionTo);
  if (a === null || b === null) return null;
  return { fraction: null, from: Math.max(a, b), to: Math.min(a, b), derived };
}

function oneSigma(
  numbers: Numbers,
  k: number | null,
): { minus: number | null; plus: number | null } {
  const interval = numbers.kind === "twoSided" || numbers.kind === "curve";
  if (k === null || !interval || numbers.plus === null) return { minus: null, plus: null };
  return { minus: Number(numbers.minus) / k, plus: Number(numbers.plus) / k };
}

function describeLevel(
  fields: ConstraintFields,
  numbers: Numbers,
  k: number | null,
  steps: ConversionStep[],
): void {
  if (fields.kind === "curve" && numbers.value === null) return;
  if (fields.level === "notStated") {
    steps.push({
      code: "levelNotStated",
      text: "Level not stated: the widths stay as printed until a table decides on a level.",
    });
    return;
  }
  if (k === null || fields.level === "oneSigma") return;
  const divisor = k.toFixed(3);
  if (numbers.minus !== null && numbers.plus !== null) {
    const widths =
      numbers.minus === numbers.plus
        ? `${numbers.plus} / ${divisor} on both sides`
        : `${numbers.minus} / ${divisor} below and ${numbers.plus} / ${divisor} above`;
    steps.push({ code: "oneSigma", text: `Level, derived: one sigma is ${widths}.` });
  } else if (numbers.limitSigma !== null) {
    steps.push({
      code: "oneSigma",
      text: `Level, derived: one sigma of the limit is ${numbers.limitSigma} / ${divisor}.`,
    });
  }
}

function describeCurve(
  fields: ConstraintFields,
  { x }: CurveNodes,
  evaluatedIn: "linear" | "log10",
  steps: ConversionStep[],
): void {
  const trimmed = trimmedRows(fields);
  const column = fields.curveColumn === "lnLikelihood" ? "ln L" : "the density, read as L,";
  steps.push({
    code: "curve",
    text:
      `Curve: ${column} is used over its highest value, ln L linear between ${x.length} rows` +
      `${evaluatedIn === "log10" ? " in log10" : ""}; nothing is allowed beyond its ends.` +
      (trimmed > 0
        ? ` ${trimmed === 1 ? "One row of zero at an end is" : `${trimmed} rows of zero at the ends are`} left out.`
        : ""),
  });
}
