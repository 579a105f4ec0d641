import "@testing-library/jest-dom";
import { fireEvent, screen, waitFor, within } from "@testing-library/react";

import { TableBuilderScreen } from "@/features/tables/TableBuilderScreen";
import { TableScreen } from "@/features/tables/TableScreen";
import { TablesScreen } from "@/features/tables/TablesScreen";
import {
  ReleaseListDocument,
  SaveRecipeDocument,
  TableBySlugDocument,
  TableListDocument,
  TableProposalDocument,
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
    supersededBy: null,
    fields: {
      __typename: "ConstraintFields",
      ...completeFields(),
      dataUsed: [`Field of ${number}`],
      ...fields,
    },
    citation: { ...CITATION, ...paper },
  };
}

function settled(number: string, more: object = {}) {
  return {
    __typename: "SettledRow",
    number,
    included: true,
    reason: null,
    proposed: true,
    open: [],
    cautions: [],
    form: "quantileMatched",
    forms: ["quantileMatched", "twoPiece"],
    formula: "quantile-matched",
    formReason: null,
    redshift: "point",
    level: 0.6827,
    weight: 1,
    mixture: null,
    set: null,
    ...more,
  };
}

const OVERLAP = "overlap:FL-0001+FL-0003";

/** Two papers on one field: open until the choice is there. */
function decision(taken: string | null) {
  const option = (code: string, words: string, override = false) => ({
    __typename: "DecisionOption",
    code,
    words,
    override,
  });
  return {
    __typename: "TableDecision",
    id: OVERLAP,
    kind: "overlap",
    rows: ["FL-0001", "FL-0003"],
    words: "Two rows share data: Field of FL-0001.",
    options: [
      option("keep:FL-0001", "Keep FL-0001"),
      option("keep:FL-0003", "Keep FL-0003"),
      option("all", "Keep both, with a reason", true),
    ],
    proposed: "keep:FL-0001",
    because: "only one of these 2 rows can stand",
    taken,
    byDefault: taken === "keep:FL-0001",
    reason: null,
  };
}

interface Recipe {
  decisions: { id: string; option: string; byDefault: boolean; reason: string | null }[];
  out: { number: string; reason: string }[];
  forms: { number: string; form: string; reason: string }[];
}

/** The proposal a server would make of the recipe. */
function proposal(recipe: Recipe, rows: object[]) {
  const [choice] = recipe.decisions;
  const settles = choice && (choice.byDefault || choice.reason);
  const taken = settles ? choice.option : null;
  const kept = taken ?? "keep:FL-0001";
  const outOf = (number: string) => recipe.out.find((one) => one.number === number);
  const shown = ["FL-0001", "FL-0002", "FL-0003"].map((number) => {
    const byHand = outOf(number);
    const lost = number !== "FL-0002" && kept !== "all" && kept !== `keep:${number}`;
    return settled(number, {
      included: !byHand && !lost,
      reason: byHand ? `Taken out: ${byHand.reason}` : lost ? "Shares Field of FL-0001" : null,
      open: taken === null && number !== "FL-0002" ? [OVERLAP] : [],
    });
  });
  return {
    __typename: "TableProposal",
    open: rows.length > 0 && taken === null ? 1 : 0,
    filter: "All constraints",
    lastEvent: { __typename: "EventMark", sequence: 7, at: "2026-11-20T08:00:00Z" },
    rows: rows.length > 0 ? shown : [],
    constraints: rows,
    decisions: rows.length > 0 ? [decision(taken)] : [],
    mixtures: [],
    sets: [],
  };
}

const tables = (list: object[] = []): MockedResponse => ({
  request: { query: TableListDocument },
  result: { data: { fittingTables: list } },
  ...endless,
});

const releases = (list: object[] = []): MockedResponse => ({
  request: { query: ReleaseListDocument },
  result: { data: { releases: list } },
  ...endless,
});

/** Two rows of separate data, and one that shares the data of the first. */
const ROWS = [row("FL-0001"), row("FL-0002"), row("FL-0003", { dataUsed: ["Field of FL-0001"] })];

beforeEach(() => {
  route.params = {};
  localStorage.clear();
  router.replace.mockClear();
});

