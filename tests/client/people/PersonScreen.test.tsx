import "@testing-library/jest-dom";
import { screen, within } from "@testing-library/react";

import { PersonScreen } from "@/features/people/PersonScreen";
import { PersonCreditDocument } from "~graphql/generated/graphql";

import {
  CITATION,
  completeFields,
  type MockedResponse,
  route,
  show,
  WIDTHS,
} from "../desk/support";

jest.mock("expo-router", () => ({
  useRouter: () => jest.requireActual("../desk/support").router,
  useLocalSearchParams: () => jest.requireActual("../desk/support").route.params,
  usePathname: () => "/people",
}));
jest.mock("expo-router/head", () => ({ __esModule: true, default: () => null }));

const row = (number: string) => ({
  __typename: "Constraint",
  number,
  state: "current",
  fields: { __typename: "ConstraintFields", ...completeFields() },
  citation: { __typename: "Citation", id: CITATION.id, shortName: CITATION.shortName },
});
const PERSON = {
  __typename: "PersonCredit",
  id: "p1",
  nameOnPapers: "Ottla Firn",
  orcid: "0000-0002-1825-0097",
  since: "2026-03-02T10:00:00Z",
  former: false,
  enteredTotal: 2,
  entered: [row("FL-0042"), row("FL-0043")],
  readTotal: 1,
  read: [row("FL-0007")],
};

const open = (width: number, person: object | null) => {
  route.params = { id: "p1" };
  return show(<PersonScreen />, {
    width,
    roles: null,
    mocks: [
      {
        request: { query: PersonCreditDocument, variables: { id: "p1" } },
        result: { data: { personCredit: person } },
      } as MockedResponse,
    ],
  });
};

describe.each(WIDTHS)("a person's page at %i points", (width) => {
  it("names the person and lists what was entered and what was read", async () => {
    open(width, PERSON);
    expect(await screen.findByRole("list", { name: "Entered" })).toBeInTheDocument();
    expect(screen.getByRole("heading", { level: 1 })).toHaveTextContent("Ottla Firn");
    expect(screen.getByText("March 2026")).toBeInTheDocument();
    expect(screen.getByRole("link", { name: PERSON.orcid })).toHaveAttribute(
      "href",
      `https://orcid.org/${PERSON.orcid}`,
    );
    const links = (name: string) =>
      within(screen.getByRole("list", { name }))
        .getAllByRole("link")
        .map((link) => link.getAttribute("href"));
    expect(links("Entered")).toEqual(["/constraints/FL-0042", "/constraints/FL-0043"]);
    expect(links("Read again")).toEqual(["/constraints/FL-0007"]);
  });

  it("says how many more there are than are listed, and who has left", async () => {
    open(width, { ...PERSON, former: true, enteredTotal: 612, readTotal: 0, read: [] });
    expect(await screen.findByText("The newest 2 of 612 are listed.")).toBeInTheDocument();
    expect(screen.getByText("Has left the registry")).toBeInTheDocument();
    expect(screen.queryByRole("list", { name: "Read again" })).not.toBeInTheDocument();
  });

  it("says so where there is no such page", async () => {
    open(width, null);
    expect(await screen.findByText("No such page")).toBeInTheDocument();
  });
});
