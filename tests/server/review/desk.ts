import type { ReadingContent } from "~shared/review/reading";
import type { ConstraintFields } from "~shared/statement/fields";
import { FIELD_NAMES_IN_ORDER } from "~server/constraint/fields.type";

import type { Agent, TestServer } from "../support/harness";

const FIELDS = FIELD_NAMES_IN_ORDER.join(" ");

const SUBMISSION_PARTS = `
    id number ordinal state version decisionNote answeredBy submittedAt
    fields { ${FIELDS} }
    citation { key }
    findings { code grade message }
    answers { code answer accepted }
    comments { id field text by answer }
    changes { field before after }
    history { ordinal state changes { field before after } }`;
const SUBMISSION = `
  __typename
  ... on Refusal { code message field }
  ... on Submission { ${SUBMISSION_PARTS} }`;

const REVIEW = `
  item { id number state version claimedByMe claimedUntil barredBecause place page }
  fieldsToRead readingStoredAt contributor blockers
  submission { ${FIELDS} }
  comparison { field reading submitted agrees earlier }
  findings { code message }
  answers { code answer accepted }
  comments { field text answer }
  changes { field before after }
  checklist { code text ticked }`;

const REVIEW_RESULT = `__typename ... on Refusal { code message field } ... on Review { ${REVIEW} }`;
const DONE = `__typename ... on Refusal { code message field } ... on Done { message }`;

