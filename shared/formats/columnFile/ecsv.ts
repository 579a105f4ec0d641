/**
 * Enhanced Character-Separated Values 1.0 (astropy's APE 6): a YAML header behind number signs, then
 * comma-separated rows. A missing value is an empty field.
 */
import {
  isNumeric,
  numberText,
  oneLine,
  type FileCell,
  type FileColumn,
  type FileHead,
  type FileRow,
  type FileRows,
} from "./columnFile";

const DATATYPES = {
  text: "string",
  decimal: "float64",
  double: "float64",
  integer: "int64",
  flag: "bool",
} as const;

/** The file in pieces: its header, then row by row; lines end with a line feed. */
export async function* ecsv(head: FileHead, rows: FileRows): AsyncGenerator<string> {
  yield headerOf(head);
  for await (const row of rows) yield rowOf(row, head.columns);
}

/** JSON's strings and flow collections are YAML, so no value can be read as anything else. */
function headerOf({ title, lines, columns }: FileHead): string {
  const columnLines = columns.map(({ name, kind, unit, meaning, ucd }) => {
    const parts = [
      `name: ${JSON.stringify(name)}`,
      ...(unit === undefined ? [] : [`unit: ${JSON.stringify(unit)}`]),
      `datatype: ${DATATYPES[kind]}`,
      `description: ${JSON.stringify(oneLine(meaning))}`,
      ...(ucd === undefined ? [] : [`meta: {ucd: ${JSON.stringify(ucd)}}`]),
    ];
    return `# - {${parts.join(", ")}}\n`;
  });
  const meta = JSON.stringify({ title: oneLine(title), notes: lines.map(oneLine) });
  return [
    "# %ECSV 1.0\n# ---\n# delimiter: ','\n# datatype:\n",
    ...columnLines,
    `# meta: ${meta}\n`,
    "# schema: astropy-2.0\n",
    `${columns.map(({ name }) => name).join(",")}\n`,
  ].join("");
}

function rowOf(row: FileRow, columns: readonly FileColumn[]): string {
  return `${columns.map((column, index) => cellOf(row[index] ?? null, column)).join(",")}\n`;
}

function cellOf(cell: FileCell, column: FileColumn): string {
  if (cell === null) return "";
  if (isNumeric(column)) return numberText(cell, column);
  if (column.kind === "flag") return cell === true ? "True" : "False";
  const text = oneLine(String(cell));
  return /[",#\s]/.test(text) ? `"${text.replace(/"/g, '""')}"` : text;
}
