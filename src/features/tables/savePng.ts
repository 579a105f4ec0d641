/** Dots for each inch: what journals ask of a drawing with lines. */
const DOTS_PER_INCH = 600;

/**
 * Draws an SVG of this registry into a PNG at its own size in inches and saves it.
 *
 * @throws If the drawing can't be fetched or drawn.
 */
export async function savePng(path: string, name: string): Promise<void> {
  const response = await fetch(path);
  if (!response.ok) throw new Error(`the figure answered ${response.status}`);
  const text = await response.text();
  const inches = (side: "width" | "height"): number =>
    Number(new RegExp(`<svg[^>]* ${side}="([\\d.]+)in"`).exec(text)?.[1] ?? NaN);
  const image = new Image();
  image.src = URL.createObjectURL(new Blob([text], { type: "image/svg+xml" }));
  try {
    await image.decode();
    const canvas = document.createElement("canvas");
    canvas.width = Math.round(inches("width") * DOTS_PER_INCH);
    canvas.height = Math.round(inches("height") * DOTS_PER_INCH);
    canvas.getContext("2d")?.drawImage(image, 0, 0, canvas.width, canvas.height);
    const blob = await new Promise<Blob | null>((resolve) => canvas.toBlob(resolve, "image/png"));
    if (!blob) throw new Error("the drawing gave no picture");
    const link = document.createElement("a");
    link.href = URL.createObjectURL(blob);
    link.download = name;
    link.click();
    URL.revokeObjectURL(link.href);
  } finally {
    URL.revokeObjectURL(image.src);
  }
}
