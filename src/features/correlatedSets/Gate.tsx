import type { ReactNode } from "react";

import { useSession } from "@/apollo/useSession";
import { Button } from "@/components/Button";
import { Empty } from "@/components/feedback/Empty";
import { Loading } from "@/components/feedback/Loading";
import { Screen } from "@/layout/Screen";

/** A page for one role; the server asks again, this only says it in words. */
export function RolePage({
  title,
  role,
  here,
  because,
  children,
}: {
  title: string;
  role: "contributor" | "editor";
  /** Its own address, to come back to. */
  here: string;
  because: string;
  children: () => ReactNode;
}) {
  const { viewer, loading, hasRole } = useSession();
  if (!loading && hasRole(role)) return <>{children()}</>;
  return (
    <Screen title={title} back="/desk">
      {loading ? (
        <Loading label="Fetching your account" />
      ) : (
        <Empty
          icon="lock-outline"
          title={viewer ? because : "Sign in first"}
          text={
            viewer
              ? `Your account has no ${role} role. A maintainer grants it.`
              : "What you do here is kept under your name."
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
