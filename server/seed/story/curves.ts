import { FRACTION, type StoryRecord } from "./kinds";

/** A posterior density at steps of 1/40, normalized over 0 to 1, with the digits a journal prints. */
function densityTable(shape: (x: number) => number): string {
  const places = Array.from({ length: 41 }, (_, at) => at / 40);
  const heights = places.map(shape);
  const area = heights.reduce(
    (sum, height, at) => sum + (at === 0 ? 0 : (height + (heights[at - 1] ?? 0)) / 80),
    0,
  );
  const rows = places.map((x, at) => `${x.toFixed(3)},${((heights[at] ?? 0) / area).toFixed(4)}`);
  return `${["x_HI,density", ...rows].join("\n")}\n`;
}

/** ln L over its highest value at steps of 0.03. */
function likelihoodTable(lnL: (x: number) => number): string {
  const places = Array.from({ length: 31 }, (_, at) => 0.08 + at * 0.03);
  const highest = Math.max(...places.map(lnL));
  const rows = places.map((x) => `${x.toFixed(2)},${(lnL(x) - highest).toFixed(3)}`);
  return `${["Q,ln L", ...rows].join("\n")}\n`;
}

/** Whole curves, as papers attach them. */
export const CURVES: readonly StoryRecord[] = [
  {
    name: "densityCurve",
    paper: "curves",
    by: "contributor",
    reader: "editor",
    from: "2026-08-26T09:00:00Z",
    fate: "approved",
    fields: {
      ...FRACTION,
      zRole: "point",
      z: "8.21",
      kind: "curve",
      // Beta(6, 4): median 0.606, 16 and 84 per cent at 0.448 and 0.755.
      curveTable: densityTable((x) => x ** 5 * (1 - x) ** 3),
      curveColumn: "density",
      value: "0.61",
      plus: "0.15",
      minus: "0.16",
      level: "percent68",
      estimator: "median",
      methodTags: ["galaxyDampingWing"],
      cosmicVariance: "included",
      dataUsed: ["Harrowmere galaxy 41"],
      priorForm: "flat",
      priorVariable: "neutral fraction",
      priorRange: "0 to 1",
      place: "Supplement, curve 1",
      page: "4",
      printedText:
        "x_HI = 0.61 +0.15 -0.16 (68 %) for galaxy 41 at z = 8.21; the curve is attached",
    },
  },
  {
    name: "likelihoodCurve",
    paper: "curves",
    by: "contributor",
    reader: "editor",
    from: "2026-08-26T09:30:00Z",
    fate: "approved",
    fields: {
      ...FRACTION,
      species: "ionized",
      zRole: "point",
      z: "9.36",
      kind: "curve",
      // Long towards many ionized regions: what two numbers would lose.
      curveTable: likelihoodTable((q) =>
        q < 0.23 ? -((q - 0.23) ** 2) / (2 * 0.07 ** 2) : -((q - 0.23) ** 2) / (2 * 0.26 ** 2),
      ),
      curveColumn: "lnLikelihood",
      methodTags: ["galaxyDampingWing"],
      cosmicVariance: "included",
      dataUsed: ["Harrowmere galaxy 63"],
      place: "Supplement, curve 2",
      page: "4",
      printedText: "the likelihood of the ionized fraction towards galaxy 63, z = 9.36",
    },
  },
];
