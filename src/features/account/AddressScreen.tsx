import { useMutation } from "@apollo/client/react";

import { ConfirmAddressChangeDocument } from "~graphql/generated/graphql";

import { LinkPage } from "./LinkPage";

/** Completes a change of address from the new one. */
export function AddressScreen() {
  const [confirm] = useMutation(ConfirmAddressChangeDocument);
  return (
    <LinkPage
      title="Confirm your new address"
      text="One press makes this the mail address of your account. You sign in with it from then on."
      action="Confirm the new address"
      done="Address changed"
      send={async (token) => (await confirm({ variables: { token } })).data?.confirmAddressChange}
    />
  );
}
