import "@testing-library/jest-dom";
import { TextDecoder } from "node:util";

import { fireEvent, screen, waitFor, within } from "@testing-library/react";

import { ImportScreen } from "@/features/importFile/ImportScreen";
import { PreviewImportDocument, RunImportDocument } from "~graphql/generated/graphql";

import { completeFields, type MockedResponse, settle, show, WIDTHS } from "../desk/support";

jest.mock("expo-router", () => ({
  useRouter: () => jest.requireActual("../desk/support").router,
  useLocalSearchParams: () => ({}),
  usePathname: () => "/desk/import",
}));
jest.mock("expo-router/head", () => ({ __esModule: true, default: () => null }));

interface Sent {
  input: {
    columns?: { column: string; field: string | null }[];
    words?: { field: string; word: string; value: string | null }[];
  };
}

const preview = {
  __typename: "ImportPreview",
  good: 1,
  refused: 1,
  alreadyHere: 0,
  remembered: false,
  columns: [
    {
      __typename: "ImportColumn",
      column: "key",
      proposedField: "citationKey",
      sample: ["Osuwande2027"],
    },
    { __typename: "ImportColumn", column: "val", proposedField: "value", sample: ["0.40"] },
    { __typename: "ImportColumn", column: "mood", proposedField: null, sample: ["calm"] },
  ],
  words: [
    {
      __typename: "ImportWord",
      field: "weighting",
      word: "vol",
      proposed: "volume",
      choices: ["volume", "mass", "unknown"],
    },
  ],
  rows: [
    {
      __typename: "ImportRow",
      key: "Osuwande2027",
      line: 2,
      outcome: "good",
      grade: "none",
      citationShortName: "Osuwande & Vask 2027",
      openFields: ["place"],
      fields: { __typename: "ConstraintFields", ...completeFields() },
      refusals: [],
    },
    {
      __typename: "ImportRow",
      key: "Nobody2028",
      line: 3,
      outcome: "refused",
      grade: "error",
      citationShortName: null,
      openFields: [],
      fields: { __typename: "ConstraintFields", ...completeFields() },
      refusals: [
        {
          __typename: "ImportRefusal",
          file: "list.csv",
          line: 3,
          column: "key",
          reason: "The key Nobody2028 is not in list.bib.",
        },
      ],
    },
  ],
};

function mocks(sent: Sent[] = [], ran: Sent[] = []): MockedResponse[] {
  return [
    {
      request: { query: PreviewImportDocument, variables: () => true },
      result: (variables: Sent) => {
        sent.push(variables);
        return { data: { previewImport: preview } };
      },
      maxUsageCount: Number.POSITIVE_INFINITY,
    },
    {
      request: { query: RunImportDocument, variables: () => true },
      result: (variables: Sent) => {
        ran.push(variables);
        return {
          data: {
            runImport: {
              __typename: "ImportDone",
              created: 1,
              alreadyHere: 0,
              refused: 1,
              submissionIds: ["s1"],
            },
          },
        };
      },
    },
  ] as unknown as MockedResponse[];
}

let uploads: { kind: string; name: string }[];
beforeEach(() => {
  uploads = [];
  // jsdom has none of its own.
  global.TextDecoder = TextDecoder as never;
  global.fetch = jest.fn((_url: string, init: { body: FormData }) => {
    const file = init.body.get("file") as File;
    uploads.push({ kind: String(init.body.get("kind")), name: file.name });
    return Promise.resolve({
      ok: true,
      json: () => Promise.resolve({ id: `u${uploads.length}`, name: file.name }),
    });
  }) as never;
});

/** jsdom's files can't give their bytes, which FilePick reads. */
function textFile(name: string, text: string): File {
  const file = new File([text], name, { type: "text/plain" });
  Object.defineProperty(file, "arrayBuffer", {
    value: () => Promise.resolve(Buffer.from(text)),
  });
  return file;
}

