import { ApolloLink } from "@apollo/client";
import { concatMap, from, map, of, tap } from "rxjs";

import type { SessionQuery } from "~graphql/generated/graphql";
import { setVocabulary } from "~shared/methods/vocabulary";

/**
 * Puts the registry's method vocabulary in force. It comes with the session; requests that are sent
 * meanwhile are under way at the same time, but their answers wait for it, so that no list is drawn in the
 * words of another vocabulary. Should the session fail, the words of the start list do.
 */
export function vocabularyLink(): ApolloLink {
  let ready: Promise<void> | null = null;
  let isReady = false;
  let inForce = "";
  return new ApolloLink((operation, forward) => {
    const take = tap<ApolloLink.Result>(({ data }) => {
      const methods = (data as Partial<SessionQuery> | null | undefined)?.methodVocabulary;
      const words = JSON.stringify(methods ?? null);
      if (!methods || words === inForce) return;
      inForce = words;
      setVocabulary(methods);
    });
    if (operation.operationName === "Session") {
      let release = (): void => undefined;
      ready ??= new Promise((resolve) => {
        release = () => {
          isReady = true;
          resolve();
        };
      });
      return forward(operation).pipe(
        take,
        tap({ next: () => release(), error: () => release(), unsubscribe: () => release() }),
      );
    }
    const answers = forward(operation).pipe(take);
    const wait = ready;
    if (wait === null || isReady) return answers;
    return answers.pipe(
      concatMap((answer) => (isReady ? of(answer) : from(wait).pipe(map(() => answer)))),
    );
  });
}
