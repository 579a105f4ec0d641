/** Text in printable ASCII, for formats that know no other. */

const SPELLED: Readonly<Record<string, string>> = {
  "\u00d7": "x",
  "\u00b1": "+/-",
  "\u2212": "-",
  "\u2010": "-",
  "\u2011": "-",
  "\u2012": "-",
  "\u2013": "-",
  "\u2014": "-",
  "\u2018": "'",
  "\u2019": "'",
  "\u201c": '"',
  "\u201d": '"',
  "\u2026": "...",
  "\u2264": "<=",
  "\u2265": ">=",
  "\u2248": "~",
  "\u00a0": " ",
  ß: "ss",
  æ: "ae",
  Æ: "Ae",
  œ: "oe",
  Œ: "Oe",
  ø: "o",
  Ø: "O",
  ł: "l",
  Ł: "L",
  đ: "d",
  Đ: "D",
  ð: "d",
  þ: "th",
  ı: "i",
  α: "alpha",
  β: "beta",
  γ: "gamma",
  δ: "delta",
  Δ: "Delta",
  λ: "lambda",
  μ: "mu",
  µ: "mu",
  ρ: "rho",
  σ: "sigma",
  τ: "tau",
  χ: "chi",
};

/**
 * A text without characters beyond ASCII: accents go, Greek letters are named, signs are spelled; what
 * remains is a question mark.
 */
export function ascii(text: string): string {
  return [...text]
    .map((letter) => SPELLED[letter] ?? letter)
    .join("")
    .normalize("NFKD")
    .replace(/\p{M}+/gu, "")
    .replace(/[^\x20-\x7e]/gu, "?");
}
