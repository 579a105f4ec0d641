import { ApolloServer } from "@apollo/server";
import { unwrapResolverError } from "@apollo/server/errors";
import { ApolloServerPluginLandingPageDisabled } from "@apollo/server/plugin/disabled";
import type { GraphQLFormattedError, GraphQLSchema } from "graphql";
import { ArgumentValidationError } from "type-graphql";

import { tokenGuard } from "~server/apiToken/tokenGuard";
import type { RequestContext } from "~server/common/context";
import { failure, type Logger } from "~server/logging/logger";
import { costGuard, MAX_TOKENS, shapeGuards } from "~server/security/graphqlGuards";

import { requestId } from "./requestId";

/** Codes that are an answer. Whatever carries another one is a fault of ours. */
const EXPECTED = new Set([
  "GRAPHQL_PARSE_FAILED",
  "GRAPHQL_VALIDATION_FAILED",
  "BAD_USER_INPUT",
  "BAD_REQUEST",
  "OPERATION_RESOLUTION_FAILURE",
  "PERSISTED_QUERY_NOT_FOUND",
  "PERSISTED_QUERY_NOT_SUPPORTED",
  "QUERY_TOO_COSTLY",
  "TOO_MANY_REQUESTS",
  "UNAUTHENTICATED",
  "FORBIDDEN",
  "TOKEN_SCOPE",
  "TOKEN_CLOSED",
  "CROSS_ORIGIN",
]);

/** What leaves the server about an error: a code and words, or INTERNAL and the request's id. */
export function formatError(
  logger: Logger,
  formatted: GraphQLFormattedError,
  error: unknown,
): GraphQLFormattedError {
  const id = requestId();
  const original = unwrapResolverError(error);
  if (original instanceof ArgumentValidationError) {
    const names = original.extensions.validationErrors.map(({ property }) => property).join(", ");
    return answer(`Not acceptable: ${names}.`, "BAD_USER_INPUT", formatted);
  }
  const code = String(formatted.extensions?.code ?? "");
  if (EXPECTED.has(code)) {
    return answer(formatted.message, code, formatted);
  }
  logger.error({ id, path: formatted.path, ...failure(original) }, "resolver failed");
  return answer(
    "The server could not complete this. Try again; if it stays, quote the request id.",
    "INTERNAL",
    formatted,
  );
}

/** Extensions are named one by one: libraries put stack traces and SQL there. */
function answer(
  message: string,
  code: string,
  { path, locations }: GraphQLFormattedError,
): GraphQLFormattedError {
  return {
    message,
    ...(path ? { path } : {}),
    ...(locations ? { locations } : {}),
    extensions: { code, requestId: requestId() },
  };
}

export async function startApollo(
  schema: GraphQLSchema,
  logger: Logger,
): Promise<ApolloServer<RequestContext>> {
  const guards = shapeGuards();
  const apollo = new ApolloServer<RequestContext>({
    schema,
    // A public API describes itself.
    introspection: true,
    csrfPrevention: true,
    allowBatchedHttpRequests: false,
    includeStacktraceInErrorResponses: false,
    stopOnTerminationSignals: false,
    parseOptions: { maxTokens: MAX_TOKENS },
    validationRules: guards.validationRules,
    plugins: [
      ...guards.plugins,
      tokenGuard(schema),
      costGuard(schema),
      ApolloServerPluginLandingPageDisabled(),
    ],
    formatError: (formatted, error) => formatError(logger, formatted, error),
    logger: {
      debug: () => undefined,
      info: () => undefined,
      warn: (message: unknown) => logger.warn({ apollo: String(message) }, "apollo"),
      error: (message: unknown) => logger.error({ apollo: String(message) }, "apollo"),
    },
  });
  await apollo.start();
  return apollo;
}
