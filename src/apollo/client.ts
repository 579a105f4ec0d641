import { ApolloClient, ApolloLink, HttpLink, InMemoryCache } from "@apollo/client";
import { ErrorLink } from "@apollo/client/link/error";
import { tap } from "rxjs";
import { reportConnection } from "./connection";
import { possibleTypes } from "./possibleTypes";
import { isConnectionLost } from "./userMessage";
import { vocabularyLink } from "./vocabularyLink";

/** The cache with what it must know of the API; tests use the same. */
export function createCache(): InMemoryCache {
  return new InMemoryCache({
    possibleTypes,
    typePolicies: {
      Query: { fields: { session: { merge: true }, methodVocabulary: { merge: false } } },
      // Content without an identity of its own: a newer answer replaces it whole.
      ConstraintFields: { keyFields: false },
      Constraint: { keyFields: ["number"], fields: { fields: { merge: false } } },
      FittingTable: { keyFields: ["slug"], fields: { constraints: { merge: false } } },
      MethodTag: { keyFields: ["tag"], fields: { aliases: { merge: false } } },
      NamedData: { keyFields: ["slug"] },
      DataLink: { keyFields: false },
      EventMark: { keyFields: false },
      Finding: { keyFields: false },
      TableRow: { keyFields: false },
      RecordLink: { keyFields: false },
      Session: { keyFields: [], fields: { viewer: { merge: false } } },
    },
  });
}

/** Client of the API on the same origin; the session travels in its cookie. */
export function createClient(uri = "/graphql"): ApolloClient {
  const watch = new ErrorLink(({ error }) => {
    if (isConnectionLost(error) && !isAbort(error)) reportConnection(true);
  });
  const heard = new ApolloLink((operation, forward) =>
    forward(operation).pipe(tap(() => reportConnection(false))),
  );
  const http = new HttpLink({
    uri,
    credentials: "same-origin",
    // A custom header makes a forged form post from another site impossible.
    headers: { "apollo-require-preflight": "true" },
  });
  return new ApolloClient({
    link: ApolloLink.from([watch, heard, vocabularyLink(), http]),
    cache: createCache(),
    defaultOptions: { watchQuery: { fetchPolicy: "cache-and-network" } },
  });
}

function isAbort(error: unknown): boolean {
  return error instanceof Error && error.name === "AbortError";
}
