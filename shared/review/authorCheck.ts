/** The check of a record by an author of its paper: states, verdicts, limits, words. */

/** Where a check stands. That a link has run out follows from its date. */
export const CHECK_STATES = ["sent", "answered", "closed", "revoked"] as const;
export type CheckState = (typeof CHECK_STATES)[number];

export const CHECK_VERDICTS = ["correct", "comments"] as const;
export type CheckVerdict = (typeof CHECK_VERDICTS)[number];

/** What a link opens at this moment. */
export const LINK_STANDINGS = [
  "open",
  "answered",
  "closed",
  "expired",
  "revoked",
  "hidden",
] as const;
export type LinkStanding = (typeof LINK_STANDINGS)[number];

/** How long a link works. */
export const CHECK_DAYS = 30;

/** Name and address of the author are forgotten this long after the check has ended. */
export const CHECK_ADDRESS_KEPT_DAYS = 90;

/** Characters of the author's comments; of the editor's closing words. */
export const CHECK_TEXT = { shortest: 5, longest: 4000 } as const;
export const CLOSING_TEXT = { shortest: 2, longest: 2000 } as const;
export const CHECK_NAME = { shortest: 2, longest: 120 } as const;

/**
 * What the public reads of a check that was answered.
 *
 * @param on - The day of the answer, in words.
 */
export function checkWords(verdict: CheckVerdict, on: string, closed: boolean): string {
  if (verdict === "correct") {
    return `An author of the paper checked this revision on ${on}: correct.`;
  }
  return closed
    ? `An author of the paper commented on this revision on ${on}; the editors have dealt with it.`
    : `An author of the paper commented on this revision on ${on}; the editors have yet to deal with it.`;
}

/** What a link opens, from its state and its date. An answered one is closed to corrections once it has run out. */
export function linkStanding(
  check: { state: CheckState; expiresAt: Date },
  now: Date,
): Exclude<LinkStanding, "hidden"> {
  switch (check.state) {
    case "closed":
    case "revoked":
      return check.state;
    case "sent":
      return check.expiresAt > now ? "open" : "expired";
    case "answered":
      return check.expiresAt > now ? "answered" : "closed";
  }
}
