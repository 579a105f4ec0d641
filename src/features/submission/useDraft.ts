import { CombinedGraphQLErrors } from "@apollo/client/errors";
import { useApolloClient } from "@apollo/client/react";
import { useEffect, useMemo, useSyncExternalStore } from "react";

import {
  SaveDraftDocument,
  SubmissionByIdDocument,
  type SubmissionPartsFragment,
} from "~graphql/generated/graphql";

import { serverDraft } from "./draftContent";
import {
  type DraftBackend,
  type DraftContent,
  DraftKeeper,
  type DraftSnapshot,
  type SaveOutcome,
} from "./draftKeeper";

/** Refusal code of a save that lost against a newer version. */
const STALE = "stale";

export interface Draft extends DraftSnapshot {
  keeper: DraftKeeper;
}

/** The draft of one submission, kept in the browser and on the server while it is edited. */
export function useDraft(submission: SubmissionPartsFragment): Draft {
  const client = useApolloClient();
  const { id } = submission;

  // One keeper for one visit: later query results must not replace what is being typed.
  const keeper = useMemo(() => {
    const backend: DraftBackend = {
      async save(content, version) {
        try {
          const { data } = await client.mutate({
            mutation: SaveDraftDocument,
            variables: { input: { id, version, ...saveInput(content) } },
          });
          return outcomeOf(data?.saveDraft);
        } catch (error) {
          return failure(error);
        }
      },
      async load() {
        try {
          const { data } = await client.query({
            query: SubmissionByIdDocument,
            variables: { id },
            fetchPolicy: "network-only",
          });
          return data?.submission ? serverDraft(data.submission) : null;
        } catch {
          return null;
        }
      },
    };
    return new DraftKeeper(id, serverDraft(submission), backend, browserStorage());
    // eslint-disable-next-line react-hooks/exhaustive-deps -- see above
  }, [client, id]);

  const snapshot = useSyncExternalStore(keeper.subscribe, keeper.snapshot, keeper.snapshot);

  useEffect(() => {
    keeper.resume();
    const flush = () => void keeper.flush();
    const hidden = () => {
      if (document.visibilityState === "hidden") flush();
    };
    globalThis.addEventListener?.("online", flush);
    globalThis.document?.addEventListener("visibilitychange", hidden);
    return () => {
      globalThis.removeEventListener?.("online", flush);
      globalThis.document?.removeEventListener("visibilitychange", hidden);
      if (keeper.snapshot().save.kind === "waiting") flush();
      keeper.stop();
    };
  }, [keeper]);

  return { ...snapshot, keeper };
}

function browserStorage(): Storage | null {
  try {
    return globalThis.localStorage ?? null;
  } catch {
    return null;
  }
}

function saveInput({ fields, citationId, answers, commentAnswers }: DraftContent) {
  return {
    fields,
    citationId,
    answers: Object.entries(answers)
      .filter(([, answer]) => answer.trim() !== "")
      .map(([code, answer]) => ({ code, answer })),
    // An emptied answer is sent too, since the server changes only those it is given.
    commentAnswers: Object.entries(commentAnswers).map(([commentId, answer]) => ({
      commentId,
      answer,
    })),
  };
}

function outcomeOf(
  result:
    | ({ __typename: "Submission" } & SubmissionPartsFragment)
    | { __typename: "Refusal"; code: string; message: string }
    | undefined,
): SaveOutcome {
  if (!result) return { kind: "offline" };
  if (result.__typename === "Submission") return { kind: "saved", draft: serverDraft(result) };
  return result.code === STALE ? { kind: "stale" } : { kind: "refused", message: result.message };
}

function failure(error: unknown): SaveOutcome {
  if (!CombinedGraphQLErrors.is(error)) return { kind: "offline" };
  const codes = error.errors.map(({ extensions }) => extensions?.code);
  if (codes.includes("UNAUTHENTICATED")) return { kind: "signedOut" };
  if (codes.includes("INTERNAL") || codes.includes("INTERNAL_SERVER_ERROR")) {
    return { kind: "offline" };
  }
  return { kind: "refused", message: "The server did not take this draft. Reload the page." };
}
