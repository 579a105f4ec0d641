import "@testing-library/jest-dom";
import { fireEvent, screen, waitFor, within } from "@testing-library/react";

import { SubmitScreen } from "@/features/submission/SubmitScreen";
import {
  CheckFieldsDocument,
  KeepCitationsDocument,
  PreviewCitationsDocument,
  SaveDraftDocument,
  StartDraftDocument,
  SubmissionByIdDocument,
  SubmitDraftDocument,
} from "~graphql/generated/graphql";
import { emptyFields } from "~shared/statement/fields";

import {
  buildSubmission,
  CITATION,
  completeFields,
  type MockedResponse,
  route,
  router,
  settle,
  show,
  WIDTHS,
} from "../desk/support";

jest.mock("expo-router", () => ({
  useRouter: () => jest.requireActual("../desk/support").router,
  useLocalSearchParams: () => jest.requireActual("../desk/support").route.params,
  usePathname: () => "/desk",
}));
jest.mock("expo-router/head", () => ({ __esModule: true, default: () => null }));

const load = (submission = buildSubmission()): MockedResponse => ({
  request: { query: SubmissionByIdDocument, variables: { id: "s1" } },
  result: { data: { submission } },
  maxUsageCount: Number.POSITIVE_INFINITY,
});

/** Takes any save and answers with the next version. */
const saves = (sent: { version: number; fields: { minus: string | null } }[]): MockedResponse => ({
  request: { query: SaveDraftDocument, variables: () => true } as never,
  result: (variables: { input: (typeof sent)[number] }) => {
    sent.push(variables.input);
    const { version, fields } = variables.input;
    return {
      data: {
        saveDraft: buildSubmission({
          version: version + 1,
          fields: { __typename: "ConstraintFields", ...completeFields(), ...fields } as never,
        }),
      },
    } as never;
  },
  maxUsageCount: Number.POSITIVE_INFINITY,
});

const checks = (findings: unknown[] = []): MockedResponse => ({
  request: { query: CheckFieldsDocument, variables: () => true } as never,
  result: { data: { checkFields: findings } } as never,
  maxUsageCount: Number.POSITIVE_INFINITY,
});

beforeEach(() => {
  localStorage.clear();
  jest.clearAllMocks();
  route.params = { id: "s1" };
});

describe.each(WIDTHS)("the submission form at %i points", (width) => {
  const at = (mocks: MockedResponse[]) =>
    show(<SubmitScreen />, { width, roles: ["contributor"], mocks });

  it("saves a typed number with the version it was loaded at, and says when", async () => {
    route.params = { id: "s1", step: "printed" };
    const sent: { version: number; fields: { minus: string | null } }[] = [];
    at([load(), saves(sent)]);
    fireEvent.change(await screen.findByLabelText("− minus"), { target: { value: "0.12" } });
    await waitFor(() => expect(sent).toHaveLength(1), { timeout: 3000 });
    expect(sent[0]).toMatchObject({ version: 3, fields: { minus: "0.12" } });
    await waitFor(() => expect(screen.getByText(/^Saved \d\d:\d\d$/)).toBeInTheDocument());
  });

  it("shows the printed digits in the preview as they are typed", async () => {
    route.params = { id: "s1", step: "printed" };
    at([load(), saves([])]);
    const field = await screen.findByLabelText("Value");
    fireEvent.change(field, { target: { value: "0.50" } });
    const preview = screen.getByRole("region", { name: "As it will read" });
    expect(within(preview).getByText("0.50")).toBeInTheDocument();
  });

  it("says at the field that what was typed is no number", async () => {
    route.params = { id: "s1", step: "printed" };
    at([load(), saves([])]);
    const field = await screen.findByLabelText("Value");
    fireEvent.change(field, { target: { value: "O.25" } });
    await waitFor(() => expect(field).toHaveAttribute("aria-invalid", "true"));
  });

  it("does not complain about what is missing before the last step was looked at", async () => {
    route.params = { id: "s1", step: "printed" };
    at([load(buildSubmission({ fields: emptyFields() as never })), saves([])]);
    await screen.findByLabelText("Quantity");
    expect(screen.queryByText(/missing/i)).not.toBeInTheDocument();
  });

  it("takes up what was typed before a reload and never reached the server", async () => {
    route.params = { id: "s1", step: "printed" };
    localStorage.setItem(
      "fogline.draft.s1",
      JSON.stringify({
        baseVersion: 3,
        content: {
          fields: { ...completeFields(), minus: "0.19" },
          citationId: "c1",
          answers: {},
          commentAnswers: {},
        },
      }),
    );
    const sent: { version: number; fields: { minus: string | null } }[] = [];
    at([load(), saves(sent)]);
    expect(await screen.findByLabelText("− minus")).toHaveValue("0.19");
    await waitFor(() => expect(sent[0]?.fields.minus).toBe("0.19"));
  });

  it("asks for the answer, the licence and nothing else before a clean draft is submitted", async () => {
    route.params = { id: "s1", step: "check" };
    const submitted = jest.fn();
    at([
      load(),
      saves([]),
      checks([
        {
          __typename: "Finding",
          code: "nearDuplicate",
          grade: "mustAnswer",
          fields: ["z"],
          message: "It lies near FL-0017.",
        },
      ]),
      {
        request: { query: SubmitDraftDocument, variables: () => true } as never,
        result: (variables: unknown) => {
          submitted(variables);
          return {
            data: {
              submitDraft: buildSubmission({
                state: "submitted",
                submittedAt: "2026-12-01T12:10:00Z",
              }),
            },
          } as never;
        },
      },
    ]);
    expect(await screen.findByText("It lies near FL-0017.")).toBeInTheDocument();
    const submit = screen.getByRole("button", { name: "Submit for review" });
    expect(submit).toHaveAttribute("aria-disabled", "true");
    expect(screen.getByText(/Not yet: one answer to give, the licence/)).toBeInTheDocument();

    fireEvent.change(screen.getByLabelText("Your answer"), { target: { value: "Other fields." } });
    fireEvent.click(screen.getByRole("checkbox", { name: /CC BY 4.0/ }));
    expect(screen.queryByText(/^Not yet/)).not.toBeInTheDocument();
    await settle(1000);
    fireEvent.click(screen.getByRole("button", { name: "Submit for review" }));
    await waitFor(() => expect(submitted).toHaveBeenCalled());
    expect(submitted.mock.calls[0][0]).toMatchObject({ id: "s1", agreeToLicence: true });
    expect(await screen.findByText("FL-0061 is submitted")).toBeInTheDocument();
  });

  it("shows a return's comment at its field with room for the answer", async () => {
    route.params = { id: "s1", step: "printed" };
    at([
      load(
        buildSubmission({
          ordinal: 2,
          comments: [
            {
              __typename: "FieldComment",
              id: "m1",
              field: "minus",
              text: "The paper prints 0.11.",
              by: "Nakuda, S.",
              at: "2026-12-01T10:00:00Z",
              answer: null,
              messages: [],
            },
          ],
        }),
      ),
      saves([]),
    ]);
    expect(await screen.findByText("The paper prints 0.11.")).toBeInTheDocument();
    expect(screen.getByText("One comment waits for your answer")).toBeInTheDocument();
    fireEvent.change(screen.getByLabelText("Your answer"), { target: { value: "Mended." } });
    await waitFor(() =>
      expect(screen.queryByText("One comment waits for your answer")).not.toBeInTheDocument(),
    );
  });

  it("asks once before it discards", async () => {
    route.params = { id: "s1", step: "paper" };
    at([load()]);
    fireEvent.click(await screen.findByRole("button", { name: "Discard this draft" }));
    expect(await screen.findByText("Discard this draft?")).toBeInTheDocument();
  });
});

