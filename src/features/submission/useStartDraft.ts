import { useMutation } from "@apollo/client/react";
import { useRouter } from "expo-router";
import { useState } from "react";

import { userMessage } from "@/apollo/userMessage";
import {
  ReviseSubmissionDocument,
  StartDraftDocument,
  type SubmissionOutcomeFragment,
} from "~graphql/generated/graphql";

import { type StepKey, submissionLink } from "./links";

/** Opens new drafts and goes to them: of a paper, of another submission's paper, of a returned one. */
export function useStartDraft() {
  const router = useRouter();
  const [start, starting] = useMutation(StartDraftDocument);
  const [revise, revising] = useMutation(ReviseSubmissionDocument);
  const [refusal, setRefusal] = useState<string | null>(null);

  async function go(
    open: () => Promise<SubmissionOutcomeFragment | undefined>,
    step: StepKey,
    replace: boolean,
  ) {
    setRefusal(null);
    try {
      const outcome = await open();
      if (outcome?.__typename === "Submission") {
        router[replace ? "replace" : "push"](submissionLink(outcome.id, step));
      } else {
        setRefusal(outcome?.message ?? "The draft could not be opened. Try again.");
      }
    } catch (error) {
      setRefusal(userMessage(error));
    }
  }

  return {
    busy: starting.loading || revising.loading,
    refusal,
    ofPaper: (citationId: string) =>
      go(
        async () => (await start({ variables: { citationId } })).data?.startDraft,
        "printed",
        true,
      ),
    ofSubmission: (fromSubmissionId: string) =>
      go(
        async () => (await start({ variables: { fromSubmissionId } })).data?.startDraft,
        "printed",
        false,
      ),
    answering: (id: string) =>
      go(
        async () => (await revise({ variables: { id } })).data?.reviseSubmission,
        "printed",
        false,
      ),
  };
}
