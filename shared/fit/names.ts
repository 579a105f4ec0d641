import type { FamilyChoice } from "./request";

const WORDS: Readonly<Record<string, string>> = {
  zRe: "z_re",
  deltaZ: "Δz",
  zEnd: "z_end",
  alpha: "α",
  zEarly: "z_early",
  tau: "τ",
  tauEarly: "τ(15, 30)",
  midpoint: "midpoint",
  duration: "duration",
};

/** A parameter or derived quantity as people write it: "z_re"; a free form's x(7) stands as it is. */
export function quantityWord(name: string): string {
  return WORDS[name] ?? name;
}

/** A text with the names of parameters in it as people write them. */
export function inWords(text: string): string {
  return text.replace(/\b(zRe|deltaZ|zEnd|alpha|zEarly)\b/g, quantityWord);
}

/** Each family of histories in words, as a sentence begins with it. */
export const HISTORY_WORDS: Record<FamilyChoice["kind"], string> = {
  tanh: "Tanh history",
  powerLaw: "Power-law history",
  freeForm: "Monotone free form",
};