describe.each(WIDTHS)("the citation step at %i points", (width) => {
  const parsed = {
    __typename: "CitationPreview",
    index: 0,
    line: 1,
    givenKey: "Osuwande2027",
    problem: null,
    remarks: [],
    matchedBy: null,
    existing: null,
    citation: {
      __typename: "ParsedCitation",
      key: "Osuwande2027",
      authors: CITATION.authors,
      shortName: CITATION.shortName,
      year: 2027,
      title: CITATION.title,
      container: CITATION.container,
      volume: "13",
      pages: "204",
      doi: CITATION.doi,
      arxiv: null,
      bibcode: null,
      entryType: "article",
    },
  };
  const broken = {
    ...parsed,
    index: 1,
    line: 9,
    givenKey: "Vask2028",
    citation: null,
    problem: "The brace opened in the title is never closed.",
  };
  const reads: MockedResponse = {
    request: { query: PreviewCitationsDocument, variables: () => true } as never,
    result: { data: { previewCitations: [parsed, broken] } } as never,
  };

  it("shows each entry as it will be cited, and a broken one with its line and reason", async () => {
    route.params = { id: "new" };
    show(<SubmitScreen />, { width, roles: ["contributor"], mocks: [reads] });
    fireEvent.change(await screen.findByLabelText("BibTeX"), {
      target: { value: "@article{Osuwande2027, ...}" },
    });
    expect(
      await screen.findByText("Osuwande, A.; Vask, I.", {}, { timeout: 3000 }),
    ).toBeInTheDocument();
    expect(screen.getByText("10.5555/aic.13.204")).toBeInTheDocument();
    expect(screen.getByText("Entry 2, Vask2028, line 9")).toBeInTheDocument();
    expect(screen.getByText("The brace opened in the title is never closed.")).toBeInTheDocument();
    expect(screen.getAllByRole("button", { name: /^Use / })).toHaveLength(1);
  });

  it("keeps the chosen entry and opens its draft at the second step", async () => {
    route.params = { id: "new" };
    show(<SubmitScreen />, {
      width,
      roles: ["contributor"],
      mocks: [
        reads,
        {
          request: { query: KeepCitationsDocument, variables: () => true } as never,
          result: {
            data: {
              keepCitations: {
                __typename: "KeptCitations",
                kept: [{ __typename: "KeptCitation", index: 0, created: true, citation: CITATION }],
                problems: [],
              },
            },
          } as never,
        },
        {
          request: { query: StartDraftDocument, variables: { citationId: "c1" } },
          result: { data: { startDraft: buildSubmission() } },
        },
      ],
    });
    fireEvent.change(await screen.findByLabelText("BibTeX"), { target: { value: "@article{x}" } });
    fireEvent.click(
      await screen.findByRole("button", { name: "Use Osuwande & Vask 2027" }, { timeout: 3000 }),
    );
    await waitFor(() =>
      expect(router.replace).toHaveBeenCalledWith("/desk/submit/s1?step=printed"),
    );
  });
});

it("sends nobody in particular to sign in, and back to this draft", async () => {
  show(<SubmitScreen />, { width: 390, roles: null });
  const link = await screen.findByRole("link", { name: "Sign in" });
  expect(link).toHaveAttribute("href", "/account/sign-in?next=%2Fdesk%2Fsubmit%2Fs1");
});