describe.each(WIDTHS)("the builder at %i points", (width) => {
  const wide = width >= 1100;

  function build(options: {
    params?: Record<string, string>;
    roles?: [] | null;
    answer?: object;
    rows?: object[];
  }) {
    const saved = jest.fn();
    route.params = { ...(wide ? {} : { step: "rows" }), ...options.params };
    const proposed = {
      request: { query: TableProposalDocument, variables: () => true },
      result: ({ recipe }: { recipe: Recipe }) => ({
        data: { tableProposal: proposal(recipe, options.rows ?? ROWS) },
      }),
      ...endless,
    } as unknown as MockedResponse;
    const save = {
      request: {
        query: SaveRecipeDocument,
        variables: (variables: object) => {
          saved(variables);
          return true;
        },
      },
      result: { data: { saveRecipe: options.answer } },
    } as unknown as MockedResponse;
    show(<TableBuilderScreen />, {
      width,
      roles: options.roles === undefined ? [] : options.roles,
      mocks: [proposed, tables(), releases(), save],
    });
    return saved;
  }
  const rowButton = (number: string) =>
    screen.findByRole("button", { name: new RegExp(`^Paper of ${number}`) });
  const saveButton = () => screen.getByRole("button", { name: "Save the table" });
  const takeAll = () =>
    fireEvent.click(screen.getByRole("button", { name: "Take it as proposed" }));

  it("proposes rows, the one that shares data out with its reason", async () => {
    build({});
    expect(await rowButton("FL-0001")).toHaveAccessibleName(/, in$/);
    expect(await rowButton("FL-0003")).toHaveAccessibleName(/, out$/);
    expect(screen.getByText("2 in, 1 out with a reason")).toBeInTheDocument();
    expect(screen.getByText("Out: Shares Field of FL-0001")).toBeInTheDocument();
  });

  it("preselects nothing in a decision, tags the proposal and says why", async () => {
    build({ params: { step: "decisions" } });
    const group = within(
      await screen.findByRole("group", { name: "Decision 1, Overlapping data" }),
    );
    for (const option of group.getAllByRole("radio")) expect(option).not.toBeChecked();
    expect(group.getByText("proposed")).toBeInTheDocument();
    expect(group.getByText("Proposed: only one of these 2 rows can stand.")).toBeInTheDocument();
    expect(screen.getByText("1 open")).toBeInTheDocument();
  });

  it("takes every proposal in one tap", async () => {
    build({ params: { step: "decisions" } });
    await screen.findByText("1 open");
    takeAll();
    expect(await screen.findByText("None open")).toBeInTheDocument();
    fireEvent.click(screen.getByRole("button", { name: "Show 1 taken" }));
    expect(screen.getByText("Taken as proposed.")).toBeInTheDocument();
  });

  it("asks for the reason of a choice of one's own before it counts", async () => {
    build({ params: { step: "decisions" } });
    fireEvent.click(await screen.findByRole("radio", { name: /Keep both/ }));
    expect(screen.getByText("1 open")).toBeInTheDocument();
    fireEvent.change(screen.getByLabelText("Why, in a few words"), {
      target: { value: "Disjoint halves" },
    });
    expect(await screen.findByText("None open")).toBeInTheDocument();
  });

  it("takes a row out by hand with its reason, and puts it back", async () => {
    build({});
    fireEvent.click(await rowButton("FL-0002"));
    fireEvent.click(await screen.findByRole("button", { name: "Take it out" }));
    fireEvent.change(screen.getByLabelText("Why it is taken out"), {
      target: { value: "I trust it less" },
    });
    expect(await screen.findAllByText(/Taken out: I trust it less/)).not.toHaveLength(0);
    fireEvent.click(screen.getByRole("button", { name: "Put it back" }));
    expect(await screen.findByText("2 in, 1 out with a reason")).toBeInTheDocument();
  });

  if (wide) {
    it("is not saved while a decision is open or the name is missing, and says so", async () => {
      const saved = build({});
      await rowButton("FL-0001");
      fireEvent.click(saveButton());
      expect(saveButton()).toHaveAccessibleDescription("One decision is open.");
      takeAll();
      await screen.findByText("None open");
      expect(saveButton()).toHaveAccessibleDescription("Give the table a name.");
      expect(saved).not.toHaveBeenCalled();
    });

    it("sends the recipe and goes to the table's page", async () => {
      const saved = build({
        answer: { __typename: "FittingTable", slug: "abc234def567", version: 1 },
      });
      await rowButton("FL-0001");
      takeAll();
      await screen.findByText("None open");
      fireEvent.change(screen.getByLabelText("Name of the table"), { target: { value: "Wings" } });
      fireEvent.click(saveButton());
      await waitFor(() => expect(router.replace).toHaveBeenCalledWith("/tables/abc234def567"));
      expect(saved).toHaveBeenCalledWith({
        input: expect.objectContaining({
          name: "Wings",
          visibility: "public",
          recipe: expect.objectContaining({
            release: null,
            decisions: [{ id: OVERLAP, option: "keep:FL-0001", byDefault: true, reason: null }],
            out: [],
            forms: [],
          }),
        }),
      });
      expect(localStorage.getItem("fogline.tableRecipe")).not.toContain("Wings");
    });

    it("shows a refusal in its words and keeps the choices", async () => {
      const message = "One decision is still open.";
      build({ answer: { __typename: "Refusal", code: "open", message, field: null } });
      await rowButton("FL-0001");
      takeAll();
      await screen.findByText("None open");
      fireEvent.change(screen.getByLabelText("Name of the table"), { target: { value: "Wings" } });
      fireEvent.click(saveButton());
      expect(await screen.findByText(message)).toBeInTheDocument();
      expect(router.replace).not.toHaveBeenCalled();
      expect(screen.getByLabelText("Name of the table")).toHaveValue("Wings");
    });
  }

  it("brings the record it was opened for into view", async () => {
    const scrolled = jest.fn();
    Element.prototype.scrollIntoView = function (this: Element) {
      scrolled(this.textContent);
    };
    build({ params: { with: "FL-0002" } });
    await rowButton("FL-0002");
    expect(scrolled).toHaveBeenCalledWith(expect.stringContaining("Paper of FL-0002"));
    expect(screen.queryByText(/does not match/)).not.toBeInTheDocument();
  });

  it("says when the filter leaves out the record it was opened for", async () => {
    build({ params: { with: "FL-0099" } });
    expect(await screen.findByText("FL-0099 does not match this filter.")).toBeInTheDocument();
  });

  it("can be tried by anybody; saving asks to sign in", async () => {
    build({ roles: null, params: wide ? {} : { step: "save" } });
    expect(await screen.findByRole("link", { name: "Sign in to save" })).toBeInTheDocument();
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
    visibility: "public",
    notify: false,
    version: 0,
    release: null,
    adaptedFrom: null,
    methods: null,
    decisions: [],
    mixtures: [],
    sets: [],
    versions: [],
    rowsSince: [],
    files: ["csv", "json", "bib"].map((kind) => ({
      __typename: "TableFileMark",
      kind,
      name: { csv: "CSV", json: "JSON", bib: "BibTeX" }[kind],
      path: `/api/tables/abc234def567.${kind}`,
    })),
    createdAt: "2026-11-20T09:00:00Z",
    filter: "All constraints",
    digest: "ab12".repeat(16),
    rowsIn: 2,
    rowsOut: 1,
    lastEvent: { __typename: "EventMark", sequence: 7, digest: "cd", at: "2026-11-20T08:00:00Z" },
    rows: [
      settled("FL-0001"),
      settled("FL-0002", { included: false, reason: "I trust it less", proposed: false }),
      settled("FL-0003", { reason: "Disjoint halves", proposed: false }),
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
          request: {
            query: TableBySlugDocument,
            variables: { slug: "abc234def567", version: null },
          },
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
      ["BibTeX", "bib"],
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
  show(<TablesScreen />, { width: 390, roles: null, mocks: [tables(), releases()] });
  expect(await screen.findByText("No fitting table yet")).toBeInTheDocument();
  expect(screen.getByRole("link", { name: "Build the first one" })).toHaveAttribute(
    "href",
    "/tables/new",
  );
});
