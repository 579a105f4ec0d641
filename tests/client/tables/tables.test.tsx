import "@testing-library/jest-dom";
import { fireEvent, screen, waitFor, within } from "@testing-library/react";

import { TableBuilderScreen } from "@/features/tables/TableBuilderScreen";
import { TableScreen } from "@/features/tables/TableScreen";
import { TablesScreen } from "@/features/tables/TablesScreen";
import {
  SaveTableDocument,
  TableBySlugDocument,
  TableCandidatesDocument,
  TableListDocument,
} from "~graphql/generated/graphql";
import type { ConstraintFields } from "~shared/statement/fields";

import {
  CITATION,
  completeFields,
  type MockedResponse,
  route,
  router,
  show,
  WIDTHS,
} from "../desk/support";

jest.mock("expo-router", () => ({
  useRouter: () => jest.requireActual("../desk/support").router,
  useLocalSearchParams: () => jest.requireActual("../desk/support").route.params,
  usePathname: () => "/tables",
}));
jest.mock("expo-router/head", () => ({ __esModule: true, default: () => null }));

const endless = { maxUsageCount: Number.POSITIVE_INFINITY };

function row(number: string, fields: Partial<ConstraintFields> = {}) {
  const paper = { id: `of ${number}`, shortName: `Paper of ${number}` };
  return {
    __typename: "Constraint",
    number,
    quotable: `${number}.1`,
    state: "current",
    fields: {
      __typename: "ConstraintFields",
      ...completeFields(),
      dataUsed: [`Field of ${number}`],
      ...fields,
    },
    citation: { ...CITATION, ...paper },
  };
}

const candidates = (rows: object[]): MockedResponse =>
  ({
    request: { query: TableCandidatesDocument, variables: () => true },
    result: {
      data: {
        constraints: {
          __typename: "ConstraintPage",
          total: rows.length,
          registryTotal: 24,
          lastEvent: null,
          constraints: rows,
        },
      },
    },
    ...endless,
  }) as unknown as MockedResponse;

const tables = (list: object[] = []): MockedResponse => ({
  request: { query: TableListDocument },
  result: { data: { fittingTables: list } },
  ...endless,
});

/** Two rows of separate data, and one that shares the data of the first. */
const ROWS = [row("FL-0001"), row("FL-0002"), row("FL-0003", { dataUsed: ["Field of FL-0001"] })];

beforeEach(() => {
  route.params = {};
  sessionStorage.clear();
  router.replace.mockClear();
});

