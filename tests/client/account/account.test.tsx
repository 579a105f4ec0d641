import "@testing-library/jest-dom";
import { fireEvent, screen, waitFor } from "@testing-library/react";

import { ConfirmScreen } from "@/features/account/ConfirmScreen";
import { returnAddress } from "@/features/account/links";
import { RegisterScreen } from "@/features/account/RegisterScreen";
import { ResetScreen } from "@/features/account/ResetScreen";
import { SignInScreen } from "@/features/account/SignInScreen";
import {
  ConfirmEmailDocument,
  RegisterDocument,
  ResetPasswordDocument,
  SignInDocument,
} from "~graphql/generated/graphql";

import { type MockedResponse, route, router, show, WIDTHS } from "../desk/support";

jest.mock("expo-router", () => ({
  useRouter: () => jest.requireActual("../desk/support").router,
  useLocalSearchParams: () => jest.requireActual("../desk/support").route.params,
  usePathname: () => "/account",
}));
jest.mock("expo-router/head", () => ({ __esModule: true, default: () => null }));

function answer(query: unknown, name: string, data: object): MockedResponse {
  return {
    request: { query, variables: () => true },
    result: { data: { [name]: data } },
  } as unknown as MockedResponse;
}

const refusal = (message: string, field: string | null, code = "NO") => ({
  __typename: "Refusal",
  code,
  message,
  field,
});

const type = (label: string, value: string) =>
  fireEvent.change(screen.getByLabelText(label), { target: { value } });

beforeEach(() => {
  jest.clearAllMocks();
  route.params = {};
});

describe("returnAddress", () => {
  it("goes back to where one came from", () => {
    expect(returnAddress("/desk/submit/s1?step=check")).toBe("/desk/submit/s1?step=check");
  });

  it("never leaves the registry, however the address is written", () => {
    const elsewhere = [
      "https://elsewhere.example",
      "//elsewhere.example",
      "/\\elsewhere.example",
      "javascript:alert(1)",
      "",
    ];
    for (const next of elsewhere) expect(returnAddress(next)).toBe("/desk");
  });
});

describe.each(WIDTHS)("the account pages at %i points", (width) => {
  it("goes back to where one came from after signing in", async () => {
    route.params = { next: "/desk/import" };
    show(<SignInScreen />, {
      width,
      roles: null,
      mocks: [
        answer(SignInDocument, "signIn", {
          __typename: "Viewer",
          id: "u1",
          email: "person@fogline.example",
          nameOnPapers: "Vask, Inna",
          furtherNames: [],
          orcid: null,
          roles: [],
        }),
      ],
    });
    await screen.findByLabelText("Mail address");
    type("Mail address", "person@fogline.example");
    type("Password", "lifting-fog-2026");
    fireEvent.click(screen.getByRole("button", { name: "Sign in" }));
    await waitFor(() => expect(router.replace).toHaveBeenCalledWith("/desk/import"));
  });

  it("offers the confirmation mail again when the address is not confirmed", async () => {
    show(<SignInScreen />, {
      width,
      roles: null,
      mocks: [
        answer(
          SignInDocument,
          "signIn",
          refusal("Confirm your address first.", "email", "NOT_CONFIRMED"),
        ),
      ],
    });
    await screen.findByLabelText("Mail address");
    type("Mail address", "person@fogline.example");
    type("Password", "lifting-fog-2026");
    fireEvent.click(screen.getByRole("button", { name: "Sign in" }));
    expect(await screen.findByText("Confirm your address first.")).toBeInTheDocument();
    expect(screen.getByRole("button", { name: "Send the mail again" })).toBeInTheDocument();
    expect(router.replace).not.toHaveBeenCalled();
  });

  it("shows a refusal at its entry and moves the focus there", async () => {
    show(<RegisterScreen />, {
      width,
      roles: null,
      mocks: [
        answer(
          RegisterDocument,
          "register",
          refusal("A password has at least 12 characters.", "password"),
        ),
      ],
    });
    await screen.findByLabelText("Password");
    type("Password", "short");
    fireEvent.click(screen.getByRole("button", { name: "Register" }));
    expect(await screen.findByText("A password has at least 12 characters.")).toBeInTheDocument();
    expect(screen.getByLabelText("Password")).toHaveFocus();
    expect(screen.getByLabelText("Password")).toHaveAttribute("aria-invalid", "true");
  });

  it("confirms an address by a press, not by being opened", async () => {
    route.params = { token: "t-1" };
    const confirmed = jest.fn();
    show(<ConfirmScreen />, {
      width,
      roles: null,
      mocks: [
        {
          request: { query: ConfirmEmailDocument, variables: { token: "t-1" } },
          result: () => {
            confirmed();
            return {
              data: { confirmEmail: { __typename: "Done", message: "Your address is confirmed." } },
            };
          },
        },
      ],
    });
    const press = await screen.findByRole("button", { name: "Confirm my address" });
    expect(confirmed).not.toHaveBeenCalled();
    fireEvent.click(press);
    expect(await screen.findByText("Your address is confirmed.")).toBeInTheDocument();
  });

  it("sets a new password with the token of the mail, and offers a new mail when it is used up", async () => {
    route.params = { token: "t-2" };
    show(<ResetScreen />, {
      width,
      roles: null,
      mocks: [
        answer(ResetPasswordDocument, "resetPassword", refusal("This link is used up.", null)),
      ],
    });
    await screen.findByLabelText("New password");
    type("New password", "another foggy morning");
    fireEvent.click(screen.getByRole("button", { name: "Set the password" }));
    expect(await screen.findByText("This link is used up.")).toBeInTheDocument();
    expect(screen.getByRole("link", { name: "Ask for a new mail" })).toHaveAttribute(
      "href",
      "/account/reset",
    );
  });
});
