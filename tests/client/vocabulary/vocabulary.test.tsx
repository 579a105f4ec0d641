import "@testing-library/jest-dom";
import { act, fireEvent, screen, waitFor, within } from "@testing-library/react";
import { useState } from "react";

import { MethodPicker } from "@/components/statement/MethodPicker";
import { MethodsPart } from "@/features/constraints/MethodsPart";
import { MethodsScreen } from "@/features/vocabulary/MethodsScreen";
import { VocabularyScreen } from "@/features/vocabulary/VocabularyScreen";
import {
  AddMethodTagDocument,
  ChangeMethodTagDocument,
  MethodVocabularyDocument,
  RetireMethodTagDocument,
} from "~graphql/generated/graphql";
import { START_VOCABULARY } from "~shared/methods/startVocabulary";
import { setVocabulary, type MethodTag } from "~shared/methods/vocabulary";

import { type MockedResponse, route, show, WIDTHS } from "../desk/support";

jest.mock("expo-router", () => ({
  useRouter: () => jest.requireActual("../desk/support").router,
  useLocalSearchParams: () => jest.requireActual("../desk/support").route.params,
  usePathname: () => "/methods",
}));
jest.mock("expo-router/head", () => ({ __esModule: true, default: () => null }));

const endless = { maxUsageCount: Number.POSITIVE_INFINITY };

type Kept = MethodTag & { position: number; version: number; constraintCount: number };
const kept = (changes: Partial<Record<string, Partial<Kept>>> = {}) =>
  START_VOCABULARY.map((entry, index) => ({
    __typename: "MethodTag" as const,
    ...entry,
    aliases: [...entry.aliases],
    position: 10 * (index + 1),
    version: 1,
    constraintCount: entry.tag === "darkGaps" ? 4 : 0,
    ...changes[entry.tag],
  }));

const listed = (methods: object[] = kept()): MockedResponse =>
  ({
    request: { query: MethodVocabularyDocument },
    result: { data: { methodVocabulary: methods } },
    ...endless,
  }) as unknown as MockedResponse;

/** A change that the server answers; what was sent is told to `sent`. */
function answer(query: object, operation: string, result: object, sent = jest.fn()) {
  const mock = {
    request: { query, variables: () => true },
    result: (variables: object) => {
      sent(variables);
      return { data: { [operation]: result } };
    },
    ...endless,
  } as unknown as MockedResponse;
  return { mock, sent };
}

const changed = (tag: string, changes: Partial<Kept> = {}) => ({
  ...kept().find((method) => method.tag === tag),
  version: 2,
  ...changes,
});
const refusal = (field: string | null, message: string) => ({
  __typename: "Refusal",
  code: "words",
  field,
  message,
});

afterEach(() => {
  route.params = {};
  act(() => setVocabulary(START_VOCABULARY));
});

