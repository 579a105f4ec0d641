import { quantityWords } from "./quantityWords";
import type { FamilyChoice } from "./request";

/** Each family of histories in words, as a sentence begins with it. */
export const HISTORY_WORDS: Record<FamilyChoice["kind"], string> = {
  tanh: "Tanh history",
  powerLaw: "Power-law history",
  freeForm: "Monotone free form",
};

/** A text with the names of parameters in it as formulas spell them. */
export function inSymbols(text: string): string {
  return text.replace(/\b(zRe|deltaZ|zEnd|alpha|zEarly)\b/g, (name) => quantityWords(name).symbol);
}
