/** A reader's report of an error: its states and outcomes, and the limits of what is written. */

export const REPORT_STATES = ["open", "answered", "closed"] as const;
export type ReportState = (typeof REPORT_STATES)[number];

export const REPORT_OUTCOMES = [
  "corrected",
  "erratumRecorded",
  "noError",
  "passedToAuthors",
] as const;
export type ReportOutcome = (typeof REPORT_OUTCOMES)[number];

/** Characters of a report; of an answer or a reply. */
export const REPORT_LENGTH = { shortest: 10, longest: 2000 } as const;
export const MESSAGE_LENGTH = { shortest: 2, longest: 2000 } as const;

/** A reporter's address is forgotten this long after the report was closed. */
export const ADDRESS_KEPT_DAYS = 90;

/**
 * What became of a report, in words.
 *
 * @param correctedBy - The correcting revision (FL-0042.3), where there is one.
 */
export function outcomeWords(outcome: ReportOutcome, correctedBy: string | null): string {
  switch (outcome) {
    case "corrected":
      return correctedBy === null ? "Corrected" : `Corrected by ${correctedBy}`;
    case "erratumRecorded":
      return "An erratum was recorded";
    case "noError":
      return "Not an error";
    case "passedToAuthors":
      return "Passed to the authors";
  }
}

/** What the public reads of a record's reports; null where there is none. */
export function reportCountWords(open: number, answered: number): string | null {
  const all = open + answered;
  if (all === 0) return null;
  const reports = all === 1 ? "1 error report" : `${all} error reports`;
  if (open === 0) return all === 1 ? `${reports}, answered` : `${reports}, all answered`;
  if (answered === 0) return `${reports}, not answered yet`;
  return `${reports}, ${answered} answered, ${open} not yet`;
}
