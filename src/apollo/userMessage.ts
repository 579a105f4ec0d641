import { CombinedGraphQLErrors, ServerError, ServerParseError } from "@apollo/client/errors";

const MESSAGES: Record<string, string> = {
  UNAUTHENTICATED: "Sign in to do this; you may have been signed out meanwhile.",
  FORBIDDEN: "Your account has no role that allows this. Ask a maintainer for it.",
  NOT_FOUND: "There is nothing at this address. It may have been withdrawn or mistyped.",
  TOO_MANY_REQUESTS: "Too many attempts. Wait a few minutes and try again.",
  BAD_USER_INPUT: "The server could not read what was sent. Reload the page and try again.",
  GRAPHQL_VALIDATION_FAILED: "This page is older than the server. Reload it and try again.",
};

const UNEXPECTED = "The server could not complete this. Try again.";

/**
 * Any failure as one sentence the reader can act on; an unexpected one carries the request's id,
 * by which the operator finds it in the log.
 */
export function userMessage(error: unknown): string {
  if (CombinedGraphQLErrors.is(error)) {
    const extensions = error.errors[0]?.extensions;
    const known = MESSAGES[String(extensions?.code)];
    if (known !== undefined) return known;
    return withRequestId(UNEXPECTED, extensions?.requestId);
  }
  if (ServerError.is(error)) {
    if (error.statusCode === 429) return MESSAGES.TOO_MANY_REQUESTS ?? UNEXPECTED;
    return withRequestId(UNEXPECTED, requestIdOf(error.bodyText));
  }
  if (ServerParseError.is(error)) return UNEXPECTED;
  return "No connection to the server. Check your network and try again. What you typed is kept.";
}

/** True when the server was not reached at all. */
export function isConnectionLost(error: unknown): boolean {
  return (
    error !== undefined &&
    error !== null &&
    !CombinedGraphQLErrors.is(error) &&
    !ServerError.is(error) &&
    !ServerParseError.is(error)
  );
}

function withRequestId(message: string, requestId: unknown): string {
  return typeof requestId === "string" && requestId !== ""
    ? `${message} If it happens again, tell the maintainers this number: ${requestId}.`
    : message;
}

function requestIdOf(body: string | undefined): unknown {
  try {
    const parsed = JSON.parse(body ?? "") as {
      requestId?: unknown;
      errors?: { extensions?: { requestId?: unknown } }[];
    };
    return parsed.requestId ?? parsed.errors?.[0]?.extensions?.requestId;
  } catch {
    return undefined;
  }
}
