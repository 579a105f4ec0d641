import { crc32 } from "node:zlib";

import Papa from "papaparse";

import type { EvidenceKind } from "~shared/evidence/evidence";

/**
 * What a file is, found from its bytes alone. A name or a declared type is a claim, checked
 * against this afterwards (claims.ts). The checks are strict where a lenient one would let a file
 * be two things at once: a page behind a picture's first bytes, an archive behind a page's last.
 */
export type Found = { kind: EvidenceKind } | { refused: string };

const refused = (reason: string): Found => ({ refused: reason });

const ASCII = "latin1";
/** As far into a file as a browser looks for markup. */
const SNIFFED = 2048;

/** @param bytes - The whole file. */
export function kindOf(bytes: Buffer): Found {
  if (bytes.length === 0) return refused("The file is empty.");
  if (isArchive(bytes)) {
    return refused("The file is an archive (a zip, or an office document). Send what is in it.");
  }
  if (starts(bytes, "%PDF-")) return asPdf(bytes);
  if (starts(bytes, "\x89PNG\r\n\x1a\n")) return asPng(bytes);
  if (starts(bytes, "\xff\xd8\xff")) return asJpeg(bytes);
  const markup = markupAtStart(bytes);
  if (markup !== null) return refused(markup);
  if (bytes.subarray(0, 1024).includes("%PDF-")) {
    return refused("Something stands before the PDF in this file. Save it anew as a PDF.");
  }
  return asCsv(bytes);
}

function starts(bytes: Buffer, text: string): boolean {
  return bytes.subarray(0, text.length).toString(ASCII) === text;
}

/**
 * Whether the file begins as an archive or ends as one. A zip is read from its end, so bytes of
 * anything may stand before it; its end record says how long its comment is, and the file ends there.
 */
function isArchive(bytes: Buffer): boolean {
  const begins = ["PK\x03\x04", "PK\x05\x06", "PK\x07\x08", "\x1f\x8b", "7z\xbc\xaf", "Rar!"];
  if (begins.some((magic) => starts(bytes, magic))) return true;
  const earliest = Math.max(0, bytes.length - 22 - 65_535);
  for (let at = bytes.length - 22; at >= earliest; at -= 1) {
    if (bytes.readUInt32LE(at) !== 0x06054b50) continue;
    if (at + 22 + bytes.readUInt16LE(at + 20) <= bytes.length) return true;
  }
  return false;
}

/** Why a file that begins with markup is refused, or null. */
function markupAtStart(bytes: Buffer): string | null {
  const head = bytes
    .subarray(0, SNIFFED)
    .toString(ASCII)
    .replace(/^(?:\xef\xbb\xbf|\xff\xfe|\xfe\xff)/, "")
    .replace(/\0/g, "")
    .trimStart();
  if (/<svg[\s>]/i.test(head)) {
    return "An SVG can hold programs, so it is not taken. Save the figure as PNG or PDF.";
  }
  if (/^<(?:!|\?|[a-z])/i.test(head)) {
    return "The file is a web page or other markup. Save what it shows as PDF or PNG.";
  }
  return null;
}

function asPdf(bytes: Buffer): Found {
  if (!/^%PDF-[12]\.\d/.test(bytes.subarray(0, 8).toString(ASCII))) {
    return refused("The file begins like a PDF but names no version of PDF.");
  }
  const head = bytes.subarray(0, SNIFFED).toString(ASCII);
  if (/<(?:!doctype\s+html|html|head|body|script|iframe)\b/i.test(head)) {
    return refused("The file begins like a PDF and goes on as a web page.");
  }
  if (!/\d\s+\d+\s+obj\b/.test(bytes.toString(ASCII))) {
    return refused("The file begins like a PDF but holds nothing a PDF holds.");
  }
  // A reader looks for the end in the last kilobyte, and so does this.
  const tail = bytes.subarray(-1024).toString(ASCII);
  if (!tail.includes("%%EOF") || !tail.includes("startxref")) {
    return refused("The PDF has no end: it is cut off or damaged. Save it anew.");
  }
  return { kind: "pdf" };
}

const LARGEST_SIDE = 20_000;
const MOST_PIXELS = 150_000_000;

const tooManyPixels = (width: number, height: number): boolean =>
  width > LARGEST_SIDE || height > LARGEST_SIDE || width * height > MOST_PIXELS;
const TOO_MANY_PIXELS = "The picture has too many pixels for a phone to show. Save it smaller.";

