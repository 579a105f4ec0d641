import { HeaderMap } from "@apollo/server";
import { GraphQLError } from "graphql";

/**
 * An answer over plain HTTP that is not success; the message is a sentence for the person.
 * Anything else that is thrown leaves the server as INTERNAL, without a word about why.
 */
export class HttpProblem extends Error {
  override readonly name = "HttpProblem";

  constructor(
    readonly status: number,
    readonly code: string,
    message: string,
    readonly headers: Readonly<Record<string, string>> = {},
  ) {
    super(message);
  }
}

export function unauthenticated(): GraphQLError {
  return new GraphQLError("Sign in first.", { extensions: { code: "UNAUTHENTICATED" } });
}

export function forbidden(): GraphQLError {
  return new GraphQLError("Your account may not do this.", { extensions: { code: "FORBIDDEN" } });
}

export function tooManySentence(seconds: number): string {
  const wait =
    seconds < 90
      ? `${Math.max(1, Math.ceil(seconds))} seconds`
      : `${Math.ceil(seconds / 60)} minutes`;
  return `Too many requests. Try again in ${wait}.`;
}

/** The same answer from within GraphQL, with its status and headers. */
export function asGraphqlError({ code, message, status, headers }: HttpProblem): GraphQLError {
  const named = new HeaderMap();
  for (const [name, value] of Object.entries(headers)) named.set(name.toLowerCase(), value);
  return new GraphQLError(message, { extensions: { code, http: { status, headers: named } } });
}
