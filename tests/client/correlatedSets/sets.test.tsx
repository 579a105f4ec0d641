import "@testing-library/jest-dom";
import { fireEvent, screen, waitFor, within } from "@testing-library/react";

import { NewSetScreen } from "@/features/correlatedSets/NewSetScreen";
import { SetDraftScreen } from "@/features/correlatedSets/SetDraftScreen";
import { SetReviewScreen } from "@/features/correlatedSets/SetReviewScreen";
import { SetScreen } from "@/features/correlatedSets/SetScreen";
import {
  CorrelatedSetByNumberDocument,
  SaveSetDocument,
  SetCandidatesDocument,
  SetReviewByNumberDocument,
  StartSetDocument,
  StoreSetReadingDocument,
} from "~graphql/generated/graphql";
import { emptyFields, type ConstraintFields } from "~shared/statement/fields";

import { type MockedResponse, route, router, show, WIDTHS } from "../desk/support";

jest.mock("expo-router", () => ({
  useRouter: () => jest.requireActual("../desk/support").router,
  useLocalSearchParams: () => jest.requireActual("../desk/support").route.params,
  usePathname: () => "/sets",
}));
jest.mock("expo-router/head", () => ({ __esModule: true, default: () => null }));

const endless = { maxUsageCount: Number.POSITIVE_INFINITY };

const PAPER = {
  __typename: "Citation",
  id: "c1",
  key: "Quelle2031",
  authors: ["Quelle, Rona"],
  shortName: "Quelle 2031",
  year: 2031,
  title: "Bins in the mist",
  container: "Annals of Imaginary Skies",
  volume: "1",
  pages: "2",
};

function member(number: string, z: string, overrides: Partial<ConstraintFields> = {}) {
  return {
    __typename: "SetMemberType",
    number,
    quotable: `${number}.1`,
    approved: true,
    cannotJoin: null,
    fields: {
      __typename: "ConstraintFields",
      ...emptyFields(),
      quantity: "neutralFraction",
      species: "neutral",
      scale: "linear",
      kind: "twoSided",
      value: "0.40",
      plus: "0.10",
      minus: "0.10",
      level: "oneSigma",
      zRole: "point",
      z,
      ...overrides,
    },
  };
}

const PAIR = [member("FL-0001", "6.6"), member("FL-0002", "7.2")];

function correlatedSet(overrides: object = {}) {
  return {
    __typename: "CorrelatedSet",
    number: "FLS-0001",
    state: "approved",
    version: 3,
    label: "Two bins",
    citation: PAPER,
    members: PAIR,
    matrixKind: "correlation",
    triangle: [["1"], ["-0.60", "1"]],
    printedRho: [
      [1, -0.6],
      [-0.6, 1],
    ],
    usedRho: [
      [1, -0.6],
      [-0.6, 1],
    ],
    place: "Table 5",
    page: null,
    note: null,
    submittedBy: "Ottla Firn",
    readBy: "Brisa Kelm",
    submittedAt: "2026-05-01T10:00:00Z",
    decidedAt: "2026-05-02T10:00:00Z",
    updatedAt: "2026-05-02T10:00:00Z",
    changedMembers: [],
    withdrawnBecause: null,
    follows: null,
    mine: false,
    decisionNote: null,
    findings: [],
    answers: [],
    ...overrides,
  };
}

const setMock = (set: object | null): MockedResponse =>
  ({
    request: { query: CorrelatedSetByNumberDocument, variables: { number: "FLS-0001" } },
    result: { data: { correlatedSet: set } },
    ...endless,
  }) as unknown as MockedResponse;

