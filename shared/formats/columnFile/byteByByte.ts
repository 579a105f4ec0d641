/**
 * The journals' machine-readable table: a byte-by-byte description, then rows of fixed width (Standards for
 * Astronomical Catalogues, version 2.0). A missing value is blank. ASCII only.
 */
import { ascii } from "./ascii";
import {
  isNumeric,
  numberText,
  oneLine,
  type FileCell,
  type FileColumn,
  type FileHead,
  type FileRows,
} from "./columnFile";

const LINE = 80;
const RULE = "-".repeat(LINE);
const DOUBLE_RULE = "=".repeat(LINE);

interface Field {
  readonly column: FileColumn;
  /** First byte of the field, from 1. */
  readonly from: number;
  readonly width: number;
  /** "F5.2", "I4", "A12" */
  readonly format: string;
}

/** What a first pass over the rows finds. */
export interface FieldWidths {
  /** Characters of the widest cell of each column, at least 1. */
  readonly widths: readonly number[];
  /** Digits behind the point of the most precise cell of each column. */
  readonly digits: readonly number[];
  /** Whether a cell of the column has an exponent. */
  readonly exponents: readonly boolean[];
}

/** First pass: how wide the fields are. */
export async function fieldWidths(
  columns: readonly FileColumn[],
  rows: FileRows,
): Promise<FieldWidths> {
  const widths = columns.map(() => 1);
  const digits = columns.map(() => 0);
  const exponents = columns.map(() => false);
  for await (const row of rows) {
    columns.forEach((column, index) => {
      const text = cellText(row[index] ?? null, column);
      widths[index] = Math.max(widths[index] as number, text.length);
      if (!isNumeric(column)) return;
      const [mantissa = "", exponent] = text.toLowerCase().split("e");
      if (exponent !== undefined) exponents[index] = true;
      const behind = mantissa.split(".")[1]?.length ?? 0;
      digits[index] = Math.max(digits[index] as number, behind);
    });
  }
  return { widths, digits, exponents };
}

/** Second pass: the file in pieces; lines end with a line feed. */
export async function* byteByByte(
  head: FileHead,
  found: FieldWidths,
  rows: FileRows,
): AsyncGenerator<string> {
  const fields = fieldsOf(head.columns, found);
  yield descriptionOf(head, fields);
  for await (const row of rows) {
    const cells = fields.map(({ column, width }, index) => {
      const text = cellText(row[index] ?? null, column);
      return isNumeric(column) ? text.padStart(width) : text.padEnd(width);
    });
    yield `${cells.join(" ")}\n`;
  }
}

function cellText(cell: FileCell, column: FileColumn): string {
  if (cell === null) return "";
  if (isNumeric(column)) return numberText(cell, column);
  if (column.kind === "flag") return cell === true ? "yes" : "no";
  return ascii(oneLine(String(cell)));
}

function fieldsOf(columns: readonly FileColumn[], found: FieldWidths): Field[] {
  let from = 1;
  return columns.map((column, index) => {
    const width = found.widths[index] as number;
    const field = { column, from, width, format: formatOf(column, width, found, index) };
    from += width + 1;
    return field;
  });
}

function formatOf(column: FileColumn, width: number, found: FieldWidths, index: number): string {
  if (column.kind === "integer") return `I${width}`;
  if (!isNumeric(column)) return `A${width}`;
  return `${found.exponents[index] ? "E" : "F"}${width}.${found.digits[index] as number}`;
}

function descriptionOf({ title, lines, columns }: FileHead, fields: readonly Field[]): string {
  const lastByte = fields.reduce((end, field) => Math.max(end, field.from + field.width - 1), 0);
  const byteWidth = String(lastByte).length;
  const bytesWidth = 2 * byteWidth + 1;
  const unitOf = (column: FileColumn): string => column.unit ?? "---";
  const formatWidth = Math.max(6, ...fields.map(({ format }) => format.length));
  const unitWidth = Math.max(5, ...columns.map((column) => unitOf(column).length));
  const labelWidth = Math.max(5, ...columns.map(({ name }) => name.length));
  const start = bytesWidth + formatWidth + unitWidth + labelWidth + 8;
  const described = fields.flatMap(({ column, from, width, format }) => {
    const bytes =
      width === 1
        ? String(from).padStart(bytesWidth)
        : `${String(from).padStart(byteWidth)}-${String(from + width - 1).padStart(byteWidth)}`;
    const optional = "? ";
    const words = `${optional}${ascii(oneLine(column.meaning))}`;
    const [first = "", ...rest] = wrap(words, Math.max(24, LINE - start));
    return [
      ` ${bytes} ${format.padEnd(formatWidth)}  ${unitOf(column).padEnd(unitWidth)}  ${column.name.padEnd(labelWidth)}  ${first}`,
      ...rest.map((line) => `${" ".repeat(start - 1)}${line}`),
    ].map((line) => line.trimEnd());
  });
  const heading = ` ${"Bytes".padEnd(bytesWidth)} ${"Format".padEnd(formatWidth)}  ${"Units".padEnd(unitWidth)}  ${"Label".padEnd(labelWidth)}  Explanations`;
  return `${[
    `Title: ${ascii(oneLine(title))}`,
    `Table: ${ascii(oneLine(title))}`,
    DOUBLE_RULE,
    "Byte-by-byte Description of file: table.txt",
    RULE,
    heading,
    RULE,
    ...described,
    RULE,
    ...lines.flatMap((line, index) =>
      wrap(`Note (${index + 1}): ${ascii(oneLine(line))}`, LINE - 2).map((part, at) =>
        at === 0 ? part : `  ${part}`,
      ),
    ),
    RULE,
  ].join("\n")}\n`;
}

function wrap(text: string, width: number): string[] {
  const lines: string[] = [];
  let line = "";
  for (const word of text.split(/\s+/)) {
    if (line !== "" && line.length + 1 + word.length > width) {
      lines.push(line);
      line = word;
    } else line = line === "" ? word : `${line} ${word}`;
  }
  return [...lines, line];
}
