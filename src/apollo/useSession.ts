import { useQuery } from "@apollo/client/react";
import { SessionDocument, type Role, type SessionQuery } from "~graphql/generated/graphql";
import { may, type Action } from "~shared/review/policy";

type Viewer = NonNullable<SessionQuery["session"]["viewer"]>;

export interface SessionState {
  viewer: Viewer | null;
  loading: boolean;
  /** Whether the registry holds invented data; unknown counts as no until the server says it. */
  demonstration: boolean;
  licence: string;
  hasRole(role: Role): boolean;
  /** The server's own table of who may do what; `own` is whether the thing is this person's. */
  may(action: Action, own?: boolean): boolean;
  refetch(): Promise<unknown>;
}

/** Who is signed in, and what the registry says of itself. */
export function useSession(): SessionState {
  const { data, loading, refetch } = useQuery(SessionDocument, { fetchPolicy: "cache-first" });
  const viewer = data?.session.viewer ?? null;
  return {
    viewer,
    loading: loading && data === undefined,
    demonstration: data?.session.demonstration ?? false,
    licence: data?.session.licence ?? "",
    may: (action, own) => may(action, viewer?.roles ?? null, own),
    hasRole: (role) => viewer?.roles.includes(role) ?? false,
    refetch: () => refetch(),
  };
}
