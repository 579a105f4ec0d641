/** TeX as it stands in bibliographies, prepared for citation-js and read back as plain text. */

/** Commands citation-js leaves as they are, or joins to the next letter. */
const SYMBOLS: Record<string, string> = {
  AA: "Å",
  aa: "å",
  AE: "Æ",
  ae: "æ",
  OE: "Œ",
  oe: "œ",
  O: "Ø",
  o: "ø",
  L: "Ł",
  l: "ł",
  ss: "ß",
  DH: "Ð",
  dh: "ð",
  DJ: "Đ",
  dj: "đ",
  TH: "Þ",
  th: "þ",
  sim: "∼",
  simeq: "≃",
  approx: "≈",
  lesssim: "≲",
  gtrsim: "≳",
  lsim: "≲",
  gsim: "≳",
  leq: "≤",
  le: "≤",
  geq: "≥",
  ge: "≥",
  ll: "≪",
  gg: "≫",
  lt: "<",
  gt: ">",
  equiv: "≡",
  propto: "∝",
  times: "×",
  pm: "±",
  mp: "∓",
  cdot: "·",
  deg: "°",
  degr: "°",
  arcmin: "′",
  arcsec: "″",
  odot: "⊙",
  infty: "∞",
  rightarrow: "→",
  to: "→",
  micron: "µm",
};

/** Commands that only choose a face or a mode: the argument stays, the command goes. */
const TRANSPARENT =
  /\\(?:ensuremath|mathrm|mathit|mathbf|mathsf|mathcal|textrm|textup|text|mbox|hbox|boldmath|rm|it|bf|sf|tt|sc|nobreak|protect|textnormal|uppercase|MakeUppercase|textsc|emph|textit|textbf)(?![A-Za-z])\s*/g;

const ACCENTS = "[\"'`^~=.]|[uvHcdbrkt](?![A-Za-z])";

/**
 * Rewrites what citation-js reads wrongly, leaving accents and maths that it reads well.
 * White space is collapsed first: long runs of it make the library's lexer quadratic.
 */
export function tidyTex(value: string): string {
  let text = value.replace(/\s+/g, " ").trim();
  // \{ and \} balance for BibTeX but not for citation-js.
  text = text.replace(/\\[{}]/g, "");
  text = text.replace(/\\[,;: ]|\\quad(?![A-Za-z])|\\space(?![A-Za-z])/g, " ");
  text = text.replace(/\\[!/]|\\-/g, "");
  // \'{\i}, \'\i and {\'\i}: the accent replaces the dot.
  text = text.replace(
    new RegExp(`\\\\(${ACCENTS})\\s*(?:\\{\\s*\\\\([ij])\\s*\\}|\\\\([ij])(?![A-Za-z]) ?)`, "g"),
    (_all, accent: string, braced?: string, bare?: string) => `\\${accent}{${braced ?? bare}}`,
  );
  text = text.replace(
    new RegExp(`\\\\(${ACCENTS})\\s+([A-Za-z])`, "g"),
    (_all, accent: string, letter: string) => `\\${accent}{${letter}}`,
  );
  text = text.replace(TRANSPARENT, "");
  text = text.replace(/\\([A-Za-z]+) ?/g, (all, command: string) => {
    const symbol = Object.hasOwn(SYMBOLS, command) ? SYMBOLS[command] : undefined;
    return symbol ?? all;
  });
  // An odd dollar sign would swallow the rest of the field as maths.
  if ((text.match(/(?<!\\)\$/g) ?? []).length % 2 === 1) text = text.replace(/(?<!\\)\$/g, "\\$");
  return text.replace(/ {2,}/g, " ");
}

/** Plain text of a CSL string: its few style tags go, letters are composed, spaces are plain. */
export function plainText(csl: string): string {
  return csl
    .replace(/<\/?(?:i|b|sub|sup|span)(?:\s[^<>]*)?>/g, "")
    .replace(/ı(?=[\u0300-\u036f])/g, "i")
    .replace(/ȷ(?=[\u0300-\u036f])/g, "j")
    .normalize("NFC")
    .replace(/[\s\u00a0]+/g, " ")
    .trim();
}

/** Last resort for a value no parser takes: without commands, braces and maths. */
export function withoutTex(value: string): string {
  return value
    .replace(/\\[A-Za-z]+\s*|\\./g, "")
    .replace(/[{}$\\]/g, "")
    .replace(/\s+/g, " ")
    .trim();
}
