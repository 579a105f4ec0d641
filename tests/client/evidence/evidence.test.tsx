import "@testing-library/jest-dom";

import { fireEvent, screen, waitFor, within } from "@testing-library/react";

import { AttachEvidence } from "@/components/evidence/AttachEvidence";
import { EvidenceFiles } from "@/components/evidence/EvidenceFiles";
import {
  DescribeEvidenceDocument,
  EvidenceDocument,
  type EvidencePartsFragment,
  RemoveEvidenceDocument,
} from "~graphql/generated/graphql";

import { type MockedResponse, settle, show, WIDTHS } from "../desk/support";

jest.mock("expo-router", () => ({
  useRouter: () => jest.requireActual("../desk/support").router,
  useLocalSearchParams: () => ({}),
  usePathname: () => "/desk/submit/s1",
}));

const NUMBER = "FL-0061.1";

const file = (part: Partial<EvidencePartsFragment> = {}): EvidencePartsFragment => ({
  __typename: "Evidence",
  id: "e1",
  kind: "png",
  bytes: 1_400_000,
  digest: "0a1b2c3d4e5f".padEnd(64, "0"),
  name: "figure 2.png",
  caption: "Figure 2, left panel",
  uploadedAt: "2026-12-01T12:04:00Z",
  address: "/api/evidence/e1",
  ...part,
});

const kept = (...files: EvidencePartsFragment[]): MockedResponse => ({
  request: { query: EvidenceDocument, variables: { number: NUMBER } },
  result: { data: { evidence: files } },
});

/** A server that answers uploads as it is told, and remembers what came. */
class FakeRequest {
  static answer: { status: number; body: string } | "offline" | "never" = "never";
  static sent: { address: string; form: FormData; request: FakeRequest }[] = [];
  upload: { onprogress?: (event: { loaded: number; total: number }) => void } = {};
  onload?: () => void;
  onerror?: () => void;
  onabort?: () => void;
  status = 0;
  responseText = "";
  private address = "";
  open(_method: string, address: string) {
    this.address = address;
  }
  send(form: FormData) {
    FakeRequest.sent.push({ address: this.address, form, request: this });
    const { answer } = FakeRequest;
    if (answer === "never") return;
    setTimeout(() => {
      if (answer === "offline") return this.onerror?.();
      this.status = answer.status;
      this.responseText = answer.body;
      this.onload?.();
    }, 0);
  }
  abort() {
    this.onabort?.();
  }
}

const RealRequest = global.XMLHttpRequest;
beforeEach(() => {
  FakeRequest.sent = [];
  FakeRequest.answer = "never";
  global.XMLHttpRequest = FakeRequest as never;
});
afterEach(() => {
  global.XMLHttpRequest = RealRequest;
});

const PDF = new File(["%PDF-1.4"], "paper.pdf", { type: "application/pdf" });
const choose = (...files: File[]) =>
  fireEvent.change(screen.getByLabelText(/^Attach/), { target: { files } });

