/**
 * Members of the API's unions. The cache can't match a fragment on a union without them: it would
 * drop the fragment's fields silently. tests/client/account/possibleTypes.test.tsx holds them
 * against the emitted schema.
 */
export const possibleTypes: Record<string, string[]> = {
  AuthorAnswerResult: ["AuthorCheckPage", "Refusal"],
  AuthorCheckResult: ["AuthorCheck", "Refusal"],
  CorrelatedSetResult: ["CorrelatedSet", "Refusal"],
  DoneResult: ["Done", "Refusal"],
  ErrorReportResult: ["ErrorReport", "Refusal"],
  EvidenceResult: ["Evidence", "Refusal"],
  FittingTableResult: ["FittingTable", "Refusal"],
  ImportPreviewResult: ["ImportPreview", "Refusal"],
  ImportResult: ["ImportDone", "Refusal"],
  KeepCitationsResult: ["KeptCitations", "Refusal"],
  LookUpResult: ["LookedUpCitation", "Refusal"],
  MakeApiTokenResult: ["MadeApiToken", "Refusal"],
  MethodTagResult: ["MethodTag", "Refusal"],
  NamedDataResult: ["NamedData", "Refusal"],
  PersonResult: ["Person", "Refusal"],
  RecordLifeResult: ["RecordLife", "Refusal"],
  ReleaseResult: ["Refusal", "Release"],
  ReplyResult: ["Refusal", "ReportedError"],
  ReportErrorResult: ["ErrorReported", "Refusal"],
  ReviewResult: ["Refusal", "Review"],
  SetReviewResult: ["Refusal", "SetReview"],
  SignInResult: ["Refusal", "Viewer"],
  SubmissionResult: ["Refusal", "Submission"],
  TableProposalResult: ["Refusal", "TableProposal"],
  ThreadResult: ["CommentThread", "Refusal"],
  ViewerResult: ["Refusal", "Viewer"],
};
