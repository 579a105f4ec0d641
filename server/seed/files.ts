import { crc32, deflateSync } from "node:zlib";

import type { EvidenceKind } from "~shared/evidence/evidence";

/** A tiny invented file of the demonstration. */
export interface SeedFile {
  name: string;
  caption: string;
  kind: EvidenceKind;
  bytes: Buffer;
}

/** One page of typewriter text as a PDF of about a kilobyte. */
export function pdfPage(lines: readonly string[]): Buffer {
  const escaped = lines.map((line) => line.replace(/[\\()]/g, "\\$&"));
  const text = `BT /F1 11 Tf 14 TL 56 780 Td\n${escaped.map((line) => `(${line}) Tj T*`).join("\n")}\nET`;
  const objects = [
    "<< /Type /Catalog /Pages 2 0 R >>",
    "<< /Type /Pages /Kids [3 0 R] /Count 1 >>",
    "<< /Type /Page /Parent 2 0 R /MediaBox [0 0 595 842] /Contents 4 0 R /Resources << /Font << /F1 5 0 R >> >> >>",
    `<< /Length ${text.length} >>\nstream\n${text}\nendstream`,
    "<< /Type /Font /Subtype /Type1 /BaseFont /Courier >>",
  ];
  let body = "%PDF-1.4\n";
  const offsets = objects.map((object, index) => {
    const offset = body.length;
    body += `${index + 1} 0 obj\n${object}\nendobj\n`;
    return offset;
  });
  const table = offsets.map((offset) => `${String(offset).padStart(10, "0")} 00000 n \n`).join("");
  const count = objects.length + 1;
  body += `xref\n0 ${count}\n0000000000 65535 f \n${table}`;
  const start = body.indexOf("xref\n0 ");
  body += `trailer\n<< /Size ${count} /Root 1 0 R >>\nstartxref\n${start}\n%%EOF\n`;
  return Buffer.from(body, "latin1");
}

/**
 * A grey picture of one curve over a frame, as PNG.
 *
 * @param curve - Height from 0 to 1 at a place from 0 to 1.
 */
export function pngCurve(curve: (at: number) => number, width = 240, height = 150): Buffer {
  const rows = Buffer.alloc((width + 1) * height, 0xff);
  for (let y = 0; y < height; y += 1) {
    rows[y * (width + 1)] = 0; // no filter in this row
    for (let x = 0; x < width; x += 1) {
      const drawn = height - 12 - curve(x / (width - 1)) * (height - 24);
      const edge = x === 8 || y === height - 10;
      if (edge || Math.abs(y - drawn) < 1.2) rows[y * (width + 1) + 1 + x] = edge ? 0x88 : 0x22;
    }
  }
  const header = Buffer.alloc(13);
  header.writeUInt32BE(width, 0);
  header.writeUInt32BE(height, 4);
  header.set([8, 0, 0, 0, 0], 8); // eight bits of grey
  return Buffer.concat([
    Buffer.from("\x89PNG\r\n\x1a\n", "latin1"),
    chunk("IHDR", header),
    chunk("IDAT", deflateSync(rows)),
    chunk("IEND", Buffer.alloc(0)),
  ]);
}

function chunk(kind: string, data: Buffer): Buffer {
  const named = Buffer.concat([Buffer.from(kind, "latin1"), data]);
  const length = Buffer.alloc(4);
  length.writeUInt32BE(data.length);
  const check = Buffer.alloc(4);
  check.writeUInt32BE(crc32(named));
  return Buffer.concat([length, named, check]);
}

/** Rows of values as CSV. */
export function csvTable(head: readonly string[], rows: readonly (readonly string[])[]): Buffer {
  return Buffer.from([head, ...rows].map((row) => `${row.join(",")}\n`).join(""), "utf8");
}

/** What contributors attached, by the name of the record. */
export const EVIDENCE: Readonly<Record<string, readonly SeedFile[]>> = {
  numbersInFigure: [
    {
      name: "figure-7.png",
      caption: "Figure 7 of the paper, redrawn by hand",
      kind: "png",
      bytes: pngCurve((at) => Math.exp(-((at - 0.45) ** 2) / 0.03)),
    },
  ],
  levelInCaption: [
    {
      name: "caption.pdf",
      caption: "The caption that says 90 %",
      kind: "pdf",
      bytes: pdfPage([
        "Figure 3. Grey: the region of 90 % around the mean.",
        "",
        "(An invented page of the demonstration.)",
      ]),
    },
  ],
  lowerBin: [
    {
      name: "table-5.csv",
      caption: "Table 5: the correlation of the two bins",
      kind: "csv",
      bytes: csvTable(
        ["bin", "6.02-6.26", "6.26-6.50"],
        [
          ["6.02-6.26", "1", "0.60"],
          ["6.26-6.50", "0.60", "1"],
        ],
      ),
    },
  ],
};
