import type { SubmissionPartsFragment } from "~graphql/generated/graphql";
import { type ConstraintFields, emptyFields } from "~shared/statement/fields";

import type { ServerDraft } from "./draftKeeper";

/** The record's fields alone, without what GraphQL adds to an object. */
export function plainFields(fields: ConstraintFields): ConstraintFields {
  const plain = emptyFields();
  for (const name of Object.keys(plain) as (keyof ConstraintFields)[]) {
    plain[name] = (fields[name] ?? plain[name]) as never;
  }
  return plain;
}

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
