import "@testing-library/jest-dom";
import { screen } from "@testing-library/react";

import { Trail } from "@/features/submission/Trail";
import { SubmissionTrailDocument } from "~graphql/generated/graphql";

import { buildSubmission, type MockedResponse, show, WIDTHS } from "../desk/support";

jest.mock("expo-router", () => ({
  useRouter: () => jest.requireActual("../desk/support").router,
  useLocalSearchParams: () => ({}),
  usePathname: () => "/desk",
}));
jest.mock("expo-router/head", () => ({ __esModule: true, default: () => null }));

const round = (id: string, ordinal: number, parts: object) => ({
  __typename: "TrailRound",
  id,
  ordinal,
  state: "submitted",
  enteredBy: "Vask, Inna",
  begunAt: "2026-11-01T10:00:00Z",
  submittedAt: "2026-11-02T10:00:00Z",
  changes: [],
  answers: [],
  readBy: null,
  readAt: null,
  decidedAt: null,
  decisionNote: null,
  comments: [],
  ...parts,
});

const message = {
  __typename: "ThreadMessage",
  id: "7",
  by: "Kelm, Brisa",
  mine: false,
  text: "Row 4 of it?",
  at: "2026-11-05T10:00:00Z",
};

it.each(WIDTHS)("tells all rounds with names, the latest first, at %i points", async (width) => {
  show(<Trail submission={buildSubmission({ id: "s9", number: "FL-0061" }) as never} />, {
    width,
    roles: ["contributor"],
    mocks: [
      {
        request: { query: SubmissionTrailDocument, variables: { id: "s9" } },
        result: {
          data: {
            submission: {
              __typename: "Submission",
              id: "s9",
              trail: [
                round("r1", 1, {
                  state: "returned",
                  readBy: "Kelm, Brisa",
                  readAt: "2026-11-03T10:00:00Z",
                  decidedAt: "2026-11-03T11:00:00Z",
                  decisionNote: "Nearly there.",
                  comments: [
                    {
                      __typename: "FieldComment",
                      id: "m1",
                      field: "place",
                      text: "Which table?",
                      by: "Kelm, Brisa",
                      at: "2026-11-03T11:00:00Z",
                      answer: "Table 2.",
                      messages: [message],
                    },
                  ],
                }),
                round("r2", 2, {
                  state: "inReview",
                  changes: [
                    {
                      __typename: "FieldChange",
                      field: "place",
                      before: "Table 1",
                      after: "Table 2",
                    },
                  ],
                }),
              ],
            },
          },
        },
      } as unknown as MockedResponse,
    ],
  });
  const second = await screen.findByText("FL-0061.2");
  const first = screen.getByText("FL-0061.1");
  expect(second.compareDocumentPosition(first) & Node.DOCUMENT_POSITION_FOLLOWING).toBeTruthy();
  for (const said of [
    "Kelm, Brisa read the paper again",
    "Kelm, Brisa returned it",
    "“Nearly there.”",
    "Which table?",
    "Answer: Table 2.",
    "Row 4 of it?",
    "An editor is reading the paper again.",
  ]) {
    expect(screen.getByText(said)).toBeInTheDocument();
  }
  expect(screen.getByText(/was Table 1, now Table 2$/)).toBeInTheDocument();
  // The editor has written last, and the answer is with the editors: one may go on.
  expect(screen.getByRole("button", { name: "Reply to this comment" })).toBeInTheDocument();
});
