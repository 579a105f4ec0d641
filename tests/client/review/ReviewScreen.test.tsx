import "@testing-library/jest-dom";
import { fireEvent, screen, waitFor, within } from "@testing-library/react";

import { ReviewScreen } from "@/features/review/ReviewScreen";
import {
  ApproveSubmissionDocument,
  ClaimSubmissionDocument,
  CorrectReadingDocument,
  ReturnSubmissionDocument,
  ReviewByIdDocument,
  StoreReadingDocument,
} from "~graphql/generated/graphql";
import { READING_FIELDS } from "~shared/review/reading";

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
  usePathname: () => "/desk",
}));
jest.mock("expo-router/head", () => ({ __esModule: true, default: () => null }));

const item = (part: object = {}) => ({
  __typename: "QueueItem",
  id: "r1",
  number: "FL-0061",
  ordinal: 1,
  state: "inReview",
  version: 5,
  submittedAt: "2026-11-28T09:00:00Z",
  claimedByMe: true,
  claimedUntil: "2026-12-04T09:00:00Z",
  barredBecause: null,
  leftToOthers: false,
  notRenewable: null,
  place: "Table 2, row 3",
  page: "11",
  versionRead: "published",
  citation: CITATION,
  ...part,
});

const buildReview = (part: object = {}) => ({
  __typename: "Review",
  item: item(),
  contributor: null,
  fieldsToRead: [...READING_FIELDS],
  readingStoredAt: null,
  submission: null,
  comparison: [],
  findings: [],
  answers: [],
  comments: [],
  changes: [],
  checklist: [],
  blockers: ["Your second reading is not stored yet."],
  ...part,
});

const row = (field: string, reading: string, submitted: string) => ({
  __typename: "ReviewField",
  field,
  reading,
  submitted,
  agrees: reading === submitted,
  earlier: [],
});

/** The reading is stored; minus differs, and one answer waits. */
const compared = (part: object = {}) =>
  buildReview({
    contributor: "Vask, Inna",
    fieldsToRead: [],
    readingStoredAt: "2026-12-01T10:42:00Z",
    submission: { __typename: "ConstraintFields", ...completeFields(), minus: "0.17" },
    comparison: [row("value", "0.40", "0.40"), row("minus", "0.11", "0.17")],
    blockers: ["Your reading differs at: Minus. Correct it, or return the submission."],
    ...part,
  });

const load = (review: object | null): MockedResponse => ({
  request: { query: ReviewByIdDocument, variables: { id: "r1" } },
  result: { data: { review } } as never,
  maxUsageCount: Number.POSITIVE_INFINITY,
});

/** Answers any call of a mutation, and keeps what it was sent. */
function answer(query: unknown, name: string, data: object, sent: Record<string, unknown>[] = []) {
  return {
    request: { query, variables: () => true },
    result: (variables: Record<string, unknown>) => {
      sent.push(variables);
      return { data: { [name]: data } };
    },
    maxUsageCount: Number.POSITIVE_INFINITY,
  } as unknown as MockedResponse;
}

beforeEach(() => {
  localStorage.clear();
  jest.clearAllMocks();
  route.params = { id: "r1" };
});

