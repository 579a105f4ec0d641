import type { AuthCheckerInterface, ResolverData } from "type-graphql";

import type { Role } from "~shared/review/states";

import { hasRole, type RequestContext } from "./context";
import { forbidden, unauthenticated } from "./errors";

/** @Authorized() means signed in; @Authorized("editor") means holding that role; several: any of them. */
export class RoleChecker implements AuthCheckerInterface<RequestContext, Role> {
  check({ context }: ResolverData<RequestContext>, roles: Role[]): boolean {
    if (!context.viewer) throw unauthenticated();
    if (roles.length > 0 && !roles.some((role) => hasRole(context.viewer, role))) throw forbidden();
    return true;
  }
}
