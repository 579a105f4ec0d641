/** States of a revision and of a record, and the roles that act on them. */

export const REVISION_STATES = [
  "draft",
  "submitted",
  "inReview",
  "returned",
  "approved",
  "discarded",
] as const;
export type RevisionState = (typeof REVISION_STATES)[number];

export const RECORD_STATES = ["current", "superseded", "withdrawn"] as const;
export type RecordState = (typeof RECORD_STATES)[number];

export const ROLES = ["contributor", "editor", "maintainer"] as const;
export type Role = (typeof ROLES)[number];

/** Which state a revision may move to. Adding a state without a row does not compile. */
export const NEXT_STATES: Record<RevisionState, readonly RevisionState[]> = {
  draft: ["submitted", "discarded"],
  submitted: ["inReview", "discarded"],
  inReview: ["approved", "returned", "submitted"], // back to submitted: the claim ended
  returned: [], // the answer is a new revision
  approved: [],
  discarded: [],
};

/** How long a claim holds a submission. */
export const CLAIM_HOURS = 72;

/** In its last hours a claim can be lengthened, and only so often: others may be waiting. */
export const RENEW_WITHIN_HOURS = 24;
export const MOST_RENEWALS = 2;

/** A submission that has waited longer is called overdue. */
export const OVERDUE_DAYS = 14;
