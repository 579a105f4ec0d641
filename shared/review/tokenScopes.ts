/** What an API token may do for its person: the server enforces this table, the client offers it. */
import type { Action } from "./policy";

/** In the order in which they are offered. Every token reads; the others are added. */
export const TOKEN_SCOPES = ["read", "tables", "fits"] as const;
export type TokenScope = (typeof TOKEN_SCOPES)[number];

export const SCOPE_WORDS: Record<TokenScope, { name: string; hint: string }> = {
  read: {
    name: "Read",
    hint: "What you see signed in, your private tables and own histories among it. Every token reads.",
  },
  tables: { name: "Tables", hint: "Save, change and delete fitting tables of yours." },
  fits: { name: "Fits", hint: "Upload own histories, score them and run fits." },
};

/**
 * The scope that an action needs. null: no token may do it, whatever its scopes; the desk, roles,
 * the password and tokens themselves are for people who are signed in. Adding an action without a
 * row does not compile.
 */
export const SCOPE_OF: Record<Action, TokenScope | null> = {
  keepCitations: null,
  startDraft: null,
  saveDraft: null,
  discardDraft: null,
  submitDraft: null,
  reviseSubmission: null,
  runImport: null,
  readSubmission: null,
  readQueue: null,
  claimSubmission: null,
  releaseClaim: null,
  storeReading: null,
  correctReading: null,
  acceptAnswer: null,
  returnSubmission: null,
  approveSubmission: null,
  handOverClaim: null,
  recuse: null,
  tickChecklist: null,
  replyToComment: null,
  sendAuthorCheck: null,
  readAuthorChecks: null,
  closeAuthorCheck: null,
  saveTable: "tables",
  deleteTable: "tables",
  changeTable: "tables",
  readPeople: null,
  grantRole: null,
  revokeRole: null,
  readCaughtMail: null,
  readErrorReports: null,
  answerErrorReport: null,
  cutRelease: null,
  startSet: null,
  saveSet: null,
  submitSet: null,
  discardSet: null,
  reviseSet: null,
  readSet: null,
  reviewSet: null,
  withdrawSet: null,
  readEventLog: null,
  keepEvidence: null,
  keepNamedData: null,
  changeRecordLife: null,
  keepVocabulary: null,
  keepTokens: null,
};

/** Live tokens that one person may have. */
export const MOST_TOKENS = 20;
export const TOKEN_NAME_MAX = 60;
/** Days until a token ends. */
export const TOKEN_DAYS = { preset: 90, most: 365 } as const;

export const TOKEN_STATES = ["active", "expired", "revoked"] as const;
export type TokenState = (typeof TOKEN_STATES)[number];
