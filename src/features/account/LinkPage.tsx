import { useLocalSearchParams } from "expo-router";

import { Button } from "@/components/Button";
import { Notice } from "@/components/Notice";
import { Body } from "@/components/Text";

import { AccountPage } from "./AccountForm";
import { useOutcome } from "./useOutcome";

/**
 * A page that a mailed link opens and that does one thing. The press is on purpose: programs that
 * look into mails follow links, and a link that acts by itself would be used up before the person
 * comes.
 */
export function LinkPage({
  title,
  text,
  action,
  send,
  done,
}: {
  title: string;
  text: string;
  /** Label of the press. */
  action: string;
  send: (token: string) => Promise<unknown>;
  /** Title once it is done. */
  done: string;
}) {
  const { token } = useLocalSearchParams<{ token?: string }>();
  const outcome = useOutcome<{ __typename: "Done"; message: string }>([]);
  if (outcome.good) {
    return (
      <AccountPage title={done}>
        <Notice
          grade="done"
          title={outcome.good.message}
          action={<Button kind="filled" label="Sign in" href="/account/sign-in?next=%2Faccount" />}
        />
      </AccountPage>
    );
  }
  return (
    <AccountPage title={title}>
      {token ? (
        <>
          <Body>{text}</Body>
          <Button
            kind="filled"
            label={action}
            busy={outcome.busy}
            onPress={() => void outcome.run(() => send(token) as never)}
          />
        </>
      ) : (
        <Notice grade="error" title="The address is not whole">
          Open the link from the mail again; it ends with a long token.
        </Notice>
      )}
      {outcome.problem ? <Notice grade="error">{outcome.problem}</Notice> : null}
    </AccountPage>
  );
}
