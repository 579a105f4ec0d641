import { lie, nameProblem } from "~server/evidence/claims";
import { kindOf } from "~server/evidence/content";

import { CSV, jpeg, PAGE, pdf, png, zip } from "./files";

const text = (content: string): Buffer => Buffer.from(content, "utf8");
const join = (...parts: (Buffer | string)[]): Buffer =>
  Buffer.concat(parts.map((part) => (typeof part === "string" ? text(part) : part)));

describe("what a file is", () => {
  it.each([
    ["a PDF", pdf(), "pdf"],
    ["a PDF with more behind its end, as readers allow", join(pdf(), "\n\n"), "pdf"],
    ["a PNG", png(), "png"],
    ["a PNG with a comment", png(3, 3, "Figure 2"), "png"],
    ["a JPEG", jpeg(), "jpeg"],
    ["a JPEG with a second picture behind it, as telephones write", jpeg(jpeg()), "jpeg"],
    ["a CSV", text(CSV), "csv"],
    ["a CSV with a byte order mark", text(`\uFEFF${CSV}`), "csv"],
    ["a CSV with semicolons and CR LF", text("z;x\r\n7,1;0,30\r\n"), "csv"],
    ["a CSV with tabs", text("z\tx\n7.1\t0.30\n"), "csv"],
    ["a CSV with quoted commas and line ends", text('z,note\n7.1,"a, b\nand c"\n'), "csv"],
    ["a CSV that says less than", text("z,limit\n7.1,<0.30\n7.5,x < 0.4\n7.9,a<b\n"), "csv"],
  ] as const)("%s is found", (_what, bytes, kind) => {
    expect(kindOf(bytes)).toEqual({ kind });
  });

  it.each([
    ["nothing", Buffer.alloc(0), "empty"],
    ["blanks only", text(" \n\n "), "empty"],
    ["a zip", zip(), "archive"],
    ["an office document, which is a zip", zip("word/document.xml", "<w/>"), "archive"],
    ["a zip behind a PDF", join(pdf(), zip()), "archive"],
    ["a zip behind a PNG", join(png(), zip()), "archive"],
    ["a zip behind a JPEG", jpeg(zip()), "archive"],
    ["a zip behind a table", join(CSV, zip()), "archive"],
    ["a zip with text behind its end", join("x,y\n1,2\n", zip(), "\n\n\n"), "archive"],
    ["a gzip", Buffer.from([0x1f, 0x8b, 8, 0, 0, 0, 0, 0]), "archive"],
    ["a page", text(PAGE), "markup"],
    ["a page behind blanks and a byte order mark", text(`\uFEFF \n ${PAGE}`), "markup"],
    ["a page in UTF-16", Buffer.from(`\uFEFF${PAGE}`, "utf16le"), "markup"],
    ["XML", text('<?xml version="1.0"?><a/>'), "markup"],
    ["a comment that begins a page", text("<!-- --><script>1</script>"), "markup"],
    ["an SVG", text('<svg xmlns="http://www.w3.org/2000/svg"/>'), "SVG"],
    ["an SVG behind an XML line", text('<?xml version="1.0"?>\n<svg >\n</svg>'), "SVG"],
    ["a page before a PDF", join(PAGE, pdf()), "markup"],
    ["text before a PDF", join("a,b\n1,2\n", pdf()), "before the PDF"],
    [
      "a page that begins like a PDF",
      text(`%PDF-1.4\n${PAGE}1 0 obj\nstartxref\n0\n%%EOF`),
      "web page",
    ],
    ["a PDF without version", text("%PDF-x\n1 0 obj\nstartxref\n%%EOF"), "no version"],
    ["a header of a PDF alone", text("%PDF-1.4\nstartxref\n%%EOF\n"), "nothing a PDF holds"],
    ["a PDF cut off", pdf().subarray(0, -30), "cut off"],
    ["a PDF with much behind its end", join(pdf(), "x".repeat(2000)), "cut off"],
    ["the first bytes of a PNG", png().subarray(0, 8), "damaged"],
    ["a PNG cut off", png().subarray(0, -4), "damaged"],
    ["a PNG with a wrong checksum", flipped(png(), 20), "damaged"],
    ["a PNG that begins with another chunk", withoutHeader(), "damaged"],
    ["a PNG with a page behind it", join(png(), PAGE), "after the picture"],
    ["a PNG of no width", png(0, 2), "damaged"],
    ["a PNG that grows to a thousand million pixels", png(30_000, 30_000), "too many pixels"],
    ["the first bytes of a JPEG", jpeg().subarray(0, 4), "damaged"],
    ["a JPEG without its end", jpeg().subarray(0, -2), "damaged"],
    ["a page behind a JPEG's first bytes", join(Buffer.from([0xff, 0xd8, 0xff]), PAGE), "damaged"],
    ["a page behind a JPEG", jpeg(text(PAGE)), "behind the picture"],
    ["a PDF behind a JPEG", jpeg(pdf()), "behind the picture"],
    ["a GIF", text("GIF89a,\n1,2\n\u0001"), "control characters"],
    ["Latin-1 text", Buffer.from("z,Å\n1,2\n", "latin1"), "UTF-8"],
    ["a table with a NUL", text("a,b\n\u00001,2\n"), "control characters"],
    ["a table with a page in a cell", text(`a,b\n1,"${PAGE.replaceAll('"', "")}"\n`), "markup"],
    ["a table with an open tag", text("a,b\n1,<script src=//x.example/y.js\n"), "markup"],
    ["a table with an event in a tag", text("a,b\n1,<img src=x onerror=alert(1)>\n"), "markup"],
    ["a table with an unknown tag", text("a,b\n1,<x-y onclick=z>\n"), "markup"],
    ["one column", text("a\n1\n2\n"), "no table"],
    ["one line", text("a,b,c\n"), "no table"],
    ["prose", text("This is what the paper says.\nIt says it twice.\n"), "no table"],
    ["an open quote", text('a,b\n1,"2\n'), "can't be read"],
  ] as const)("%s is refused with the reason", (_what, bytes, reason) => {
    const found = kindOf(bytes);
    expect("refused" in found && found.refused).toContain(reason);
  });
});

