import "@testing-library/jest-dom";
import { screen } from "@testing-library/react";

import { RowsSince } from "@/components/recordLife/RowsSince";
import { RowsSinceDocument } from "~graphql/generated/graphql";

import { type MockedResponse, settle, show, WIDTHS } from "../desk/support";

jest.mock("expo-router", () => ({
  useRouter: () => jest.requireActual("../desk/support").router,
  useLocalSearchParams: () => ({}),
  usePathname: () => "/tables",
}));
jest.mock("expo-router/head", () => ({ __esModule: true, default: () => null }));

const answer = (rowsSince: object[]): MockedResponse =>
  ({
    request: { query: RowsSinceDocument, variables: { slug: "abc", version: 2 } },
    result: { data: { fittingTable: { __typename: "FittingTable", slug: "abc", rowsSince } } },
  }) as unknown as MockedResponse;

describe.each(WIDTHS)("what happened to a table's rows, at %i points", (width) => {
  const open = (mock: MockedResponse) =>
    show(<RowsSince slug="abc" version={2} />, { width, roles: null, mocks: [mock] });

  it("says of each row what happened, when and why, and leads to its record", async () => {
    open(
      answer([
        {
          __typename: "RowSinceType",
          number: "FL-0003",
          state: "superseded",
          newerRevision: "FL-0003.2",
          notices: [
            {
              __typename: "RecordNotice",
              id: "7",
              kind: "superseded",
              reason: "A later version was printed.",
              by: "Holt, Maren",
              at: "2026-11-20T09:00:00Z",
              replacedBy: "FL-0009",
              endedAt: null,
              endedBy: null,
              endedReason: null,
            },
          ],
        },
      ]),
    );
    expect(await screen.findByText("The record of one row changed since")).toBeInTheDocument();
    expect(
      screen.getByText(/Superseded by FL-0009, 20 November 2026.* A later version was printed\./),
    ).toBeInTheDocument();
    expect(screen.getByText("Corrected: FL-0003.2 is in use now.")).toBeInTheDocument();
    expect(screen.getByRole("link", { name: "FL-0003" })).toHaveAttribute(
      "href",
      "/constraints/FL-0003",
    );
  });

  it("says nothing when nothing happened, and that it doesn't know when it can't", async () => {
    const quiet = open(answer([]));
    await settle(100);
    expect(screen.queryByRole("note")).not.toBeInTheDocument();
    quiet.unmount();
    open({
      request: { query: RowsSinceDocument, variables: { slug: "abc", version: 2 } },
      error: new Error("offline"),
    } as MockedResponse);
    expect(await screen.findByText(/is not known now/)).toBeInTheDocument();
    expect(screen.getByRole("button", { name: "Try again" })).toBeInTheDocument();
  });
});