async function readFiles() {
  fireEvent.change(await screen.findByLabelText(/Pick the CSV file/), {
    target: { files: [textFile("list.csv", "key,val,mood\n")] },
  });
  fireEvent.change(screen.getByLabelText(/Pick the \.bib file/), {
    target: { files: [textFile("list.bib", "@article{x}")] },
  });
  await settle(20);
  fireEvent.click(screen.getByRole("button", { name: "Read the files" }));
  await screen.findByText("Columns");
}

describe.each(WIDTHS)("the import at %i points", (width) => {
  const at = (given: MockedResponse[]) =>
    show(<ImportScreen />, { width, roles: ["contributor"], mocks: given });

  it("uploads both files and fills in what is proposed for columns and words", async () => {
    at(mocks());
    await readFiles();
    expect(uploads).toEqual([
      { kind: "csv", name: "list.csv" },
      { kind: "bib", name: "list.bib" },
    ]);
    expect(screen.getByLabelText("Field for key")).toHaveValue("citationKey");
    expect(screen.getByLabelText("Field for mood")).toHaveValue("");
    expect(screen.getByLabelText("Meaning of vol")).toHaveValue("volume");
  });

  it("sends a changed column with all the others, and takes the field from where it stood", async () => {
    const sent: Sent[] = [];
    at(mocks(sent));
    await readFiles();
    fireEvent.change(screen.getByLabelText("Field for mood"), { target: { value: "value" } });
    await waitFor(() => expect(sent).toHaveLength(2));
    expect(sent[1]?.input.columns).toEqual([
      { column: "key", field: "citationKey" },
      { column: "val", field: null },
      { column: "mood", field: "value" },
    ]);
    expect(screen.getByLabelText("Field for val")).toHaveValue("");
  });

  it("names file, line, column and reason of a refused row, and what stays open in a good one", async () => {
    at(mocks());
    await readFiles();
    fireEvent.click(screen.getByRole("button", { name: "See the rows" }));
    expect(
      await screen.findByText(
        "list.csv, line 3, column key: The key Nobody2028 is not in list.bib.",
      ),
    ).toBeInTheDocument();
    expect(screen.getByText("Stays open: place in the paper")).toBeInTheDocument();
    expect(screen.getByText("refused")).toBeInTheDocument();
    expect(screen.queryByRole("table") !== null).toBe(width > 700);
  });

  it("creates the good rows' drafts and leads to them", async () => {
    const ran: Sent[] = [];
    at(mocks([], ran));
    await readFiles();
    fireEvent.click(screen.getByRole("button", { name: "See the rows" }));
    fireEvent.click(await screen.findByRole("button", { name: "Create one draft" }));
    expect(await screen.findByText("One draft is on your desk")).toBeInTheDocument();
    expect(ran[0]?.input.words).toEqual([{ field: "weighting", word: "vol", value: "volume" }]);
    expect(screen.getByRole("link", { name: "Open the first draft" })).toHaveAttribute(
      "href",
      "/desk/submit/s1",
    );
  });

  it("says which file the server did not take, and why", async () => {
    global.fetch = jest.fn(() =>
      Promise.resolve({
        ok: false,
        json: () =>
          Promise.resolve({ code: "FILE_TOO_LARGE", message: "The file is larger than 1 MB." }),
      }),
    ) as never;
    at(mocks());
    fireEvent.change(await screen.findByLabelText(/Pick the CSV file/), {
      target: { files: [textFile("list.csv", "key\n")] },
    });
    fireEvent.change(screen.getByLabelText(/Pick the \.bib file/), {
      target: { files: [textFile("list.bib", "@article{x}")] },
    });
    await settle(20);
    fireEvent.click(screen.getByRole("button", { name: "Read the files" }));
    const alert = await screen.findByRole("alert");
    expect(
      within(alert).getByText(/list\.csv: The file is larger than 1 MB\./),
    ).toBeInTheDocument();
  });
});
