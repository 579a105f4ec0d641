import { escapeXml as escape, wrapWords } from "@/charts/figureFile";
import { markerPath } from "@/components/markerPath";
import { historyLine } from "@/charts/looks";
import { FAMILY_MARKS } from "@/theme/families";
import { schemes } from "@/theme/tokens";
import { FAMILY_NAMES, METHOD_FAMILIES } from "~shared/methods/vocabulary";
import type { HistoryRow } from "@/charts/rows";
import type { Overlay } from "./useOverlays";

export const FIGURE = { width: 1000, height: 640 } as const;

const colors = schemes.light;

/** The figure's papers, each once, by name: "Osuwande & Vask 2024 [osuwande2024]". */
export function figureCitations(rows: readonly HistoryRow[]): string[] {
  const papers = new Map(rows.map(({ citation }) => [citation.key, citation.shortName]));
  return [...papers].map(([key, name]) => `${name} [${key}]`).sort((a, b) => a.localeCompare(b));
}

/**
 * The downloaded figure: the drawing of the screen with legend, citations and what it rests on.
 *
 * @param drawing - The chart's own SVG, FIGURE wide and high.
 * @param rows - The rows it shows.
 * @param source - Where the rows come from, for the foot.
 * @param faces - CSS with the fonts inside, or "" to name them only.
 */
export function figureSvg({
  drawing,
  rows,
  overlays,
  source,
  demonstration,
  faces,
}: {
  drawing: string;
  rows: readonly HistoryRow[];
  overlays: readonly Overlay[];
  source: string;
  demonstration: boolean;
  faces: string;
}): string {
  const parts: string[] = [];
  let y = FIGURE.height + 20;
  const sans = `font-family="'Source Sans 3', sans-serif" font-size="14" fill="${colors.ink}"`;

  const families = METHOD_FAMILIES.filter((family) => rows.some((row) => row.family === family));
  families.forEach((family, index) => {
    const x = 76 + (index % 4) * 226;
    const line = y + Math.floor(index / 4) * 24;
    const { shape, light } = FAMILY_MARKS[family];
    const open = shape === "ring";
    parts.push(
      `<g transform="translate(${x} ${line - 5})"><path d="${markerPath(shape, 6)}" fill="${open ? "none" : light}" stroke="${light}" stroke-width="${open ? 1.75 : 0}"/>${open ? `<circle r="2.3" fill="${light}"/>` : ""}</g>`,
      `<text x="${x + 14}" y="${line}" ${sans}>${escape(FAMILY_NAMES[family])}</text>`,
    );
  });
  y += Math.ceil(families.length / 4) * 24 + 4;

  overlays.forEach((overlay) => {
    const look = historyLine(overlay.look, colors);
    const values = overlay.model.values;
    const words =
      overlay.model.kind === "tanh"
        ? `${overlay.name}, midpoint ${values.zRe}, width ${values.deltaZ}`
        : `${overlay.name}, end ${values.zEnd}, exponent ${values.alpha}, early end 20`;
    parts.push(
      `<line x1="64" x2="100" y1="${y - 5}" y2="${y - 5}" stroke="${look.stroke}" stroke-width="${look.strokeWidth}"${look.strokeDasharray ? ` stroke-dasharray="${look.strokeDasharray}"` : ""}/>`,
      `<text x="110" y="${y}" ${sans}>${escape(words)}; optical depth ${overlay.readout.opticalDepth.toFixed(4)}</text>`,
    );
    y += 24;
  });

  y += 4;
  const notes = [
    `Constraints from: ${figureCitations(rows).join("; ")}.`,
    "Filled: best value; hollow: limit or band; dashed: level not stated. Error bars mix levels; points may share data; arrows are not walls.",
    `${demonstration ? "Invented demonstration data. " : ""}${source} The choices are this figure's, not the authors'; cite the originals.`,
  ];
  for (const note of notes) {
    for (const line of wrapWords(note, 150)) {
      parts.push(
        `<text x="64" y="${y}" font-family="'Source Sans 3', sans-serif" font-size="13" fill="${colors.muted}">${escape(line)}</text>`,
      );
      y += 18;
    }
    y += 4;
  }
  const height = y + 8;
  return `<?xml version="1.0" encoding="UTF-8"?>
<svg xmlns="http://www.w3.org/2000/svg" width="${FIGURE.width}" height="${height}" viewBox="0 0 ${FIGURE.width} ${height}">
<style>${faces}</style>
<rect width="100%" height="100%" fill="${colors.surface}"/>
${drawing}
${parts.join("\n")}
</svg>
`;
}