describe.each(WIDTHS)("the builder at %i points", (width) => {
  function build(options: {
    params?: Record<string, string>;
    roles?: [] | null;
    answer?: object;
    rows?: object[];
  }) {
    const saved = jest.fn();
    route.params = options.params ?? {};
    const save = {
      request: {
        query: SaveTableDocument,
        variables: (variables: object) => {
          saved(variables);
          return true;
        },
      },
      result: { data: { saveTable: options.answer } },
    } as unknown as MockedResponse;
    show(<TableBuilderScreen />, {
      width,
      roles: options.roles === undefined ? [] : options.roles,
      mocks: [candidates(options.rows ?? ROWS), tables(), save],
    });
    return saved;
  }
  const box = (number: string) =>
    screen.findByRole("checkbox", { name: new RegExp(`^Paper of ${number}:`) });
  const saveButton = () => screen.getByRole("button", { name: "Save the table" });
  const name = (value: string) =>
    fireEvent.change(screen.getByLabelText("Name of the table"), { target: { value } });

  it("proposes rows, the one that shares data out with its reason", async () => {
    build({});
    expect(await box("FL-0001")).toBeChecked();
    expect(await box("FL-0002")).toBeChecked();
    expect(await box("FL-0003")).not.toBeChecked();
    expect(
      screen.getByText("Out, as proposed: Shares Field of FL-0001 with FL-0001."),
    ).toBeInTheDocument();
    expect(screen.getByText(/^2 in, 1 out\./)).toBeInTheDocument();
    const preview = within(
      screen.getByRole(width < 700 ? "list" : "group", { name: "Rows of the table" }),
    );
    expect(preview.getByText("FL-0002.1")).toBeInTheDocument();
    expect(preview.queryByText("FL-0003.1")).not.toBeInTheDocument();
  });

  it("is not saved while a row is out without a reason, and says which", async () => {
    const saved = build({});
    fireEvent.click(await box("FL-0002"));
    name("Wings");
    fireEvent.click(saveButton());
    expect(saveButton()).toHaveAccessibleDescription("A reason is missing: FL-0002.");
    fireEvent.change(screen.getByLabelText("Why it is left out"), {
      target: { value: "I trust it less" },
    });
    expect(saveButton()).not.toHaveAttribute("aria-disabled", "true");
    expect(saved).not.toHaveBeenCalled();
  });

  it("sends each row with its reason, in or out, and goes to the table's page", async () => {
    const saved = build({
      answer: { __typename: "FittingTable", slug: "abc234def567", name: "Wings" },
    });
    fireEvent.click(await box("FL-0002"));
    fireEvent.change(screen.getByLabelText("Why it is left out"), {
      target: { value: "I trust it less" },
    });
    fireEvent.click(await box("FL-0003"));
    expect(screen.getByText("A reason is missing: FL-0003.")).toBeInTheDocument();
    fireEvent.change(screen.getByLabelText("Why it is in all the same"), {
      target: { value: " Disjoint halves " },
    });
    name("Wings");
    fireEvent.click(saveButton());
    await waitFor(() => expect(router.replace).toHaveBeenCalledWith("/tables/abc234def567"));
    expect(saved).toHaveBeenCalledWith({
      input: {
        name: "Wings",
        filter: expect.anything(),
        rows: [
          { number: "FL-0001", included: true, reason: null },
          { number: "FL-0002", included: false, reason: "I trust it less" },
          { number: "FL-0003", included: true, reason: "Disjoint halves" },
        ],
      },
    });
  });

  it("shows a refusal in its words and keeps the choices", async () => {
    const message = "FL-0009 matches the filter too and is neither in nor out.";
    build({ answer: { __typename: "Refusal", code: "stale", message, field: null } });
    fireEvent.click(await box("FL-0002"));
    fireEvent.change(screen.getByLabelText("Why it is left out"), { target: { value: "Dim" } });
    name("Wings");
    fireEvent.click(saveButton());
    expect(await screen.findByText(message)).toBeInTheDocument();
    expect(router.replace).not.toHaveBeenCalled();
    expect(await box("FL-0002")).not.toBeChecked();
    expect(screen.getByLabelText("Why it is left out")).toHaveValue("Dim");
  });

  it("takes a choice back to the proposal", async () => {
    build({});
    fireEvent.click(await box("FL-0003"));
    fireEvent.click(screen.getByRole("button", { name: "As proposed" }));
    expect(await box("FL-0003")).not.toBeChecked();
    expect(screen.queryByLabelText("Why it is in all the same")).not.toBeInTheDocument();
  });

  it("brings the record it was opened for into view, or says that the filter leaves it out", async () => {
    const scrolled = jest.fn();
    Element.prototype.scrollIntoView = function (this: Element) {
      scrolled(this.textContent);
    };
    build({ params: { with: "FL-0002" } });
    await box("FL-0002");
    expect(scrolled).toHaveBeenCalledWith(expect.stringContaining("Paper of FL-0002"));
    expect(screen.queryByText(/does not match/)).not.toBeInTheDocument();
  });

  it("says when the filter leaves out the record it was opened for", async () => {
    build({ params: { with: "FL-0099" } });
    expect(await screen.findByText("FL-0099 does not match this filter.")).toBeInTheDocument();
  });

  it("can be tried by anybody; saving asks to sign in", async () => {
    build({ roles: null });
    expect(await box("FL-0001")).toBeChecked();
    expect(screen.getByRole("link", { name: "Sign in to save" })).toBeInTheDocument();
    expect(screen.queryByRole("button", { name: "Save the table" })).not.toBeInTheDocument();
  });

  it("says so when no row matches", async () => {
    build({ rows: [] });
    expect(await screen.findByText("No row matches")).toBeInTheDocument();
  });
});

