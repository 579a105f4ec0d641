import { useMutation } from "@apollo/client/react";

import { ObjectToAddressChangeDocument } from "~graphql/generated/graphql";

import { LinkPage } from "./LinkPage";

/** Stops or undoes a change of address from the old one. */
export function ObjectionScreen() {
  const [object] = useMutation(ObjectToAddressChangeDocument);
  return (
    <LinkPage
      title="Object to a change of address"
      text="If you did not ask for another address, keep your account with this one. Every session ends, and a link to set a new password is sent here."
      action="Keep my address"
      done="Address kept"
      send={async (token) => (await object({ variables: { token } })).data?.objectToAddressChange}
    />
  );
}
