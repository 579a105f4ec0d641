/** A drawing of the screen as a file: what every downloaded figure needs. */
import { fontFolder } from "@/theme/fontFolder";

const FACES = [
  ["Source Serif 4", "400", "normal", "source-serif-4-latin-400-normal"],
  ["Source Serif 4", "400", "italic", "source-serif-4-latin-400-italic"],
  ["Source Sans 3", "400", "normal", "source-sans-3-latin-400-normal"],
  ["Source Sans 3", "600", "normal", "source-sans-3-latin-600-normal"],
  ["Source Code Pro", "400", "normal", "source-code-pro-latin-400-normal"],
] as const;

/** Text inside an SVG. */
export function escapeXml(text: string): string {
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
