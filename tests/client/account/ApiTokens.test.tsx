import "@testing-library/jest-dom";
import { fireEvent, screen, waitFor, within } from "@testing-library/react";

import { ApiTokens } from "@/features/account/ApiTokens";
import {
  type ApiTokenPartsFragment,
  ApiTokensDocument,
  MakeApiTokenDocument,
  RevokeApiTokenDocument,
} from "~graphql/generated/graphql";
import { MOST_TOKENS } from "~shared/review/tokenScopes";

import { type MockedResponse, show, WIDTHS } from "../desk/support";

jest.mock("expo-router", () => ({
  useRouter: () => jest.requireActual("../desk/support").router,
  useLocalSearchParams: () => ({}),
  usePathname: () => "/account",
}));

const DAY_MS = 86_400_000;
const inDays = (days: number) => new Date(Date.now() + days * DAY_MS).toISOString();
const SECRET = `fgl_${"0k3v".repeat(14)}`;

const token = (over: Partial<ApiTokenPartsFragment> = {}): ApiTokenPartsFragment => ({
  __typename: "ApiToken",
  id: "t1",
  name: "nightly fits",
  scopes: ["read", "fits"],
  start: "fgl_0k3v",
  state: "active",
  createdAt: "2026-03-03T10:00:00.000Z",
  expiresAt: inDays(60.5),
  lastUsedAt: null,
  revokedAt: null,
  ...over,
});

const listed = (...apiTokens: ApiTokenPartsFragment[]): MockedResponse => ({
  request: { query: ApiTokensDocument },
  result: { data: { apiTokens } },
});
const sent = jest.fn();
const answer = (query: unknown, name: string, data: object): MockedResponse =>
  ({
    request: {
      query,
      variables: (variables: object) => {
        sent(name, variables);
        return true;
      },
    },
    result: { data: { [name]: data } },
  }) as unknown as MockedResponse;

beforeEach(() => jest.clearAllMocks());

