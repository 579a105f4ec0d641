import "@testing-library/jest-dom";
import { fireEvent, screen, waitFor, within } from "@testing-library/react";

import { AccountScreen } from "@/features/account/AccountScreen";
import { AddressScreen } from "@/features/account/AddressScreen";
import { ObjectionScreen } from "@/features/account/ObjectionScreen";
import {
  ConfirmAddressChangeDocument,
  DeleteAccountDocument,
  ObjectToAddressChangeDocument,
  RequestAddressChangeDocument,
  SignOutEverywhereDocument,
  UpdateProfileDocument,
} from "~graphql/generated/graphql";

import { type MockedResponse, route, router, show, WIDTHS } from "../desk/support";

jest.mock("expo-router", () => ({
  useRouter: () => jest.requireActual("../desk/support").router,
  useLocalSearchParams: () => jest.requireActual("../desk/support").route.params,
  usePathname: () => "/account",
}));
jest.mock("expo-router/head", () => ({ __esModule: true, default: () => null }));

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
const done = (message: string) => ({ __typename: "Done", message });
const refusal = (message: string, field: string | null) => ({
  __typename: "Refusal",
  code: "NO",
  message,
  field,
});

const form = async (name: string) => within(await screen.findByRole("form", { name }));
const type = (where: ReturnType<typeof within>, label: string, value: string) =>
  fireEvent.change(where.getByLabelText(label), { target: { value } });

beforeEach(() => {
  jest.clearAllMocks();
  route.params = {};
});

describe.each(WIDTHS)("the account at %i points", (width) => {
  const open = (...mocks: MockedResponse[]) =>
    show(<AccountScreen />, { width, roles: ["editor"], mocks });

  it("keeps further names, commas and all", async () => {
    const viewer = {
      __typename: "Viewer",
      id: "u1",
      email: "person@fogline.example",
      nameOnPapers: "Vask, Inna",
      furtherNames: ["Quellorn, I."],
      orcid: null,
      roles: ["editor"],
    };
    open(answer(UpdateProfileDocument, "updateProfile", viewer));
    const profile = await form("Profile");
    type(profile, "Further names on papers", "Quellorn, I.");
    fireEvent.click(profile.getByRole("button", { name: "Add to Further names on papers" }));
    fireEvent.click(profile.getByRole("button", { name: "Save the profile" }));
    expect(await screen.findByText("The profile is saved.")).toBeInTheDocument();
    expect(sent).toHaveBeenCalledWith("updateProfile", {
      nameOnPapers: "Vask, Inna",
      furtherNames: ["Quellorn, I."],
      orcid: null,
    });
    expect(screen.getByRole("link", { name: "See your public page" })).toHaveAttribute(
      "href",
      "/people/u1",
    );
  });

  it("asks for the password before the address changes, and says what happens next", async () => {
    open(
      answer(
        RequestAddressChangeDocument,
        "requestAddressChange",
        refusal("Your present password is not this one.", "password"),
      ),
      answer(
        RequestAddressChangeDocument,
        "requestAddressChange",
        done("We sent a mail to new@fogline.example."),
      ),
    );
    const address = await form("Change the address");
    type(address, "New mail address", "new@fogline.example");
    type(address, "Your password", "wrong");
    fireEvent.click(address.getByRole("button", { name: "Change the address" }));
    expect(await address.findByText(/not this one/)).toBeInTheDocument();
    expect(address.getByLabelText("New mail address")).toHaveValue("new@fogline.example");
    type(address, "Your password", "right");
    fireEvent.click(address.getByRole("button", { name: "Change the address" }));
    expect(await address.findByText("We sent a mail to new@fogline.example.")).toBeInTheDocument();
    expect(address.getByLabelText("Your password")).toHaveValue("");
  });

  it("signs out everywhere after asking once", async () => {
    open(answer(SignOutEverywhereDocument, "signOutEverywhere", done("Out.")));
    fireEvent.click(await screen.findByRole("button", { name: "Sign out everywhere" }));
    const dialog = await screen.findByRole("dialog");
    expect(dialog).toHaveTextContent("this one too");
    expect(sent).not.toHaveBeenCalled();
    fireEvent.click(within(dialog).getByRole("button", { name: "Sign out everywhere" }));
    await waitFor(() => expect(router.replace).toHaveBeenCalledWith("/"));
  });

  it("deletes the account after asking once, with the choice of credit", async () => {
    open(answer(DeleteAccountDocument, "deleteAccount", done("Your account is deleted.")));
    const leaving = await form("Delete the account");
    expect(leaving.getByRole("radio", { name: /Vask, Inna, as now/ })).toBeChecked();
    fireEvent.click(leaving.getByRole("radio", { name: /a former member/ }));
    type(leaving, "Your password", "right");
    fireEvent.click(leaving.getByRole("button", { name: "Delete the account" }));
    const dialog = await screen.findByRole("dialog");
    expect(sent).not.toHaveBeenCalled();
    fireEvent.click(within(dialog).getByRole("button", { name: "Delete it" }));
    await waitFor(() => expect(router.replace).toHaveBeenCalledWith("/"));
    expect(sent).toHaveBeenCalledWith("deleteAccount", { password: "right", credit: "anonymous" });
  });

  it("stays when the deletion is refused, and says why", async () => {
    open(
      answer(
        DeleteAccountDocument,
        "deleteAccount",
        refusal("You are the last maintainer. Make somebody else a maintainer first.", null),
      ),
    );
    const leaving = await form("Delete the account");
    type(leaving, "Your password", "right");
    fireEvent.click(leaving.getByRole("button", { name: "Delete the account" }));
    fireEvent.click(
      within(await screen.findByRole("dialog")).getByRole("button", { name: "Delete it" }),
    );
    expect(await screen.findByText(/You are the last maintainer/)).toBeInTheDocument();
    expect(router.replace).not.toHaveBeenCalled();
  });
});

describe.each([
  [
    "the new address is confirmed",
    AddressScreen,
    ConfirmAddressChangeDocument,
    "confirmAddressChange",
    "Confirm the new address",
  ],
  [
    "the old address objects",
    ObjectionScreen,
    ObjectToAddressChangeDocument,
    "objectToAddressChange",
    "Keep my address",
  ],
] as const)("%s", (_, Page, query, name, action) => {
  it("by one press, not by opening the link", async () => {
    route.params = { token: "t0ken" };
    show(<Page />, { width: 390, roles: null, mocks: [answer(query, name, done("It is done."))] });
    const press = await screen.findByRole("button", { name: action });
    expect(sent).not.toHaveBeenCalled();
    fireEvent.click(press);
    expect(await screen.findByText("It is done.")).toBeInTheDocument();
    expect(sent).toHaveBeenCalledWith(name, { token: "t0ken" });
  });

  it("says that a link without its token is not whole", async () => {
    show(<Page />, { width: 390, roles: null });
    expect(await screen.findByText("The address is not whole")).toBeInTheDocument();
    expect(screen.queryByRole("button", { name: action })).not.toBeInTheDocument();
  });
});
