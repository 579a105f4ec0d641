import type { MockLink } from "@apollo/client/testing";
import { MockedProvider } from "@apollo/client/testing/react";
import { act, configure, render } from "@testing-library/react";
import type { ReactNode } from "react";

import { createCache } from "@/apollo/client";
import { ThemeProvider } from "@/theme/ThemeProvider";
import {
  ApiTokensDocument,
  EvidenceDocument,
  AuthorChecksDocument,
  ErrorReportsDocument,
  LooksUpCitationsDocument,
  MySetsDocument,
  NamedDataNamesDocument,
  RecordLifeDocument,
  RowsSinceDocument,
  SessionDocument,
  SetQueueDocument,
  SubmissionTrailDocument,
  type SubmissionPartsFragment,
} from "~graphql/generated/graphql";
import type { Role } from "~shared/review/states";
import { type ConstraintFields, emptyFields } from "~shared/statement/fields";

// Eight builders share two cores; a flow of several steps takes its time there.
jest.setTimeout(30_000);
configure({ asyncUtilTimeout: 8_000 });

export type MockedResponse = MockLink.MockedResponse;

/** Both widths every flow has to work at. */
export const WIDTHS = [390, 1440] as const;

export const router = {
  push: jest.fn(),
  replace: jest.fn(),
  setParams: jest.fn(),
  back: jest.fn(),
};

/** Parameters of the address a page stands at; a test replaces them. */
export const route: { params: Record<string, string> } = { params: {} };

/** Gives jsdom, which lays nothing out, the size of a window. */
export function setWindow(width: number): void {
  const root = document.documentElement;
  Object.defineProperty(root, "clientWidth", { value: width, configurable: true });
  Object.defineProperty(root, "clientHeight", {
    value: width < 700 ? 844 : 900,
    configurable: true,
  });
  window.dispatchEvent(new Event("resize"));
}

/** The session of a person; with it comes the method vocabulary, empty unless a test is about it. */
export function sessionMock(
  roles: Role[] | null,
  demonstration = true,
  methodVocabulary: object[] = [],
): MockedResponse {
  return {
    request: { query: SessionDocument },
    result: {
      data: {
        methodVocabulary: methodVocabulary as never[],
        session: {
          __typename: "Session",
          demonstration,
          licence: "CC BY 4.0",
          lastEvent: null,
          viewer:
            roles === null
              ? null
              : {
                  __typename: "Viewer",
                  id: "u1",
                  email: "person@fogline.example",
                  nameOnPapers: "Vask, Inna",
                  furtherNames: [],
                  orcid: null,
                  roles,
                },
        },
      },
    },
    maxUsageCount: Number.POSITIVE_INFINITY,
  };
}

/** No correlated sets, reports or look-up, for the tests that are about something else. */
const NOTHING_ELSE = [
  {
    request: { query: ErrorReportsDocument, variables: { state: "open" } },
    result: { data: { errorReports: [] } },
  },
  {
    request: { query: LooksUpCitationsDocument },
    result: { data: { session: { __typename: "Session", looksUpCitations: false } } },
  },
  {
    request: { query: RecordLifeDocument, variables: () => true },
    result: { data: { recordLife: null } },
  },
  {
    request: { query: RowsSinceDocument, variables: () => true },
    result: { data: { fittingTable: null } },
  },
  { request: { query: NamedDataNamesDocument }, result: { data: { namedDataList: [] } } },
  {
    request: { query: AuthorChecksDocument, variables: { text: null } },
    result: { data: { authorChecks: [] } },
  },
  {
    request: { query: SubmissionTrailDocument, variables: { id: "s1" } },
    result: { data: { submission: { __typename: "Submission", id: "s1", trail: [] } } },
  },
  { request: { query: ApiTokensDocument }, result: { data: { apiTokens: [] } } },
  { request: { query: MySetsDocument }, result: { data: { mySets: [] } } },
  { request: { query: SetQueueDocument }, result: { data: { setQueue: [] } } },
  // Whatever the revision.
  {
    request: { query: EvidenceDocument, variables: () => true },
    result: { data: { evidence: [] } },
  },
].map((mock) => ({ ...mock, maxUsageCount: Number.POSITIVE_INFINITY }) as MockedResponse);

/** A page as one person sees it at one width. */
export function show(
  page: ReactNode,
  options: {
    width: number;
    roles: Role[] | null;
    mocks?: MockedResponse[];
    methods?: object[];
  },
) {
  setWindow(options.width);
  return render(
    <MockedProvider
      cache={createCache()}
      mocks={[
        sessionMock(options.roles, true, options.methods),
        ...(options.mocks ?? []),
        ...NOTHING_ELSE,
      ]}
    >
      <ThemeProvider>{page}</ThemeProvider>
    </MockedProvider>,
  );
}

/** Lets promises and short timers settle. */
export async function settle(milliseconds = 0): Promise<void> {
  await act(async () => {
    await new Promise((resolve) => setTimeout(resolve, milliseconds));
  });
}

export const CITATION = {
  __typename: "Citation" as const,
  id: "c1",
  key: "Osuwande2027",
  authors: ["Osuwande, A.", "Vask, I."],
  shortName: "Osuwande & Vask 2027",
  year: 2027,
  title: "Neutral gas at the edge of an invented field",
  container: "Annals of Invented Cosmology",
  volume: "13",
  pages: "204",
  doi: "10.5555/aic.13.204",
  arxiv: null,
  bibcode: null,
  entryType: "article",
};

/** A statement complete enough to be submitted; the paper and its numbers are invented. */
export function completeFields(): ConstraintFields {
  return {
    ...emptyFields(),
    quantity: "neutralFraction",
    species: "neutral",
    scale: "linear",
    weighting: "volume",
    z: "7.2",
    zRole: "point",
    kind: "twoSided",
    value: "0.40",
    plus: "0.17",
    minus: "0.11",
    level: "percent68",
    estimator: "median",
    printedText: "0.40 +0.17 -0.11 (68%)",
    methodTags: ["equivalentWidths"],
    dataKnown: true,
    dataUsed: ["Corrie field"],
    versionRead: "published",
    place: "Table 2, row 3",
    page: "11",
  };
}

export function buildSubmission(part: Partial<SubmissionPartsFragment> = {}) {
  return {
    __typename: "Submission" as const,
    id: "s1",
    number: "FL-0061",
    ordinal: 1,
    state: "draft" as const,
    version: 3,
    updatedAt: "2026-12-01T12:04:00Z",
    submittedAt: null,
    answeredBy: null,
    decisionNote: null,
    citation: CITATION,
    fields: { __typename: "ConstraintFields" as const, ...completeFields() },
    findings: [],
    answers: [],
    comments: [],
    changes: [],
    history: [],
    ...part,
  };
}