describe.each(WIDTHS)("API tokens at %i points", (width) => {
  const open = (...mocks: MockedResponse[]) => show(<ApiTokens />, { width, roles: [], mocks });
  const button = (name: string | RegExp) => screen.findByRole("button", { name });

  it("are said to be none, with the way to make one", async () => {
    open(listed());
    expect(await screen.findByText("You have no token yet.")).toBeInTheDocument();
    expect(await button("Make a token")).toBeEnabled();
  });

  it("are listed with what they may do, their use and their end; ended ones when asked for", async () => {
    open(
      listed(
        token({ lastUsedAt: "2026-03-04T09:00:00.000Z" }),
        token({ id: "t2", name: "soon over", scopes: ["read"], expiresAt: inDays(4.5) }),
        token({ id: "t3", name: "long over", state: "expired", expiresAt: inDays(-3) }),
        token({
          id: "t4",
          name: "taken back",
          state: "revoked",
          revokedAt: "2026-04-01T08:30:00.000Z",
        }),
      ),
    );
    const list = await screen.findByRole("list", { name: "API tokens" });
    const rows = within(list).getAllByRole("listitem");
    expect(rows).toHaveLength(2);
    expect(rows[0]).toHaveTextContent(/nightly fits.*fgl_0k3v… · Read, Fits/);
    expect(rows[0]).toHaveTextContent(/Made 3 March 2026 · last used 4 March 2026/);
    expect(rows[1]).toHaveTextContent(/never used.*, in 4 days/);
    fireEvent.click(await button("Show 2 tokens that have ended"));
    const all = within(list).getAllByRole("listitem");
    expect(all).toHaveLength(4);
    expect(all[2]).toHaveTextContent(/long over.*Expired.*Ended /);
    expect(all[3]).toHaveTextContent(/taken back.*Revoked.*Revoked 1 April 2026/);
    expect(within(all[2]!).queryByRole("button")).toBeNull();
  });

  it("are made with a name, scopes, a time and the password; the secret is shown once, to be copied", async () => {
    const writeText = jest.fn().mockResolvedValue(undefined);
    Object.assign(navigator, { clipboard: { writeText } });
    open(
      listed(),
      answer(MakeApiTokenDocument, "makeApiToken", {
        __typename: "MadeApiToken",
        secret: SECRET,
        token: token(),
      }),
      listed(token()),
    );
    fireEvent.click(await button("Make a token"));
    const form = within(await screen.findByRole("form", { name: "Make a token" }));
    fireEvent.change(form.getByLabelText("What uses it"), { target: { value: "nightly fits" } });
    fireEvent.click(form.getByRole("checkbox", { name: "Fits" }));
    fireEvent.change(form.getByLabelText("How long it lasts"), { target: { value: "30" } });
    fireEvent.change(form.getByLabelText("Your password"), { target: { value: "secret" } });
    fireEvent.click(form.getByRole("button", { name: "Make the token" }));
    const shown = await screen.findByRole("group", { name: "Your new token" });
    expect(sent).toHaveBeenCalledWith("makeApiToken", {
      input: { name: "nightly fits", scopes: ["read", "fits"], days: 30 },
      password: "secret",
    });
    expect(shown).toHaveTextContent(SECRET);
    await waitFor(() => expect(shown).toHaveFocus());
    fireEvent.click(within(shown).getByRole("button", { name: "Copy the token" }));
    expect(await within(shown).findByText("Copied.")).toBeInTheDocument();
    expect(writeText).toHaveBeenCalledWith(SECRET);
    expect(await screen.findByRole("list", { name: "API tokens" })).toHaveTextContent(
      "nightly fits",
    );
    fireEvent.click(within(shown).getByRole("button", { name: "I have it" }));
    expect(screen.queryByText(SECRET)).toBeNull();
  });

  it("say where the browser refuses to copy that the text can be selected", async () => {
    Object.assign(navigator, { clipboard: { writeText: () => Promise.reject(new Error("no")) } });
    open(
      listed(),
      answer(MakeApiTokenDocument, "makeApiToken", {
        __typename: "MadeApiToken",
        secret: SECRET,
        token: token(),
      }),
      listed(token()),
    );
    fireEvent.click(await button("Make a token"));
    fireEvent.click(await button("Make the token"));
    fireEvent.click(await button("Copy the token"));
    expect(await screen.findByText(/select the token above/)).toBeInTheDocument();
  });

  it("keep what was typed when the password is wrong, and say so at the entry", async () => {
    open(
      listed(),
      answer(MakeApiTokenDocument, "makeApiToken", {
        __typename: "Refusal",
        code: "PASSWORD_WRONG",
        message: "Your present password is not this one.",
        field: "password",
      }),
    );
    fireEvent.click(await button("Make a token"));
    fireEvent.change(await screen.findByLabelText("What uses it"), { target: { value: "plots" } });
    fireEvent.click(await button("Make the token"));
    expect(await screen.findByText("Your present password is not this one.")).toBeInTheDocument();
    expect(screen.getByLabelText("What uses it")).toHaveValue("plots");
    await waitFor(() => expect(screen.getByLabelText("Your password")).toHaveFocus());
    fireEvent.click(await button("Cancel"));
    expect(screen.queryByRole("form")).toBeNull();
  });

  it("are revoked after asking once, and the row goes", async () => {
    open(
      listed(token()),
      answer(RevokeApiTokenDocument, "revokeApiToken", {
        __typename: "Done",
        message: "The token “nightly fits” is revoked.",
      }),
      listed(token({ state: "revoked", revokedAt: "2026-04-01T08:30:00.000Z" })),
    );
    fireEvent.click(await button("Revoke nightly fits"));
    const dialog = await screen.findByRole("dialog");
    expect(dialog).toHaveTextContent("Whatever uses “nightly fits” is refused from now on.");
    expect(sent).not.toHaveBeenCalled();
    fireEvent.click(within(dialog).getByRole("button", { name: "Revoke it" }));
    expect(await screen.findByText("The token “nightly fits” is revoked.")).toBeInTheDocument();
    expect(sent).toHaveBeenCalledWith("revokeApiToken", { id: "t1" });
    expect(await screen.findByText("No token of yours works now.")).toBeInTheDocument();
  });

  it(`stop at ${MOST_TOKENS}, with the reason beside the button`, async () => {
    open(listed(...Array.from({ length: MOST_TOKENS }, (_, i) => token({ id: `t${i}` }))));
    expect(await screen.findByText("You have 20 tokens. Revoke one first.")).toBeInTheDocument();
    expect(await button("Make a token")).toHaveAttribute("aria-disabled", "true");
  });

  it("that did not arrive are asked for again", async () => {
    open({ request: { query: ApiTokensDocument }, error: new Error("offline") }, listed(token()));
    fireEvent.click(await button("Try again"));
    expect(await screen.findByText("nightly fits")).toBeInTheDocument();
  });
});
