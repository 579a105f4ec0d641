import { crc32, deflateRawSync, deflateSync } from "node:zlib";

/** Files made by hand, so that each test knows every byte of what it sends. */

const latin1 = (text: string): Buffer => Buffer.from(text, "latin1");

/** The smallest PDF that readers open: one empty page, with its table of places. */
export function pdf(extra = ""): Buffer {
  const objects = [
    "<< /Type /Catalog /Pages 2 0 R >>",
    "<< /Type /Pages /Kids [3 0 R] /Count 1 >>",
    "<< /Type /Page /Parent 2 0 R /MediaBox [0 0 200 200] >>",
  ];
  let text = "%PDF-1.4\n%\xe2\xe3\xcf\xd3\n";
  const places: number[] = [];
  objects.forEach((object, index) => {
    places.push(text.length);
    text += `${index + 1} 0 obj\n${object}\nendobj\n`;
  });
  text += extra;
  const table = text.length;
  text += `xref\n0 4\n0000000000 65535 f \n${places
    .map((place) => `${String(place).padStart(10, "0")} 00000 n \n`)
    .join("")}trailer\n<< /Size 4 /Root 1 0 R >>\nstartxref\n${table}\n%%EOF\n`;
  return latin1(text);
}

function chunk(type: string, data: Buffer): Buffer {
  const body = Buffer.concat([latin1(type), data]);
  const length = Buffer.alloc(4);
  length.writeUInt32BE(data.length);
  const sum = Buffer.alloc(4);
  sum.writeUInt32BE(crc32(body));
  return Buffer.concat([length, body, sum]);
}

/** A grey picture of a width and height, as PNG. */
export function png(width = 2, height = 2, comment = ""): Buffer {
  const header = Buffer.alloc(13);
  header.writeUInt32BE(width, 0);
  header.writeUInt32BE(height, 4);
  header.set([8, 0, 0, 0, 0], 8);
  const rows = Buffer.alloc((width + 1) * Math.min(height, 64), 0x55);
  return Buffer.concat([
    latin1("\x89PNG\r\n\x1a\n"),
    chunk("IHDR", header),
    ...(comment ? [chunk("tEXt", latin1(`Comment\0${comment}`))] : []),
    chunk("IDAT", deflateSync(rows)),
    chunk("IEND", Buffer.alloc(0)),
  ]);
}

const segment = (marker: number, data: Buffer): Buffer => {
  const head = Buffer.from([0xff, marker, 0, 0]);
  head.writeUInt16BE(data.length + 2, 2);
  return Buffer.concat([head, data]);
};

/** The frame of a JPEG with a scan that no decoder is asked about here. */
export function jpeg(behind: Buffer = Buffer.alloc(0), width = 8): Buffer {
  return Buffer.concat([
    Buffer.from([0xff, 0xd8]),
    segment(0xe0, latin1("JFIF\0\x01\x01\0\0\x01\0\x01\0\0")),
    // A thumbnail in it ends as a picture does; the walk must not take that for the end.
    segment(0xe1, Buffer.concat([latin1("Exif\0\0"), Buffer.from([0xff, 0xd8, 0xff, 0xd9])])),
    segment(0xc0, Buffer.from([8, 0, 8, width >> 8, width & 255, 1, 1, 0x11, 0])),
    segment(0xda, Buffer.from([1, 1, 0, 0, 63, 0])),
    Buffer.from([0x12, 0xff, 0x00, 0x34, 0xff, 0xd9]),
    behind,
  ]);
}

/** An archive with one file in it. */
export function zip(name = "a.txt", content = "text"): Buffer {
  const data = latin1(content);
  const packed = deflateRawSync(data);
  const local = Buffer.alloc(30);
  local.writeUInt32LE(0x04034b50, 0);
  local.writeUInt16LE(20, 4);
  local.writeUInt16LE(8, 8);
  local.writeUInt32LE(crc32(data), 14);
  local.writeUInt32LE(packed.length, 18);
  local.writeUInt32LE(data.length, 22);
  local.writeUInt16LE(name.length, 26);
  const central = Buffer.alloc(46);
  central.writeUInt32LE(0x02014b50, 0);
  local.copy(central, 6, 4, 30);
  const head = Buffer.concat([local, latin1(name), packed]);
  const end = Buffer.alloc(22);
  end.writeUInt32LE(0x06054b50, 0);
  end.writeUInt16LE(1, 8);
  end.writeUInt16LE(1, 10);
  end.writeUInt32LE(46 + name.length, 12);
  end.writeUInt32LE(head.length, 16);
  return Buffer.concat([head, central, latin1(name), end]);
}

export const CSV = "z,x_HI,plus,minus\n7.1,0.30,0.10,0.05\n# a comment\n7.5,0.42,0.11,0.09\n";
export const PAGE = "<!DOCTYPE html>\n<html><body><script>alert(1)</script></body></html>\n";
