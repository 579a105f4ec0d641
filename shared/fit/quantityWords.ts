/** Names and numbers of what a fit finds, as screens and files set them. */

export interface QuantityWords {
  /** "Optical depth, z 15 to 30" */
  readonly words: string;
  /** In the spelling of a formula: what follows an underscore is a subscript. */
  readonly symbol: string;
}

const WORDS: Record<string, QuantityWords> = {
  zRe: { words: "Redshift of the tanh", symbol: "z_re" },
  deltaZ: { words: "Width of the tanh", symbol: "Δz" },
  zEnd: { words: "End", symbol: "z_end" },
  alpha: { words: "Exponent", symbol: "α" },
  zEarly: { words: "Early end", symbol: "z_early" },
  tau: { words: "Optical depth", symbol: "τ" },
  tauEarly: { words: "Optical depth, z 15 to 30", symbol: "τ(15, 30)" },
  midpoint: { words: "Midpoint", symbol: "z_mid" },
  duration: { words: "Duration, x 0.75 to 0.25", symbol: "Δz_0.75–0.25" },
};

/** Words and symbol of a parameter or derived quantity; a value of the free form is told by its redshift. */
export function quantityWords(name: string): QuantityWords {
  const known = WORDS[name];
  if (known) return known;
  const redshift = /^x\((.+)\)$/.exec(name)?.[1];
  return redshift === undefined
    ? { words: name, symbol: name }
    : { words: `Neutral fraction at z ${redshift}`, symbol: `x(${redshift})` };
}

/** Decimals with which an uncertainty keeps two significant digits; at most eight. */
export function decimalsFor(uncertainty: number): number {
  if (!(uncertainty > 0) || !Number.isFinite(uncertainty)) return 4;
  const first = Math.floor(Math.log10(uncertainty));
  // What rounds up to the next power of ten needs a digit less: 0.0998 is 0.10.
  const rounded = Number(uncertainty.toPrecision(2));
  const place = Math.floor(Math.log10(rounded) + 1e-12);
  return Math.min(8, Math.max(0, 1 - Math.max(first, place)));
}

/** A number with fixed decimals and a true minus; zero has no sign. */
export function fixed(value: number, decimals: number): string {
  const text = value.toFixed(decimals);
  return /^-0(\.0*)?$/.test(text) ? text.slice(1) : text.replace("-", "−");
}

/** The same with its sign, for shifts: "+0.031", "−0.2", "0.0". */
export function signed(value: number, decimals: number): string {
  const text = fixed(value, decimals);
  return Number(text.replace("−", "-")) > 0 ? `+${text}` : text;
}

export interface ValueWithErrors {
  readonly value: string;
  readonly plus: string;
  readonly minus: string;
}

/** A central value with the ends of its interval, as a paper prints them: two digits of the smaller error. */
export function withErrors(
  centre: number,
  [low, high]: readonly [number, number],
): ValueWithErrors {
  const [minus, plus] = [centre - low, high - centre];
  const known = [minus, plus].filter((width) => width > 0);
  const decimals = decimalsFor(known.length > 0 ? Math.min(...known) : NaN);
  return {
    value: fixed(centre, decimals),
    plus: fixed(Math.max(0, plus), decimals),
    minus: fixed(Math.max(0, minus), decimals),
  };
}