describe.each(WIDTHS)("the vocabulary's page at %i points", (width) => {
  const open = (mocks: MockedResponse[] = [], methods = kept()) =>
    show(<VocabularyScreen />, {
      width,
      roles: ["maintainer"],
      methods,
      mocks: [listed(methods), ...mocks],
    });

  it("lists the methods by family with their counts, and the retired ones apart", async () => {
    open([], kept({ nearZones: { retiredInto: "darkGaps" } }));
    const forest = await screen.findByRole("list", { name: "Forest opacity" });
    expect(within(forest).getAllByRole("listitem")).toHaveLength(3);
    expect(within(forest).getByText(/darkGaps/)).toBeInTheDocument();
    expect(within(forest).getByText(/4 constraints/)).toBeInTheDocument();
    const retired = screen.getByRole("list", { name: "Retired" });
    expect(within(retired).getByText("Near zones")).toBeInTheDocument();
    expect(within(retired).getByText(/A word for Dark gaps now/)).toBeInTheDocument();
    expect(screen.getAllByText(/never independent$/)).toHaveLength(2);
  });

  it("keeps changed words at once, without a question", async () => {
    const { mock, sent } = answer(
      ChangeMethodTagDocument,
      "changeMethodTag",
      changed("darkGaps", { name: "Gaps" }),
    );
    open([mock]);
    fireEvent.click(await screen.findByRole("button", { name: "Edit Dark gaps" }));
    fireEvent.change(screen.getByLabelText("Name"), { target: { value: "Gaps" } });
    fireEvent.click(screen.getByRole("button", { name: "Save" }));
    expect(await screen.findByText("Gaps is changed.")).toBeInTheDocument();
    expect(sent).toHaveBeenCalledWith({
      version: 1,
      input: {
        tag: "darkGaps",
        family: "forestOpacity",
        name: "Gaps",
        definition: "Lengths of stretches without transmission.",
        caution: "Depends on simulated opacity fluctuations.",
        aliases: ["dark gap", "dark gap lengths"],
        neverIndependent: false,
        position: 60,
      },
    });
  });

  it("asks once before a method moves to another family", async () => {
    const { mock, sent } = answer(
      ChangeMethodTagDocument,
      "changeMethodTag",
      changed("darkGaps", { family: "other" }),
    );
    open([mock]);
    fireEvent.click(await screen.findByRole("button", { name: "Edit Dark gaps" }));
    fireEvent.change(screen.getByLabelText("Family"), { target: { value: "other" } });
    fireEvent.click(screen.getByRole("button", { name: "Save" }));
    expect(await screen.findByText("Move Dark gaps to Other?")).toBeInTheDocument();
    expect(screen.getByText(/^4 constraints will be drawn and filtered under Other/)).toBeVisible();
    expect(sent).not.toHaveBeenCalled();
    // Going back keeps what was typed.
    fireEvent.click(screen.getByRole("button", { name: "Cancel" }));
    expect(await screen.findByLabelText("Family")).toHaveValue("other");
    fireEvent.click(screen.getByRole("button", { name: "Save" }));
    fireEvent.click(await screen.findByRole("button", { name: "Move it" }));
    expect(await screen.findByText("Dark gaps is changed.")).toBeInTheDocument();
    expect(sent).toHaveBeenCalledTimes(1);
  });

  it("says at the field what stands against a new method, before and after sending", async () => {
    const { mock, sent } = answer(
      AddMethodTagDocument,
      "addMethodTag",
      refusal("name", "“Metal lines” is a word for Metals already: a word stands for one method."),
    );
    open([mock]);
    fireEvent.click(await screen.findByRole("button", { name: "Add a method" }));
    const add = () => fireEvent.click(screen.getByRole("button", { name: "Add the method" }));
    add();
    expect(await screen.findByText("Choose a family.")).toBeInTheDocument();
    fireEvent.change(screen.getByLabelText("Family"), { target: { value: "other" } });
    fireEvent.change(screen.getByLabelText("Tag"), { target: { value: "Metal lines" } });
    add();
    expect(await screen.findByText(/^A tag is one word in camelCase/)).toBeInTheDocument();
    for (const [label, value] of [
      ["Tag", "metalLines"],
      ["Name", "Dark-Gaps"],
      ["Definition, in one line", "Ratios of ions."],
      ["Usual systematic", "Depends on the enrichment."],
    ] as const) {
      fireEvent.change(screen.getByLabelText(label), { target: { value } });
    }
    add();
    expect(await screen.findByText(/is a word for Dark gaps already/)).toBeInTheDocument();
    expect(sent).not.toHaveBeenCalled();
    fireEvent.change(screen.getByLabelText("Name"), { target: { value: "Metal lines" } });
    add();
    expect(await screen.findByText(/is a word for Metals already/)).toBeInTheDocument();
    expect(screen.getByLabelText("Name")).toHaveValue("Metal lines");
  });

  it("keeps what was typed when the sheet is closed and opened again", async () => {
    open();
    fireEvent.click(await screen.findByRole("button", { name: "Add a method" }));
    fireEvent.change(screen.getByLabelText("Name"), { target: { value: "Metal lines" } });
    fireEvent.click(screen.getByRole("button", { name: "Close" }));
    expect(screen.queryByLabelText("Name")).toBeNull();
    fireEvent.click(screen.getByRole("button", { name: "Add a method" }));
    expect(screen.getByLabelText("Name")).toHaveValue("Metal lines");
    // Another method's sheet is its own.
    fireEvent.click(screen.getByRole("button", { name: "Close" }));
    fireEvent.click(screen.getByRole("button", { name: "Edit Dark gaps" }));
    expect(screen.getByLabelText("Name")).toHaveValue("Dark gaps");
  });

  it("retires a method into another one", async () => {
    const { mock, sent } = answer(
      RetireMethodTagDocument,
      "retireMethodTag",
      changed("nearZones", { version: 1 }),
    );
    open([mock]);
    fireEvent.click(await screen.findByRole("button", { name: "Retire Dark gaps" }));
    expect(screen.getByText("Choose what takes it over first.")).toBeInTheDocument();
    const choice = screen.getByLabelText("Taken over by");
    expect(within(choice).queryByText(/^Dark gaps/)).toBeNull();
    fireEvent.change(choice, { target: { value: "nearZones" } });
    expect(
      screen.getByText("4 constraints will be shown and found under Near zones."),
    ).toBeVisible();
    fireEvent.click(screen.getByRole("button", { name: "Retire it for good" }));
    expect(
      await screen.findByText("Dark gaps is retired; Near zones took it over."),
    ).toBeInTheDocument();
    expect(sent).toHaveBeenCalledWith({ tag: "darkGaps", version: 1, into: "nearZones" });
  });

  it("is for maintainers", async () => {
    show(<VocabularyScreen />, { width, roles: ["editor"], methods: kept(), mocks: [listed()] });
    expect(await screen.findByText("For maintainers only")).toBeInTheDocument();
  });
});