/** The desk as its screens use it: one call for each thing a person does there. */
export function deskOf(server: TestServer, agent: Agent) {
  const call = async (query: string, variables: object = {}) => {
    const { data, errors } = await server.graphql(agent, query, variables);
    if (errors) throw new Error(errors.map((error) => error.message).join("; "));
    // A test names what it expects of the answer; a type would only say it a second time.
    // eslint-disable-next-line @typescript-eslint/no-explicit-any
    return Object.values(data as Record<string, unknown>)[0] as any;
  };
  return {
    call,
    start: (citationId: string | null, fromSubmissionId: string | null = null) =>
      call(
        `mutation ($citationId: ID, $from: ID) {
          startDraft(citationId: $citationId, fromSubmissionId: $from) { ${SUBMISSION} } }`,
        { citationId, from: fromSubmissionId },
      ),
    save: (id: string, version: number, fields: Partial<ConstraintFields>, more: object = {}) =>
      call(`mutation ($input: SaveDraftInput!) { saveDraft(input: $input) { ${SUBMISSION} } }`, {
        input: { id, version, fields, ...more },
      }),
    submit: (id: string, version: number, agreeToLicence = true) =>
      call(
        `mutation ($id: ID!, $version: Int!, $agree: Boolean!) {
          submitDraft(id: $id, version: $version, agreeToLicence: $agree) { ${SUBMISSION} } }`,
        { id, version, agree: agreeToLicence },
      ),
    discard: (id: string, version: number) =>
      call(
        `mutation ($id: ID!, $version: Int!) { discardDraft(id: $id, version: $version) { ${DONE} } }`,
        { id, version },
      ),
    revise: (id: string) =>
      call(`mutation ($id: ID!) { reviseSubmission(id: $id) { ${SUBMISSION} } }`, { id }),
    submission: (id: string) =>
      call(`query ($id: ID!) { submission(id: $id) { ${SUBMISSION_PARTS} } }`, { id }),
    mine: () => call(`{ mySubmissions { ${SUBMISSION_PARTS} } }`),
    queue: () =>
      call(
        `{ queue { id number ordinal state version claimedByMe claimedUntil barredBecause submittedAt } }`,
      ),
    review: (id: string) => call(`query ($id: ID!) { review(id: $id) { ${REVIEW} } }`, { id }),
    claim: (id: string) =>
      call(`mutation ($id: ID!) { claimSubmission(id: $id) { ${REVIEW_RESULT} } }`, { id }),
    renew: (id: string) =>
      call(`mutation ($id: ID!) { renewClaim(id: $id) { ${REVIEW_RESULT} } }`, { id }),
    handOverList: (id: string) =>
      call(`query ($id: ID!) { handOverList(id: $id) { id nameOnPapers } }`, { id }),
    handOver: (id: string, editorId: string) =>
      call(
        `mutation ($id: ID!, $editorId: ID!) {
          handOverClaim(id: $id, editorId: $editorId) { ${DONE} } }`,
        { id, editorId },
      ),
    leave: (citationId: string, reason: string | null = null) =>
      call(
        `mutation ($citationId: ID!, $reason: String) {
          leavePaper(citationId: $citationId, reason: $reason) { ${DONE} } }`,
        { citationId, reason },
      ),
    takeBack: (citationId: string) =>
      call(`mutation ($citationId: ID!) { takePaperBack(citationId: $citationId) { ${DONE} } }`, {
        citationId,
      }),
    reply: (commentId: string, text: string) =>
      call(
        `mutation ($commentId: ID!, $text: String!) {
          replyToComment(commentId: $commentId, text: $text) {
            __typename ... on Refusal { code message }
            ... on CommentThread { comment { id answer messages { by mine text } } } } }`,
        { commentId, text },
      ),
    trail: (id: string) =>
      call(
        `query ($id: ID!) { submission(id: $id) { trail {
          ordinal state enteredBy submittedAt readBy readAt decidedAt decisionNote
          changes { field before after } answers { message answer accepted }
          comments { field text by answer messages { by text } } } } }`,
        { id },
      ),
    release: (id: string) =>
      call(`mutation ($id: ID!) { releaseClaim(id: $id) { ${DONE} } }`, { id }),
    read: (id: string, reading: Partial<ReadingContent>) =>
      call(
        `mutation ($id: ID!, $reading: ReadingInput!) {
          storeReading(id: $id, reading: $reading) { ${REVIEW_RESULT} } }`,
        { id, reading },
      ),
    correct: (id: string, field: string, reading: Partial<ReadingContent>, why: string) =>
      call(
        `mutation ($id: ID!, $field: String!, $reading: ReadingInput!, $why: String!) {
          correctReading(id: $id, field: $field, reading: $reading, why: $why) { ${REVIEW_RESULT} } }`,
        { id, field, reading, why },
      ),
    accept: (id: string, code: string) =>
      call(
        `mutation ($id: ID!, $code: String!) { acceptAnswer(id: $id, code: $code) { ${REVIEW_RESULT} } }`,
        { id, code },
      ),
    tick: (id: string, codes: readonly string[]) =>
      call(
        `mutation ($id: ID!, $codes: [String!]!) {
          tickChecklist(id: $id, codes: $codes) { ${REVIEW_RESULT} } }`,
        { id, codes },
      ),
    /** Ticks the whole checklist, where there is one to tick, and approves. */
    approve: async (id: string, version: number, note: string | null = null) => {
      const review = await call(
        `query ($id: ID!) { review(id: $id) { checklist { code ticked } } }`,
        { id },
      );
      const points: { code: string; ticked: boolean }[] = review?.checklist ?? [];
      if (points.some(({ ticked }) => !ticked)) {
        await call(
          `mutation ($id: ID!, $codes: [String!]!) {
            tickChecklist(id: $id, codes: $codes) { __typename } }`,
          { id, codes: points.map(({ code }) => code) },
        );
      }
      return call(
        `mutation ($id: ID!, $version: Int!, $note: String) {
          approveSubmission(id: $id, version: $version, note: $note) { ${DONE} } }`,
        { id, version, note },
      );
    },
    giveBack: (
      id: string,
      version: number,
      comments: { field: string; text: string }[],
      note: string | null = null,
    ) =>
      call(
        `mutation ($id: ID!, $version: Int!, $comments: [ReturnComment!]!, $note: String) {
          returnSubmission(id: $id, version: $version, comments: $comments, note: $note) { ${DONE} } }`,
        { id, version, comments, note },
      ),
    constraint: (number: string) =>
      call(
        `query ($number: String!) { constraint(number: $number) {
          number ordinal quotable submittedBy readBy fields { ${FIELDS} }
          revisions { ordinal changes { field before after } }
          sharesDataWith { number shortName via } alternatives { number via } } }`,
        { number },
      ),
  };
}
