/** One record as it leaves the registry, and what every file says about itself. */
import { parseDecimal } from "~shared/statement/decimal";
import type { ConstraintFields } from "~shared/statement/fields";

export interface ExportCitation {
  key: string;
  shortName: string;
  year: number | null;
  doi: string | null;
  arxiv: string | null;
  bibcode: string | null;
}

export interface ExportRow {
  /** FL-0042 */
  number: string;
  /** FL-0042.3 */
  quotable: string;
  state: string;
  fields: ConstraintFields;
  citation: ExportCitation;
}

export interface ExportHeader {
  /** Name or address of the registry. */
  registry: string;
  /** True when the records are the invented demonstration. */
  demonstration: boolean;
  /** The last event of the log when the file was made; null in an empty registry. */
  lastEvent: { sequence: number; at: string; digest: string } | null;
  /** The filter in words. */
  filter: string;
  /** Data licence. */
  licence: string;
}

/** Cautions every export carries. */
export const EXPORT_CAUTIONS = [
  "Records may share data, and their levels differ: look at both before combining them.",
  "Records are model-dependent; unknown is not none.",
  "Inclusion is no endorsement. Cite the original papers.",
] as const;

export const TABLE_CAUTIONS = [
  "The choices are this table's, not the authors'; cite the originals.",
  "Rows are taken as independent of one another.",
  ...EXPORT_CAUTIONS,
] as const;

/** A header's words for what the data are. */
export function demonstrationWords(demonstration: boolean): string | null {
  return demonstration ? "Demonstration: all records, papers and numbers are invented." : null;
}

export function lastEventWords(header: ExportHeader): string {
  const event = header.lastEvent;
  return event === null ? "none" : `${event.sequence} of ${event.at}, digest ${event.digest}`;
}

/**
 * A cell that no spreadsheet takes for a formula: text that begins like one is preceded by an apostrophe.
 * Numbers stay numbers; a true minus becomes the hyphen that programs read.
 */
export function safeCell(text: string): string {
  if (parseDecimal(text) !== null) return text.trim().replace(/^\u2212/, "-");
  return /^[=+\-@\t\r\n\uff1d\uff0b\uff0d\uff20]/.test(text) ? `'${text}` : text;
}

/** A header line without line breaks, so that nothing in it can pass for data. */
export function commentLine(text: string): string {
  return `# ${text.replace(/[\u0000-\u001f\u007f\u0085\u2028\u2029]+/g, " ").trim()}`;
}