describe.each(WIDTHS)("the review at %i points", (width) => {
  const at = (...mocks: MockedResponse[]) =>
    show(<ReviewScreen />, { width, roles: ["editor"], mocks });

  it("claims, and then opens an empty form", async () => {
    at(
      load(
        buildReview({
          item: item({ state: "submitted", claimedByMe: false, claimedUntil: null }),
          blockers: ["Claim it first."],
        }),
      ),
      answer(ClaimSubmissionDocument, "claimSubmission", buildReview()),
    );
    fireEvent.click(await screen.findByRole("button", { name: "Claim for a second reading" }));
    expect(await screen.findByLabelText("Quantity")).toHaveValue("");
    expect(screen.getByText(/stay hidden until your\s+reading is stored/)).toBeInTheDocument();
  });

  it("says who holds a submission that can't be claimed, and offers nothing to press", async () => {
    at(
      load(
        buildReview({
          item: item({ claimedByMe: false, claimedUntil: "2026-12-03T09:00:00Z" }),
        }),
      ),
    );
    expect(await screen.findByText("Another editor is reading it")).toBeInTheDocument();
    expect(screen.queryByRole("button", { name: /Claim/ })).not.toBeInTheDocument();
  });

  it("stores nothing while a field that is asked for is open", async () => {
    const sent: Record<string, unknown>[] = [];
    at(load(buildReview()), answer(StoreReadingDocument, "storeReading", compared(), sent));
    const store = await screen.findByRole("button", { name: "Store my reading" });
    expect(store).toHaveAttribute("aria-disabled", "true");
    fireEvent.click(store);
    expect(sent).toHaveLength(0);
  });

  it("takes up a reading begun in this browser, and shows the comparison once it is stored", async () => {
    const sent: Record<string, unknown>[] = [];
    localStorage.setItem("fogline.reading.r1", JSON.stringify(completeFields()));
    at(load(buildReview()), answer(StoreReadingDocument, "storeReading", compared(), sent));
    expect(await screen.findByLabelText("− minus")).toHaveValue("0.11");
    fireEvent.click(screen.getByRole("button", { name: "Store my reading" }));

    const table = await screen.findByRole("table", { name: "Your reading beside the submission" });
    expect(within(table).getByText("differs")).toBeInTheDocument();
    expect(sent[0]).toMatchObject({ id: "r1", reading: { minus: "0.11", value: "0.40" } });
    // Only what is read leaves the browser: the printed text was never asked for.
    expect(sent[0]).toMatchObject({ reading: { printedText: null } });
    expect(localStorage.getItem("fogline.reading.r1")).toBeNull();
  });

  it("asks only for the fields of a re-reading", async () => {
    at(load(buildReview({ fieldsToRead: ["minus"] })));
    expect(await screen.findByLabelText("Minus")).toHaveValue("");
    expect(screen.queryByLabelText("Value")).not.toBeInTheDocument();
    expect(screen.queryByLabelText("Quantity")).not.toBeInTheDocument();
  });

  it("keeps approval closed, with the reason, while a field differs", async () => {
    at(load(compared()));
    const approve = await screen.findByRole("button", { name: "Approve" });
    expect(approve).toHaveAttribute("aria-disabled", "true");
    expect(screen.getByText(/Not yet: Your reading differs at: Minus/)).toBeInTheDocument();
  });

  it("corrects a reading with a reason, starting from an empty field", async () => {
    const sent: Record<string, unknown>[] = [];
    at(
      load(compared()),
      answer(
        CorrectReadingDocument,
        "correctReading",
        compared({ comparison: [row("minus", "0.17", "0.17")], blockers: [] }),
        sent,
      ),
    );
    fireEvent.click(await screen.findByRole("button", { name: "Read this field again: Minus" }));
    const field = screen.getByLabelText("Minus, read again");
    expect(field).toHaveValue("");
    fireEvent.change(field, { target: { value: "0.17" } });
    fireEvent.change(screen.getByLabelText("Why you read it differently now"), {
      target: { value: "I had taken the row above." },
    });
    fireEvent.click(screen.getByRole("button", { name: "Store the correction" }));
    await waitFor(() => expect(sent).toHaveLength(1));
    expect(sent[0]).toMatchObject({
      field: "minus",
      reading: { minus: "0.17" },
      why: "I had taken the row above.",
    });
    await waitFor(() =>
      expect(screen.getByRole("button", { name: "Approve" })).not.toHaveAttribute("aria-disabled"),
    );
  });

  it("returns with the comment begun at the differing field, after asking once", async () => {
    const sent: Record<string, unknown>[] = [];
    at(
      load(compared()),
      answer(
        ReturnSubmissionDocument,
        "returnSubmission",
        { __typename: "Done", message: "FL-0061.1 went back to its contributor." },
        sent,
      ),
    );
    fireEvent.click(await screen.findByRole("button", { name: "Return with a comment at Minus" }));
    expect(screen.getByLabelText("Comment")).toHaveValue("I read 0.11 where 0.17 is given.");
    fireEvent.click(screen.getByRole("button", { name: "Return to contributor" }));
    expect(sent).toHaveLength(0);
    fireEvent.click(await screen.findByRole("button", { name: "Return it" }));
    expect(await screen.findByText("FL-0061.1 went back to its contributor.")).toBeInTheDocument();
    expect(sent[0]).toMatchObject({
      id: "r1",
      version: 5,
      comments: [{ field: "minus", text: "I read 0.11 where 0.17 is given." }],
    });
  });

  it("shows the server's refusal when another editor decided first, with a way on", async () => {
    at(
      load(compared({ blockers: [], comparison: [row("minus", "0.11", "0.11")] })),
      answer(ApproveSubmissionDocument, "approveSubmission", {
        __typename: "Refusal",
        code: "notClaimed",
        message: "You don't hold this submission any more.",
        field: null,
      }),
    );
    fireEvent.click(await screen.findByRole("button", { name: "Approve" }));
    expect(await screen.findByText("You don't hold this submission any more.")).toBeInTheDocument();
    expect(screen.getByRole("button", { name: "See how it stands now" })).toBeInTheDocument();
  });
});
