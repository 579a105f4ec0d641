import { useState } from "react";

import { userMessage } from "@/apollo/userMessage";

interface Problem {
  message: string;
  field: string | null;
}

type Outcome =
  | { __typename: "MethodTag"; name: string }
  | { __typename: "Refusal"; message: string; field: string | null }
  | null
  | undefined;

/** One change of the vocabulary: sends it, and keeps what the server had against it. */
export function useChange(): {
  problem: Problem | null;
  refuse: (problem: Problem | null) => void;
  send: (work: () => Promise<Outcome>, done: () => void) => Promise<void>;
} {
  const [problem, setProblem] = useState<Problem | null>(null);
  return {
    problem,
    refuse: setProblem,
    send: async (work, done) => {
      setProblem(null);
      try {
        const result = await work();
        if (result?.__typename === "MethodTag") done();
        else {
          setProblem({
            message: result?.message ?? "The server gave no answer. Try again.",
            field: result?.field ?? null,
          });
        }
      } catch (failure) {
        setProblem({ message: userMessage(failure), field: null });
      }
    },
  };
}