describe.each(WIDTHS)("correlated sets at %i points", (width) => {
  beforeEach(() => {
    localStorage.clear();
    jest.clearAllMocks();
    route.params = { number: "FLS-0001" };
  });

  it("shows the matrix as a table of numbers with their signs, and leads to the records", async () => {
    show(<SetScreen />, { width, roles: null, mocks: [setMock(correlatedSet())] });
    const table = await screen.findByRole("table", { name: /Correlation matrix as printed/ });
    expect(within(table).getAllByText("−0.60")).toHaveLength(2);
    expect(within(table).getAllByText("1")).not.toHaveLength(0);
    expect(within(table).getByRole("rowheader", { name: /FL-0002, z 7.2/ })).toBeInTheDocument();
    expect(screen.getAllByRole("link").map((link) => link.getAttribute("href"))).toEqual(
      expect.arrayContaining(["/constraints/FL-0001", "/constraints/FL-0002"]),
    );
    expect(screen.queryByRole("button", { name: "Withdraw it" })).toBeNull();
  });

  it("shows the correlations as used where one record is turned round", async () => {
    const turned = correlatedSet({
      members: [PAIR[0], member("FL-0002", "7.2", { species: "ionized" })],
      usedRho: [
        [1, 0.6],
        [0.6, 1],
      ],
    });
    show(<SetScreen />, { width, roles: ["maintainer"], mocks: [setMock(turned)] });
    fireEvent.click(await screen.findByRole("radio", { name: "Correlation as used" }));
    const table = await screen.findByRole("table", { name: /as used/ });
    expect(within(table).getAllByText("0.60")).toHaveLength(2);
    expect(screen.getByRole("button", { name: "Withdraw it" })).toBeInTheDocument();
  });

  it("puts a withdrawn set's reason above it", async () => {
    const withdrawn = correlatedSet({ state: "withdrawn", withdrawnBecause: "Another model." });
    show(<SetScreen />, { width, roles: null, mocks: [setMock(withdrawn)] });
    expect(await screen.findByText("Another model.")).toBeInTheDocument();
    expect(screen.getByText("Withdrawn: not used any more")).toBeInTheDocument();
  });

  it("starts a set from the paper's two-sided records and says why others can't join", async () => {
    route.params = { paper: "c1", with: "FL-0001" };
    const started = jest.fn();
    const limit = { ...member("FL-0003", "8"), cannotJoin: "is a limit: it has no error" };
    show(<NewSetScreen />, {
      width,
      roles: ["contributor"],
      mocks: [
        {
          request: { query: SetCandidatesDocument, variables: { citationId: "c1" } },
          result: { data: { setCandidates: [...PAIR, limit] } },
          ...endless,
        } as unknown as MockedResponse,
        {
          request: { query: StartSetDocument, variables: () => true },
          result: (variables: object) => {
            started(variables);
            return { data: { startSet: correlatedSet({ state: "draft", mine: true }) } };
          },
        } as unknown as MockedResponse,
      ],
    });
    expect(await screen.findByText("FL-0003 is a limit: it has no error.")).toBeInTheDocument();
    const start = screen.getByRole("button", { name: /Type the matrix/ });
    expect(start).toHaveAttribute("aria-disabled", "true");
    fireEvent.click(screen.getByRole("checkbox", { name: /FL-0002/ }));
    fireEvent.click(screen.getByRole("button", { name: "Type the matrix of 2" }));
    await waitFor(() => expect(router.replace).toHaveBeenCalledWith("/desk/sets/FLS-0001"));
    expect(started).toHaveBeenCalledWith({
      input: { citationId: "c1", members: ["FL-0001", "FL-0002"] },
    });
  });

  it("saves what is typed by itself, mirrors the triangle and says what is wrong", async () => {
    const saved = jest.fn();
    const draft = correlatedSet({
      state: "draft",
      mine: true,
      triangle: [["1"], ["", "1"]],
      printedRho: null,
      usedRho: null,
    });
    show(<SetDraftScreen />, {
      width,
      roles: ["contributor"],
      mocks: [
        setMock(draft),
        {
          request: { query: SaveSetDocument, variables: () => true },
          result: (variables: { input: object }) => {
            saved(variables.input);
            return { data: { saveSet: { ...draft, version: 4 } } };
          },
          ...endless,
        } as unknown as MockedResponse,
      ],
    });
    const entry = await screen.findByRole("textbox", { name: "Row 2, column 1" });
    // The diagonal of a correlation matrix is not typed.
    expect(screen.queryByRole("textbox", { name: "Row 1, column 1" })).toBeNull();
    fireEvent.change(entry, { target: { value: "1.6" } });
    expect(
      await screen.findByText("Row 2, column 1: a correlation lies between −1 and 1."),
    ).toBeInTheDocument();
    expect(localStorage.getItem("fogline.set.FLS-0001")).toContain("1.6");
    fireEvent.change(entry, { target: { value: "0.6" } });
    await waitFor(() =>
      expect(saved).toHaveBeenLastCalledWith(
        expect.objectContaining({ version: 3, triangle: [["1"], ["0.6", "1"]] }),
      ),
    );
    await waitFor(() => expect(localStorage.getItem("fogline.set.FLS-0001")).toBeNull());
    expect(
      screen.getByRole("table", { name: "The matrix as it will be drawn" }),
    ).toBeInTheDocument();
  });

  it("asks an editor for the matrix before anything of the submission is shown", async () => {
    const item = {
      __typename: "SetQueueItem",
      number: "FLS-0001",
      state: "inReview",
      version: 4,
      citation: PAPER,
      members: ["FL-0001", "FL-0002"],
      place: "Table 5",
      page: null,
      submittedAt: "2026-05-01T10:00:00Z",
      claimedByMe: true,
      claimedUntil: "2036-05-04T10:00:00Z",
      barredBecause: null,
    };
    const review = {
      __typename: "SetReview",
      item,
      members: PAIR,
      readingStoredAt: null,
      blockers: ["Your second reading is not stored yet."],
      comparison: [],
      set: null,
    };
    const stored = jest.fn();
    show(<SetReviewScreen />, {
      width,
      roles: ["editor"],
      mocks: [
        {
          request: { query: SetReviewByNumberDocument, variables: { number: "FLS-0001" } },
          result: { data: { setReview: review } },
          ...endless,
        } as unknown as MockedResponse,
        {
          request: { query: StoreSetReadingDocument, variables: () => true },
          result: (variables: object) => {
            stored(variables);
            return { data: { storeSetReading: review } };
          },
        } as unknown as MockedResponse,
      ],
    });
    fireEvent.click(await screen.findByRole("radio", { name: "Correlations" }));
    const entry = screen.getByRole("textbox", { name: "Row 2, column 1" });
    expect(entry).toHaveValue("");
    const store = screen.getByRole("button", { name: "Store my reading" });
    expect(store).toHaveAttribute("aria-disabled", "true");
    fireEvent.change(entry, { target: { value: "-.6" } });
    await waitFor(() => expect(store).not.toHaveAttribute("aria-disabled", "true"));
    fireEvent.click(store);
    await waitFor(() =>
      expect(stored).toHaveBeenCalledWith({
        number: "FLS-0001",
        reading: { matrixKind: "correlation", triangle: [[""], ["-.6", ""]] },
      }),
    );
  });
});
