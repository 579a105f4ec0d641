import type { DataSource } from "typeorm";

import type { Config } from "~server/config/config";
import type { RateLimits } from "~server/security/rateLimits";
import type { Role } from "~shared/review/states";
import type { TokenScope } from "~shared/review/tokenScopes";

/** The person behind a request, as resolvers and policies see them. */
export interface ViewerIdentity {
  id: string;
  email: string;
  nameOnPapers: string;
  /** Other names under which they have published. */
  furtherNames: readonly string[];
  orcid: string | null;
  roles: readonly Role[];
}

/** The API token behind a request, where it came with one instead of a session. */
export interface TokenIdentity {
  id: string;
  scopes: readonly TokenScope[];
}

/** What every resolver receives. */
export interface RequestContext {
  requestId: string;
  /** Address of the caller, for limits only; never logged with content. */
  ip: string;
  viewer: ViewerIdentity | null;
  /** null: nobody is signed in, or a session is. */
  token: TokenIdentity | null;
  /** Whether a page of another origin asks; it has no cookie and may change nothing. */
  foreign: boolean;
  database: DataSource;
  config: Config;
  limits: RateLimits;
  /** Starts a session under a new id; set by the HTTP layer. */
  signIn(userId: string, epoch: number): Promise<void>;
  signOut(): Promise<void>;
}

export function hasRole(viewer: ViewerIdentity | null, role: Role): boolean {
  return viewer?.roles.includes(role) ?? false;
}

/** The signed-in person; call it only behind @Authorized(). */
export function requireViewer(ctx: RequestContext): ViewerIdentity {
  if (!ctx.viewer) throw new Error("resolver reached without a viewer");
  return ctx.viewer;
}
