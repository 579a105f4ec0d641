import type { ReactNode } from "react";
import { View } from "react-native";

import { useSession } from "@/apollo/useSession";
import { Button } from "@/components/Button";
import { Empty } from "@/components/feedback/Empty";
import { Loading } from "@/components/feedback/Loading";
import { Screen } from "@/layout/Screen";
import type { Role } from "~shared/review/states";

/** A page of the desk for one role, or for anybody signed in; the server asks again. */
export function DeskPage({
  title,
  subtitle,
  here,
  role,
  children,
}: {
  title: string;
  subtitle?: string;
  here: string;
  role: Role | null;
  children: ReactNode;
}) {
  const { viewer, loading, hasRole } = useSession();
  const allowed = viewer !== null && (role === null || hasRole(role));
  return (
    <Screen title={title} subtitle={subtitle} back="/desk">
      <View style={{ gap: 16, maxWidth: 860, width: "100%" }}>
        {loading ? (
          <Loading label="Fetching your account" />
        ) : allowed ? (
          children
        ) : (
          <Empty
            icon="lock-outline"
            title={viewer ? `For ${role ?? "member"}s only` : "Sign in first"}
            text={
              viewer
                ? `Your account has no ${role ?? ""} role. A maintainer grants it.`
                : "This page belongs to an account."
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
      </View>
    </Screen>
  );
}
