/** Rows in typed columns, as every file format of a fitting table or a release takes them. */

/**
 * text: words; decimal: a number whose digits are kept as they came ("0.30"); double: a computed number;
 * integer; flag: true or false.
 */
export type ColumnKind = "text" | "decimal" | "double" | "integer" | "flag";

export interface FileColumn {
  /** Lower case with underscores; the same in every format. */
  readonly name: string;
  readonly meaning: string;
  readonly kind: ColumnKind;
  /** In the notation of the IVOA's VOUnit 1.0; left out for a number without a unit. */
  readonly unit?: string;
  /** Unified Content Descriptor (IVOA UCD1+). */
  readonly ucd?: string;
}

/** Null where nothing is stated: no number ever stands for "none". */
export type FileCell = string | number | boolean | null;
export type FileRow = readonly FileCell[];

/** Rows as they come, so that a long table need never be held whole. */
export type FileRows = Iterable<FileRow> | AsyncIterable<FileRow>;

/** What a file says of itself before its rows. */
export interface FileHead {
  /** Name of the table, one line. */
  readonly title: string;
  /** Facts and cautions, one line each. */
  readonly lines: readonly string[];
  readonly columns: readonly FileColumn[];
}

const CONTROL = /[\u0000-\u001f\u007f-\u009f\u2028\u2029]+/g;

/** A text on one line: every run of control characters and line ends is a blank. */
export function oneLine(text: string): string {
  return text.replace(CONTROL, " ").trim();
}

/**
 * The characters of a number that is not null: the digits of a decimal as they came, with the minus that
 * programs read; a computed one in the fewest digits that give it back.
 *
 * @throws {TypeError} If the cell is no finite number.
 */
export function numberText(cell: FileCell, column: FileColumn): string {
  const text =
    typeof cell === "string"
      ? cell
          .trim()
          .replace(/^\u2212/, "-")
          .replace(/^\+/, "")
      : String(cell);
  if (text === "" || !Number.isFinite(Number(text))) {
    throw new TypeError(`column ${column.name} holds ${JSON.stringify(cell)}, which is no number`);
  }
  return text.startsWith(".") ? `0${text}` : text.replace(/^-\./, "-0.");
}

/** Whether the column holds numbers. */
export function isNumeric(column: FileColumn): boolean {
  return column.kind === "decimal" || column.kind === "double" || column.kind === "integer";
}