describe.each(WIDTHS)("the files of a draft at %i points", (width) => {
  const at = (...mocks: MockedResponse[]) =>
    show(<AttachEvidence revisionId="s1" number={NUMBER} />, {
      width,
      roles: ["contributor"],
      mocks,
    });

  it("sends what is chosen, says how far it is, and then shows it as kept", async () => {
    // What the server keeps at the moment in which it answers, however often it is asked.
    let stored: EvidencePartsFragment[] = [];
    at({
      ...kept(),
      result: () => ({ data: { evidence: stored } }),
      maxUsageCount: Number.POSITIVE_INFINITY,
    } as MockedResponse);
    await screen.findByLabelText(/^Attach a file/);
    choose(PDF);
    await screen.findByText("0 % of 8 bytes");
    await waitFor(() => expect(FakeRequest.sent).toHaveLength(1));
    const { address, form, request } = FakeRequest.sent[0] as (typeof FakeRequest.sent)[0];
    expect(address).toBe("/api/evidence");
    expect(form.get("revision")).toBe("s1");
    expect((form.get("file") as File).name).toBe("paper.pdf");
    request.upload.onprogress?.({ loaded: 4, total: 8 });
    await screen.findByText("50 % of 8 bytes");
    stored = [file({ name: "paper.pdf", kind: "pdf" })];
    request.status = 201;
    request.onload?.();
    expect(await screen.findByText("PDF, 1.4 MB")).toBeInTheDocument();
    expect(screen.queryByText(/% of/)).toBeNull();
  });

  it("says in words why a file was not taken, and sends it again when asked", async () => {
    at(kept(), kept(file({ name: "paper.pdf" })));
    await screen.findByLabelText(/^Attach a file/);
    FakeRequest.answer = { status: 400, body: '{"message":"The file is an archive."}' };
    choose(PDF);
    const alert = await screen.findByRole("alert");
    expect(alert).toHaveTextContent("paper.pdf is not attached");
    expect(alert).toHaveTextContent("The file is an archive.");
    FakeRequest.answer = { status: 201, body: "{}" };
    fireEvent.click(within(alert).getByRole("button", { name: "Send it again" }));
    expect(await screen.findByText("PNG picture, 1.4 MB")).toBeInTheDocument();
    await waitFor(() => expect(screen.queryByRole("alert")).toBeNull());
  });

  it.each([
    ["offline" as const, "No connection to the server"],
    [{ status: 502, body: "<html>" }, "The server did not take this file"],
  ])("keeps a file in hand when the server is out of reach: %j", async (answer, words) => {
    at(kept());
    await screen.findByLabelText(/^Attach a file/);
    FakeRequest.answer = answer;
    choose(PDF);
    const alert = await screen.findByRole("alert");
    expect(alert).toHaveTextContent(words);
    fireEvent.click(within(alert).getByRole("button", { name: "Leave it out" }));
    await waitFor(() => expect(screen.queryByRole("alert")).toBeNull());
  });

  it("does not send what is larger than the server takes", async () => {
    at(kept());
    await screen.findByLabelText(/^Attach a file/);
    const large = new File(["x"], "large.pdf");
    Object.defineProperty(large, "size", { value: 12_300_000 });
    choose(large);
    expect(await screen.findByRole("alert")).toHaveTextContent(
      "The file has 12.3 MB; 10 MB is the most.",
    );
    expect(FakeRequest.sent).toEqual([]);
  });

  it("stops a file on its way", async () => {
    at(kept());
    await screen.findByLabelText(/^Attach a file/);
    choose(PDF);
    fireEvent.click(await screen.findByRole("button", { name: "Stop paper.pdf" }));
    await waitFor(() => expect(screen.queryByText(/% of/)).toBeNull());
  });

  it("asks once before a file is removed", async () => {
    const removed = jest.fn(() => ({
      data: { removeEvidence: { __typename: "Done", message: "Gone." } },
    }));
    at(kept(file()), kept(), {
      request: { query: RemoveEvidenceDocument, variables: { id: "e1" } },
      result: removed,
    } as MockedResponse);
    fireEvent.click(await screen.findByRole("button", { name: "Remove figure 2.png" }));
    expect(removed).not.toHaveBeenCalled();
    const dialog = await screen.findByRole("dialog");
    fireEvent.click(within(dialog).getByRole("button", { name: "Remove" }));
    await waitFor(() => expect(screen.queryByText("figure 2.png")).toBeNull());
    expect(removed).toHaveBeenCalledTimes(1);
  });

  it("keeps what is typed about a file when the field is left, and says when it could not", async () => {
    const described = jest.fn(() => ({
      data: {
        describeEvidence: {
          __typename: "Refusal",
          code: "notDraft",
          message: "This is submitted.",
        },
      },
    }));
    at(kept(file()), {
      request: { query: DescribeEvidenceDocument, variables: { id: "e1", caption: "Table 3" } },
      result: described,
    } as MockedResponse);
    const entry = await screen.findByLabelText("What it shows");
    expect(entry).toHaveValue("Figure 2, left panel");
    fireEvent.change(entry, { target: { value: "Table 3" } });
    fireEvent.blur(entry);
    expect(await screen.findByRole("alert")).toHaveTextContent("This is submitted.");
    expect(described).toHaveBeenCalledTimes(1);
  });

  it("offers no more room once ten files are kept", async () => {
    const digests = Array.from({ length: 10 }, (_, n) => String(n).repeat(64));
    at(kept(...digests.map((digest, n) => file({ id: `e${n}`, digest, kind: "csv" }))));
    expect(await screen.findByText(/10 files are the most/)).toBeInTheDocument();
    expect(screen.queryByLabelText(/^Attach/)).toBeNull();
  });
});

describe("the files of a revision", () => {
  const at = (...mocks: MockedResponse[]) =>
    show(<EvidenceFiles number={NUMBER} />, { width: 390, roles: null, mocks });

  it("draws a picture from its address and offers to save it, for who may see it", async () => {
    at(kept(file()));
    const picture = await screen.findByRole("img", { name: "Figure 2, left panel" });
    expect(picture).toHaveAttribute("src", "/api/evidence/e1");
    expect(screen.getByRole("link", { name: "Save figure 2.png" })).toHaveAttribute(
      "href",
      "/api/evidence/e1",
    );
    fireEvent.error(picture);
    expect(await screen.findByText(/can’t be shown here/)).toBeInTheDocument();
  });

  it("draws no table and no PDF", async () => {
    at(kept(file({ kind: "csv" }), file({ id: "e2", kind: "pdf", digest: "b".repeat(64) })));
    expect(await screen.findAllByRole("link", { name: /^Save/ })).toHaveLength(2);
    expect(screen.queryByRole("img", { name: "Figure 2, left panel" })).toBeNull();
  });

  it("says to everybody else what is kept, with its digest, and why it is not passed on", async () => {
    at(kept(file({ id: null, name: null, caption: null, uploadedAt: null, address: null })));
    expect(await screen.findByText("PNG picture, 1.4 MB")).toBeInTheDocument();
    expect(screen.getByText(/under copyright/)).toBeInTheDocument();
    expect(screen.getByText("0a1b2c3d4e5f…")).toBeInTheDocument();
    expect(screen.queryByRole("link")).toBeNull();
  });

  it("is no heading over nothing", async () => {
    at(kept());
    await settle(50);
    expect(screen.queryByText("Evidence")).toBeNull();
  });
});
