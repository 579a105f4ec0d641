import { InMemoryCache } from "@apollo/client";
import { MockedProvider } from "@apollo/client/testing/react";
import { act, configure, fireEvent, render, screen, within } from "@testing-library/react";
import { GraphQLError } from "graphql";
import { HistoryScreen } from "@/features/history/HistoryScreen";
import { ThemeProvider } from "@/theme/ThemeProvider";
import {
  HistoryConstraintsDocument,
  HistoryPointDocument,
  SessionDocument,
} from "~graphql/generated/graphql";
import { buildConstraint } from "./rows";

// Drawing a whole screen takes its time where several suites share two cores.
jest.setTimeout(30_000);
configure({ asyncUtilTimeout: 8_000 });

const mockSetParams = jest.fn();
let mockParams: Record<string, string> = {};
jest.mock("expo-router", () => ({
  useRouter: () => ({ push: jest.fn(), setParams: mockSetParams }),
  useLocalSearchParams: () => mockParams,
  usePathname: () => "/",
}));
jest.mock("expo-router/head", () => ({ __esModule: true, default: () => null }));
// jsdom lays nothing out, so nothing would ever be measured.
jest.mock("@/charts/useMeasuredWidth", () => ({
  useMeasuredWidth: (fixed?: number) => ({ width: fixed ?? 800, onLayout: () => undefined }),
}));

const session = {
  request: { query: SessionDocument },
  result: {
    data: {
      methodVocabulary: [],
      session: {
        __typename: "Session" as const,
        demonstration: true,
        licence: "CC BY 4.0",
        lastEvent: null,
        viewer: null,
      },
    },
  },
};

const wing = buildConstraint("FL-0001", { z: "7.51", value: "0.63", plus: "0.17", minus: "0.23" });
const pixels = buildConstraint("FL-0002", {
  methodTags: ["darkPixels"],
  z: "5.9",
  kind: "upperLimit",
  value: "0.11",
  level: "percent95",
});
const depth = buildConstraint("FL-0003", {
  quantity: "opticalDepth",
  methodTags: ["cmbPolarization"],
  z: null,
  zRole: null,
  value: "0.057",
  plus: "0.011",
  minus: "0.011",
});

function answer(
  constraints: ReturnType<typeof buildConstraint>[],
  filter: object = { states: ["current"] },
) {
  return {
    request: { query: HistoryConstraintsDocument, variables: { filter } },
    result: {
      data: {
        constraints: {
          __typename: "ConstraintPage" as const,
          total: constraints.length,
          registryTotal: 9,
          lastEvent: { __typename: "EventMark" as const, sequence: 12, at: "2026-03-14T10:00:00Z" },
          constraints,
        },
        tableSurroundings: {
          __typename: "TableSurroundings" as const,
          overlaps: [],
          conditions: [],
        },
      },
    },
  };
}

async function open(
  mocks: unknown[],
  { width = 1440, params = {} }: { width?: number; params?: Record<string, string> } = {},
) {
  mockParams = params;
  const root = document.documentElement;
  Object.defineProperty(root, "clientWidth", { value: width, configurable: true });
  Object.defineProperty(root, "clientHeight", { value: 900, configurable: true });
  window.dispatchEvent(new Event("resize"));
  const view = render(
    <MockedProvider mocks={mocks as never} cache={new InMemoryCache()}>
      <ThemeProvider>
        <HistoryScreen />
      </ThemeProvider>
    </MockedProvider>,
  );
  await act(async () => {
    await new Promise((resolve) => setTimeout(resolve, 50));
  });
  return view;
}

beforeEach(() => mockSetParams.mockClear());

