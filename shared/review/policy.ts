/** Who may do what: the server enforces this table, the client reads it to offer buttons. */
import { NEXT_STATES } from "./states";
import type { RevisionState, Role } from "./states";

export const ACTIONS = [
  "keepCitations",
  "startDraft",
  "saveDraft",
  "discardDraft",
  "submitDraft",
  "reviseSubmission",
  "runImport",
  "readSubmission",
  "readQueue",
  "claimSubmission",
  "releaseClaim",
  "storeReading",
  "correctReading",
  "acceptAnswer",
  "returnSubmission",
  "approveSubmission",
  "handOverClaim",
  "recuse",
  "tickChecklist",
  "replyToComment",
  "sendAuthorCheck",
  "readAuthorChecks",
  "closeAuthorCheck",
  "saveTable",
  "deleteTable",
  "changeTable",
  "readPeople",
  "grantRole",
  "revokeRole",
  "readCaughtMail",
  "readErrorReports",
  "answerErrorReport",
  "cutRelease",
  "startSet",
  "saveSet",
  "submitSet",
  "discardSet",
  "reviseSet",
  "readSet",
  "reviewSet",
  "withdrawSet",
  "readEventLog",
  "keepEvidence",
  "keepNamedData",
  "changeRecordLife",
  "keepVocabulary",
  "keepTokens",
] as const;
export type Action = (typeof ACTIONS)[number];

export interface Permission {
  /** One of these roles is needed; null means any signed-in person. */
  roles: readonly Role[] | null;
  /** Whether the thing acted on must be one's own, must not be, or either. */
  own: "only" | "never" | "any";
}

const CONTRIBUTOR: readonly Role[] = ["contributor"];
const EDITOR: readonly Role[] = ["editor"];
const MAINTAINER: readonly Role[] = ["maintainer"];
const EDITOR_OR_MAINTAINER: readonly Role[] = ["editor", "maintainer"];

/** Adding an action without a row does not compile. */
export const MAY: Record<Action, Permission> = {
  keepCitations: { roles: CONTRIBUTOR, own: "any" },
  startDraft: { roles: CONTRIBUTOR, own: "any" },
  saveDraft: { roles: CONTRIBUTOR, own: "only" },
  discardDraft: { roles: CONTRIBUTOR, own: "only" },
  submitDraft: { roles: CONTRIBUTOR, own: "only" },
  reviseSubmission: { roles: CONTRIBUTOR, own: "only" },
  runImport: { roles: CONTRIBUTOR, own: "any" },
  // Who is no contributor any more still reads what they sent.
  readSubmission: { roles: null, own: "only" },
  readQueue: { roles: EDITOR, own: "any" },
  claimSubmission: { roles: EDITOR, own: "never" },
  releaseClaim: { roles: EDITOR, own: "never" },
  storeReading: { roles: EDITOR, own: "never" },
  correctReading: { roles: EDITOR, own: "never" },
  acceptAnswer: { roles: EDITOR, own: "never" },
  returnSubmission: { roles: EDITOR, own: "never" },
  approveSubmission: { roles: EDITOR, own: "never" },
  handOverClaim: { roles: EDITOR, own: "never" },
  recuse: { roles: EDITOR, own: "any" },
  tickChecklist: { roles: EDITOR, own: "never" },
  // The record's contributor, or the editor who holds it and has read it.
  replyToComment: { roles: null, own: "any" },
  sendAuthorCheck: { roles: EDITOR, own: "never" },
  readAuthorChecks: { roles: EDITOR, own: "any" },
  closeAuthorCheck: { roles: EDITOR, own: "never" },
  saveTable: { roles: null, own: "any" },
  deleteTable: { roles: null, own: "only" },
  changeTable: { roles: null, own: "only" },
  readPeople: { roles: MAINTAINER, own: "any" },
  grantRole: { roles: MAINTAINER, own: "any" },
  revokeRole: { roles: MAINTAINER, own: "any" },
  readCaughtMail: { roles: MAINTAINER, own: "any" },
  readErrorReports: { roles: EDITOR_OR_MAINTAINER, own: "any" },
  // Nobody says of a record of their own that it holds no error.
  answerErrorReport: { roles: EDITOR_OR_MAINTAINER, own: "never" },
  cutRelease: { roles: MAINTAINER, own: "any" },
  startSet: { roles: CONTRIBUTOR, own: "any" },
  saveSet: { roles: CONTRIBUTOR, own: "only" },
  submitSet: { roles: CONTRIBUTOR, own: "only" },
  discardSet: { roles: CONTRIBUTOR, own: "only" },
  reviseSet: { roles: CONTRIBUTOR, own: "only" },
  readSet: { roles: null, own: "only" },
  reviewSet: { roles: EDITOR, own: "never" },
  withdrawSet: { roles: MAINTAINER, own: "any" },
  readEventLog: { roles: MAINTAINER, own: "any" },
  keepEvidence: { roles: CONTRIBUTOR, own: "only" },
  keepNamedData: { roles: EDITOR_OR_MAINTAINER, own: "any" },
  changeRecordLife: { roles: MAINTAINER, own: "any" },
  keepVocabulary: { roles: MAINTAINER, own: "any" },
  keepTokens: { roles: null, own: "only" },
};

/**
 * Whether a person may do something.
 *
 * @param roles - The signed-in person's roles; null when nobody is signed in.
 * @param own - Whether the thing is theirs; leave it out where nothing is acted on yet.
 */
export function may(action: Action, roles: readonly Role[] | null, own?: boolean): boolean {
  if (roles === null) return false;
  const permission = MAY[action];
  if (permission.roles !== null && !permission.roles.some((role) => roles.includes(role))) {
    return false;
  }
  return own === undefined || mayWithOwn(action, own);
}

/** Whether something may be done to a thing that is one's own, or isn't, whatever one's roles. */
export function mayWithOwn(action: Action, own: boolean): boolean {
  const rule = MAY[action].own;
  return rule === "any" || own === (rule === "only");
}

/** Whether a revision may move from one state to another. */
export function canMove(from: RevisionState, to: RevisionState): boolean {
  return NEXT_STATES[from].includes(to);
}
