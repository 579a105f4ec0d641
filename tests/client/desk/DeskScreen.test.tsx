import "@testing-library/jest-dom";
import { fireEvent, screen, waitFor, within } from "@testing-library/react";

import { DeskScreen } from "@/features/desk/DeskScreen";
import { PeopleScreen } from "@/features/desk/PeopleScreen";
import {
  GrantRoleDocument,
  MyDeskDocument,
  PeopleDocument,
  ReviewQueueDocument,
} from "~graphql/generated/graphql";
import type { Role } from "~shared/review/states";

import { buildSubmission, CITATION, type MockedResponse, show, WIDTHS } from "./support";

jest.mock("expo-router", () => ({
  useRouter: () => jest.requireActual("./support").router,
  useLocalSearchParams: () => ({}),
  usePathname: () => "/desk",
}));
jest.mock("expo-router/head", () => ({ __esModule: true, default: () => null }));

const endless = { maxUsageCount: Number.POSITIVE_INFINITY };

const mine = (submissions: object[]): MockedResponse =>
  ({
    request: { query: MyDeskDocument },
    result: { data: { mySubmissions: submissions } },
    ...endless,
  }) as unknown as MockedResponse;

const queueItem = (id: string, number: string, submittedAt: string, part: object = {}) => ({
  __typename: "QueueItem",
  id,
  number,
  ordinal: 1,
  state: "submitted",
  version: 4,
  submittedAt,
  claimedByMe: false,
  claimedUntil: null,
  barredBecause: null,
  leftToOthers: false,
  notRenewable: null,
  place: "Table 1",
  page: null,
  versionRead: "published",
  citation: CITATION,
  ...part,
});

const queue = (items: object[]): MockedResponse =>
  ({
    request: { query: ReviewQueueDocument },
    result: { data: { queue: items } },
    ...endless,
  }) as unknown as MockedResponse;

describe.each(WIDTHS)("the desk at %i points", (width) => {
  const at = (roles: Role[] | null, ...mocks: MockedResponse[]) =>
    show(<DeskScreen />, { width, roles, mocks });

  it("tells nobody in particular what it is, and how to sign in", async () => {
    at(null);
    expect(await screen.findByRole("link", { name: "Sign in" })).toHaveAttribute(
      "href",
      "/account/sign-in?next=%2Fdesk",
    );
  });

  it("tells a reader how to become a contributor", async () => {
    at([]);
    expect(
      await screen.findByText(/A maintainer of this registry grants the role/),
    ).toBeInTheDocument();
    expect(screen.queryByText("Queue")).not.toBeInTheDocument();
  });

  it("shows a contributor first what came back, with what is asked", async () => {
    const comment = {
      __typename: "FieldComment",
      id: "m1",
      field: "minus",
      text: "The paper prints 0.11.",
      by: "Nakuda, Sel",
      at: "2026-12-01T10:00:00Z",
      answer: null,
      messages: [],
    };
    at(
      ["contributor"],
      mine([
        buildSubmission({ id: "s1", number: "FL-0061" }),
        buildSubmission({
          id: "s2",
          number: "FL-0062",
          state: "returned",
          comments: [comment as never],
        }),
      ]),
    );
    const returned = await screen.findByRole("list", { name: "Returned to you" });
    expect(within(returned).getByText("Minus: The paper prints 0.11.")).toBeInTheDocument();
    const drafts = screen.getByRole("list", { name: "Drafts" });
    expect(
      returned.compareDocumentPosition(drafts) & Node.DOCUMENT_POSITION_FOLLOWING,
    ).toBeTruthy();
  });

  it("shows a returned revision only until its answer is there, whatever became of that", async () => {
    const revision = (id: string, ordinal: number, state: "returned" | "approved") =>
      buildSubmission({ id, number: "FL-0063", ordinal, state });
    at(["contributor"], mine([revision("s1", 1, "returned"), revision("s2", 2, "approved")]));
    const approved = await screen.findByRole("list", { name: "Approved" });
    expect(within(approved).getAllByRole("link")).toHaveLength(1);
    expect(screen.queryByRole("list", { name: "Returned to you" })).not.toBeInTheDocument();
  });

  it("shows an editor the queue oldest first, and own claims before it", async () => {
    at(
      ["editor"],
      queue([
        queueItem("q2", "FL-0072", "2026-11-29T09:00:00Z"),
        queueItem("q1", "FL-0071", "2026-11-20T09:00:00Z"),
        queueItem("q3", "FL-0073", "2026-11-30T09:00:00Z", {
          state: "inReview",
          claimedByMe: true,
          claimedUntil: "2026-12-03T09:00:00Z",
        }),
      ]),
    );
    const waiting = await screen.findByRole("list", { name: "Waiting, oldest first" });
    const links = within(waiting).getAllByRole("link");
    expect(links.map((link) => link.getAttribute("href"))).toEqual([
      "/desk/review/q1",
      "/desk/review/q2",
    ]);
    const claimed = screen.getByRole("list", { name: "Claimed by me" });
    expect(within(claimed).getByRole("link")).toHaveAttribute("href", "/desk/review/q3");
  });

  it("says so when the queue does not arrive, with a retry", async () => {
    at(["editor"], {
      request: { query: ReviewQueueDocument },
      error: new Error("no route"),
      ...endless,
    });
    expect(await screen.findByRole("button", { name: "Try again" })).toBeInTheDocument();
  });

  it("asks before a role is granted, and says what became of it", async () => {
    const person = {
      __typename: "Person",
      id: "p1",
      email: "pim@fogline.example",
      nameOnPapers: "Ashgrove, Pim",
      confirmed: true,
      registeredAt: "2026-11-01T09:00:00Z",
      roles: [],
    };
    const granted = jest.fn();
    show(<PeopleScreen />, {
      width,
      roles: ["maintainer"],
      mocks: [
        {
          request: { query: PeopleDocument, variables: { text: null } },
          result: { data: { people: [person] } },
          ...endless,
        },
        {
          request: { query: GrantRoleDocument, variables: { personId: "p1", role: "contributor" } },
          result: () => {
            granted();
            return { data: { grantRole: { ...person, roles: ["contributor"] } } };
          },
        },
      ] as unknown as MockedResponse[],
    });
    fireEvent.click(
      await screen.findByRole("button", { name: "Grant Ashgrove, Pim the contributor role" }),
    );
    expect(await screen.findByText("Make Ashgrove, Pim a contributor?")).toBeInTheDocument();
    expect(granted).not.toHaveBeenCalled();
    fireEvent.click(screen.getByRole("button", { name: "Grant the role" }));
    await waitFor(() =>
      expect(screen.getByText("Ashgrove, Pim is a contributor now.")).toBeInTheDocument(),
    );
    expect(
      screen.getByRole("button", { name: "Revoke the contributor role of Ashgrove, Pim" }),
    ).toBeInTheDocument();
  });
});
