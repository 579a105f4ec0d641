import { plainFields } from "@/components/statement/plainFields";
import type { SubmissionPartsFragment } from "~graphql/generated/graphql";

import type { ServerDraft } from "./draftKeeper";

/** What the form edits, from what the server sends. */
export function serverDraft(submission: SubmissionPartsFragment): ServerDraft {
  return {
    version: submission.version,
    updatedAt: submission.updatedAt,
    content: {
      fields: plainFields(submission.fields),
      citationId: submission.citation?.id ?? null,
      answers: Object.fromEntries(submission.answers.map(({ code, answer }) => [code, answer])),
      commentAnswers: Object.fromEntries(
        submission.comments.map(({ id, answer }) => [id, answer ?? ""]),
      ),
    },
  };
}
