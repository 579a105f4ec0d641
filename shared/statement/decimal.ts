/** Exact decimal arithmetic on printed numbers, so that 1 − 0.9 is 0.1 and 0.30 keeps its zero. */
import Big from "big.js";

const PRINTED_NUMBER = /^([+-]?)(\d+\.?\d*|\.\d+)(?:[eE]([+-]?\d{1,2}))?$/;
const LONGEST_NUMBER = 40;

/** A printed number with an ASCII sign and no surrounding space. */
function plainText(text: string): string {
  return text.trim().replace(/^[\u2212\u2013]/, "-");
}

/** Whether the text is one number as papers print them: a true minus counts, a decimal comma does not. */
export function isPrintedNumber(text: string | null): boolean {
  if (text === null) return false;
  const plain = plainText(text);
  return plain.length <= LONGEST_NUMBER && PRINTED_NUMBER.test(plain);
}

/**
 * Exact value of a printed number.
 *
 * @param text - As typed: "0.30", "+0.1", "-0.2", ".5", "3e-4", with a true minus or a hyphen.
 * @returns The value, or null when the text is not one number ("O.25", "", "1,2").
 */
export function parseDecimal(text: string | null): Big | null {
  if (text === null || !isPrintedNumber(text)) return null;
  const [, sign = "", digits = "", exponent = ""] = PRINTED_NUMBER.exec(plainText(text)) ?? [];
  const whole = digits.startsWith(".") ? `0${digits}` : digits.replace(/\.$/, "");
  return new Big(`${sign === "-" ? "-" : ""}${whole}${exponent === "" ? "" : `e${exponent}`}`);
}

/** Digits behind the point that the printed number resolves; 0.30 has two, 3e-4 has four. */
export function decimalPlaces(text: string): number {
  const match = PRINTED_NUMBER.exec(plainText(text));
  if (!match) return 0;
  const fraction = (match[2] ?? "").split(".")[1] ?? "";
  return Math.max(0, fraction.length - Number(match[3] ?? 0));
}

/** Plain notation without an exponent; at least as many decimals as asked, no rounding. */
export function decimalText(value: Big, places = 0): string {
  const exact = value.toFixed();
  const own = exact.split(".")[1]?.length ?? 0;
  return own >= places ? exact : value.toFixed(places);
}

/**
 * One minus a printed number, to the printed decimals: 0.30 gives 0.70, 0.9 gives 0.1.
 *
 * @returns Null when the text is not a number.
 */
export function oneMinus(text: string | null): string | null {
  const value = parseDecimal(text);
  if (value === null || text === null) return null;
  return decimalText(new Big(1).minus(value), decimalPlaces(text));
}

/**
 * A computed double as a decimal string of at most twelve significant digits, without an exponent.
 * Twelve digits keep relative 1e-8 work exact and drop the noise of binary fractions.
 */
export function computedText(value: number): string {
  return new Big(value.toPrecision(12)).toFixed();
}