function flipped(bytes: Buffer, place: number): Buffer {
  const changed = Buffer.from(bytes);
  changed[place] = (changed[place] ?? 0) ^ 1;
  return changed;
}

function withoutHeader(): Buffer {
  const whole = png();
  return Buffer.concat([whole.subarray(0, 8), whole.subarray(8 + 25)]);
}

describe("what a file says it is", () => {
  it.each([
    ["pdf", "Fig. 2 (left).PDF", "application/pdf"],
    ["png", "figure.png", "image/png"],
    ["jpeg", "IMG_0001.JPG", "image/jpeg"],
    ["jpeg", "page.jpeg", "application/octet-stream"],
    ["csv", "curve.csv", "application/vnd.ms-excel"],
    ["csv", "curve.csv", "text/csv; charset=utf-8"],
  ] as const)("a %s called %s and sent as %s is believed", (kind, name, type) => {
    expect(lie(kind, name, type)).toBeNull();
  });

  it.each([
    ["png", "figure.pdf", "application/pdf", "name does not end in .png"],
    ["pdf", "paper.csv", "text/csv", "name does not end in .pdf"],
    ["csv", "table.pdf.html", "text/html", "name does not end in .csv"],
    ["csv", "table", "text/csv", "name does not end in .csv"],
    ["csv", "table.csv", "text/html", "sent as text/html"],
    ["png", "figure.png", "image/svg+xml", "sent as image/svg+xml"],
    ["jpeg", "figure.jpg", "image/png", "sent as image/png"],
  ] as const)("a %s called %s and sent as %s is not", (kind, name, type, reason) => {
    expect(lie(kind, name, type)).toContain(reason);
  });

  it.each([
    ["../../etc/passwd.csv", "path"],
    ["..\\..\\table.csv", "path"],
    ["/var/table.csv", "path"],
    ["C:table.csv", "path"],
    [".htaccess.csv", "path"],
    ["table\u0000.csv", "invisible"],
    ["table\r\nX-Header: 1.csv", "invisible"],
    ["table\u202Efdp.csv", "invisible"],
    ["  ", "no name"],
    [`${"x".repeat(120)}.csv`, "longer than"],
  ])("the name %j can't be kept", (name, reason) => {
    expect(nameProblem(name)).toContain(reason);
  });

  it("a name with marks and letters of any script can", () => {
    for (const name of ["Ålesund – fig. 2 (left), “best”.pdf", "図2.png", "Fig. 3: b;c'd\"e.csv"]) {
      expect(nameProblem(name)).toBeNull();
    }
  });
});
