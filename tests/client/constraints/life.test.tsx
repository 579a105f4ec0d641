import "@testing-library/jest-dom";
import { fireEvent, render, screen, waitFor, within } from "@testing-library/react";

import { HappenedPart } from "@/features/constraints/HappenedPart";
import { chainEnd, relationWord } from "@/features/constraints/life";
import { LifeNotices } from "@/features/constraints/LifeNotices";
import { LifeSheet } from "@/features/constraints/LifeSheet";
import { RelationsPart } from "@/features/constraints/RelationsPart";
import { ThemeProvider } from "@/theme/ThemeProvider";
import {
  ConstraintListDocument,
  LiftNoticeDocument,
  SupersedeRecordDocument,
  type LifePartsFragment,
} from "~graphql/generated/graphql";

import { CITATION, completeFields, type MockedResponse, show, WIDTHS } from "../desk/support";

jest.mock("expo-router", () => ({
  useRouter: () => jest.requireActual("../desk/support").router,
  useLocalSearchParams: () => jest.requireActual("../desk/support").route.params,
  usePathname: () => "/constraints",
}));
jest.mock("expo-router/head", () => ({ __esModule: true, default: () => null }));

type NoticeParts = LifePartsFragment["notices"][number];

const notice = (parts: Partial<NoticeParts> = {}): NoticeParts => ({
  __typename: "RecordNotice",
  id: "7",
  kind: "superseded",
  reason: "A later version was printed.",
  by: "Holt, Maren",
  at: "2026-11-20T09:00:00Z",
  replacedBy: "FL-0009",
  endedAt: null,
  endedBy: null,
  endedReason: null,
  ...parts,
});

const life = (parts: Partial<LifePartsFragment> = {}): LifePartsFragment => ({
  __typename: "RecordLife",
  constraint: {
    __typename: "Constraint",
    number: "FL-0003",
    state: "superseded",
    supersededBy: "FL-0009",
  },
  notices: [notice()],
  relations: [
    {
      __typename: "RecordRelationType",
      relation: "supersedes",
      inverse: true,
      number: "FL-0009",
      shortName: "Osuwande & Vask 2027",
      state: "current",
    },
  ],
  conditionChains: [
    { __typename: "ConditionChainType", through: ["FL-0003", "FL-0002"], on: "cmb" },
  ],
  happened: [
    {
      __typename: "RecordEventType",
      sequence: 31,
      kind: "record.superseded",
      at: "2026-11-20T09:00:00Z",
      by: "Holt, Maren",
      subject: "FL-0003",
      replacedBy: "FL-0009",
    },
  ],
  ...parts,
});

const themed = (page: React.ReactNode) => render(<ThemeProvider>{page}</ThemeProvider>);

describe("the life of a record on its page", () => {
  it("says who recorded what, why, and leads to what replaced it", () => {
    themed(
      <LifeNotices notices={[notice(), notice({ id: "8", endedAt: "2026-11-21T09:00:00Z" })]} />,
    );
    expect(screen.getAllByText("This record is superseded by FL-0009")).toHaveLength(1);
    expect(screen.getByText("A later version was printed.")).toBeInTheDocument();
    expect(screen.getByText(/Recorded by Holt, Maren, 20 November 2026/)).toBeInTheDocument();
    expect(screen.getByRole("link", { name: "Go to FL-0009" })).toHaveAttribute(
      "href",
      "/constraints/FL-0009",
    );
    expect(screen.queryByRole("button", { name: "Take this back" })).not.toBeInTheDocument();
  });

  it("shows relations from both ends, and chains to their kind of data", () => {
    themed(
      <RelationsPart
        record={{ number: "FL-0003", sharesDataWith: [], alternatives: [] }}
        life={life()}
      />,
    );
    expect(screen.getByText("Is superseded by")).toBeInTheDocument();
    expect(screen.getByText("CMB through FL-0002")).toBeInTheDocument();
    expect(chainEnd({ through: ["FL-0003"], on: "lymanAlpha" })).toBe("Lyα data");
    const [relation] = life().relations;
    expect(relation && relationWord({ ...relation, relation: "conditionedOn" })).toBe("Goes into");
  });

  it("lists what happened, and what was taken back", () => {
    const ended = notice({
      kind: "withdrawn",
      replacedBy: null,
      endedAt: "2026-11-21T09:00:00Z",
      endedBy: "Holt, Maren",
      endedReason: "It was another record.",
    });
    themed(<HappenedPart life={life({ notices: [ended] })} />);
    expect(screen.getByText("Superseded by FL-0009")).toBeInTheDocument();
    expect(screen.getByText(/It was another record\./)).toBeInTheDocument();
    expect(screen.queryByRole("button")).not.toBeInTheDocument();
  });
});