describe.each(WIDTHS)("the page of methods at %i points", (width) => {
  const open = (methods: object[] = kept()) =>
    show(<MethodsScreen />, { width, roles: null, methods, mocks: [listed(methods)] });

  it("says of each what it means, its caution, and where its constraints are", async () => {
    open();
    const forest = await screen.findByRole("list", { name: "Forest opacity" });
    expect(within(forest).getByRole("heading", { name: "Dark gaps" })).toBeInTheDocument();
    expect(
      within(forest).getByText("Lengths of stretches without transmission."),
    ).toBeInTheDocument();
    expect(
      within(forest).getByText("Caution: Depends on simulated opacity fluctuations."),
    ).toBeInTheDocument();
    expect(
      within(forest).getByRole("link", { name: "4 constraints by Dark gaps" }),
    ).toHaveAttribute("href", "/constraints?tag=darkGaps");
    expect(within(forest).getAllByText("No constraint yet")).toHaveLength(3);
    expect(screen.getAllByText(/^Never independent/)).toHaveLength(2);
  });

  it("leads from a retired method in the address to what took it over", async () => {
    const scrolled = jest.fn();
    Element.prototype.scrollIntoView = scrolled;
    const methods = kept({ nearZones: { retiredInto: "darkGaps" } });
    setVocabulary(methods);
    route.params = { method: "nearZones" };
    open(methods);
    await screen.findByRole("heading", { name: "Dark gaps" });
    await waitFor(() => expect(scrolled).toHaveBeenCalledTimes(1));
    expect(scrolled.mock.contexts[0]).toHaveAttribute("id", "method-darkGaps");
    expect(screen.queryByRole("heading", { name: "Near zones" })).toBeNull();
    expect(screen.getByText(/^Also met as dark gap, .*Near zones$/)).toBeInTheDocument();
  });

  it("says so when there is no method", async () => {
    open([]);
    expect(await screen.findByText("No method yet")).toBeInTheDocument();
  });
});

describe("methods elsewhere", () => {
  const retired = () =>
    START_VOCABULARY.map((entry) =>
      entry.tag === "nearZones" ? { ...entry, retiredInto: "darkGaps" } : entry,
    );

  it("stand on a record under what took them over, each with its meaning a touch away", () => {
    setVocabulary(retired());
    show(<MethodsPart tags={["nearZones", "jointInference"]} />, { width: 390, roles: null });
    expect(screen.getByRole("heading", { name: "Methods" })).toBeInTheDocument();
    expect(screen.getByRole("link", { name: /Dark gaps/ })).toHaveAttribute(
      "href",
      "/methods?method=darkGaps",
    );
    expect(screen.getByText("Other, never independent")).toBeInTheDocument();
    expect(screen.queryByText("Near zones")).toBeNull();
  });

  it("are offered to a draft as they are now, also when they change meanwhile", async () => {
    const heard = jest.fn();
    function Draft() {
      const [tags, setTags] = useState(["nearZones"]);
      return (
        <MethodPicker
          label="Methods"
          tags={tags}
          onChange={(next) => {
            heard(next);
            setTags(next);
          }}
        />
      );
    }
    show(<Draft />, { width: 390, roles: null });
    expect(screen.getByRole("button", { name: "Remove Near zones" })).toBeInTheDocument();
    act(() => setVocabulary(retired()));
    fireEvent.click(screen.getByRole("button", { name: "Change the methods" }));
    expect(screen.getByRole("checkbox", { name: /^Dark gaps/ })).toBeChecked();
    expect(screen.queryByRole("checkbox", { name: /^Near zones/ })).toBeNull();
    fireEvent.click(screen.getByRole("checkbox", { name: /^Dark pixels/ }));
    expect(heard).toHaveBeenLastCalledWith(["darkGaps", "darkPixels"]);
  });
});
