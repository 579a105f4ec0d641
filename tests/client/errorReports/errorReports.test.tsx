import "@testing-library/jest-dom";
import { fireEvent, screen, waitFor, within } from "@testing-library/react";

import { ReporterScreen } from "@/features/errorReports/ReporterScreen";
import { ReportScreen } from "@/features/errorReports/ReportScreen";
import { ReportsScreen } from "@/features/errorReports/ReportsScreen";
import {
  AnswerErrorReportDocument,
  CloseErrorReportDocument,
  ErrorReportDocument,
  ErrorReportsDocument,
  ReplyToReportDocument,
  ReportedErrorDocument,
} from "~graphql/generated/graphql";

import { type MockedResponse, route, router, show, WIDTHS } from "../desk/support";

jest.mock("expo-router", () => ({
  useRouter: () => jest.requireActual("../desk/support").router,
  useLocalSearchParams: () => jest.requireActual("../desk/support").route.params,
  usePathname: () => "/desk/reports",
}));
jest.mock("expo-router/head", () => ({ __esModule: true, default: () => null }));

const PAPER = {
  __typename: "Citation",
  id: "c1",
  shortName: "Osuwande & Vask 2027",
  title: "Neutral gas at the edge of an invented field",
};
const REPORT = {
  __typename: "ErrorReport",
  id: "r1",
  version: 1,
  number: "FL-0042",
  quotable: "FL-0042.1",
  citation: PAPER,
  text: "Table 3 prints 0.31 here.",
  reportedAt: "2026-11-29T12:00:00Z",
  state: "open",
  outcome: null,
  correctedBy: null,
  closedAt: null,
  mailed: true,
  barredBecause: null,
  entries: [] as object[],
};
const ENTRY = {
  __typename: "ErrorReportEntry",
  id: "1",
  by: "Brisa Kelm",
  text: "Which version of the paper?",
  at: "2026-11-30T09:00:00Z",
};

const sent = jest.fn();
/** Answers a query or mutation whatever its variables, and notes them. */
const answer = (query: unknown, name: string, data: unknown, endless = true): MockedResponse =>
  ({
    request: {
      query,
      variables: (variables: object) => {
        sent(name, variables);
        return true;
      },
    },
    result: { data: { [name]: data } },
    ...(endless ? { maxUsageCount: Number.POSITIVE_INFINITY } : {}),
  }) as unknown as MockedResponse;
const type = (label: string, value: string) =>
  fireEvent.change(screen.getByLabelText(label), { target: { value } });
const press = (name: string | RegExp) => fireEvent.click(screen.getByRole("button", { name }));

beforeEach(() => {
  jest.clearAllMocks();
  route.params = {};
});

describe.each(WIDTHS)("the desk's error reports at %i points", (width) => {
  const desk = (reports: object[], roles: "editor" | "reader" = "editor") =>
    show(<ReportsScreen />, {
      width,
      roles: roles === "editor" ? ["editor"] : [],
      mocks: [answer(ErrorReportsDocument, "errorReports", reports)],
    });

  it("stand in two lists, what waits and what is answered, each leading to its report", async () => {
    const closed = {
      ...REPORT,
      id: "r2",
      state: "closed",
      outcome: "noError",
      text: "Other words",
    };
    desk([REPORT, closed]);
    const waiting = await screen.findByRole("list", { name: "Waiting, oldest first" });
    expect(within(waiting).getByRole("link")).toHaveAttribute("href", "/desk/reports/r1");
    const settled = screen.getByRole("list", { name: "Answered" });
    expect(settled).toHaveTextContent("Not an error");
  });

  it("keep the search in the address", async () => {
    desk([REPORT]);
    await screen.findByText("FL-0042.1");
    type("Search by number, paper or words", "  slanted ");
    await waitFor(() => expect(router.setParams).toHaveBeenCalledWith({ q: "slanted" }));
  });

  it("ask for what the address says, and say so when nothing has the words", async () => {
    route.params = { q: "nowhere" };
    desk([]);
    expect(await screen.findByText("No report has these words")).toBeInTheDocument();
    expect(sent).toHaveBeenCalledWith("errorReports", expect.objectContaining({ text: "nowhere" }));
  });

  it("are none for who holds neither role, who is told so", async () => {
    desk([REPORT], "reader");
    expect(await screen.findByText("Editors and maintainers only")).toBeInTheDocument();
    expect(screen.queryByText("FL-0042.1")).not.toBeInTheDocument();
  });
});

