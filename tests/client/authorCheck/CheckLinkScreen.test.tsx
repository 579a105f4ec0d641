import "@testing-library/jest-dom";
import { fireEvent, screen } from "@testing-library/react";

import { CheckLinkScreen } from "@/features/authorCheck/CheckLinkScreen";
import { AnswerAuthorCheckDocument, AuthorCheckByLinkDocument } from "~graphql/generated/graphql";

import { CITATION, completeFields, type MockedResponse, show, WIDTHS } from "../desk/support";

jest.mock("expo-router", () => ({
  useRouter: () => jest.requireActual("../desk/support").router,
  useLocalSearchParams: () => ({ token: "t" }),
  usePathname: () => "/check/t",
}));
jest.mock("expo-router/head", () => ({ __esModule: true, default: () => null }));

const page = (parts: object = {}) => ({
  __typename: "AuthorCheckPage",
  standing: "open",
  version: 1,
  quotable: "FL-0061.1",
  number: "FL-0061",
  approved: true,
  outdated: false,
  expiresAt: "2026-12-31T10:00:00Z",
  askedBy: "Kelm, Brisa",
  askedAt: "2026-12-01T10:00:00Z",
  authorName: "Osuwande, Ada",
  authorEmail: "ada@lantern.example",
  verdict: null,
  citation: CITATION,
  fields: { __typename: "ConstraintFields", ...completeFields() },
  lines: [],
  ...parts,
});

const opens = (opened: object | null): MockedResponse =>
  ({
    request: { query: AuthorCheckByLinkDocument, variables: { token: "t" } },
    result: { data: { authorCheckByLink: opened } },
  }) as unknown as MockedResponse;

describe.each(WIDTHS)("an author's link at %i points", (width) => {
  const at = (...mocks: MockedResponse[]) =>
    show(<CheckLinkScreen />, { width, roles: null, mocks });

  it("shows the record, what is kept of the author, and sends 'correct'", async () => {
    const variables = { token: "t", version: 1, verdict: "correct", text: null };
    const line = {
      __typename: "AuthorCheckLine",
      id: "1",
      by: null,
      verdict: "correct",
      text: null,
      at: "2026-12-02T10:00:00Z",
    };
    at(opens(page()), {
      request: { query: AnswerAuthorCheckDocument, variables },
      result: {
        data: {
          answerAuthorCheck: page({
            standing: "answered",
            version: 2,
            verdict: "correct",
            lines: [line],
          }),
        },
      },
    } as unknown as MockedResponse);
    expect(await screen.findByText("As printed")).toBeInTheDocument();
    expect(screen.getByText("As used")).toBeInTheDocument();
    expect(screen.getByText(/ada@lantern\.example/)).toBeInTheDocument();
    const send = screen.getByRole("button", { name: "Send the answer" });
    expect(send).toHaveAttribute("aria-disabled", "true");
    fireEvent.click(screen.getByRole("radio", { name: "It says what the paper says" }));
    fireEvent.click(screen.getByRole("button", { name: "Send the answer" }));
    expect(await screen.findByText("Thank you, your answer is kept")).toBeInTheDocument();
    expect(screen.getByRole("list", { name: "Answers" })).toHaveTextContent("Correct");
  });

  it("asks for words with comments", async () => {
    at(opens(page()));
    fireEvent.click(await screen.findByRole("radio", { name: "I have comments" }));
    expect(screen.getByText("Write your comments first.")).toBeInTheDocument();
  });

  it.each([
    [null, "This link opens nothing"],
    [page({ standing: "expired", fields: null }), "This link has run out"],
    [page({ standing: "revoked", fields: null }), "This link was taken back"],
    [page({ standing: "closed", fields: null }), "You have answered, and it is closed"],
    [page({ standing: "hidden", fields: null }), "You have yet to read this record"],
  ])("has a page of its own for what is not open: %#", async (opened, title) => {
    at(opens(opened));
    expect(await screen.findByText(title)).toBeInTheDocument();
    expect(screen.queryByRole("button", { name: "Send the answer" })).not.toBeInTheDocument();
  });
});