describe.each([390, 1440])("History at %i", (width) => {
  it("shows the constraints, how many of how many, and that the data are invented", async () => {
    await open([session, answer([wing, pixels, depth])], { width });
    expect(await screen.findByText(/3 of 9 constraints shown/)).toBeTruthy();
    expect(screen.getByText("Invented demonstration data")).toBeTruthy();
    expect(screen.getByRole("button", { name: /Quasar damping wing at z = 7.51/ })).toBeTruthy();
    expect(screen.getByText("Optical depth, total")).toBeTruthy();
  });

  it("opens a point from the address as printed and as used, with its cautions", async () => {
    const detail = {
      request: { query: HistoryPointDocument, variables: { number: "FL-0001" } },
      result: { data: { constraint: null } },
    };
    await open([session, answer([wing, pixels]), detail], { width, params: { point: "FL-0001" } });
    const panel = within(await screen.findByRole("region", { name: "Point FL-0001.1" }));
    expect(panel.getByText("As printed")).toBeTruthy();
    expect(panel.getByText("As used")).toBeTruthy();
    expect(panel.getByText(/Model-dependent/)).toBeTruthy();
    expect(panel.getByRole("link", { name: "Open the record" }).getAttribute("href")).toBe(
      "/constraints/FL-0001",
    );
    fireEvent.click(panel.getByRole("button", { name: "Close the point" }));
    expect(mockSetParams).toHaveBeenCalledWith({ point: undefined });
  });
});

describe("History", () => {
  it("moves readouts and curve with a slider", async () => {
    await open([session, answer([wing])], { params: { models: "tanh_7.67_0.5" } });
    const table = within(await screen.findByRole("table", { name: /Readouts/ }));
    // PHYSICS, worked values: τ(tanh 7.67, Δz 0.5) = 0.0541970146.
    expect(table.getByText("0.0542")).toBeTruthy();
    fireEvent.change(screen.getByRole("slider", { name: "Midpoint, tanh" }), {
      target: { value: "8.5" },
    });
    expect(table.queryByText("0.0542")).toBeNull();
    expect(table.getByText("8.50")).toBeTruthy();
  });

  it("filters by a family in the legend, in the address", async () => {
    await open([session, answer([wing, pixels])]);
    fireEvent.click(await screen.findByRole("button", { name: "Dark pixels, 1" }));
    expect(mockSetParams).toHaveBeenCalledWith(expect.objectContaining({ family: "darkPixels" }));
  });

  it("draws only the families of the address and keeps counting the others", async () => {
    await open([session, answer([wing, pixels])], { params: { family: "darkPixels" } });
    expect(await screen.findByText(/1 of 9 constraints shown/)).toBeTruthy();
    expect(screen.queryByRole("button", { name: /Quasar damping wing at z/ })).toBeNull();
    expect(screen.getByRole("button", { name: "Damping wing, 1" })).toBeTruthy();
  });

  it("says over how many rows it scores, and why others are left out", async () => {
    const mass = buildConstraint("FL-0004", { z: "6.5", weighting: "mass" });
    await open([session, answer([wing, mass])]);
    expect(await screen.findByText(/over 1 of 2 rows shown/)).toBeTruthy();
    fireEvent.click(screen.getByRole("button", { name: "1 row left out: why" }));
    const dialog = within(screen.getByRole("dialog", { name: /left out/ }));
    expect(dialog.getByText("FL-0004")).toBeTruthy();
    expect(dialog.getByText(/mass/i)).toBeTruthy();
  });

  it("names the way on when nothing matches", async () => {
    await open([session, answer([])]);
    expect(await screen.findByText("No row matches")).toBeTruthy();
    expect(screen.getByRole("button", { name: "Clear the filter" })).toBeTruthy();
  });

  it("says what a failed server means for the reader and offers a retry", async () => {
    const failed = {
      request: {
        query: HistoryConstraintsDocument,
        variables: { filter: { states: ["current"] } },
      },
      result: {
        errors: [
          new GraphQLError("secret", { extensions: { code: "INTERNAL", requestId: "r-9" } }),
        ],
      },
    };
    await open([session, failed]);
    const alert = await screen.findByRole("alert");
    expect(alert.textContent).toContain("r-9");
    expect(alert.textContent).not.toContain("secret");
    expect(within(alert).getByRole("button", { name: "Try again" })).toBeTruthy();
  });

  it("offers its points as a table", async () => {
    await open([session, answer([wing, pixels])]);
    fireEvent.click(await screen.findByRole("button", { name: "Show the points as a table" }));
    const table = within(screen.getByRole("table", { name: /Constraints shown/ }));
    expect(table.getByRole("button", { name: "FL-0002" })).toBeTruthy();
    expect(table.getByText("at 95 %")).toBeTruthy();
  });
});
