import "@testing-library/jest-dom";
import { fireEvent, screen, waitFor } from "@testing-library/react";
import { useState } from "react";

import { DataUsedInput } from "@/components/statement/DataUsedInput";
import { DataEntryScreen } from "@/features/namedData/DataEntryScreen";
import { DataScreen } from "@/features/namedData/DataScreen";
import {
  EditNamedDataDocument,
  NamedDataBySlugDocument,
  NamedDataListDocument,
  NamedDataNamesDocument,
} from "~graphql/generated/graphql";
import type { Role } from "~shared/review/states";

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
  usePathname: () => "/data",
}));
jest.mock("expo-router/head", () => ({ __esModule: true, default: () => null }));

const endless = { maxUsageCount: Number.POSITIVE_INFINITY };

const LISTED = {
  __typename: "NamedData",
  slug: "sedge-field",
  name: "Sedge field",
  kind: "field",
  aliases: ["SF 1"],
  constraintCount: 2,
};

const list = (entries: object[]): MockedResponse =>
  ({
    request: { query: NamedDataListDocument, variables: () => true },
    result: { data: { namedDataList: entries } },
    ...endless,
  }) as unknown as MockedResponse;

const ENTRY = {
  __typename: "NamedData",
  slug: "sedge-field",
  name: "Sedge field",
  kind: "field",
  ra: "108.02",
  dec: "-5.5",
  sexagesimal: "07h12m04.80s −05°30′00.0″",
  extent: "1.2 square degrees",
  note: null,
  version: 3,
  aliases: ["SF 1"],
  subsetOf: [{ __typename: "DataLink", slug: "marsh", name: "Marsh survey", kind: "sample" }],
  contains: [],
  overlaps: [],
  constraints: [
    {
      __typename: "Constraint",
      number: "FL-0042",
      quotable: "FL-0042.1",
      state: "superseded",
      supersededBy: "FL-0043",
      fields: { __typename: "ConstraintFields", ...completeFields() },
      citation: CITATION,
    },
  ],
};

const entry = (found: object | null = ENTRY): MockedResponse =>
  ({
    request: { query: NamedDataBySlugDocument, variables: { slug: "sedge-field" } },
    result: { data: { namedData: found } },
    ...endless,
  }) as unknown as MockedResponse;

beforeEach(() => {
  route.params = {};
  router.setParams.mockClear();
});

describe.each(WIDTHS)("the list of named data at %i points", (width) => {
  it("shows name, kind, other names and how many constraints use it", async () => {
    show(<DataScreen />, { width, roles: null, mocks: [list([LISTED])] });
    expect(await screen.findByText("Sedge field")).toBeInTheDocument();
    expect(screen.getByText("Field; also SF 1")).toBeInTheDocument();
    expect(screen.getByText("2 constraints")).toBeInTheDocument();
    fireEvent.change(screen.getByLabelText("Search by name or alias"), {
      target: { value: "sedge" },
    });
    await waitFor(() => expect(router.setParams).toHaveBeenCalledWith({ q: "sedge" }));
  });

  it("says what to do when nothing has the name", async () => {
    route.params = { q: "nothing" };
    show(<DataScreen />, { width, roles: null, mocks: [list([])] });
    expect(await screen.findByText("No entry has this name")).toBeInTheDocument();
    fireEvent.click(screen.getByRole("button", { name: "Clear the search" }));
    expect(router.setParams).toHaveBeenCalledWith({ q: undefined, kind: undefined });
  });
});

describe.each(WIDTHS)("an entry at %i points", (width) => {
  const open = (roles: Role[] | null, ...mocks: MockedResponse[]) => {
    route.params = { slug: "sedge-field" };
    return show(<DataEntryScreen />, { width, roles, mocks });
  };

  it("says where it is in both forms, what it belongs to, and which constraints use it", async () => {
    open(null, entry());
    expect(await screen.findByText("07h12m04.80s −05°30′00.0″")).toBeInTheDocument();
    expect(screen.getByText("108.02, −5.5")).toBeInTheDocument();
    expect(screen.getByRole("link", { name: "Marsh survey" })).toHaveAttribute(
      "href",
      "/data/marsh",
    );
    expect(screen.getByRole("link", { name: /FL-0042/ })).toHaveAttribute(
      "href",
      "/constraints/FL-0042",
    );
    expect(screen.getByText("Superseded")).toBeInTheDocument();
    expect(screen.queryByRole("button", { name: "Edit" })).not.toBeInTheDocument();
  });

  it("says that there is none when there is none", async () => {
    open(null, entry(null));
    expect(await screen.findByText("No entry at this address")).toBeInTheDocument();
  });

  it("lets an editor say what it is, with the version that was read", async () => {
    const sent = jest.fn();
    const edit = {
      request: {
        query: EditNamedDataDocument,
        variables: (variables: object) => {
          sent(variables);
          return true;
        },
      },
      result: {
        data: {
          editNamedData: {
            __typename: "Refusal",
            code: "stale",
            message: "Somebody changed this entry meanwhile. Reload the page.",
            field: null,
          },
        },
      },
    } as unknown as MockedResponse;
    open(["editor"], entry(), edit);
    fireEvent.click(await screen.findByRole("button", { name: "Edit" }));
    fireEvent.change(screen.getByLabelText(/Declination/), { target: { value: "95" } });
    expect(
      screen.getByText("The declination is a number of degrees from −90 to 90."),
    ).toBeInTheDocument();
    fireEvent.change(screen.getByLabelText(/Declination/), { target: { value: "5.5" } });
    expect(screen.getByText("07h12m04.80s +05°30′00.0″")).toBeInTheDocument();
    fireEvent.click(screen.getByRole("button", { name: "Remove SF 1" }));
    expect(screen.getByText(/Taken out: SF 1/)).toBeInTheDocument();
    fireEvent.click(screen.getByRole("button", { name: "Save" }));
    expect(await screen.findByText(/Somebody changed this entry/)).toBeInTheDocument();
    expect(sent).toHaveBeenCalledWith({
      input: expect.objectContaining({ slug: "sedge-field", version: 3, dec: "5.5", aliases: [] }),
    });
  });
});

describe("naming the data of a constraint", () => {
  function Form() {
    const [fields, setFields] = useState({
      ...completeFields(),
      dataUsed: [] as string[],
      dataKnown: null as boolean | null,
    });
    return (
      <DataUsedInput
        label="Data"
        fields={fields}
        set={(name, value) => setFields((before) => ({ ...before, [name]: value }))}
      />
    );
  }

  it("offers known names and aliases while typing, and takes no name twice in another spelling", async () => {
    const names = {
      request: { query: NamedDataNamesDocument },
      result: { data: { namedDataList: [LISTED] } },
      ...endless,
    } as unknown as MockedResponse;
    show(<Form />, { width: 390, roles: ["contributor"], mocks: [names] });
    const input = await screen.findByLabelText("Data");
    expect(screen.queryByRole("button", { name: /Sedge field/ })).not.toBeInTheDocument();
    fireEvent.change(input, { target: { value: "sf1" } });
    fireEvent.click(await screen.findByRole("button", { name: "SF 1, a name of Sedge field" }));
    expect(screen.getByRole("button", { name: "Remove SF 1" })).toBeInTheDocument();
    fireEvent.change(input, { target: { value: "sf 1" } });
    fireEvent.click(screen.getByRole("button", { name: "Add to Data" }));
    expect(screen.getAllByRole("button", { name: /^Remove/ })).toHaveLength(1);
  });
});
