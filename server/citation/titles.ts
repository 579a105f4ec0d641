import { distance } from "./editDistance";

const GREEK: Record<string, string> = {
  α: "alpha",
  β: "beta",
  γ: "gamma",
  δ: "delta",
  ε: "epsilon",
  λ: "lambda",
  μ: "mu",
  µ: "mu",
  ν: "nu",
  ξ: "xi",
  π: "pi",
  ρ: "rho",
  σ: "sigma",
  τ: "tau",
  χ: "chi",
  ω: "omega",
};

/** Title for comparison: no case, accents, signs or blanks; Lyman-alpha, Lyα and Ly alpha agree. */
export function titleMatch(title: string): string {
  return title
    .normalize("NFKD")
    .toLowerCase()
    .replace(/[α-ωµ]/g, (letter) => GREEK[letter] ?? letter)
    .replace(/[\u0300-\u036f]/g, "")
    .replace(/[^\p{L}\p{N}]+/gu, "")
    .replace(/lymanalpha/g, "lyalpha")
    .slice(0, 500);
}

/** Numbers and Roman numerals of a title: parts of a series differ only in these. */
function ordinals(title: string): string {
  return (title.match(/\d+(?:\.\d+)?|\b[IVX]+\b/g) ?? []).join(" ");
}

/** Whether two titles are one paper's: equal but for typing, and for no number in them. */
export function nearEqualTitles(a: string, b: string): boolean {
  const [x, y] = [titleMatch(a), titleMatch(b)];
  if (x === "" || y === "") return false;
  if (x === y) return true;
  if (Math.min(x.length, y.length) < 30 || Math.abs(x.length - y.length) > 2) return false;
  return ordinals(a) === ordinals(b) && distance(x, y, 2) <= 2;
}
