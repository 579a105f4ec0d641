import { markerPath } from "@/components/markerPath";
import { historyLine } from "@/charts/looks";
import { FAMILY_MARKS } from "@/theme/families";
import { fontFolder } from "@/theme/fontFolder";
import { schemes } from "@/theme/tokens";
import { FAMILY_NAMES, METHOD_FAMILIES } from "~shared/methods/vocabulary";
import type { HistoryRow } from "./rows";
import type { Overlay } from "./useOverlays";

export const FIGURE = { width: 1000, height: 640 } as const;

const FACES = [
  ["Source Serif 4", "400", "normal", "source-serif-4-latin-400-normal"],
  ["Source Serif 4", "400", "italic", "source-serif-4-latin-400-italic"],
  ["Source Sans 3", "400", "normal", "source-sans-3-latin-400-normal"],
  ["Source Sans 3", "600", "normal", "source-sans-3-latin-600-normal"],
  ["Source Code Pro", "400", "normal", "source-code-pro-latin-400-normal"],
] as const;

const colors = schemes.light;

function escape(text: string): string {
  return text.replaceAll("&", "&amp;").replaceAll("<", "&lt;").replaceAll('"', "&quot;");
}

/** Breaks a line of words at a width in characters; drawn text has no wrapping of its own. */
export function wrapWords(text: string, longest: number): string[] {
  const lines: string[] = [];
  let line = "";
  for (const word of text.split(" ")) {
    if (line !== "" && line.length + 1 + word.length > longest) {
      lines.push(line);
      line = word;
    } else {
      line = line === "" ? word : `${line} ${word}`;
    }
  }
  if (line !== "") lines.push(line);
  return lines;
}

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

/** The fonts as CSS with their bytes inside: an SVG drawn as an image can fetch nothing. */
export async function embeddedFaces(): Promise<string> {
  const rules = await Promise.all(
    FACES.map(async ([family, weight, style, file]) => {
      const answer = await fetch(`${fontFolder}/${file}.woff2`);
      if (!answer.ok) return "";
      const bytes = new Uint8Array(await answer.arrayBuffer());
      let binary = "";
      bytes.forEach((byte) => (binary += String.fromCharCode(byte)));
      return `@font-face{font-family:"${family}";font-weight:${weight};font-style:${style};src:url(data:font/woff2;base64,${btoa(binary)}) format("woff2")}`;
    }),
  );
  return rules.join("");
}

/** An SVG as PNG at twice its size. */
export async function pngOf(svg: string): Promise<Blob> {
  const address = URL.createObjectURL(new Blob([svg], { type: "image/svg+xml" }));
  try {
    const image = new Image();
    image.src = address;
    await image.decode();
    const canvas = document.createElement("canvas");
    canvas.width = 2 * image.naturalWidth;
    canvas.height = 2 * image.naturalHeight;
    const context = canvas.getContext("2d");
    if (context === null) throw new Error("This browser draws no pictures.");
    context.drawImage(image, 0, 0, canvas.width, canvas.height);
    return await new Promise((resolve, reject) =>
      canvas.toBlob(
        (blob) => (blob ? resolve(blob) : reject(new Error("The picture came out empty."))),
        "image/png",
      ),
    );
  } finally {
    URL.revokeObjectURL(address);
  }
}

export function download(blob: Blob, name: string): void {
  const address = URL.createObjectURL(blob);
  const link = document.createElement("a");
  link.href = address;
  link.download = name;
  document.body.append(link);
  link.click();
  link.remove();
  setTimeout(() => URL.revokeObjectURL(address), 10_000);
}
