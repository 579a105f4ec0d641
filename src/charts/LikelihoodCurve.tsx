export interface LikelihoodLine {
  /** Where the density is given; [n], in the quantity's unit. */
  x: readonly number[];
  /** Density at each x; [n], any scale, drawn over its own peak. */
  density: readonly number[];
  label: string;
  /** Lines are told apart by their dash as well as by colour. */
  look?: "main" | "other";
}
export function LikelihoodCurve(_props: {
  lines: readonly LikelihoodLine[];
  symbol?: string;
  marks?: readonly { x: number; label: string }[];
  width?: number;
  height?: number;
  domain?: readonly [number, number];
  hue?: string;
}) {
  return null;
}