describe.each(WIDTHS)("a maintainer's steps at %i points", (width) => {
  const found: MockedResponse = {
    request: { query: ConstraintListDocument, variables: () => true },
    result: {
      data: {
        constraints: {
          __typename: "ConstraintPage",
          total: 1,
          registryTotal: 9,
          lastEvent: null,
          constraints: [
            {
              __typename: "Constraint",
              number: "FL-0009",
              quotable: "FL-0009.1",
              state: "current",
              supersededBy: null,
              fields: { __typename: "ConstraintFields", ...completeFields() },
              citation: CITATION,
            },
          ],
        },
      },
    },
    maxUsageCount: Number.POSITIVE_INFINITY,
  } as unknown as MockedResponse;

  it("asks for the record in its place and a reason, then sends both", async () => {
    const sent = jest.fn();
    const done = jest.fn();
    const supersede = {
      request: {
        query: SupersedeRecordDocument,
        variables: (variables: object) => {
          sent(variables);
          return true;
        },
      },
      result: { data: { supersedeRecord: life() } },
    } as unknown as MockedResponse;
    show(
      <LifeSheet
        task={{ kind: "record" }}
        number="FL-0003"
        state="current"
        onClose={() => undefined}
        onDone={done}
      />,
      { width, roles: ["maintainer"], mocks: [found, supersede] },
    );
    fireEvent.click(await screen.findByRole("radio", { name: "Superseded" }));
    fireEvent.change(screen.getByLabelText("Record in its place"), { target: { value: "vask" } });
    fireEvent.click(await screen.findByRole("button", { name: /Take FL-0009/ }));
    expect(screen.getByText(/Write the reason first/)).toBeInTheDocument();
    fireEvent.change(screen.getByLabelText("Reason"), {
      target: { value: "A later version was printed." },
    });
    fireEvent.click(screen.getByRole("button", { name: "Mark as superseded" }));
    await waitFor(() => expect(done).toHaveBeenCalled());
    expect(sent).toHaveBeenCalledWith({
      number: "FL-0003",
      replacedBy: "FL-0009",
      reason: "A later version was printed.",
    });
  });

  it("keeps the reason when taking back is refused", async () => {
    const message = "It was taken back already. Reload the page.";
    const lift = {
      request: { query: LiftNoticeDocument, variables: () => true },
      result: {
        data: { liftNotice: { __typename: "Refusal", code: "stale", message, field: null } },
      },
    } as unknown as MockedResponse;
    show(
      <LifeSheet
        task={{ kind: "takeBack", notice: notice() }}
        number="FL-0003"
        state="superseded"
        onClose={() => undefined}
        onDone={() => undefined}
      />,
      { width, roles: ["maintainer"], mocks: [lift] },
    );
    const reason = await screen.findByLabelText("Reason");
    fireEvent.change(reason, { target: { value: "Recorded at the wrong record." } });
    const sheet = within(screen.getByRole("dialog"));
    fireEvent.click(sheet.getByRole("button", { name: "Take it back" }));
    expect(await screen.findByText(message)).toBeInTheDocument();
    expect(reason).toHaveValue("Recorded at the wrong record.");
  });
});
