import { Authorized } from "type-graphql";

import { MAY, type Action } from "~shared/review/policy";
import type { Role } from "~shared/review/states";

/**
 * Guard of an operation by the table of who may do what: a role, or being signed in. Whose the
 * thing is that it acts on, the service asks once it has loaded it.
 */
export function Requires(action: Action): MethodDecorator & PropertyDecorator {
  return Authorized<Role>(MAY[action].roles ?? []);
}
