import "@testing-library/jest-dom";

import { fireEvent, screen, waitFor } from "@testing-library/react";

import { EventLogScreen } from "@/features/desk/EventLogScreen";
import { EventLogDocument, type EventLogQuery } from "~graphql/generated/graphql";

import { type MockedResponse, route, router, show, WIDTHS } from "./support";

jest.mock("expo-router", () => ({
  useRouter: () => jest.requireActual("./support").router,
  useLocalSearchParams: () => jest.requireActual("./support").route.params,
  usePathname: () => "/desk/log",
}));
jest.mock("expo-router/head", () => ({ __esModule: true, default: () => null }));

type LoggedEvent = EventLogQuery["eventLog"]["events"][number];

const event = (sequence: number, at: string): LoggedEvent => ({
  __typename: "LoggedEvent",
  sequence,
  at,
  kind: "claim.made",
  sentence: `Vask, Inna claimed FL-00${sequence}.1 to read it again.`,
  who: "Vask, Inna",
  subject: `FL-00${sequence}.1`,
  digest: String(sequence).padEnd(64, "a"),
  previousDigest: String(sequence - 1).padEnd(64, "a"),
});

function log(
  asked: { filter: object; before: number | null },
  events: LoggedEvent[],
  more: { next?: number | null; total?: number } = {},
): MockedResponse {
  return {
    request: { query: EventLogDocument, variables: asked },
    result: {
      data: {
        eventLog: {
          __typename: "EventLogPage",
          events,
          next: more.next ?? null,
          total: more.total ?? events.length,
        },
      },
    },
    maxUsageCount: Number.POSITIVE_INFINITY,
  };
}

const NEWEST = { filter: {}, before: null };

beforeEach(() => {
  route.params = {};
  jest.clearAllMocks();
});

describe.each(WIDTHS)("the event log at %i points", (width) => {
  const at = (...mocks: MockedResponse[]) =>
    show(<EventLogScreen />, { width, roles: ["maintainer"], mocks });

  it("says what happened under its day, in UTC, and shows the digests on demand", async () => {
    at(log(NEWEST, [event(42, "2026-12-01T00:30:00Z"), event(41, "2026-11-30T23:30:00Z")]));
    expect(await screen.findByText("1 December 2026")).toBeInTheDocument();
    expect(screen.getByText("30 November 2026")).toBeInTheDocument();
    expect(screen.getByText("00:30:00 · event 42 · Claim made")).toBeInTheDocument();
    const { digest, previousDigest } = event(42, "");
    expect(screen.queryByText(digest)).toBeNull();
    const more = screen.getByRole("button", { name: "Digest of event 42" });
    expect(more).toHaveAttribute("aria-expanded", "false");
    fireEvent.click(more);
    expect(await screen.findByText(digest)).toBeInTheDocument();
    expect(screen.getByText(previousDigest)).toBeInTheDocument();
    fireEvent.click(screen.getByRole("button", { name: "All about FL-0042.1" }));
    expect(router.setParams).toHaveBeenCalledWith({ about: "FL-0042.1", before: undefined });
  });

  it("goes on to older events by an address of its own, and back to the newest", async () => {
    at(log(NEWEST, [event(42, "2026-12-01T00:30:00Z")], { next: 42, total: 60 }));
    fireEvent.click(await screen.findByRole("button", { name: "Older events" }));
    expect(router.setParams).toHaveBeenCalledWith({ before: "42" });
    expect(screen.queryByRole("button", { name: "Newest events" })).toBeNull();
  });

  it("takes filter and page from the address, for the list and for the files", async () => {
    route.params = { kind: "claim.made", about: "FL-0041", before: "42", other: "x" };
    const filter = { about: "FL-0041", kind: "claim.made" };
    at(log({ filter, before: 42 }, [event(41, "2026-11-30T23:30:00Z")]));
    expect(await screen.findByText("1 event of this filter")).toBeInTheDocument();
    expect(screen.getByRole("link", { name: "CSV" })).toHaveAttribute(
      "href",
      "/api/log.csv?about=FL-0041&kind=claim.made",
    );
    fireEvent.click(screen.getByRole("button", { name: "Newest events" }));
    expect(router.setParams).toHaveBeenCalledWith({ before: undefined });
  });

  it("says when nothing is like the filter, with the way out", async () => {
    route.params = { person: "nobody" };
    at(log({ filter: { person: "nobody" }, before: null }, []));
    expect(await screen.findByText("No event is like this")).toBeInTheDocument();
    fireEvent.click(screen.getByRole("button", { name: "Clear the filter" }));
    await waitFor(() =>
      expect(router.setParams).toHaveBeenCalledWith(
        expect.objectContaining({ person: undefined, before: undefined }),
      ),
    );
  });

  it("says when the server can't be asked", async () => {
    at({ request: { query: EventLogDocument, variables: NEWEST }, error: new Error("offline") });
    expect(await screen.findByRole("alert")).toBeInTheDocument();
  });
});

it("a day goes into the address once it is one", async () => {
  show(<EventLogScreen />, {
    width: 1440,
    roles: ["maintainer"],
    mocks: [log(NEWEST, [event(42, "2026-12-01T00:30:00Z")])],
  });
  const from = await screen.findByLabelText("From");
  fireEvent.change(from, { target: { value: "2026-02-30" } });
  expect(await screen.findByText("There is no such day")).toBeInTheDocument();
  fireEvent.change(from, { target: { value: "2026-02-28" } });
  await waitFor(() =>
    expect(router.setParams).toHaveBeenCalledWith({ from: "2026-02-28", before: undefined }),
  );
  expect(router.setParams).toHaveBeenCalledTimes(1);
});

it("is for maintainers", async () => {
  show(<EventLogScreen />, { width: 390, roles: ["editor"] });
  expect(await screen.findByText("Maintainers only")).toBeInTheDocument();
});
