import "@testing-library/jest-dom";
import { fireEvent, screen, waitFor, within } from "@testing-library/react";

import { ConstraintScreen } from "@/features/constraints/ConstraintScreen";
import { ConstraintsScreen } from "@/features/constraints/ConstraintsScreen";
import {
  ConstraintByNumberDocument,
  ConstraintListDocument,
  ReportErrorDocument,
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
  usePathname: () => "/constraints",
}));
jest.mock("expo-router/head", () => ({ __esModule: true, default: () => null }));

const endless = { maxUsageCount: Number.POSITIVE_INFINITY };

function listed(number: string, fields: Partial<ConstraintFields> = {}) {
  return {
    __typename: "Constraint",
    number,
    quotable: `${number}.1`,
    state: "current",
    supersededBy: null,
    fields: { __typename: "ConstraintFields", ...completeFields(), ...fields },
    citation: CITATION,
  };
}

/** Answers any list that is asked for, and tells what was asked. */
function list(
  rows: object[],
  asked: (variables: Record<string, unknown>) => void = () => undefined,
  registryTotal = 24,
): MockedResponse {
  return {
    request: {
      query: ConstraintListDocument,
      variables: (variables: Record<string, unknown>) => {
        asked(variables);
        return true;
      },
    },
    result: {
      data: {
        constraints: {
          __typename: "ConstraintPage",
          total: rows.length,
          registryTotal,
          lastEvent: null,
          constraints: rows,
        },
      },
    },
    ...endless,
  } as unknown as MockedResponse;
}

const record = (fields: Partial<ConstraintFields> = {}): MockedResponse =>
  ({
    request: { query: ConstraintByNumberDocument, variables: { number: "FL-0042" } },
    result: {
      data: {
        constraint: {
          ...listed("FL-0042", fields),
          ordinal: 1,
          approvedAt: "2026-11-20T09:00:00Z",
          submittedBy: "Vask, Inna",
          readBy: "Okane, Ruth",
          citation: {
            ...CITATION,
            bibtex: "@article{Osuwande2027,\n  title = {Neutral gas}\n}",
          },
          dataEntries: [],
          sharesDataWith: [],
          alternatives: [],
          authorChecks: [],
          errorReports: { __typename: "ErrorReportCount", open: 1, answered: 1 },
          revisions: [
            {
              __typename: "PublicRevision",
              ordinal: 1,
              state: "approved",
              at: "2026-03-02T10:00:00Z",
              enteredBy: { __typename: "Credit", name: "Ottla Firn", personId: "p1" },
              readBy: { __typename: "Credit", name: "a former member", personId: null },
              changes: [],
            },
          ],
        },
      },
    },
    ...endless,
  }) as unknown as MockedResponse;

beforeEach(() => {
  route.params = {};
  router.setParams.mockClear();
});

describe.each(WIDTHS)("the list at %i points", (width) => {
  it("asks for what the address says, and hands the same filter to the files", async () => {
    route.params = { family: "dampingWing", z: "6-8", sort: "year" };
    const asked = jest.fn();
    show(<ConstraintsScreen />, { width, roles: null, mocks: [list([listed("FL-0042")], asked)] });
    expect(await screen.findByText(/Osuwande & Vask 2027/)).toBeInTheDocument();
    expect(asked).toHaveBeenLastCalledWith(
      expect.objectContaining({
        filter: { families: ["dampingWing"], zFrom: 6, zTo: 8 },
        sort: "year",
        offset: 0,
      }),
    );
    expect(screen.getByText("1 of 24 · Family: damping wing; redshift 6 to 8")).toBeInTheDocument();
    const file = new URL(
      screen.getByRole("link", { name: "CSV" }).getAttribute("href") ?? "",
      "http://fogline.test",
    );
    expect(file.pathname).toBe("/api/constraints.csv");
    expect(Object.fromEntries(file.searchParams)).toEqual(route.params);
  });

  it("puts the search into the address when typing rests", async () => {
    show(<ConstraintsScreen />, { width, roles: null, mocks: [list([listed("FL-0042")])] });
    fireEvent.change(await screen.findByLabelText("Search"), { target: { value: "Corrie" } });
    expect(router.setParams).not.toHaveBeenCalled();
    await waitFor(() =>
      expect(router.setParams).toHaveBeenCalledWith(expect.objectContaining({ q: "Corrie" })),
    );
  });

  it("says what to do when nothing matches, and clears the filter in the address", async () => {
    route.params = { family: "dampingWing" };
    show(<ConstraintsScreen />, { width, roles: null, mocks: [list([])] });
    expect(await screen.findByText("No row matches")).toBeInTheDocument();
    const [clear] = screen.getAllByRole("button", { name: "Clear the filter" });
    fireEvent.click(clear!);
    expect(router.setParams).toHaveBeenCalledWith(expect.objectContaining({ family: undefined }));
  });

  it("says that the registry is empty when it is", async () => {
    show(<ConstraintsScreen />, { width, roles: null, mocks: [list([], undefined, 0)] });
    expect(await screen.findByText("No constraint yet")).toBeInTheDocument();
    expect(screen.queryByRole("button", { name: "Clear the filter" })).not.toBeInTheDocument();
  });
});

