import { useApolloClient, useQuery } from "@apollo/client/react";
import { useState } from "react";

import { userMessage } from "@/apollo/userMessage";
import {
  ReviewByIdDocument,
  type ReviewOutcomeFragment,
  type ReviewPartsFragment,
} from "~graphql/generated/graphql";

export interface ReviewActions {
  busy: boolean;
  /** Why the last step was refused, with the field it belongs to. */
  refusal: { message: string; code: string | null; field: string | null } | null;
  /** Sends a step of the review and shows what came of it. True when it went through. */
  run: (send: () => Promise<ReviewOutcomeFragment | undefined>) => Promise<boolean>;
  clear: () => void;
}

/** One submission as this editor may see it now. */
export function useReview(id: string) {
  const client = useApolloClient();
  const query = useQuery(ReviewByIdDocument, {
    variables: { id },
    // What may be seen changes with every step of this editor and of others.
    fetchPolicy: "network-only",
    nextFetchPolicy: "cache-first",
  });
  const [busy, setBusy] = useState(false);
  const [refusal, setRefusal] = useState<ReviewActions["refusal"]>(null);

  const actions: ReviewActions = {
    busy,
    refusal,
    clear: () => setRefusal(null),
    async run(send) {
      setBusy(true);
      setRefusal(null);
      try {
        const outcome = await send();
        if (outcome?.__typename === "Review") {
          client.writeQuery({
            query: ReviewByIdDocument,
            variables: { id },
            data: { review: outcome as ReviewPartsFragment },
          });
          return true;
        }
        setRefusal({
          message: outcome?.message ?? "The server gave no answer. Try again.",
          code: outcome?.code ?? null,
          field: outcome?.field ?? null,
        });
        return false;
      } catch (error) {
        setRefusal({ message: userMessage(error), code: null, field: null });
        return false;
      } finally {
        setBusy(false);
      }
    },
  };
  return { ...query, review: query.data?.review ?? null, actions };
}
