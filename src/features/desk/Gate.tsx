import type { ReactNode } from "react";

import { useSession } from "@/apollo/useSession";
import { Button } from "@/components/Button";
import { Empty } from "@/components/feedback/Empty";
import { Loading } from "@/components/feedback/Loading";
import { Screen } from "@/layout/Screen";

/** A maintainer's page; the server asks again, this only says it in words. */
export function MaintainerPage({
  title,
  subtitle,
  here,
  children,
}: {
  title: string;
  subtitle?: string;
  here: string;
  children: ReactNode;
}) {
  const { viewer, loading, hasRole } = useSession();
  return (
    <Screen title={title} subtitle={subtitle} back="/desk">
      {loading ? (
        <Loading label="Fetching your account" />
      ) : hasRole("maintainer") ? (
        children
      ) : (
        <Empty
          icon="lock-outline"
          title={viewer ? "Maintainers only" : "Sign in first"}
          text={
            viewer
              ? "Your account has no maintainer role."
              : "This page is for a maintainer of the registry."
          }
          action={
            viewer ? (
              <Button kind="filled" label="To the desk" href="/desk" />
            ) : (
              <Button
                kind="filled"
                label="Sign in"
                href={`/account/sign-in?next=${encodeURIComponent(here)}`}
              />
            )
          }
        />
      )}
    </Screen>
  );
}
