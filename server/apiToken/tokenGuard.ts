import type { ApolloServerPlugin } from "@apollo/server";
import { Kind, type DocumentNode, type GraphQLSchema, type SelectionSetNode } from "graphql";

import type { RequestContext } from "~server/common/context";
import { asGraphqlError } from "~server/common/errors";
import type { OperationNote } from "~server/common/requires";
import { crossOrigin } from "~server/security/sameOrigin";
import { SCOPE_OF, type TokenScope } from "~shared/review/tokenScopes";

import { closedToTokens, withoutScope } from "./refusals";

/**
 * The scope that a field of Query or Mutation needs of a token; null when none opens it. Whatever
 * changes something is closed unless its action has a scope; whatever reads is open unless it is
 * guarded by an action, which is the desk's, or says that it is closed.
 */
export function scopeNeeded(
  kind: "query" | "mutation",
  { action, closedToTokens: closed }: OperationNote,
): TokenScope | null {
  if (closed) return null;
  if (action !== undefined) return SCOPE_OF[action];
  return kind === "query" ? "read" : null;
}

/**
 * Holds API tokens to their scopes before anything runs, and keeps pages of other origins, which
 * ask without a cookie, from changing anything.
 */
export function tokenGuard(schema: GraphQLSchema): ApolloServerPlugin<RequestContext> {
  return {
    requestDidStart: async () => ({
      didResolveOperation: async ({ contextValue: { token, foreign }, document, operation }) => {
        if (!operation) return; // Apollo has said so by itself
        const kind = operation.operation;
        if (foreign && kind !== "query") throw asGraphqlError(crossOrigin());
        if (!token) return;
        if (kind === "subscription") throw asGraphqlError(closedToTokens());
        const root = kind === "query" ? schema.getQueryType() : schema.getMutationType();
        for (const name of topFields(document, operation.selectionSet)) {
          const field = root?.getFields()[name];
          if (!field) continue; // __typename, __schema: what anybody may know
          const scope = scopeNeeded(kind, field.extensions as OperationNote);
          if (scope === null) throw asGraphqlError(closedToTokens());
          if (!token.scopes.includes(scope)) throw asGraphqlError(withoutScope(scope));
        }
      },
    }),
  };
}

/** Names of the fields at the top of an operation, in fragments too; whether skipped or not. */
function topFields(document: DocumentNode, { selections }: SelectionSetNode): string[] {
  return selections.flatMap((selection) => {
    if (selection.kind === Kind.FIELD) return [selection.name.value];
    if (selection.kind === Kind.INLINE_FRAGMENT) return topFields(document, selection.selectionSet);
    const fragment = document.definitions.find(
      (each) => each.kind === Kind.FRAGMENT_DEFINITION && each.name.value === selection.name.value,
    );
    return fragment?.kind === Kind.FRAGMENT_DEFINITION
      ? topFields(document, fragment.selectionSet)
      : [];
  });
}
