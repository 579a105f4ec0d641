import type { ViewerIdentity } from "~server/common/context";
import { ROLES } from "~shared/review/states";

import type { User } from "./user.entity";

/** The person as resolvers and policies see them; needs the user's roles loaded. */
export function viewerOf(user: User): ViewerIdentity {
  const held = new Set(user.roles.map((grant) => grant.role));
  return {
    id: user.id,
    email: user.email,
    nameOnPapers: user.nameOnPapers,
    furtherNames: user.furtherNames,
    orcid: user.orcid,
    roles: ROLES.filter((role) => held.has(role)),
  };
}
