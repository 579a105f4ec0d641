import { Authorized, Extensions } from "type-graphql";

import { MAY, type Action } from "~shared/review/policy";
import type { Role } from "~shared/review/states";

/** What an operation tells the guard of API tokens about itself. */
export interface OperationNote {
  action?: Action;
  closedToTokens?: boolean;
}

/**
 * Guard of an operation by the table of who may do what: a role, or being signed in. Whose the
 * thing is that it acts on, the service asks once it has loaded it. API tokens are let in by the
 * scope of the same action (shared/review/tokenScopes.ts).
 */
export function Requires(action: Action): MethodDecorator & PropertyDecorator {
  const authorized = Authorized<Role>(MAY[action].roles ?? []);
  const noted = Extensions({ action } satisfies OperationNote);
  return (target: object, name: string | symbol, descriptor?: unknown): void => {
    authorized(target, name, descriptor as never);
    noted(target, name, descriptor as never);
  };
}

/** Keeps API tokens from a query that has no action of its own and yet is no reader's. */
export function ClosedToTokens(): MethodDecorator & PropertyDecorator {
  return Extensions({ closedToTokens: true } satisfies OperationNote);
}