describe.each(WIDTHS)("a saved table at %i points", (width) => {
  const saved = (ownedByMe: boolean) => ({
    __typename: "FittingTable",
    slug: "abc234def567",
    name: "Wings",
    owner: "Vask, Inna",
    ownedByMe,
    createdAt: "2026-11-20T09:00:00Z",
    filter: "All constraints",
    digest: "ab12".repeat(16),
    rowsIn: 2,
    rowsOut: 1,
    lastEvent: { __typename: "EventMark", sequence: 7, digest: "cd", at: "2026-11-20T08:00:00Z" },
    rows: [
      { __typename: "TableRow", number: "FL-0001", included: true, reason: null, proposed: true },
      {
        __typename: "TableRow",
        number: "FL-0002",
        included: false,
        reason: "I trust it less",
        proposed: false,
      },
      {
        __typename: "TableRow",
        number: "FL-0003",
        included: true,
        reason: "Disjoint halves",
        proposed: false,
      },
    ],
    constraints: ROWS,
  });
  const open = (table: object | null) => {
    route.params = { slug: "abc234def567" };
    show(<TableScreen />, {
      width,
      roles: [],
      mocks: [
        {
          request: { query: TableBySlugDocument, variables: { slug: "abc234def567" } },
          result: { data: { fittingTable: table } },
          ...endless,
        } as unknown as MockedResponse,
      ],
    });
  };

  it("lists the rows in, and the reason of every row in or out against the proposal", async () => {
    open(saved(false));
    const rows = within(
      await screen.findByRole(width < 700 ? "list" : "group", { name: "Rows of the table" }),
    );
    expect(rows.getByText("FL-0001.1")).toBeInTheDocument();
    expect(rows.getByText("FL-0003.1")).toBeInTheDocument();
    expect(rows.queryByText("FL-0002.1")).not.toBeInTheDocument();
    const part = (name: string) => screen.getByRole("heading", { name }).parentElement;
    expect(part("In against the proposal")).toHaveTextContent(
      "FL-0003: Disjoint halves (chosen by hand)",
    );
    expect(part("Left out")).toHaveTextContent("FL-0002: I trust it less (chosen by hand)");
    expect(screen.getByText(/not the authors'; cite the originals/)).toBeInTheDocument();
  });

  it("hands out three files, and lets only its owner delete it", async () => {
    open(saved(false));
    for (const [label, kind] of [
      ["CSV", "csv"],
      ["JSON", "json"],
      [".bib", "bib"],
    ] as const) {
      expect(await screen.findByRole("link", { name: label })).toHaveAttribute(
        "href",
        `/api/tables/abc234def567.${kind}`,
      );
    }
    expect(screen.queryByRole("button", { name: "Delete" })).not.toBeInTheDocument();
  });

  it("can be deleted by its owner", async () => {
    open(saved(true));
    expect(await screen.findByRole("button", { name: "Delete" })).toBeInTheDocument();
  });

  it("says that there is none at an address that was never given", async () => {
    open(null);
    expect(await screen.findByText("No table at this address")).toBeInTheDocument();
  });
});

it("the list of tables says how to make the first one", async () => {
  show(<TablesScreen />, { width: 390, roles: null, mocks: [tables()] });
  expect(await screen.findByText("No fitting table yet")).toBeInTheDocument();
  expect(screen.getByRole("link", { name: "Build the first one" })).toHaveAttribute(
    "href",
    "/tables/new",
  );
});
