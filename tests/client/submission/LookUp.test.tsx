import "@testing-library/jest-dom";
import { fireEvent, screen } from "@testing-library/react";

import { LookUp } from "@/features/submission/LookUp";
import { LooksUpCitationsDocument, LookUpCitationDocument } from "~graphql/generated/graphql";

import { type MockedResponse, settle, show, WIDTHS } from "../desk/support";

jest.mock("expo-router", () => ({
  useRouter: () => jest.requireActual("../desk/support").router,
  useLocalSearchParams: () => ({}),
  usePathname: () => "/desk/submit/new",
}));

const BIBTEX = "@article{x, title = {A look through the mist}}";
const found = jest.fn();

function open(width: number, looksUp: boolean, ...answers: (object | Error)[]) {
  const mocks = [
    {
      request: { query: LooksUpCitationsDocument },
      result: { data: { session: { __typename: "Session", looksUpCitations: looksUp } } },
    },
    ...answers.map((answer) => ({
      request: { query: LookUpCitationDocument, variables: () => true },
      ...(answer instanceof Error
        ? { error: answer }
        : { result: { data: { lookUpCitation: answer } } }),
    })),
  ] as unknown as MockedResponse[];
  return show(<LookUp onFound={found} />, { width, roles: ["contributor"], mocks });
}
async function lookUp(identifier: string) {
  fireEvent.change(await screen.findByLabelText("DOI or arXiv number"), {
    target: { value: identifier },
  });
  fireEvent.click(screen.getByRole("button", { name: "Look it up" }));
}

beforeEach(() => found.mockClear());

describe.each(WIDTHS)("looking a paper up at %i points", (width) => {
  it("hands its BibTeX on to the preview", async () => {
    open(width, true, { __typename: "LookedUpCitation", bibtex: BIBTEX, known: false });
    await lookUp("10.5555/x");
    expect(await screen.findByText("Found. Check it against the paper.")).toBeInTheDocument();
    expect(found).toHaveBeenCalledWith(BIBTEX);
  });

  it("says when the registry has the paper", async () => {
    open(width, true, { __typename: "LookedUpCitation", bibtex: BIBTEX, known: true });
    await lookUp("10.5555/x");
    expect(await screen.findByText("The registry has this paper.")).toBeInTheDocument();
  });

  it("shows a refusal of the number at its field, and keeps what was typed", async () => {
    const message = "That is neither a DOI nor an arXiv number.";
    open(width, true, { __typename: "Refusal", code: "IDENTIFIER", message, field: "identifier" });
    await lookUp("nonsense");
    expect(await screen.findByText(message)).toBeInTheDocument();
    const field = screen.getByLabelText("DOI or arXiv number");
    expect(field).toHaveAttribute("aria-invalid", "true");
    expect(field).toHaveValue("nonsense");
    expect(found).not.toHaveBeenCalled();
  });

  it("leads to pasting when the service fails, and can be tried again", async () => {
    const message =
      "The look-up service took too long to answer. Try again later, or paste the BibTeX.";
    open(
      width,
      true,
      { __typename: "Refusal", code: "LOOK_UP_timeOut", message, field: null },
      { __typename: "LookedUpCitation", bibtex: BIBTEX, known: false },
    );
    await lookUp("10.5555/x");
    expect(await screen.findByRole("alert")).toHaveTextContent(message);
    fireEvent.click(screen.getByRole("button", { name: "Look it up" }));
    expect(await screen.findByText("Found. Check it against the paper.")).toBeInTheDocument();
  });

  it("is not offered where the registry has no service", async () => {
    open(width, false);
    await settle(50);
    expect(screen.queryByLabelText("DOI or arXiv number")).not.toBeInTheDocument();
  });
});