describe.each(WIDTHS)("a record at %i points", (width) => {
  const open = (...mocks: MockedResponse[]) => {
    route.params = { number: "FL-0042" };
    return show(<ConstraintScreen />, { width, roles: null, mocks: [...mocks, list([])] });
  };

  it("shows what the paper prints beside what is used, with the conversion", async () => {
    open(record({ species: "ionized", value: "0.9", plus: "0.05", minus: "0.02" }));
    const printed = (await screen.findByRole("heading", { name: "As printed" })).parentElement;
    expect(printed).toHaveTextContent("0.9");
    const used = screen.getByRole("heading", { name: "As used" }).parentElement?.parentElement;
    // 1 − 0.9 is 0.1, decimally; plus and minus swap.
    expect(used).toHaveTextContent("0.1");
    expect(used).toHaveTextContent("+0.02");
    expect(used).toHaveTextContent("−0.05");
    expect(within(used!).getAllByRole("listitem").length).toBeGreaterThan(0);
  });

  it("says how to cite it: the paper's entry, its file and the record's number", async () => {
    open(record());
    fireEvent.click(await screen.findByRole("button", { name: "Cite" }));
    expect(screen.getByRole("group", { name: "BibTeX entry" })).toHaveTextContent(
      "@article{Osuwande2027,",
    );
    expect(screen.getByRole("link", { name: "Download .bib" })).toHaveAttribute(
      "href",
      "/api/constraints/FL-0042.bib",
    );
    expect(screen.getByText(/name the registry record as FL-0042\.1/)).toBeInTheDocument();
  });

  it("says that there is none when there is none", async () => {
    open({
      request: { query: ConstraintByNumberDocument, variables: { number: "FL-0042" } },
      result: { data: { constraint: null } },
    });
    expect(await screen.findByText("No record FL-0042")).toBeInTheDocument();
  });
});

describe("reporting an error in a record", () => {
  type Answer = {
    __typename: string;
    code?: string;
    message: string;
    field?: string | null;
    token?: string;
  };

  async function report(answers: (Answer | Error)[]) {
    const sent = jest.fn();
    const mocks = answers.map((answer) => ({
      request: {
        query: ReportErrorDocument,
        variables: (variables: Record<string, unknown>) => {
          sent(variables);
          return true;
        },
      },
      ...(answer instanceof Error
        ? { error: answer }
        : { result: { data: { reportError: answer } } }),
    })) as unknown as MockedResponse[];
    route.params = { number: "FL-0042" };
    show(<ConstraintScreen />, { width: 390, roles: null, mocks: [record(), ...mocks] });
    fireEvent.click(await screen.findByRole("button", { name: "Report an error" }));
    const type = (label: RegExp, value: string) =>
      fireEvent.change(screen.getByLabelText(label), { target: { value } });
    const send = () => fireEvent.click(screen.getByRole("button", { name: "Send the report" }));
    return { sent, type, send };
  }

  it("needs no account, and thanks", async () => {
    const { sent, type, send } = await report([
      {
        __typename: "ErrorReported",
        message: "Thank you. The editors have your report.",
        token: "r1.abc",
      },
    ]);
    type(/What is wrong/, "Table 3 prints 0.31 here.");
    send();
    expect(await screen.findByText(/Thank you/)).toBeInTheDocument();
    expect(screen.getByRole("link", { name: "See the report" })).toHaveAttribute(
      "href",
      "/report/r1.abc",
    );
    expect(sent).toHaveBeenCalledWith({
      number: "FL-0042",
      text: "Table 3 prints 0.31 here.",
      email: null,
    });
    expect(screen.queryByLabelText(/What is wrong/)).not.toBeInTheDocument();
  });

  it("shows a refusal at its field and keeps what was typed", async () => {
    const message = "That is not a mail address.";
    const { type, send } = await report([
      { __typename: "Refusal", code: "EMAIL_INVALID", message, field: "email" },
    ]);
    type(/What is wrong/, "Table 3 prints 0.31 here.");
    type(/Your mail address/, "reader@");
    send();
    expect(await screen.findByText(message)).toBeInTheDocument();
    expect(screen.getByLabelText(/Your mail address/)).toHaveAttribute("aria-invalid", "true");
    expect(screen.getByLabelText(/What is wrong/)).toHaveValue("Table 3 prints 0.31 here.");
  });

  it("says so in words when the server is not reached", async () => {
    const { type, send } = await report([new Error("offline")]);
    type(/What is wrong/, "Table 3 prints 0.31 here.");
    send();
    await waitFor(() => expect(screen.getByRole("alert")).toHaveTextContent(/\w+/));
    expect(screen.getByLabelText(/What is wrong/)).toHaveValue("Table 3 prints 0.31 here.");
  });
});