/** Walks the chunks: header first, pixels, end, nothing after; each with its checksum. */
function asPng(bytes: Buffer): Found {
  const damaged = refused("The PNG is cut off or damaged. Save it anew.");
  let at = 8;
  let pixels = false;
  for (let first = true; at + 12 <= bytes.length; first = false) {
    const length = bytes.readUInt32BE(at);
    const type = bytes.toString(ASCII, at + 4, at + 8);
    const end = at + 12 + length;
    if (end > bytes.length || !/^[A-Za-z]{4}$/.test(type)) return damaged;
    if (crc32(bytes.subarray(at + 4, end - 4)) !== bytes.readUInt32BE(end - 4)) return damaged;
    if (first !== (type === "IHDR")) return damaged;
    if (first) {
      if (length !== 13) return damaged;
      const [width, height] = [bytes.readUInt32BE(at + 8), bytes.readUInt32BE(at + 12)];
      if (width === 0 || height === 0) return damaged;
      if (tooManyPixels(width, height)) return refused(TOO_MANY_PIXELS);
    }
    if (type === "IDAT") pixels = true;
    if (type === "IEND") {
      if (!pixels || length !== 0) return damaged;
      return end === bytes.length
        ? { kind: "png" }
        : refused("Something stands after the picture in this PNG. Save it anew.");
    }
    at = end;
  }
  return damaged;
}

/** Markers that carry no length. */
const isBare = (marker: number): boolean => marker === 0x01 || (marker >= 0xd0 && marker <= 0xd7);
/** Frame headers: C0 to CF without the tables of the same numbers. */
const isFrame = (marker: number): boolean =>
  marker >= 0xc0 && marker <= 0xcf && ![0xc4, 0xc8, 0xcc].includes(marker);

/**
 * Walks the segments to the scan and the end of the picture. Telephones put more pictures behind
 * it; markup and documents there are refused, and archives were before.
 */
function asJpeg(bytes: Buffer): Found {
  const damaged = refused("The JPEG is cut off or damaged. Save it anew.");
  let at = 2;
  let framed = false;
  while (at + 4 <= bytes.length) {
    if (bytes[at] !== 0xff) return damaged;
    const marker = bytes[at + 1] ?? 0;
    if (marker === 0xff) {
      at += 1; // fill bytes
      continue;
    }
    if (isBare(marker)) {
      at += 2;
      continue;
    }
    const length = bytes.readUInt16BE(at + 2);
    if (marker === 0xd9 || length < 2 || at + 2 + length > bytes.length) return damaged;
    if (isFrame(marker)) {
      if (length < 8) return damaged;
      const [height, width] = [bytes.readUInt16BE(at + 5), bytes.readUInt16BE(at + 7)];
      if (width === 0) return damaged;
      if (tooManyPixels(width, height)) return refused(TOO_MANY_PIXELS);
      framed = true;
    }
    at += 2 + length;
    if (marker === 0xda) break;
  }
  const end = bytes.indexOf(Buffer.from([0xff, 0xd9]), at);
  if (!framed || end < 0) return damaged;
  const behind = bytes.subarray(end + 2).toString(ASCII);
  if (/<(?:!doctype|html|head|body|script|svg|iframe|\?xml)\b|%PDF-/i.test(behind)) {
    return refused("Something that is no picture stands behind the picture in this JPEG.");
  }
  return { kind: "jpeg" };
}

/** Any tag with its end, and the beginnings of those that a browser acts on even without one. */
const MARKUP =
  /<(?:[!?]|\/?[a-z][a-z0-9-]*(?=[\s/>]))[^<>]*>|<\/?(?:!doctype|html|head|body|script|style|svg|math|iframe|object|embed|img|link|meta|base|form|a|video|audio|table|template)(?![\w.,;])/i;

function asCsv(bytes: Buffer): Found {
  let text: string;
  try {
    text = new TextDecoder("utf-8", { fatal: true }).decode(bytes);
  } catch {
    return refused("The file is none of PDF, PNG, JPEG and CSV (as UTF-8 text).");
  }
  if (/[\u0000-\u0008\u000b\u000c\u000e-\u001f\u007f]/.test(text)) {
    return refused(
      "The file is none of PDF, PNG and JPEG, and no text: it holds control characters.",
    );
  }
  if (text.trim() === "") return refused("The file is empty.");
  if (MARKUP.test(text)) return refused("The table holds markup of a web page. Take it out.");
  const { data, errors, meta } = Papa.parse<string[]>(text.trim(), { skipEmptyLines: "greedy" });
  const wrong = errors.find(({ code }) => code !== "UndetectableDelimiter");
  if (wrong)
    return refused(`The table can't be read: ${wrong.message} (line ${(wrong.row ?? 0) + 1}).`);
  const rows = data.filter((row) => !(row[0] ?? "").startsWith("#"));
  const columns = Math.max(0, ...rows.map((row) => row.length));
  if (!meta.delimiter || columns < 2 || rows.length < 2) {
    return refused("The file is no table: it needs two columns and two lines at least.");
  }
  return { kind: "csv" };
}
