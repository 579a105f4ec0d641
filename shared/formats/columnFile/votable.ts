/**
 * VOTable 1.4 (IVOA Recommendation, 2019), rows as TABLEDATA. A missing value is an empty cell, which
 * the standard allows for every type since 1.3; no number stands for it.
 */
import { create } from "xmlbuilder2";

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

/** Stands where the rows come; no title or description can hold it. */
const ROWS = "\u0001rows";

/** The file in pieces: what stands before the rows, each row, what stands behind. */
export async function* votable(head: FileHead, rows: FileRows): AsyncGenerator<string> {
  const [before = "", behind = ""] = frameOf(head).split(ROWS);
  yield before;
  for await (const row of rows) {
    const cells = head.columns.map((column, index) =>
      xmlText(cellText(row[index] ?? null, column)),
    );
    yield `\n${create({ TR: { TD: cells } }).end({ headless: true })}`;
  }
  yield `\n${behind}`;
}

function frameOf({ title, lines, columns }: FileHead): string {
  return create({ version: "1.0", encoding: "UTF-8" })
    .ele({
      VOTABLE: {
        "@version": "1.4",
        "@xmlns": NAMESPACE,
        RESOURCE: {
          "@type": "results",
          TABLE: {
            "@name": xmlText(oneLine(title)),
            DESCRIPTION: xmlText([title, ...lines].map(oneLine).join("\n")),
            FIELD: columns.map((column) => ({
              ...fieldOf(column),
              DESCRIPTION: xmlText(oneLine(column.meaning)),
            })),
            DATA: { TABLEDATA: ROWS },
          },
        },
      },
    })
    .end({ prettyPrint: true });
}

function fieldOf({ name, kind, unit, ucd }: FileColumn): Record<string, string> {
  return {
    "@name": name,
    "@ID": name,
    ...DATATYPES[kind],
    ...(unit === undefined ? {} : { "@unit": unit }),
    ...(ucd === undefined ? {} : { "@ucd": ucd }),
  };
}

const DATATYPES: Record<FileColumn["kind"], Record<string, string>> = {
  text: { "@datatype": "unicodeChar", "@arraysize": "*" },
  decimal: { "@datatype": "double" },
  double: { "@datatype": "double" },
  integer: { "@datatype": "long" },
  flag: { "@datatype": "boolean" },
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
