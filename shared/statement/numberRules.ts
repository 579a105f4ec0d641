/** Rules about the numbers of a statement: that they are some, their order, range and widths. */
import type Big from "big.js";

import { HELIUM_PER_HYDROGEN } from "./asUsed";
import { parseDecimal } from "./decimal";
import { error, mustAnswer, note } from "./finding";
import type { Finding } from "./finding";
import type { ConstraintFields, FieldName } from "./fields";
import { NUMBER_FIELDS } from "./relevant";
import type { NumberField } from "./relevant";
import { relevantNumbers, typed } from "./ruleText";
import { FIELD_NAMES } from "./words";

const WIDTH_RATIO_LIMIT = 3;
const SECOND_PEAK_RATIO = 2.4;

/** Texts in number fields that are no numbers. */
export function notNumbers(fields: ConstraintFields): Finding[] {
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

/** Low ends above high ones, bins without a width, a redshift outside its ends. */
export function orderOfEnds(fields: ConstraintFields): Finding[] {
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

export interface QuantityRange {
  low: number | null;
  high: number | null;
  words: string;
}

/** Bounds of the printed number itself; for a log10 the upper one only. */
export function quantityRange(fields: ConstraintFields): QuantityRange {
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

/** Numbers and ends of intervals beyond the range of their quantity. */
export function ranges(fields: ConstraintFields): Finding[] {
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

/** Signs and sizes of plus, minus and a limit's sigma. */
export function widths(fields: ConstraintFields): Finding[] {
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
