/** Comma-separated values (RFC 4180): comment lines, the line of names, then row by row; lines end with CR LF. */
import Papa from "papaparse";

import { commentLine, safeCell } from "../exportRow";
import {
  isNumeric,
  numberText,
  type FileCell,
  type FileColumn,
  type FileHead,
  type FileRows,
} from "./columnFile";

/** The file in pieces: comments and names, then each row as it comes. */
export async function* csv(head: FileHead, rows: FileRows): AsyncGenerator<string> {
  const comments = [head.title, ...head.lines].map((line) => `${commentLine(line)}\r\n`);
  yield `${comments.join("")}${line(head.columns.map(({ name }) => name))}`;
  for await (const row of rows) {
    yield line(head.columns.map((column, index) => cellText(row[index] ?? null, column)));
  }
}

// A number sign in a cell would begin a comment in readers that know comment lines.
const QUOTES = ((value: unknown) => typeof value === "string" && /[#'=]/.test(value)) as never;

function line(cells: readonly string[]): string {
  return `${Papa.unparse([[...cells]], { newline: "\r\n", quotes: QUOTES })}\r\n`;
}

function cellText(cell: FileCell, column: FileColumn): string {
  if (cell === null) return "";
  if (isNumeric(column)) return numberText(cell, column);
  return typeof cell === "string" ? safeCell(cell) : String(cell);
}
