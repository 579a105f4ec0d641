/** Reading the exact printed text: which numbers and which levels it holds. */
import type Big from "big.js";

import { parseDecimal } from "./decimal";

/** One spelling for the signs that papers and their TeX sources set in many ways. */
function plainPrint(text: string): string {
  return text
    .normalize("NFKC")
    .replace(/[\u2212\u2013\u2012\u2010\u2011]/g, "-")
    .replace(/(\d)\u00b7(\d)/g, "$1.$2")
    .replace(/\\(?:times|cdot)/g, "×")
    .replace(/\\(?:,|;|!|:|%)/g, (sign) => (sign === "\\%" ? "%" : " "))
    .replace(/\\(?:rm|mathrm|text|left|right)\b/g, " ")
    .replace(/\\sigma|σ/g, " sigma")
    .replace(/[{}$]/g, "");
}

/**
 * Sizes of all numbers in the printed text, signs left aside: "0.42 +0.19 -0.17", "0.35±0.12",
 * "0.63(-0.28, +0.15)", "0.42^{+0.19}_{-0.17}", "3 × 10^-4".
 */
export function printedNumbers(text: string): Big[] {
  const plain = plainPrint(text);
  const found: Big[] = [];
  const powers = /(\d+\.?\d*|\.\d+)\s*[×x*]\s*10\s*\^?\s*([+-]?\s*\d{1,2})(?!\d)/g;
  for (const [, digits = "", power = ""] of plain.matchAll(powers)) {
    const number = parseDecimal(`${digits}e${power.replace(/\s/g, "")}`);
    if (number) found.push(number.abs());
  }
  for (const [number] of plain.matchAll(/\d+\.?\d*(?:e[+-]?\d{1,2})?|\.\d+(?:e[+-]?\d{1,2})?/gi)) {
    const value = parseDecimal(number);
    if (value) found.push(value.abs());
  }
  return found;
}

/** Whether the printed text holds this number, by its value: 0.3 is found in "0.30". */
export function printsNumber(text: string, number: string): boolean {
  const wanted = parseDecimal(number)?.abs();
  return wanted === undefined || printedNumbers(text).some((value) => value.eq(wanted));
}

const SIGMA_PERCENT: Readonly<Record<string, string>> = {
  "1": "68.27",
  "2": "95.45",
  "3": "99.73",
  one: "68.27",
  two: "95.45",
  three: "99.73",
};

export interface PrintedLevel {
  /** As it stands in the text: "68%", "2 sigma". */
  words: string;
  probability: number;
}

/** Credible levels named in the printed text: percentages from 50 up, and one to three sigma. */
export function printedLevels(text: string): PrintedLevel[] {
  const plain = plainPrint(text);
  const levels: PrintedLevel[] = [];
  for (const [words, number = ""] of plain.matchAll(/(\d{2}(?:\.\d+)?)\s*(?:%|per\s?cent)/gi)) {
    const percent = Number(number);
    if (percent >= 50 && percent < 100) levels.push({ words, probability: percent / 100 });
  }
  for (const [words, count = ""] of plain.matchAll(
    /(?<![\d.])([123]|one|two|three)\s*-?\s*sigma\b/gi,
  )) {
    const percent = SIGMA_PERCENT[count.toLowerCase()];
    if (percent !== undefined) {
      levels.push({ words: words.replace(/\s+/g, " "), probability: Number(percent) / 100 });
    }
  }
  return levels;
}
