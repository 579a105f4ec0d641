import { useMutation } from "@apollo/client/react";

import { Button } from "@/components/Button";
import { Notice } from "@/components/Notice";
import { ResendConfirmationDocument } from "~graphql/generated/graphql";

import { useOutcome } from "./useOutcome";

/** Sends the confirmation mail once more. */
export function ResendConfirmation({ email }: { email: string }) {
  const [resend] = useMutation(ResendConfirmationDocument);
  const outcome = useOutcome<{ __typename: "Done"; message: string }>([]);
  if (outcome.good) return <Notice grade="done">{outcome.good.message}</Notice>;
  return (
    <Notice
      grade={outcome.problem ? "error" : "note"}
      title={outcome.problem ? undefined : "No mail?"}
      action={
        <Button
          kind="tonal"
          icon="email-outline"
          label="Send the mail again"
          busy={outcome.busy}
          onPress={() =>
            void outcome.run(
              async () =>
                (await resend({ variables: { email } })).data?.resendConfirmation as never,
            )
          }
        />
      }
    >
      {outcome.problem ?? "Look among the unwanted mails first; a new one replaces it."}
    </Notice>
  );
}