describe.each(WIDTHS)("one report at the desk at %i points", (width) => {
  const open = (report: object | null, ...mocks: MockedResponse[]) => {
    route.params = { id: "r1" };
    return show(<ReportScreen />, {
      width,
      roles: ["editor"],
      mocks: [answer(ErrorReportDocument, "errorReport", report), ...mocks],
    });
  };

  it("is answered with the version that was seen", async () => {
    const answered = { ...REPORT, version: 2, state: "answered", entries: [ENTRY] };
    open(REPORT, answer(AnswerErrorReportDocument, "answerErrorReport", answered));
    await screen.findByText("Table 3 prints 0.31 here.");
    type("Answer or question", ENTRY.text);
    press("Send the answer");
    expect(await screen.findByText("The answer is on its way.")).toBeInTheDocument();
    expect(sent).toHaveBeenCalledWith("answerErrorReport", {
      id: "r1",
      version: 1,
      text: ENTRY.text,
    });
    expect(screen.getByText("Brisa Kelm")).toBeInTheDocument();
    expect(screen.getByLabelText("Answer or question")).toHaveValue("");
  });

  it("is closed only with an outcome, after asking once", async () => {
    const closed = { ...REPORT, state: "closed", outcome: "corrected", correctedBy: "FL-0042.2" };
    open(REPORT, answer(CloseErrorReportDocument, "closeErrorReport", closed));
    await screen.findByText("Table 3 prints 0.31 here.");
    expect(screen.getByRole("button", { name: "Close the report" })).toHaveAttribute(
      "aria-disabled",
      "true",
    );
    fireEvent.change(screen.getByLabelText("What became of it"), {
      target: { value: "corrected" },
    });
    type("Corrected by revision", "FL-0042.2");
    type("Answer or question", "You are right.");
    press("Close the report");
    const dialog = await screen.findByRole("dialog");
    expect(dialog).toHaveTextContent("The reporter reads: Corrected by FL-0042.2.");
    expect(sent).not.toHaveBeenCalledWith("closeErrorReport", expect.anything());
    fireEvent.click(within(dialog).getByRole("button", { name: "Close it" }));
    expect(await screen.findByText("The report is closed.")).toBeInTheDocument();
    expect(sent).toHaveBeenCalledWith("closeErrorReport", {
      input: {
        id: "r1",
        version: 1,
        outcome: "corrected",
        correctedBy: "FL-0042.2",
        text: "You are right.",
      },
    });
  });

  it("keeps what was typed when somebody else was first", async () => {
    const message = "Somebody answered this report meanwhile. Reload the page.";
    open(
      REPORT,
      answer(AnswerErrorReportDocument, "answerErrorReport", {
        __typename: "Refusal",
        code: "STALE",
        field: null,
        message,
      }),
    );
    await screen.findByText("Table 3 prints 0.31 here.");
    type("Answer or question", "My own answer.");
    press("Send the answer");
    expect(await screen.findByText(message)).toBeInTheDocument();
    expect(screen.getByLabelText("Answer or question")).toHaveValue("My own answer.");
  });

  it("offers no answer to who brought the record, and says why", async () => {
    open({ ...REPORT, barredBecause: "You brought this record yourself." });
    expect(await screen.findByText("You brought this record yourself.")).toBeInTheDocument();
    expect(screen.queryByLabelText("Answer or question")).not.toBeInTheDocument();
  });

  it("says that it opens after the reading when the server gives nothing", async () => {
    open(null);
    expect(await screen.findByText(/that you are reading blind/)).toBeInTheDocument();
  });
});

describe.each(WIDTHS)("the reporter's page at %i points", (width) => {
  const REPORTED = {
    __typename: "ReportedError",
    number: "FL-0042",
    quotable: "FL-0042.1",
    citation: PAPER,
    text: "Table 3 prints 0.31 here.",
    reportedAt: "2026-11-29T12:00:00Z",
    state: "answered",
    outcome: null,
    correctedBy: null,
    entries: [ENTRY],
    mayReply: true,
  };
  const open = (report: object | null, ...mocks: MockedResponse[]) => {
    route.params = { token: "r1.signature" };
    return show(<ReporterScreen />, {
      width,
      roles: null,
      mocks: [answer(ReportedErrorDocument, "reportedError", report), ...mocks],
    });
  };

  it("shows the answer and takes one reply", async () => {
    const reply = { ...ENTRY, id: "2", by: null, text: "The published one." };
    open(
      REPORTED,
      answer(ReplyToReportDocument, "replyToReport", {
        ...REPORTED,
        state: "open",
        mayReply: false,
        entries: [ENTRY, reply],
      }),
    );
    expect(await screen.findByText("Which version of the paper?")).toBeInTheDocument();
    type("Your reply", "The published one.");
    press("Send the reply");
    expect(await screen.findByText("You have replied; the editors read it.")).toBeInTheDocument();
    expect(sent).toHaveBeenCalledWith("replyToReport", {
      token: "r1.signature",
      text: "The published one.",
    });
    expect(screen.queryByLabelText("Your reply")).not.toBeInTheDocument();
  });

  it("offers no reply before an answer", async () => {
    open({ ...REPORTED, state: "open", entries: [], mayReply: false });
    expect(await screen.findByText(/Once the editors have answered/)).toBeInTheDocument();
    expect(screen.queryByLabelText("Your reply")).not.toBeInTheDocument();
  });

  it("says what became of a closed report", async () => {
    open({ ...REPORTED, state: "closed", outcome: "passedToAuthors", mayReply: false });
    expect(await screen.findByText("Passed to the authors")).toBeInTheDocument();
  });

  it("says that a link that isn't whole opens nothing", async () => {
    open(null);
    expect(await screen.findByText("This link opens no report")).toBeInTheDocument();
  });
});
