/**
 * VOTable 1.4 (IVOA Recommendation, 2019), rows as TABLEDATA. A missing value is an empty cell, which
 * the standard allows for every type since 1.3; no number stands for it.
 */
import { createCB } from "xmlbuilder2";

import {
  isNumeric,
  numberText,
  oneLine,
  type FileCell,
  type FileColumn,
  type FileHead,
  type FileRows,
} from "./columnFile";

/** Documents of version 1.4 keep the name space of 1.3 (section 1.5 of the standard). */
const NAMESPACE = "http://www.ivoa.net/xml/VOTable/v1.3";

/** The file in pieces: what stands before the rows, each row, what stands behind. */
export async function* votable(head: FileHead, rows: FileRows): AsyncGenerator<string> {
  let piece = "";
  const xml = createCB({
    prettyPrint: true,
    data: (text: string) => {
      piece += text;
    },
  });
  const take = (): string => {
    const taken = piece;
    piece = "";
    return taken;
  };
  xml
    .dec({ version: "1.0", encoding: "UTF-8" })
    .ele("VOTABLE", { version: "1.4", xmlns: NAMESPACE })
    .ele("RESOURCE", { type: "results" })
    .ele("TABLE", { name: xmlText(head.title) })
    .ele("DESCRIPTION")
    .txt(xmlText([head.title, ...head.lines].map(oneLine).join("\n")))
    .up();
  for (const column of head.columns) {
    xml
      .ele("FIELD", fieldOf(column))
      .ele("DESCRIPTION")
      .txt(xmlText(oneLine(column.meaning)))
      .up()
      .up();
  }
  xml.ele("DATA").ele("TABLEDATA");
  yield take();
  for await (const row of rows) {
    xml.ele("TR");
    head.columns.forEach((column, index) => {
      const text = cellText(row[index] ?? null, column);
      xml.ele("TD");
      if (text !== "") xml.txt(xmlText(text));
      xml.up();
    });
    xml.up();
    yield take();
  }
  xml.end();
  yield take();
}

function fieldOf({ name, kind, unit, ucd }: FileColumn): Record<string, string> {
  return {
    name,
    ID: name,
    ...DATATYPES[kind],
    ...(unit === undefined ? {} : { unit }),
    ...(ucd === undefined ? {} : { ucd }),
  };
}

const DATATYPES: Record<FileColumn["kind"], Record<string, string>> = {
  text: { datatype: "unicodeChar", arraysize: "*" },
  decimal: { datatype: "double" },
  double: { datatype: "double" },
  integer: { datatype: "long" },
  flag: { datatype: "boolean" },
};

function cellText(cell: FileCell, column: FileColumn): string {
  if (cell === null) return "";
  if (isNumeric(column)) return numberText(cell, column);
  if (column.kind === "flag") return cell === true ? "true" : "false";
  return oneLine(String(cell));
}

/** Without what XML 1.0 can't hold: lone surrogates and the two non-characters. */
function xmlText(text: string): string {
  return text.toWellFormed().replace(/[\ufffe\uffff]/g, "\ufffd");
}
